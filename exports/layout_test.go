package exports_test

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"testing"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

var update = flag.Bool("update", false, "write the golden workbook anew")

// TestLayout makes the workbook of a stored record again. Where it differs from the stored one, the layout has changed: raise
// exports.Layout and run with -update, so that records of the layout before are not held against this one.
func TestLayout(t *testing.T) {
	file := filepath.Join("testdata", "layout", "record.xlsx")
	if *update {
		pkg, err := exports.Workbook(record(t))
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, pkg, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	stored, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	rec, err := exports.ReadRecord(stored)
	if err != nil {
		t.Fatal(err)
	}
	again, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	want, got := unzip(t, stored), unzip(t, again)
	for name := range got {
		if filepath.Ext(name) == ".png" { // another processor may round a pixel otherwise
			continue
		}
		if !bytes.Equal(got[name], want[name]) {
			t.Errorf("%s: got it other than stored, want the same; raise exports.Layout and run with -update", name)
		}
	}
	if len(got) != len(want) {
		t.Errorf("got %d parts, want %d", len(got), len(want))
	}
	v := exports.Verify(stored, nil)
	if !v.Rebuilt {
		t.Errorf("got the stored record not as this program makes it, want it so: %v", v.Differences)
	}
}

// TestOtherLayout has a workbook of this layout claim the one before: its figures are held, and what is not is said.
func TestOtherLayout(t *testing.T) {
	ada := person(t, "Ada Quill")
	rec := record(t)
	rec.Signer = &qa.Signer{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when, Fingerprint: ada.Fingerprint()}
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name string
		edit func(*kit)
		want exports.State
	}{
		{"as it was written", func(*kit) {}, exports.Intact},
		{"other pages", match(summary, `width="23"`, `width="24"`), exports.Intact},
		{"other cells", swap(readings, "<v>9.9", "<v>9.8"), exports.Disagrees},
		{"a number format", match("xl/styles.xml", `<xf numFmtId="0"`, `<xf numFmtId="1"`), exports.Disagrees},
	} {
		k := takeApart(t, pkg)
		k.match(item, `<layout>\d+</layout>`, "<layout>1</layout>")
		c.edit(k)
		b, err := opcsign.Sign(k.bytes(), ada.Key, ada.Chain, opcsign.Statement{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when})
		if err != nil {
			t.Fatal(err)
		}
		if v := exports.Verify(b, nil); v.State != c.want || v.Rebuilt || !hasCode(v, "layout-version") {
			t.Errorf("%s: got %s, rebuilt %v, %v; want %s", c.name, v.State, v.Rebuilt, v.Differences, c.want)
		}
	}
}
