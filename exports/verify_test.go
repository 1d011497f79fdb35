package exports_test

import (
	"bytes"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// TestVerifyIntact checks a record signed as the plan requires.
func TestVerifyIntact(t *testing.T) {
	v := exports.Verify(signedOnce(t), nil)
	if v.State != exports.Intact || !v.Agrees || len(v.Reasons) > 0 {
		t.Fatalf("got %s, %v, %v", v.State, v.Reasons, v.Differences)
	}
	s := v.Signatures[0]
	if s.Signer != "Ada Quill" || s.Meaning != "prepared" || s.Reason != "a reason" || s.Time != "2026-12-01T09:30:00+01:00" || !s.CoversAll || s.Trusted != nil {
		t.Errorf("signature: got %+v", s)
	}
	if got := v.Headline(); got != "intact; who signed is not established" {
		t.Errorf("headline: got %q", got)
	}
}

// TestVerifyTampering changes one thing of a signed record a case and wants it caught, with a reason.
func TestVerifyTampering(t *testing.T) {
	replace := func(part, old, new string) func(string, []byte) []byte {
		return func(name string, b []byte) []byte {
			if name != part {
				return b
			}
			if !bytes.Contains(b, []byte(old)) {
				t.Fatalf("%s holds no %q", part, old)
			}
			return bytes.Replace(b, []byte(old), []byte(new), 1)
		}
	}
	for _, c := range []struct {
		name string
		edit func(string, []byte) []byte
	}{
		{"verdict in the summary", replace("xl/worksheets/sheet1.xml", "Equivalent", "equivalent")},
		{"a figure in the results", replace("xl/worksheets/sheet2.xml", "<v>0.0", "<v>0.1")},
		{"a reading in its sheet", replace(sheetFile(t, signedOnce(t), exports.SheetReadings), "<v>9.9", "<v>9.8")},
		{"a reading in the record", replace("customXml/item1.xml", `v="9.9`, `v="9.8`)},
		{"the verdict in the record", replace("customXml/item1.xml", "&#34;verdict&#34;:&#34;equivalent&#34;", "&#34;verdict&#34;:&#34;not equivalent&#34;")},
		{"the record gone", func(name string, b []byte) []byte {
			if name == "customXml/item1.xml" {
				return nil
			}
			return b
		}},
		{"a number format", replace("xl/styles.xml", "Arial", "Ariel")},
		{"the order of the sheets", replace("xl/workbook.xml", `name="Results"`, `name="Resultz"`)},
		{"a content type", replace("[Content_Types].xml", "spreadsheetml.styles+xml", "spreadsheetml.theme+xml")},
		{"the signer's name", replace("_xmlsignatures/sig1.xml", "Ada Quill", "Eve Quill")},
		{"the signing time", replace("_xmlsignatures/sig1.xml", "2026-12-01T08:30:00Z", "2026-11-01T08:30:00Z")},
		{"the meaning", replace("_xmlsignatures/sig1.xml", "prepared", "approved")},
		{"the picture", func(name string, b []byte) []byte {
			if strings.HasPrefix(name, "xl/media/") {
				return append(bytes.Clone(b), 0)
			}
			return b
		}},
		{"the signature relationship gone", replace("_xmlsignatures/_rels/origin.sigs.rels", "<Relationship ", "<!-- ")},
	} {
		t.Run(c.name, func(t *testing.T) {
			v := exports.Verify(rezip(t, signedOnce(t), c.edit), nil)
			if v.State != exports.Changed && v.State != exports.Unreadable {
				t.Errorf("state: got %s, want changed", v.State)
			}
			if len(v.Reasons) == 0 {
				t.Error("no reason given")
			}
		})
	}
}

// TestVerifyDisagrees signs records that are intact as files and wrong in themselves: only the recomputation can tell.
func TestVerifyDisagrees(t *testing.T) {
	for _, c := range []struct {
		name string
		edit func(*qa.Record)
		code string
	}{
		{"the verdict", func(r *qa.Record) { r.Result.Characteristics[0].Verdict = qa.NotEquivalent }, "recomputation"},
		{"a reading", func(r *qa.Record) { r.Readings.Reference.Series[0].Readings[0].Value += 0.001 }, "recomputation"},
		{"the margin in the plan", func(r *qa.Record) { r.Plan.Criterion.Margin = &qa.Margin{Absolute: ptr(0.5)} }, "recomputation"},
		{"the trail", func(r *qa.Record) { r.Trail[0].Who = "nobody" }, "trail-broken"},
		{"the seal", func(r *qa.Record) { r.Result.Seal.Digest = "00" }, "seal-differs"},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec := record(t)
			c.edit(&rec)
			pkg, err := exports.SignFirst(rec, person(t, "Eve"), opcsign.Statement{Meaning: "prepared", Time: when})
			if err != nil {
				t.Fatal(err)
			}
			v := exports.Verify(pkg, nil)
			if v.State != exports.Disagrees {
				t.Errorf("state: got %s, want disagrees", v.State)
			}
			found := false
			for _, r := range v.Reasons {
				found = found || r.Code == c.code
			}
			if !found {
				t.Errorf("reasons: got %v, want %s", v.Reasons, c.code)
			}
		})
	}
}

