package qa_test

import (
	"strings"
	"testing"

	"lotpair/qa"
)

// TestSealFaults checks that a margin which needs limits is sealed only with the limits in the plan.
func TestSealFaults(t *testing.T) {
	tolerance, ppk := &qa.Margin{ToleranceFraction: ptr(0.1)}, &qa.Margin{KeepPpk: ptr(1.0), Mean: ptr(10.0), SD: ptr(0.1)}
	for _, c := range []struct {
		name   string
		margin *qa.Margin
		list   []qa.Characteristic
		faults int
	}{
		{"no limits", tolerance, nil, 1},
		{"one limit", tolerance, []qa.Characteristic{{Name: "x", Lower: ptr(9.0)}}, 1},
		{"both", tolerance, []qa.Characteristic{{Name: "x", Lower: ptr(9.0), Upper: ptr(11.0)}}, 0},
		{"ppk without", ppk, []qa.Characteristic{{Name: "x"}, {Name: "y"}}, 2},
		{"ppk with one", ppk, []qa.Characteristic{{Name: "x", Upper: ptr(11.0)}}, 0},
		{"in the unit", absolute(1), nil, 0},
		{"own margin", tolerance, []qa.Characteristic{{Name: "x", Margin: absolute(1)}}, 0},
		{"none", nil, nil, 0},
	} {
		p := plan(qa.Equivalence, c.margin)
		p.Characteristics = c.list
		if got := p.SealFaults(); len(got) != c.faults {
			t.Errorf("%s: got %v, want %d faults", c.name, got, c.faults)
		}
	}
}

// TestGuardReachesAnEnd checks that a guard which takes an end of the margin to 0 or beyond is refused for every kind.
func TestGuardReachesAnEnd(t *testing.T) {
	x := series("x", 1, 1, 2, 3, 4, 5)
	for _, c := range []struct {
		objective qa.Objective
		margin    qa.Margin
		guard     float64
		refused   bool
	}{
		{qa.Equivalence, qa.Margin{Lower: ptr(-1.0), Upper: ptr(5.0)}, 2, true},
		{qa.Equivalence, qa.Margin{Lower: ptr(-1.0), Upper: ptr(5.0)}, 1, true},
		{qa.Equivalence, qa.Margin{Lower: ptr(-1.0), Upper: ptr(5.0)}, 0.5, false},
		{qa.NotLower, qa.Margin{Lower: ptr(-1.0)}, 2, true},
		{qa.Equivalence, qa.Margin{Lower: ptr(1.0), Upper: ptr(5.0)}, 1.5, false},
		{qa.Equivalence, qa.Margin{Lower: ptr(1.0), Upper: ptr(5.0)}, 2, true},
		{qa.Equivalence, qa.Margin{Absolute: ptr(1.0)}, 1, true},
	} {
		p := plan(c.objective, &c.margin)
		p.Criterion.Guard = &c.guard
		_, err := qa.Compare(p, lots(qa.Characteristic{Name: "x"}, x, x), qa.Run{})
		if (err != nil) != c.refused {
			t.Errorf("%s, guard %v: got %v, want it refused: %v", c.objective, c.guard, err, c.refused)
		}
	}
}

// TestFewAndConstant checks that a lot which is both is said to be both.
func TestFewAndConstant(t *testing.T) {
	got := one(t, plan(qa.Equivalence, absolute(9)), lots(qa.Characteristic{Name: "x"}, series("x", 0, 3, 3, 3), series("x", 0, 1)))
	n := 0
	for _, w := range got.Warnings {
		if w.Code == qa.WarnFew {
			n++
		}
	}
	if n != 2 || !qa.Has(got.Warnings, qa.WarnNoVariation) {
		t.Errorf("got %v, want no-variation and few-readings of both lots", got.Warnings)
	}
}

// TestResolutionOfLongDecimals checks that readings with binary tails have no resolution made up for them, and that a step as
// wide as the standard deviation is not coarser than it.
func TestResolutionOfLongDecimals(t *testing.T) {
	long := series("x", 15, 10.219999999999999, 10.1, 10.33, 10.01, 10.07)
	if got := one(t, plan(qa.Equivalence, absolute(9)), lots(qa.Characteristic{Name: "x"}, long, long)); got.Checks.Reference.Resolution != nil || qa.Has(got.Warnings, qa.WarnCoarse) {
		t.Errorf("got resolution %v and %v, want none", got.Checks.Reference.Resolution, got.Warnings)
	}
	step := series("x", 3, 40.011, 40.012, 40.013) // standard deviation 0.001
	if got := one(t, plan(qa.Equivalence, absolute(9)), lots(qa.Characteristic{Name: "x"}, step, step)); qa.Has(got.Warnings, qa.WarnCoarse) {
		t.Errorf("got %v, want no coarse resolution", got.Warnings)
	}
}

