package main

import (
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// The tables are read whole, and every function in them is one that cmd/dev can compute, with as many arguments as it says.
func TestExactTables(t *testing.T) {
	for _, name := range exactTables {
		points, err := exactPoints(filepath.Join(root, filepath.FromSlash(name)))
		if err != nil {
			t.Fatal(err)
		}
		if len(points) < 100 {
			t.Errorf("%s: got %d points, want at least 100", name, len(points))
		}
		for _, p := range points {
			if f := accuracyFunctions[p.function]; f.ours == nil || len(f.args) != len(p.args) {
				t.Fatalf("%s: found %s of %d arguments, want a function of accuracyfunctions.go with as many", name, p.function, len(p.args))
			}
		}
	}
}

func TestExactPointsFaults(t *testing.T) {
	for text, want := range map[string]string{
		"# heading\nStudentUpper 1 2\n":                      ":2: found 3 fields",
		"StudentUpper 1 2 three 1e-14\n":                     `:1: found "three", want a number`,
		"# heading\n\nStudentUpper 1 2 0.2 1e-14\nStudent\n": ":4: found 1 fields",
	} {
		file := filepath.Join(t.TempDir(), "table.txt")
		if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		if _, err := exactPoints(file); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, want it to say %q", text, err, want)
		}
	}
}

// Far tails and many freedoms are regions of their own; a claim that one point breaks does not hold, and a value that is no
// number is not passed over.
func TestInRegions(t *testing.T) {
	points := []exactPoint{
		{"StudentUpper", []float64{1, 10}, 0.2, 1e-14},
		{"StudentUpper", []float64{2, 30}, 0.1, 3e-14},
		{"StudentUpper", []float64{40, 500}, 1e-90, 1e-12},
		{"StudentUpper", []float64{1, 1e8}, 0.2, 1e-14},
		{"StudentQuantile", []float64{1e-30, 7}, -5, 1e-14},
	}
	got := inRegions(points, map[string][]float64{
		"ours":  {0.2, 0.1 * (1 + 2e-14), 1e-90 * (1 + 1e-11), 0.2, -5},
		"gonum": {0.3, 0.1, math.NaN(), missingValue, -5},
	})
	if len(got) != 4 {
		t.Fatalf("got %d regions, want 4", len(got))
	}
	for i, want := range []struct {
		said  string
		holds bool
		gonum string
	}{
		{"t 1 to 2, df 10 to 30", true, "5.0e-01"},
		{"far tail: t 40, df 500, value from 1e-90", false, "no number"},
		{"many df: t 1, df 1e+08", true, "–"},
		{"far tail: p 1e-30, df 7", true, "0"},
	} {
		if r := got[i]; r.said() != want.said || r.holds != want.holds || r.errorOf("gonum") != want.gonum {
			t.Errorf("got %q %v %s, want %q %v %s", r.said(), r.holds, r.errorOf("gonum"), want.said, want.holds, want.gonum)
		}
	}
	if got[0].points != 2 || got[0].allowed != 3e-14 {
		t.Errorf("got %d points and %v allowed, want 2 and 3e-14", got[0].points, got[0].allowed)
	}
	out := accuracyTable(got, []outsider{{name: "R"}})
	for _, want := range []string{"DOES NOT HOLD", "≤ 1e-12", "not installed"} {
		if !strings.Contains(out, want) {
			t.Errorf("got\n%s\nwant it to hold %q", out, want)
		}
	}
}

// A peer that gives up is not a fault of ours.
func TestSafely(t *testing.T) {
	if got := safely(func([]float64) float64 { panic("beta: no") }, nil); !math.IsNaN(got) {
		t.Errorf("got %v, want NaN", got)
	}
	if got := safely(nil, nil); got != missingValue {
		t.Errorf("got %v, want the value that stands for none", got)
	}
}

func TestReadValues(t *testing.T) {
	got, err := readValues("accuracy.R", "0.25 \n-\nNaN\nInf\n", 4)
	if err != nil || got[0] != 0.25 || got[1] != missingValue || !math.IsNaN(got[2]) || !math.IsInf(got[3], 1) {
		t.Errorf("got %v %v, want 0.25, none, NaN and infinity", got, err)
	}
	for _, bad := range []string{"0.25\n", "0.25\nnull\n"} {
		if _, err := readValues("accuracy.R", bad, 2); err == nil {
			t.Errorf("%q: got no error", bad)
		}
	}
}

func TestAttributes(t *testing.T) {
	got := attributes("=== RUN   TestA\n=== ATTR  TestA accuracy r.txt | R | welch: p | 7 | 2 to 9 | 1e-15 | 1e-11\n=== ATTR  TestA other x\n--- PASS: TestA (0.00s)\n")
	if len(got) != 1 || !slices.Equal(got[0], []string{"r.txt", "R", "welch: p", "7", "2 to 9", "1e-15", "1e-11"}) {
		t.Errorf("got %v, want one row of seven cells", got)
	}
}
