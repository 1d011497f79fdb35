//go:build outside

package main

import (
	"encoding/csv"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lotpair/importers"
	"lotpair/qa"
)

// outsideDigits is how far another program may differ, relative to the value, or for interval ends near 0 to the interval's
// width: R and SciPy find their quantiles to about 1e-12.
const outsideDigits = 1e-10

// wholeWay takes a plan file to its result by the product's own code.
func wholeWay(t *testing.T, planFile string) (qa.Readings, qa.Result) {
	t.Helper()
	text, err := os.ReadFile(planFile)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := importers.LoadPlan(filepath.Base(planFile), text)
	if err != nil {
		t.Fatal(err)
	}
	readings, err := importers.Read(plan, func(file string) ([]byte, error) {
		return os.ReadFile(filepath.Join(filepath.Dir(planFile), file))
	})
	if err != nil {
		t.Fatal(err)
	}
	result, err := qa.Compare(plan, readings, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return readings, result
}

// handOver writes the readings that were used, for the other program.
func handOver(t *testing.T, readings qa.Readings) string {
	t.Helper()
	name := filepath.Join(t.TempDir(), "readings.csv")
	f, err := os.Create(name)
	if err != nil {
		t.Fatal(err)
	}
	w := csv.NewWriter(f)
	rows := [][]string{{"characteristic", "lot", "value"}}
	for _, ch := range readings.Characteristics {
		for lot, values := range map[string][]float64{"reference": readings.Reference.Of(ch.Name).Values(), "candidate": readings.Candidate.Of(ch.Name).Values()} {
			for _, v := range values {
				rows = append(rows, []string{ch.Name, lot, strconv.FormatFloat(v, 'g', -1, 64)})
			}
		}
	}
	if err := w.WriteAll(rows); err != nil {
		t.Fatal(err)
	}
	if err := f.Close(); err != nil {
		t.Fatal(err)
	}
	return name
}

// ours names the figures of a result as the other programs do.
func ours(c qa.Comparison) map[string]*float64 {
	return map[string]*float64{
		"reference mean": c.Reference.Mean, "reference sd": c.Reference.SD,
		"candidate mean": c.Candidate.Mean, "candidate sd": c.Candidate.SD,
		"df": c.Difference.DF, "p two-sided": c.Difference.PTwoSided,
		"decision lower": c.Equivalence.Lower, "decision upper": c.Equivalence.Upper,
		"difference lower": c.Difference.Lower, "difference upper": c.Difference.Upper,
		"sd ratio lower": c.Spread.Lower, "sd ratio upper": c.Spread.Upper,
	}
}

// The worked example, from the file to the result, says what R and SciPy say of the same readings.
func TestOutsideWorkedExample(t *testing.T) {
	readings, result := wholeWay(t, filepath.Join(root, filepath.FromSlash(demoFolder), demoPlanFile))
	file := handOver(t, readings)
	for _, other := range []struct {
		name    string
		command []string
		figures int // a characteristic
	}{
		{"R", []string{"Rscript", "testdata/outside.R", file}, 12},
		{"SciPy", []string{python, "testdata/outside.py", file}, 6},
	} {
		t.Run(other.name, func(t *testing.T) {
			out, err := exec.Command(other.command[0], other.command[1:]...).Output()
			if err != nil {
				t.Fatalf("%v: %v", other.command, err)
			}
			held, worst := 0, 0.0
			for line := range strings.Lines(string(out)) {
				f := strings.Split(strings.TrimSpace(line), "\t")
				want, err := strconv.ParseFloat(f[len(f)-1], 64)
				i := slices.IndexFunc(result.Characteristics, func(c qa.Comparison) bool { return c.Name == f[0] })
				if err != nil || len(f) != 3 || i < 0 {
					t.Fatalf("%s: found line %q, want characteristic, quantity and value", other.name, line)
				}
				c := result.Characteristics[i]
				got := ours(c)[f[1]]
				if got == nil {
					t.Fatalf("%s, %s: got no value, want %v", f[0], f[1], want)
				}
				scale := math.Abs(want)
				if strings.HasSuffix(f[1], "lower") || strings.HasSuffix(f[1], "upper") {
					scale = math.Max(scale, *c.Equivalence.Upper-*c.Equivalence.Lower)
				}
				off := math.Abs(*got-want) / scale
				if worst = math.Max(worst, off); off > outsideDigits {
					t.Errorf("%s, %s: got %.17g, want %.17g", f[0], f[1], *got, want)
				}
				held++
			}
			if want := other.figures * len(result.Characteristics); held != want {
				t.Errorf("got %d figures, want %d", held, want)
			}
			t.Logf("%d figures held, worst difference %.1e", held, worst)
		})
	}
}

// The committed reference values are what their programs compute, each within the error that its line allows.
func TestOutsideReferenceValues(t *testing.T) {
	d := &dev{root: root, stdout: io.Discard, stderr: os.Stderr}
	for _, r := range referencePrograms {
		if r.slow {
			continue
		}
		t.Run(r.table, func(t *testing.T) {
			out, err := r.output(d)
			if err != nil {
				t.Fatal(err)
			}
			got, want := valueLines(string(out)), valueLines(text(t, r.table))
			if len(got) != len(want) || len(want) == 0 {
				t.Fatalf("got %d lines, want %d", len(got), len(want))
			}
			for i := range want {
				if !sameLine(got[i], want[i]) {
					t.Errorf("got %v, want %v", got[i], want[i])
				}
			}
		})
	}
}

// Every claim of the accuracy table holds, and R and SciPy answer for the functions that they have.
func TestOutsideAccuracy(t *testing.T) {
	d := &dev{root: root, stdout: io.Discard, stderr: os.Stderr}
	regions, err := d.measured(accuracyOutsiders())
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range regions {
		if !r.holds {
			t.Errorf("%s, %s: got a relative error of %.2g, want what the table allows, at most %.2g", r.function, r.said(), r.worst["ours"], r.allowed)
		}
		for _, who := range []string{"R", "SciPy"} {
			if _, ok := r.worst[who]; !ok && strings.HasPrefix(r.function, "Student") && r.function != "StudentBetween" {
				t.Errorf("%s, %s: got nothing from %s, want its error", r.function, r.said(), who)
			}
		}
	}
}

// valueLines are the fields of every line that is not a comment.
func valueLines(table string) [][]string {
	var out [][]string
	for line := range strings.Lines(table) {
		if f := strings.Fields(line); len(f) > 0 && !strings.HasPrefix(f[0], "#") {
			out = append(out, f)
		}
	}
	return out
}

// sameLine compares two lines: names and allowed error equal, the value before it within that error, readings equal.
func sameLine(got, want []string) bool {
	n := len(want)
	if len(got) != n {
		return false
	}
	if want[0] == "readings" || n < 3 {
		return slices.Equal(got, want)
	}
	g, err1 := strconv.ParseFloat(got[n-2], 64)
	w, err2 := strconv.ParseFloat(want[n-2], 64)
	allowed, err3 := strconv.ParseFloat(want[n-1], 64)
	if err1 != nil || err2 != nil || err3 != nil {
		return slices.Equal(got, want)
	}
	return slices.Equal(got[:n-2], want[:n-2]) && got[n-1] == want[n-1] && (g == w || math.Abs(g-w) <= allowed*math.Abs(w))
}
