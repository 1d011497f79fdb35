package qa_test

import (
	"testing"

	"lotpair/qa"
)

// TestCompareTOST holds the whole way through Compare against the reference runs C4-01 and C4-03: two-sample TOST with Welch
// degrees of freedom, run in R, as quoted in the tests of statsmodels 0.13.5 (statsmodels/stats/tests/test_tost.py).
func TestCompareTOST(t *testing.T) {
	for _, c := range []struct {
		column                       string
		estimate, se, df, p          float64
		lower, upper                 float64
		verdict                      qa.Verdict
		relEstimate, relDF, relLower float64
	}{
		{"var1", .164666666666667, .253162599108363, 26.7484787582315, .0485308397623697, -.266686298072253, .596019631405587, qa.Equivalent, 1e-13, 1e-13, 1e-12},
		{"var2", .562666666666666, 0, 24.1100015106273, .43179368125948, .194916250699966, .930417082633366, qa.Undecided, 1e-13, 1e-13, 1e-12},
	} {
		t.Run(c.column, func(t *testing.T) {
			const file = "stats/testdata/tost_clinic.csv"
			ref, cand := column(t, file, "fact", "2", c.column), column(t, file, "fact", "1", c.column)
			got := one(t, plan(qa.Equivalence, absolute(0.6)), lots(qa.Characteristic{Name: c.column}, series(c.column, 2, ref...), series(c.column, 2, cand...)))
			e := got.Equivalence
			near(t, "estimate", e.Estimate, c.estimate, c.relEstimate)
			if c.se != 0 {
				near(t, "se", e.SE, c.se, 1e-13)
			}
			near(t, "df", e.DF, c.df, c.relDF)
			near(t, "p", e.P, c.p, 1e-12)
			near(t, "lower", e.Lower, c.lower, c.relLower)
			near(t, "upper", e.Upper, c.upper, c.relLower)
			if got.Verdict != c.verdict {
				t.Errorf("verdict: got %q, want %q", got.Verdict, c.verdict)
			}
		})
	}
}

// d1Reference and d1Candidate are the canonical data D1, computed in R 4 base (t.test, var.test).
var (
	d1Reference = []float64{12.003, 11.994, 12.011, 12.007, 11.998, 12.015, 12.002, 12.009, 11.989, 12.006, 12.012, 12.001}
	d1Candidate = []float64{12.008, 12.013, 11.997, 12.019, 12.004, 12.011, 11.992, 12.016, 12.006, 12.001, 12.022, 12.009}
)

func d1() (qa.Characteristic, qa.Series, qa.Series) {
	return qa.Characteristic{Name: "Bore dia", Unit: "mm", Lower: ptr(11.95), Target: ptr(12.0), Upper: ptr(12.05)},
		series("Bore dia", 3, d1Reference...), series("Bore dia", 3, d1Candidate...)
}

// TestCompareD1 holds D1 against R's answers; at ±0.010 equivalence is missed by a hair.
func TestCompareD1(t *testing.T) {
	ch, ref, cand := d1()
	wide := one(t, plan(qa.Equivalence, absolute(0.020)), lots(ch, ref, cand))
	narrow := one(t, plan(qa.Equivalence, absolute(0.010)), lots(ch, ref, cand))
	if wide.Verdict != qa.Equivalent || narrow.Verdict != qa.Undecided {
		t.Errorf("verdicts: got %q and %q, want equivalent and undecided", wide.Verdict, narrow.Verdict)
	}
	near(t, "mean of the reference", wide.Reference.Mean, 12.0039166667, 1e-11)
	near(t, "sd of the reference", wide.Reference.SD, 0.00766880734, 1e-8)
	near(t, "mean of the candidate", wide.Candidate.Mean, 12.0081666667, 1e-11)
	near(t, "sd of the candidate", wide.Candidate.SD, 0.00885061203, 1e-8)
	near(t, "estimate", wide.Difference.Estimate, 0.00425, 1e-11)
	near(t, "se", wide.Difference.SE, 0.00338063036, 1e-8)
	near(t, "df", wide.Difference.DF, 21.5630439, 1e-8)
	near(t, "t", wide.Difference.T, 1.25716199, 1e-8)
	near(t, "two-sided p", wide.Difference.PTwoSided, 0.222141870, 1e-8)
	near(t, "95 % lower", wide.Difference.Lower, -0.00276924463, 1e-8)
	near(t, "95 % upper", wide.Difference.Upper, 0.01126924463, 1e-8)
	near(t, "90 % lower", wide.Equivalence.Lower, -0.00156020125, 1e-8)
	near(t, "90 % upper", wide.Equivalence.Upper, 0.01006020125, 1e-8)
	near(t, "p at 0.020", wide.Equivalence.P, 6.32458964e-05, 1e-8)
	near(t, "p at 0.010", narrow.Equivalence.P, 0.0516733832, 1e-8)
	near(t, "sd ratio", wide.Spread.SDRatio, 1.154105409, 1e-9)
	near(t, "sd ratio lower", wide.Spread.Lower, 0.687512090, 1e-8)
	near(t, "sd ratio upper", wide.Spread.Upper, 1.937361267, 1e-9)
	near(t, "Ppk of the reference", wide.Performance.Reference.Ppk, 2.003, 3e-4)
	near(t, "Ppk of the candidate", wide.Performance.Candidate.Ppk, 1.576, 3e-4)
	if s := wide.Checks.Reference.Resolution; s == nil || *s != 0.001 {
		t.Errorf("resolution: got %v, want 0.001", s)
	}
	if s := wide.Equivalence.SmallestMargin; s == nil || *s != *wide.Equivalence.Upper {
		t.Errorf("smallest margin: got %v, want the upper end of the interval", s)
	}
}

