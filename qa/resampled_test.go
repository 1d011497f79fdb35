package qa_test

import (
	"math"
	"strconv"
	"testing"

	"lotpair/qa"
)

// TestResampled checks that the same seed gives the same answers, that the answers state it, that they lie near the plan's own
// method on data that suit it, and that the verdict is the one of the interval on the same margin.
func TestResampled(t *testing.T) {
	for _, k := range []struct {
		name, method string
		margin       *qa.Margin
		ways         int // bootstrap and permutation
	}{
		{"difference", "", absolute(0.02), 2},
		{"pairs", "paired", absolute(0.02), 2},
		{"logarithms", "log", &qa.Margin{RatioLower: ptr(0.998), RatioUpper: ptr(1.002)}, 2},
		{"ratio", "", &qa.Margin{ReferenceFraction: ptr(0.002)}, 1},
		{"ratio of pairs", "paired", &qa.Margin{ReferenceFraction: ptr(0.002)}, 2},
		{"shift", "", &qa.Margin{KeepPpk: ptr(1.0), Mean: ptr(12.0), SD: ptr(0.01)}, 1},
	} {
		ch, ref, cand := d1()
		for i := range ref.Readings {
			ref.Readings[i].Pair, cand.Readings[i].Pair = strconv.Itoa(i), strconv.Itoa(i)
		}
		p := plan(qa.Equivalence, k.margin)
		p.Criterion.Method, p.Reading.PairColumn = k.method, "Pair"
		p.Sensitivity = &qa.SensitivityPlan{Resamples: 5000, Seed: 7}
		a, b := one(t, p, lots(ch, ref, cand)), one(t, p, lots(ch, ref, cand))
		found := 0
		for i, s := range a.Sensitivity {
			if s.Method != "bootstrap" && s.Method != "permutation" {
				continue
			}
			found++
			draws := 5000
			if k.method == "paired" && s.Method == "permutation" {
				draws = 1 << 12 // every flip of twelve signs
			}
			if *s.Lower != *b.Sensitivity[i].Lower || s.Resamples != draws || *s.Seed != 7 {
				t.Errorf("%s, %s: got %v and %v, seed %v, resamples %d", k.name, s.Method, *s.Lower, *b.Sensitivity[i].Lower, *s.Seed, s.Resamples)
			}
			e := a.Equivalence
			width := *e.Upper - *e.Lower
			if math.Abs(*s.Upper-*e.Upper) > width/8 || math.Abs(*s.Lower-*e.Lower) > width/8 || math.Abs(*s.Estimate-*e.Estimate) > 1e-9 {
				t.Errorf("%s, %s: got %v to %v about %v, the plan's method %v to %v about %v", k.name, s.Method, *s.Lower, *s.Upper, *s.Estimate, *e.Lower, *e.Upper, *e.Estimate)
			}
			if within := *s.Lower > *e.MarginLower && *s.Upper < *e.MarginUpper; within != (s.Verdict == qa.Equivalent) {
				t.Errorf("%s, %s: got %q of %v to %v", k.name, s.Method, s.Verdict, *s.Lower, *s.Upper)
			}
		}
		if found != k.ways {
			t.Errorf("%s: got %d ways of resampling, want %d: %v", k.name, found, k.ways, a.Warnings)
		}
	}
}
