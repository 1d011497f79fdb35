package exports_test

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"testing"

	"lotpair/exports"
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