// TestUnmatchedAreNamed checks that the parts without a partner are listed.
func TestUnmatchedAreNamed(t *testing.T) {
	pairs := func(s qa.Series, ids ...string) qa.Series {
		for i := range s.Readings {
			s.Readings[i].Pair = ids[i]
		}
		return s
	}
	p := plan(qa.Equivalence, absolute(9))
	p.Criterion.Method, p.Reading.PairColumn = "paired", "Serial"
	got := one(t, p, lots(qa.Characteristic{Name: "x"}, pairs(series("x", 1, 1, 2.5, 3, 4), "a", "b", "c", "d"), pairs(series("x", 1, 1, 2, 3.5), "a", "b", "c")))
	for _, w := range got.Warnings {
		if w.Code == qa.WarnUnmatched {
			if !strings.Contains(w.Text, `"d" in Data!C5`) {
				t.Errorf("got %q, want the part named", w.Text)
			}
			return
		}
	}
	t.Errorf("got %v, want unmatched", got.Warnings)
}

// TestSensitivityOfRatiosAndShifts checks that margins on other scales have other ways of computing beside them too.
func TestSensitivityOfRatiosAndShifts(t *testing.T) {
	x, y := series("x", 1, 9.9, 10, 10.1, 10.2, 13, 10, 9.8, 10.1), series("x", 1, 10, 10.1, 10.2, 9.9, 10.1, 10)
	x.Readings[4].LeftOut = "dropped"
	for _, c := range []struct {
		name, method string
		margin       qa.Margin
		want         string
	}{
		{"ratio", "welch", qa.Margin{ReferenceFraction: ptr(0.2)}, "pooled log exclusions-put-back"},
		{"ratio, pooled", "pooled", qa.Margin{ReferenceFraction: ptr(0.2)}, "welch log exclusions-put-back"},
		{"log", "log", qa.Margin{RatioLower: ptr(0.8), RatioUpper: ptr(1.25)}, "exclusions-put-back"},
		{"shift", "welch", qa.Margin{KeepPpk: ptr(1.0), Mean: ptr(10.0), SD: ptr(0.1)}, "exclusions-put-back"},
	} {
		p := plan(qa.Equivalence, &c.margin)
		p.Criterion.Method = c.method
		got := one(t, p, lots(qa.Characteristic{Name: "x", Lower: ptr(9.0), Upper: ptr(11.0)}, x, y))
		var names []string
		for _, s := range got.Sensitivity {
			names = append(names, s.Method)
		}
		if s := strings.Join(names, " "); s != c.want {
			t.Errorf("%s: got %q, want %q", c.name, s, c.want)
		}
	}
}

// TestAttributeCounts checks that repeat readings of attributes reconcile, that one failed repeat fails the part, and what
// margins in fractions may be.
func TestAttributeCounts(t *testing.T) {
	x := series("x", 0, 0, 0.5, 1, 0)
	x.Rows, x.Repeats = 8, 4
	ch := qa.Characteristic{Name: "x", Kind: "attribute", Failed: []string{"NOK"}}
	got := one(t, plan(qa.Equivalence, absolute(0.5)), lots(ch, x, series("x", 0, 0, 0, 1)))
	if r := got.Reference; r.Rows != r.N+r.Repeats || *r.Failed != 2 || got.Decimals != 3 {
		t.Errorf("got %+v with %d decimals, want 4 parts and 4 repeats of 8 rows, 2 failed, 3 decimals", r, got.Decimals)
	}
	for margin, faults := range map[float64]int{0.05: 0, 0.999: 0, 1: 1, 5: 1} {
		p := plan(qa.Equivalence, absolute(margin))
		p.Characteristics = []qa.Characteristic{ch}
		if got := p.Validate(); len(got) != faults {
			t.Errorf("margin %v: got %v, want %d faults", margin, got, faults)
		}
	}
}

// TestUndecidedWhateverTheSpread checks that a margin taken from the sample gives no verdict, and one group neither, even where
// the spread alone would refute.
func TestUndecidedWhateverTheSpread(t *testing.T) {
	wide := series("x", 1, 1, 9, 2, 8, 3, 7, 1, 9, 2, 8, 0, 10)
	tight := series("x", 2, 5, 5.01, 4.99, 5.02, 4.98, 5, 5.01, 4.99, 5.02, 4.98, 5, 5.01)
	p := plan(qa.Equivalence, &qa.Margin{SDMultiple: ptr(1.5)})
	p.Criterion.SpreadRatio = ptr(1.5)
	if got := one(t, p, lots(qa.Characteristic{Name: "x"}, tight, wide)); got.Verdict != qa.Undecided || got.Spread.Verdict != qa.SpreadNotAcceptable {
		t.Errorf("margin from the sample: got %s with the spread %s, want undecided", got.Verdict, got.Spread.Verdict)
	}
	p = plan(qa.Equivalence, absolute(5))
	p.Criterion.SpreadRatio, p.Criterion.Groups, p.Reading.GroupColumn = ptr(1.5), "random", "Heat"
	if got := one(t, p, lots(qa.Characteristic{Name: "x"}, tight, wide)); got.Verdict != qa.Undecided || !qa.Has(got.Warnings, qa.WarnOneGroup) {
		t.Errorf("one group: got %s, want undecided", got.Verdict)
	}
}
