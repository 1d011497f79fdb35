package qa_test

import (
	"math/rand/v2"
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
