package qa_test

import (
	"math/rand/v2"
	"strings"
	"testing"

	"lotpair/qa"
)

// Lots whose ids merely count up are not called pairs; the same parts measured twice are.
func TestLooksPaired(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	alarms := 0
	const runs = 400
	for range runs {
		x, y := make([]float64, 12), make([]float64, 12)
		for i := range x {
			x[i], y[i] = r.NormFloat64(), r.NormFloat64()
		}
		if c := one(t, plan(qa.Equivalence, absolute(100)), lots(qa.Characteristic{Name: "X"}, series("X", 16, x...), series("X", 16, y...))); qa.Has(c.Warnings, qa.WarnPairs) {
			alarms++
		}
	}
	if alarms > 2 {
		t.Errorf("independent lots with the same ids: got %d alarms of %d, want next to none", alarms, runs)
	}
	x := []float64{1, 5, 3, 8, 2, 7, 4, 6}
	y := []float64{1.1, 5.2, 3.1, 8.2, 2, 7.1, 4.2, 6.1}
	for _, c := range []struct {
		name   string
		method string
		y      []float64
		want   bool
	}{
		{"the same parts", "", y, true},
		{"the same parts as pairs", "paired", y, false},
		{"exactly the same readings", "", x, true},
		{"the other way about", "", []float64{-1, -5, -3, -8, -2, -7, -4, -6}, false},
		{"a constant lot", "", []float64{1, 1, 1, 1, 1, 1, 1, 1}, false},
		{"too few", "", y[:4], false},
	} {
		p := plan(qa.Equivalence, absolute(100))
		p.Criterion.Method = c.method
		a, b := series("X", 1, x...), series("X", 1, c.y...)
		for _, s := range []qa.Series{a, b} {
			for i := range s.Readings {
				s.Readings[i].Pair = s.Readings[i].Part
			}
		}
		if got := qa.Has(one(t, p, lots(qa.Characteristic{Name: "X"}, a, b)).Warnings, qa.WarnPairs); got != c.want {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

// Skewed readings with lots of equal size, and normal ones of unequal size, are no cause for the warning.
func TestSkewedAndUnequal(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 15))
	lot := func(n int, of func() float64) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = of()
		}
		return x
	}
	for _, c := range []struct {
		name   string
		method string
		x, y   []float64
		want   bool
	}{
		{"skewed, unequal", "", lot(40, r.ExpFloat64), lot(8, r.ExpFloat64), true},
		{"skewed, equal", "", lot(25, r.ExpFloat64), lot(25, r.ExpFloat64), false},
		{"normal, unequal", "", lot(40, r.NormFloat64), lot(8, r.NormFloat64), false},
		{"skewed, unequal, large", "", lot(100, r.ExpFloat64), lot(40, r.ExpFloat64), false},
	} {
		p := plan(qa.Equivalence, absolute(100))
		p.Criterion.Method = c.method
		if got := qa.Has(one(t, p, lots(qa.Characteristic{Name: "X"}, series("X", 16, c.x...), series("X", 16, c.y...))).Warnings, qa.WarnSkewUnequal); got != c.want {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

// More attempts than the plan allows are said, with what they do to the error.
func TestSeveralAttempts(t *testing.T) {
	ch, ref, cand := d1()
	for _, c := range []struct {
		known        int
		second, kept string
		want         bool
	}{
		{0, "none", "", false},
		{1, "none", "register of this machine", false},
		{2, "none", "register of this machine", true},
		{2, "none", qa.NotCounted, false},
		{2, "one", "register of this machine", false},
		{3, "one", "register of this machine", true},
	} {
		p := plan(qa.Equivalence, absolute(0.02))
		p.Criterion.SecondSample = c.second
		r, err := qa.Compare(p, lots(ch, ref, cand), qa.Run{Attempts: qa.Attempts{Known: c.known, KeptBy: c.kept}})
		if err != nil {
			t.Fatal(err)
		}
		if got := qa.Has(r.Warnings, qa.WarnAttempts); got != c.want {
			t.Errorf("attempt %d, second sample %s: got %v, want %v", c.known, c.second, got, c.want)
		}
	}
}

// Readings beyond a limit are named, five at most.
func TestOutsideLimits(t *testing.T) {
	ch, _, cand := d1()
	ref := series(ch.Name, 3, 11.9, 12.06, 12.07, 12.08, 12.09, 12.1, 12.05, 11.95, 12)
	c := one(t, plan(qa.Equivalence, absolute(0.02)), lots(ch, ref, cand))
	var texts []string
	for _, w := range c.Warnings {
		if w.Code == qa.WarnOutside {
			texts = append(texts, string(w.Side)+": "+w.Text)
		}
	}
	const want = "reference: 6 readings of the reference lot beyond the specification limits (Data!C2, Data!C3, Data!C4, Data!C5, Data!C6, and 1 more)"
	if len(texts) != 1 || !strings.HasPrefix(texts[0], want) {
		t.Errorf("got %q, want %q", texts, want)
	}
}
