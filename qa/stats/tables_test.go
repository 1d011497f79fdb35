package stats_test

import (
	"math"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// answers holds every line of a table that another program made to what compute
// gives for it, and logs the worst error of each quantity. A line is a set, a
// quantity, a value and an allowed relative error; a value near 0 may have an
// absolute error of that size times scale, which compute returns.
func answers(t *testing.T, name string, least int, compute func(ref, cand []float64, what string) (got, scale float64)) {
	t.Helper()
	lots := map[string][]float64{}
	worst := map[string]float64{}
	rows := 0
	for _, line := range lines(t, name) {
		f := strings.Fields(line)
		switch {
		case strings.HasPrefix(line, "#"):
		case f[0] == "readings":
			x := make([]float64, 0, len(f)-3)
			for _, text := range f[3:] {
				x = append(x, number(t, text))
			}
			lots[f[1]+"."+f[2]] = x
		default:
			rows++
			got, scale := compute(lots[f[0]+".ref"], lots[f[0]+".cand"], f[1])
			want, allowed := number(t, f[2]), number(t, f[3])
			off := 0.0
			if got != want {
				off = math.Abs(got-want) / max(math.Abs(want), scale)
			}
			if !(off <= allowed) {
				t.Errorf("%s %s %s: got %.17g, want %.17g, relative error %.2g, allowed %.2g", name, f[0], f[1], got, want, off, allowed)
			}
			worst[f[1]] = max(worst[f[1]], off)
		}
	}
	if rows < least {
		t.Errorf("%s: got %d answers, want at least %d", name, rows, least)
	}
	for what, off := range worst {
		t.Logf("%s %s: worst relative error %.2g", name, what, off)
	}
}

// must is a value whose error ends the test.
func must[T any](t *testing.T) func(v T, err error) T {
	t.Helper()
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// ofEstimate is a quantity of an estimate, with its interval at 90 %.
func ofEstimate(t *testing.T, e stats.Estimate, what string) (got, scale float64) {
	t.Helper()
	tee, p := e.TwoSided(0)
	i := e.Interval(0.90)
	v, found := map[string]float64{"value": e.Value, "se": e.SE, "df": e.DF, "t": tee, "p": p, "lower": i.Lower, "upper": i.Upper}[what]
	if !found {
		t.Fatalf("found quantity %q, want a known one", what)
	}
	if what == "lower" || what == "upper" || what == "value" {
		return v, e.SE
	}
	return v, 0
}
