//go:build outside

package main

import (
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"lotpair/exports"
	"lotpair/importers"
	"lotpair/qa"
)

// The worked example's workbook: LibreOffice computes every formula of its sheet Workings again and gives what is stated. (The
// tests of exports hold more records, each figure to its own bound.)
func TestOutsideWorkedWorkings(t *testing.T) {
	planFile := filepath.Join(root, filepath.FromSlash(demoFolder), demoPlanFile)
	readings, result := wholeWay(t, planFile)
	text, err := os.ReadFile(planFile)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := importers.LoadPlan(demoPlanFile, text)
	if err != nil {
		t.Fatal(err)
	}
	at := time.Date(2026, 12, 1, 9, 0, 0, 0, time.UTC)
	pkg, err := exports.Workbook(qa.NewRecord(plan, qa.FileOf(demoPlanFile, text), readings, result, "test", at))
	if err != nil {
		t.Fatal(err)
	}
	book := filepath.Join(t.TempDir(), "record.xlsx")
	if err := os.WriteFile(book, pkg, 0o600); err != nil {
		t.Fatal(err)
	}
	out, err := exec.Command(python, filepath.Join(root, "exports", "testdata", "outside", "recalculate.py"), book).Output()
	if err != nil {
		t.Fatal(err)
	}
	largest := 0.0
	for _, c := range result.Characteristics {
		largest = math.Max(largest, math.Max(math.Abs(*c.Reference.Max), math.Abs(*c.Candidate.Max)))
	}
	figures, worst := 0, 0.0
	for line := range strings.Lines(string(out)) {
		f := strings.Split(strings.TrimRight(line, "\n"), "\t")
		if f[3] == "" { // a quantile, which nothing states
			continue
		}
		got, err := strconv.ParseFloat(f[2], 64)
		if err != nil {
			t.Fatal(err)
		}
		stated, err := strconv.ParseFloat(f[3], 64)
		if err != nil {
			t.Fatal(err)
		}
		off := math.Abs(got - stated)
		if off > outsideDigits*math.Abs(stated) && off > 1e-12*largest {
			t.Errorf("%s in %s: got %.17g, stated %.17g", f[1], f[4], got, stated)
		}
		if stated != 0 {
			worst = math.Max(worst, off/math.Abs(stated))
		}
		figures++
	}
	if want := 35 * len(result.Characteristics); figures < want {
		t.Errorf("got %d figures, want at least %d", figures, want)
	}
	t.Logf("%d figures held, worst difference %.1e", figures, worst)
}
