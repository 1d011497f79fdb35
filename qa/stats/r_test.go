package stats_test

import (
	"math"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// TestAgainstR holds summaries, Welch, F and Grubbs to R's answers on sets that
// are hard on arithmetic. testdata/r.txt carries readings and answers; refdata.R
// beside it makes the file.
func TestAgainstR(t *testing.T) {
	answers(t, "r.txt", 150, func(ref, cand []float64, name string) (float64, float64) {
		return answer(t, ref, cand, name), 0
	})
}

// answer computes what the table calls name.
func answer(t *testing.T, ref, cand []float64, name string) float64 {
	t.Helper()
	if lot, what, found := strings.Cut(name, "."); found && (lot == "ref" || lot == "cand") {
		x := ref
		if lot == "cand" {
			x = cand
		}
		return ofOne(t, x, what)
	}
	r, c := stats.Summarize(ref), stats.Summarize(cand)
	if what, found := strings.CutPrefix(name, "f."); found {
		v, err := stats.FRatio(r, c, 0.90)
		if err != nil {
			t.Fatal(err)
		}
		return map[string]float64{"f": v.F, "p": v.P, "lower": v.Interval.Lower, "upper": v.Interval.Upper}[what]
	}
	e, err := stats.Welch(r, c)
	if err != nil {
		t.Fatal(err)
	}
	tee, two := e.TwoSided(0)
	_, greater := e.Above(0)
	_, less := e.Below(0)
	i := e.Interval(0.90)
	v, found := map[string]float64{
		"welch.t": tee, "welch.df": e.DF, "welch.se": e.SE, "welch.lower": i.Lower, "welch.upper": i.Upper,
		"welch.p.two.sided": two, "welch.p.greater": greater, "welch.p.less": less,
	}[name]
	if !found {
		t.Fatalf("r.txt: found quantity %q, want a known one", name)
	}
	return v
}

func ofOne(t *testing.T, x []float64, what string) float64 {
	t.Helper()
	s := stats.Summarize(x)
	switch what {
	case "mean":
		return s.Mean
	case "sd":
		return s.SD
	case "q1":
		return s.Q1
	case "median":
		return s.Median
	case "q3":
		return s.Q3
	}
	g, err := stats.GrubbsTest(x)
	if err != nil {
		t.Fatal(err)
	}
	switch what {
	case "grubbs.g":
		return g.G
	case "grubbs.p":
		return g.P
	}
	t.Fatalf("r.txt: found quantity %q, want a known one", what)
	return math.NaN()
}
