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
	lots := map[string][]float64{}
	rows := 0
	for _, line := range lines(t, "r.txt") {
		f := strings.Fields(line)
		switch {
		case strings.HasPrefix(line, "#"):
		case f[0] == "readings":
			var x []float64
			for _, text := range f[3:] {
				x = append(x, number(t, text))
			}
			lots[f[1]+"."+f[2]] = x
		default:
			got := answer(t, lots[f[0]+".ref"], lots[f[0]+".cand"], f[1])
			near(t, f[0]+" "+f[1], got, number(t, f[2]), number(t, f[3]))
			rows++
		}
	}
	if rows < 150 {
		t.Errorf("got %d answers, want at least 150", rows)
	}
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
