//go:build outside

package exports_test

import (
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/importers/cells"
	"lotpair/qa"
)

// TestOutsideReadBack has readxl and openpyxl read every reading and every figure of a record: the same doubles, bit for bit.
func TestOutsideReadBack(t *testing.T) {
	pkg, rec := sample(t)
	file := filepath.Join(t.TempDir(), "record.xlsx")
	if err := os.WriteFile(file, pkg, 0o600); err != nil {
		t.Fatal(err)
	}
	var want []float64
	for _, l := range []qa.Lot{rec.Readings.Reference, rec.Readings.Candidate} {
		for _, s := range l.Series {
			want = append(want, s.Values()...)
		}
	}
	readings := len(want)
	book, err := cells.Read(pkg)
	if err != nil {
		t.Fatal(err)
	}
	results, _ := book.Sheet(exports.SheetResults)
	for _, r := range results.Rows {
		for _, c := range r.Cells {
			if x, err := strconv.ParseFloat(c.Text, 64); err == nil && r.Number > 5 && c.Kind == cells.Number {
				want = append(want, x)
			}
		}
	}
	for name, call := range map[string][]string{
		"readxl":   {"Rscript", "testdata/outside/readback.R", file},
		"openpyxl": {"/usr/bin/python3", "testdata/outside/readback.py", file},
	} {
		got := strings.Fields(string(command(t, call[0], call[1:]...)))
		if len(got) != len(want) {
			t.Errorf("%s: got %d numbers, want %d", name, len(got), len(want))
			continue
		}
		for i, s := range got {
			if x := hexFloat(t, s); x != want[i] {
				t.Errorf("%s, number %d: got %v, want %v", name, i+1, x, want[i])
			}
		}
		t.Logf("%s: %d readings and %d figures, bit for bit", name, readings, len(want)-readings)
	}
}