// TestVerifySheetsDiffer changes a sheet of an unsigned workbook and signs it past our own checks.
func TestVerifySheetsDiffer(t *testing.T) {
	pkg, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	readings := sheetFile(t, pkg, exports.SheetReadings)
	pkg = rezip(t, pkg, func(name string, b []byte) []byte {
		if name == readings {
			return bytes.Replace(b, []byte("<v>9.9"), []byte("<v>9.8"), 1)
		}
		return b
	})
	id := person(t, "Eve")
	pkg, err = opcsign.Sign(pkg, id.Key, id.Chain, opcsign.Statement{Name: "Eve", Meaning: "prepared", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Disagrees || len(v.Differences) != 2 || !strings.Contains(v.Differences[0], "Readings!D") || !strings.Contains(v.Differences[1], "unsigned draft") {
		t.Errorf("got %s, %v; want a difference in the sheet Readings and the draft that is signed", v.State, v.Differences)
	}
}

// TestVerifySigner has Eve sign a workbook whose sheets name Ada as the signer.
func TestVerifySigner(t *testing.T) {
	ada, eve := person(t, "Ada"), person(t, "Eve")
	rec := record(t)
	rec.Signer = &qa.Signer{Name: "Ada", Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when, Fingerprint: ada.Fingerprint()}
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		id   identity.Identity
		want exports.State
	}{{ada, exports.Intact}, {eve, exports.Disagrees}} {
		signed, err := opcsign.Sign(pkg, c.id.Key, c.id.Chain, opcsign.Statement{Name: c.id.Name(), Title: c.id.Title(), Organization: c.id.Organization(), Meaning: "prepared", Time: when})
		if err != nil {
			t.Fatal(err)
		}
		if v := exports.Verify(signed, nil); v.State != c.want {
			t.Errorf("signed by %s: got %s, %v; want %s", c.id.Name(), v.State, v.Differences, c.want)
		}
	}
}

// TestVerifySignedDraft signs a draft past our own checks: nothing in it is wrong but that its sheets call it unsigned, and it
// is refused for that one difference.
func TestVerifySignedDraft(t *testing.T) {
	pkg, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	id := person(t, "Ada")
	if pkg, err = opcsign.Sign(pkg, id.Key, id.Chain, opcsign.Statement{Name: "Ada", Meaning: "prepared", Time: when}); err != nil {
		t.Fatal(err)
	}
	v := exports.Verify(pkg, nil)
	if v.State != exports.Disagrees || len(v.Differences) != 1 || len(v.Reasons) != 1 || v.Reasons[0].Code != "signer-differs" || !v.Rebuilt {
		t.Errorf("got %s, %v, %v, rebuilt %v; want one difference, signer-differs, in a workbook that is otherwise as its record gives it", v.State, v.Reasons, v.Differences, v.Rebuilt)
	}
}

// TestSignLater checks the second signature, who may give it, and what a record without one is.
func TestSignLater(t *testing.T) {
	rec := record(t)
	rec.Plan.Signatures = []qa.Required{{Meaning: "prepared"}, {Meaning: "reviewed"}}
	ada, bert := person(t, "Ada"), person(t, "Bert")
	first, err := exports.SignFirst(rec, ada, opcsign.Statement{Meaning: "prepared", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(first, nil); v.State != exports.Incomplete || len(v.MissingMeanings) != 1 || v.MissingMeanings[0] != "reviewed" {
		t.Errorf("first: got %s, missing %v", v.State, v.MissingMeanings)
	}
	second, err := exports.Sign(first, bert, opcsign.Statement{Meaning: "reviewed", Time: when.AddDate(0, 0, 1)})
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(second, nil); v.State != exports.Intact || len(v.Signatures) != 2 || !v.Signatures[0].Valid || !v.Signatures[1].Valid {
		t.Errorf("second: got %s, %v, %v", v.State, v.Signatures, v.Reasons)
	}
	same, err := exports.Sign(first, ada, opcsign.Statement{Meaning: "reviewed", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(same, nil); v.State != exports.Incomplete {
		t.Errorf("same signer: got %s, want incomplete", v.State)
	}
	broken := rezip(t, first, func(name string, b []byte) []byte {
		if name == "xl/styles.xml" {
			return append(bytes.Clone(b), ' ')
		}
		return b
	})
	var sound *exports.NotSoundError
	if _, err := exports.Sign(broken, bert, opcsign.Statement{Meaning: "reviewed", Time: when}); !errors.As(err, &sound) {
		t.Errorf("a changed record: got %v, want NotSoundError", err)
	}
	rec.Plan.Record.Part = ""
	var unstated *exports.UnstatedError
	if _, err := exports.SignFirst(rec, ada, opcsign.Statement{Meaning: "prepared", Time: when}); !errors.As(err, &unstated) {
		t.Errorf("no part: got %v, want UnstatedError", err)
	}
	if _, err := exports.Sign(first, ada, opcsign.Statement{Meaning: "glanced at", Time: when}); !errors.Is(err, exports.ErrMeaning) {
		t.Errorf("meaning: got %v, want ErrMeaning", err)
	}
}

// TestSave checks that nothing is ever lost.
func TestSave(t *testing.T) {
	path := filepath.Join(t.TempDir(), "r.xlsx")
	if err := exports.Save(path, []byte("one"), false); err != nil {
		t.Fatal(err)
	}
	var exists *exports.ExistsError
	if err := exports.Save(path, []byte("two"), false); !errors.As(err, &exists) {
		t.Errorf("existing: got %v, want ExistsError", err)
	}
	if err := exports.Save(path, signedOnce(t), true); err != nil {
		t.Fatal(err)
	}
	if err := exports.Save(path, []byte("three"), true); !errors.As(err, &exists) || !exists.Signed {
		t.Errorf("signed: got %v, want ExistsError", err)
	}
	if err := exports.Replace(path, []byte("something else"), []byte("four")); err == nil {
		t.Error("replace of a changed file: got no error")
	}
	got, err := os.ReadFile(path)
	if err != nil || !bytes.Equal(got, signedOnce(t)) {
		t.Error("the signed file was touched")
	}
	left, err := filepath.Glob(filepath.Join(filepath.Dir(path), ".lotpair-*"))
	if err != nil || len(left) > 0 {
		t.Errorf("left behind: %v, %v", left, err)
	}
}

// FuzzVerify checks that no file makes verification panic.
func FuzzVerify(f *testing.F) {
	f.Add([]byte("PK\x03\x04"))
	f.Add([]byte(""))
	f.Add(signed(f))
	f.Add(olderFile(f, "small.xlsx"))
	f.Add(olderFile(f, "seal.xlsx"))
	if seal, err := sealed(f).Workbook(); err == nil {
		f.Add(seal)
	}
	f.Fuzz(func(t *testing.T, b []byte) {
		v := exports.Verify(b, nil)
		if v.State == exports.Intact && len(v.Signatures) == 0 {
			t.Error("intact without a signature")
		}
	})
}