// TestCompareMargins checks what each kind of margin comes to in the unit.
func TestCompareMargins(t *testing.T) {
	ch, ref, cand := d1()
	for _, c := range []struct {
		name         string
		objective    qa.Objective
		margin       qa.Margin
		guard        *float64
		lower, upper *float64
		verdict      qa.Verdict
	}{
		{"absolute", qa.Equivalence, qa.Margin{Absolute: ptr(0.02)}, nil, ptr(-0.02), ptr(0.02), qa.Equivalent},
		{"bounds", qa.Equivalence, qa.Margin{Lower: ptr(-0.01), Upper: ptr(0.03)}, nil, ptr(-0.01), ptr(0.03), qa.Equivalent},
		{"full tolerance", qa.Equivalence, qa.Margin{ToleranceFraction: ptr(0.1)}, nil, ptr(-0.01), ptr(0.01), qa.Undecided},
		{"half tolerance", qa.Equivalence, qa.Margin{ToleranceFraction: ptr(0.5), Of: "half"}, nil, ptr(-0.025), ptr(0.025), qa.Equivalent},
		{"guard", qa.Equivalence, qa.Margin{Absolute: ptr(0.011)}, ptr(0.001), ptr(-0.010), ptr(0.010), qa.Undecided},
		{"not higher", qa.NotHigher, qa.Margin{Absolute: ptr(0.02)}, nil, nil, ptr(0.02), qa.Demonstrated},
		{"not lower", qa.NotLower, qa.Margin{Lower: ptr(-0.001)}, nil, ptr(-0.001), nil, qa.Undecided},
		{"not lower, shown", qa.NotLower, qa.Margin{Lower: ptr(-0.002)}, nil, ptr(-0.002), nil, qa.Demonstrated},
		{"not higher, contradicted", qa.NotHigher, qa.Margin{Upper: ptr(-0.005)}, nil, nil, ptr(-0.005), qa.Contradicted},
		{"refuted", qa.Equivalence, qa.Margin{Lower: ptr(-0.02), Upper: ptr(-0.01)}, nil, ptr(-0.02), ptr(-0.01), qa.NotEquivalent},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := plan(c.objective, &c.margin)
			p.Criterion.Guard = c.guard
			got := one(t, p, lots(ch, ref, cand))
			checkEnd(t, "lower", got.Equivalence.MarginLower, c.lower)
			checkEnd(t, "upper", got.Equivalence.MarginUpper, c.upper)
			if got.Verdict != c.verdict {
				t.Errorf("verdict: got %q, want %q", got.Verdict, c.verdict)
			}
		})
	}
}

func checkEnd(t *testing.T, name string, got, want *float64) {
	t.Helper()
	if want == nil {
		if got != nil {
			t.Errorf("%s: got %v, want none", name, *got)
		}
		return
	}
	near(t, name, got, *want, 1e-12)
}

// TestCompareRefusesMargins checks that a margin that cannot be resolved is an error, never a default.
func TestCompareRefusesMargins(t *testing.T) {
	ch, ref, cand := d1()
	oneLimit := ch
	oneLimit.Lower = nil
	for name, c := range map[string]struct {
		ch        qa.Characteristic
		objective qa.Objective
		margin    *qa.Margin
		guard     *float64
	}{
		"none":                    {ch, qa.Equivalence, nil, nil},
		"two kinds":               {ch, qa.Equivalence, &qa.Margin{Absolute: ptr(1.0), ToleranceFraction: ptr(0.1)}, nil},
		"no limits":               {oneLimit, qa.Equivalence, &qa.Margin{ToleranceFraction: ptr(0.1)}, nil},
		"one bound, equivalence":  {ch, qa.Equivalence, &qa.Margin{Lower: ptr(-1.0)}, nil},
		"wrong bound, not higher": {ch, qa.NotHigher, &qa.Margin{Lower: ptr(-1.0)}, nil},
		"guard as wide":           {ch, qa.Equivalence, absolute(0.01), ptr(0.01)},
		"negative":                {ch, qa.Equivalence, absolute(-0.01), nil},
		"zero":                    {ch, qa.Equivalence, absolute(0), nil},
	} {
		p := plan(c.objective, c.margin)
		p.Criterion.Guard = c.guard
		if _, err := qa.Compare(p, lots(c.ch, ref, cand), qa.Run{}); err == nil {
			t.Errorf("%s: got no error", name)
		}
	}
}

// TestPermits checks what a margin lets through against the normal distribution by hand: mean 12.0, sd 0.01, limits ±0.05,
// shift 0.02 leaves 3 standard deviations to the upper limit: Ppk 1, outside Φ(−3) + Φ(−7) = 0.001349898032910 (Abramowitz
// and Stegun, table 26.1: Q(3) = 0.00134 98980 31630).
func TestPermits(t *testing.T) {
	ref := series("x", 2, 11.99, 12.01, 11.99, 12.01, 12.0, 12.0) // mean 12, variance 4e-4/5 = 8e-5
	ch := qa.Characteristic{Name: "x", Lower: ptr(12 - 0.05), Upper: ptr(12 + 0.05)}
	got := one(t, plan(qa.Equivalence, absolute(0.05-3*0.00894427190999916)), lots(ch, ref, series("x", 2, 12, 12.01, 11.99)))
	if got.Equivalence.Permits == nil {
		t.Fatal("permits: got none")
	}
	near(t, "ppk", &got.Equivalence.Permits.Ppk, 1, 1e-9)
	near(t, "outside", &got.Equivalence.Permits.Outside, 0.00134989803163, 1e-6)
}
