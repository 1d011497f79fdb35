package exports_test

import (
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/importers/cells"
	"lotpair/qa"
)

// summaryText is all that stands on the sheet Summary.
func summaryText(t *testing.T, pkg []byte) string {
	t.Helper()
	book, err := cells.Read(pkg)
	if err != nil {
		t.Fatal(err)
	}
	s, ok := book.Sheet(exports.SheetSummary)
	if !ok {
		t.Fatal("found no Summary")
	}
	var b strings.Builder
	for _, r := range s.Rows {
		for _, c := range r.Cells {
			b.WriteString(c.Text + "\n")
		}
	}
	return b.String()
}

// TestSummarySignatures reads the signature block of the first page: for every required meaning who is expected, of the first
// signer all that 21 CFR 11.50 asks for, the certificate, the disposition, and how long the record is to be kept.
func TestSummarySignatures(t *testing.T) {
	rec := record(t)
	rec.Plan.Retention = "active + 1 year"
	rec.Plan.Signatures = []qa.Required{{Meaning: "prepared", Name: "Ada Quill", Title: "Quality engineer"}, {Meaning: "approved", Name: "Cleo Ash", Title: "Head of quality"}}
	draft, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	text := summaryText(t, draft)
	for _, want := range []string{"UNSIGNED DRAFT", "Ada Quill", "Quality engineer", "Cleo Ash", "Head of quality", "Retention: active + 1 year."} {
		if !strings.Contains(text, want) {
			t.Errorf("draft: found no %q on the summary", want)
		}
	}
	ada, bert := person(t, "Ada Quill"), person(t, "Bert Oakes")
	pkg, err := exports.SignFirst(rec, ada, opcsign.Statement{Meaning: "prepared", Reason: "study 7 is complete", Disposition: "accepted on condition", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	text = strings.Join(strings.Fields(summaryText(t, pkg)), " ")
	for _, want := range []string{
		"prepared Ada Quill", "2026-12-01 09:30:00 +01:00 2026-12-01 08:30:00 UTC", "issued by itself, serial number ", "ECDSA on P-256, SHA-256", "Each signature covers every part",
		"study 7 is complete", "accepted on condition", "approved Cleo Ash Head of quality see the signatures of this file",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("signed: found no %q on the summary", want)
		}
	}
	if strings.Contains(text, "UNSIGNED") {
		t.Error("signed: found it called unsigned")
	}
	if pkg, err = exports.Sign(pkg, bert, opcsign.Statement{Meaning: "approved", Time: when.AddDate(0, 0, 1)}); err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Intact || !hasCode(v, "signer-expected") {
		t.Errorf("approved by another than expected: got %s, %v; want it intact and said", v.State, v.Reasons)
	}
}

// TestSignerCertificate signs a record whose sheets describe another certificate than the signer's.
func TestSignerCertificate(t *testing.T) {
	ada := person(t, "Ada Quill")
	rec := record(t)
	rec.Signer = &qa.Signer{
		Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when, Fingerprint: ada.Fingerprint(),
		Certificate: "issued by a well known authority",
	}
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	if pkg, err = opcsign.Sign(pkg, ada.Key, ada.Chain, opcsign.Statement{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when}); err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Disagrees || !hasCode(v, "signer-differs") {
		t.Errorf("got %s, %v; want it to disagree", v.State, v.Reasons)
	}
}
