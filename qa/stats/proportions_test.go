package stats_test

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestProportionsAgainstR holds Fisher's p, Newcombe's interval, score and score
// interval to R.
func TestProportionsAgainstR(t *testing.T) {
	answers(t, "proportions.txt", 150, func(ref, cand []float64, name string) (float64, float64) {
		p := must[stats.Proportions](t)(stats.CompareProportions(counts(ref), counts(cand)))
		kind, what, _ := strings.Cut(name, ".")
		if kind == "fisher" {
			return p.Fisher(), 0
		}
		if kind == "score" {
			return p.Score(number(t, what)), 0.01
		}
		at := strings.LastIndex(what, ".")
		i := p.Newcombe(number(t, what[:at]))
		if kind == "mn" {
			i = p.Interval(number(t, what[:at]))
		}
		return map[string]float64{"lower": i.Lower, "upper": i.Upper}[what[at+1:]], 0.01
	})
}

func counts(nFailed []float64) stats.Counts {
	return stats.Counts{N: int(nFailed[0]), Failed: int(nFailed[1])}
}

// TestPublishedProportions holds both intervals to Newcombe 1998, Table II, to the
// printed four decimals and to the recomputed six.
func TestPublishedProportions(t *testing.T) {
	file, err := os.Open("testdata/newcombe1998_two_proportions.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	held := 0
	for _, row := range rows[1:] {
		v := make([]float64, 8)
		for i := range v {
			v[i] = number(t, row[i+1])
		}
		p := must[stats.Proportions](t)(stats.CompareProportions(counts([]float64{v[3], v[2]}), counts([]float64{v[1], v[0]})))
		var i stats.Interval
		switch row[0] {
		case "miettinen-nurminen":
			i = p.Interval(0.95)
		case "newcombe-score", "newcombe-score(Table II method 10)":
			i = p.Newcombe(0.95)
		default:
			continue
		}
		held++
		for _, c := range [][3]float64{{i.Lower, v[4], v[6]}, {i.Upper, v[5], v[7]}} {
			if math.Abs(c[0]-c[1]) > 0.00005001 || math.Abs(c[0]-c[2]) > 0.00000051 {
				t.Errorf("%v: got %.7f, want %v and %v", row[:5], c[0], c[1], c[2])
			}
		}
	}
	if held != 14 {
		t.Errorf("got %d rows, want 14", held)
	}
	// 7/34 and 1/34, Fagerland, Lydersen & Laake 2015: what is printed there as
	// this interval lacks N/(N-1); with it, recomputed, .0270416, .3452912.
	p := must[stats.Proportions](t)(stats.CompareProportions(stats.Counts{N: 34, Failed: 1}, stats.Counts{N: 34, Failed: 7}))
	near(t, "7/34 and 1/34, lower", p.Interval(0.95).Lower, 0.0270416, 2e-6)
	near(t, "7/34 and 1/34, upper", p.Interval(0.95).Upper, 0.3452912, 2e-7)
	near(t, "7/34 and 1/34, Newcombe lower", p.Newcombe(0.95).Lower, 0.019, 0.02)
	near(t, "7/34 and 1/34, Newcombe upper", p.Newcombe(0.95).Upper, 0.34, 0.01)
}

func TestProportionsEdges(t *testing.T) {
	for _, c := range []stats.Counts{{}, {N: 5, Failed: 6}, {N: 5, Failed: -1}} {
		if _, err := stats.CompareProportions(c, stats.Counts{N: 5}); !errors.Is(err, stats.ErrNotCounts) {
			t.Errorf("%+v: got %v, want %v", c, err, stats.ErrNotCounts)
		}
	}
	p := must[stats.Proportions](t)(stats.CompareProportions(stats.Counts{N: 20}, stats.Counts{N: 10}))
	if z := p.Score(0); z != 0 {
		t.Errorf("nothing failed: got z %v, want 0", z)
	}
	if f := p.Fisher(); f != 1 {
		t.Errorf("nothing failed: got p %v, want 1", f)
	}
	// All against none: the interval ends at 1, and every test below is finite.
	p = must[stats.Proportions](t)(stats.CompareProportions(stats.Counts{N: 20}, stats.Counts{N: 10, Failed: 10}))
	if i := p.Interval(0.95); i.Upper != 1 || !(i.Lower > 0.7 && i.Lower < 0.72) {
		t.Errorf("all against none: got %+v, want .7156 to 1", i)
	}
	if z, v := p.Below(1); z != 0 || v != 0.5 {
		t.Errorf("all against none at 1: got z %v p %v, want 0 and 0.5", z, v)
	}
	near(t, "all against none, Fisher", p.Fisher(), 1/30045015.0, 1e-13)
}

func drawCounts(t *rapid.T, label string) stats.Counts {
	n := rapid.IntRange(1, 300).Draw(t, label)
	return stats.Counts{N: n, Failed: rapid.IntRange(0, n).Draw(t, label+" failed")}
}

// Exchanging the lots, or failed and passed, turns the interval over; it is the
// tests; Newcombe's contains the difference.
func TestProportionsLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := drawCounts(t, "ref"), drawCounts(t, "cand")
		p, err := stats.CompareProportions(ref, cand)
		q, err2 := stats.CompareProportions(cand, ref)
		ref.Failed, cand.Failed = ref.N-ref.Failed, cand.N-cand.Failed
		o, err3 := stats.CompareProportions(ref, cand)
		if err := errors.Join(err, err2, err3); err != nil {
			t.Fatal(err)
		}
		i, j, k := p.Interval(0.90), q.Interval(0.90), o.Interval(0.90)
		if math.Abs(i.Lower+j.Upper) > 1e-12 || math.Abs(i.Upper+k.Lower) > 1e-12 {
			t.Fatalf("got %+v and %+v, want %+v turned over", j, k, i)
		}
		if !(i.Lower <= p.Difference() && p.Difference() <= i.Upper) || !alike(p.Fisher(), q.Fisher(), 1e-9) {
			t.Fatalf("got %+v, want it about %v", i, p.Difference())
		}
		delta := rapid.Float64Range(-0.999, 0.999).Draw(t, "delta")
		_, above := p.Above(delta)
		_, below := p.Below(delta)
		if math.Abs(min(above, below)-0.05) > 1e-9 && (min(above, below) > 0.05) != (i.Lower < delta && delta < i.Upper) {
			t.Fatalf("got p %v and %v at %v, want as %+v says", above, below, delta, i)
		}
		if n := p.Newcombe(0.90); !(n.Lower <= p.Difference() && p.Difference() <= n.Upper) || n.Lower < -1-1e-15 || n.Upper > 1+1e-15 {
			t.Fatalf("got %+v, want it about %v", n, p.Difference())
		}
	})
}
