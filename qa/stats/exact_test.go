package stats_test

import (
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// TestExactTable holds powers, sizes and one-sided tolerance factors to 50-digit
// computations by other formulas: exact.txt is made by refdata_exact.py.
func TestExactTable(t *testing.T) {
	seen := map[string]int{}
	for _, line := range lines(t, "exact.txt") {
		if strings.HasPrefix(line, "#") {
			continue
		}
		f := strings.Fields(line)
		a := make([]float64, len(f)-1)
		for i, text := range f[1:] {
			a[i] = number(t, text)
		}
		want, allowed := a[len(a)-2], a[len(a)-1]
		var got float64
		switch f[0] {
		case "TOSTPower":
			d := lots2(int(a[0]), int(a[1]), 1, a[2], a[3])
			d.Alpha = a[4]
			got = power(t, d)
		case "TOSTSize":
			d := lots2(0, 0, 1, a[0], a[1])
			d.Alpha = a[2]
			n, _, err := stats.Parts(d, 1, a[3])
			if err != nil {
				t.Fatal(err)
			}
			got = float64(n)
		case "ToleranceFactorOneSided":
			got = must[float64](t)(stats.ToleranceFactorOneSided(int(a[0]), a[1], a[2]))
		default:
			t.Fatalf("exact.txt: found function %q, want a known one", f[0])
		}
		near(t, line, got, want, allowed)
		seen[f[0]]++
	}
	for name, least := range map[string]int{"TOSTPower": 140, "TOSTSize": 14, "ToleranceFactorOneSided": 25} {
		if seen[name] < least {
			t.Errorf("%s: got %d rows, want at least %d", name, seen[name], least)
		}
	}
}
