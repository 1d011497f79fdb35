package qa_test

import (
	"math"
	"strings"
	"testing"

	"lotpair/qa"
	"lotpair/qa/stats"
)

// row is one row of the other ways of computing a verdict.
func row(t *testing.T, c qa.Comparison, method string) qa.SensitivityResult {
	t.Helper()
	for _, s := range c.Sensitivity {
		if s.Method == method {
			return s
		}
	}
	t.Fatalf("other ways: got %+v, want %s among them", c.Sensitivity, method)
	return qa.SensitivityResult{}
}

// The stated uncertainty of the measuring systems' bias stands beside the verdict as an interval of its own, and in what a new
// study takes. By hand for D1: se 0.00338063036 and u 0.003*sqrt(2) give 0.00542476; df 21.5630439/(se/0.00542476)^4 = 142.98, t of
// 0.95 is 1.655581 (R 4: qt), so 0.00425 +- 0.008981227.
func TestUncertainty(t *testing.T) {
	ch, ref, cand := d1()
	ch.Uncertainty = &qa.Uncertainty{Reference: 0.003, Candidate: 0.003}
	got := one(t, plan(qa.Equivalence, absolute(0.013)), lots(ch, ref, cand))
	s := row(t, got, "gauge-bias")
	near(t, "lower", s.Lower, 0.00425-0.008981227, 1e-6)
	near(t, "upper", s.Upper, 0.00425+0.008981227, 1e-6)
	if got.Verdict != qa.Equivalent || s.Verdict != qa.Undecided || !qa.Has(got.Warnings, qa.WarnFlips) {
		t.Errorf("got %q, with the bias %q, %v; want equivalent as measured, undecided with the bias, and that said", got.Verdict, s.Verdict, got.Warnings)
	}
	if qa.Has(got.Warnings, qa.WarnUncertainty) {
		t.Errorf("got %v, want no warning: the margin is three standard uncertainties", got.Warnings)
	}
	u := math.Hypot(0.003, 0.003)
	undecided := one(t, plan(qa.Equivalence, absolute(0.010)), lots(ch, ref, cand))
	size := func(shift float64) *qa.StudyParts {
		n, m, _, err := stats.Size(stats.Design{Alpha: 0.05, Lower: -0.01, Upper: 0.01, SDRef: *got.Reference.SD, SDCand: *got.Candidate.SD, Welch: true, Shift: shift, Bias: u}, 1, 0.9)
		if err != nil {
			return nil
		}
		return &qa.StudyParts{Reference: n, Candidate: m}
	}
	checkStudy(t, undecided, qa.NewStudyResult{Power: 0.9, AtZero: size(0), AtEstimate: size(*got.Difference.Estimate)})
	if without := one(t, plan(qa.Equivalence, absolute(0.010)), lots(ch2(), ref, cand)); without.NewStudy.AtZero.Reference >= undecided.NewStudy.AtZero.Reference {
		t.Errorf("got %d parts with a bias and %d without, want more", undecided.NewStudy.AtZero.Reference, without.NewStudy.AtZero.Reference)
	}
	// At the estimate the bias alone takes more than a tenth: P(0.00425 + u Z < 0.010) = 0.912 leaves it; with 0.0035 each it does not.
	ch.Uncertainty = &qa.Uncertainty{Reference: 0.0035, Candidate: 0.0035}
	p := plan(qa.Equivalence, absolute(0.010))
	if c := one(t, p, lots(ch, ref, cand)); c.NewStudy == nil || c.NewStudy.AtZero == nil || c.NewStudy.AtEstimate != nil || !qa.Has(c.Warnings, qa.WarnUncertainty) {
		t.Errorf("a bias that takes too much: got %+v, %v; want none at the estimate, and why", c.NewStudy, c.Warnings)
	}
	// One twice the margin or more: said as the contract has it.
	ch.Uncertainty = &qa.Uncertainty{Reference: 0.004, Candidate: 0.004}
	if c := one(t, p, lots(ch, ref, cand)); !qa.Has(c.Warnings, qa.WarnUncertainty) {
		t.Errorf("margin 0.010, uncertainty of the difference 0.0057: got %v", c.Warnings)
	}
}

// ch2 is D1's characteristic without an uncertainty.
func ch2() qa.Characteristic {
	ch, _, _ := d1()
	return ch
}

// On the scale of a ratio the bias counts in parts of the mean, on that of a shift the candidate's alone.
func TestUncertaintyScales(t *testing.T) {
	ch, ref, cand := d1()
	ch.Uncertainty = &qa.Uncertainty{Reference: 0.003, Candidate: 0.004}
	p := plan(qa.Equivalence, &qa.Margin{RatioLower: ptr(0.99), RatioUpper: ptr(1.01)})
	p.Criterion.Method = "log"
	c := one(t, p, lots(ch, ref, cand))
	e, s := c.Equivalence, row(t, c, "gauge-bias")
	all := math.Hypot(*e.SE, math.Hypot(0.003 / *c.Reference.Mean, 0.004 / *c.Candidate.Mean))
	share := *e.SE / all
	want := stats.Estimate{Value: math.Log(*e.Estimate), SE: all, DF: *e.DF / math.Pow(share, 4)}.Interval(0.9)
	near(t, "ratio, upper", s.Upper, math.Exp(want.Upper), 1e-13)
	// Of a ratio of means the standard error of each contrast: p of the bias counted is 0.05 at both ends.
	for _, method := range []string{"welch", "pooled"} {
		p = plan(qa.Equivalence, &qa.Margin{ReferenceFraction: ptr(0.001)})
		p.Criterion.Method = method
		c = one(t, p, lots(ch, ref, cand))
		s = row(t, c, "gauge-bias")
		n := float64(c.Reference.N)
		a, b := *c.Reference.SD**c.Reference.SD/n, *c.Candidate.SD**c.Candidate.SD/n
		if method == "pooled" {
			a, b = (a+b)/2, (a+b)/2
		}
		for _, theta := range []float64{*s.Lower, *s.Upper} {
			r := theta * theta * a
			df := (r + b) * (r + b) / ((r*r + b*b) / (n - 1))
			if method == "pooled" {
				df = 2*n - 2
			}
			v := r + b + theta*theta*0.003*0.003 + 0.004*0.004
			df *= v * v / ((r + b) * (r + b))
			two := stats.Estimate{Value: *c.Candidate.Mean - theta**c.Reference.Mean, SE: math.Sqrt(v), DF: df}
			_, pValue := two.TwoSided(0)
			near(t, method+", p at an end", &pValue, 0.10, 1e-8)
		}
		if c.Verdict != qa.Equivalent || s.Verdict != qa.Undecided || !qa.Has(c.Warnings, qa.WarnFlips) {
			t.Errorf("%s: got %q, with the bias %q; want equivalent as measured and undecided with the bias", method, c.Verdict, s.Verdict)
		}
	}
	c = one(t, plan(qa.Equivalence, &qa.Margin{KeepPpk: ptr(1.0), Mean: ptr(12.0), SD: ptr(0.01)}), lots(ch, ref, cand))
	e, s = c.Equivalence, row(t, c, "gauge-bias")
	all = math.Hypot(*e.SE, 0.004)
	share = *e.SE / all
	want = stats.Estimate{Value: *e.Estimate, SE: all, DF: *e.DF / math.Pow(share, 4)}.Interval(0.9)
	near(t, "shift, upper", s.Upper, want.Upper, 1e-13)
}

// A guard narrows what a new study must show, as it narrows the margin.
func TestGuardInNewStudy(t *testing.T) {
	ch, ref, cand := d1()
	p := plan(qa.Equivalence, absolute(0.0105))
	p.Criterion.Guard = ptr(0.0005)
	guarded := one(t, p, lots(ch, ref, cand))
	narrow := one(t, plan(qa.Equivalence, absolute(0.010)), lots(ch, ref, cand))
	checkStudy(t, guarded, *narrow.NewStudy)
}

// Different gauges restrict the claim to the lots as they were measured.
func TestDifferentGauges(t *testing.T) {
	ch, ref, cand := d1()
	p := plan(qa.Equivalence, absolute(0.02))
	p.Record.GaugeReference, p.Record.GaugeCandidate = "bore gauge 14", "bore gauge 15"
	r, err := qa.Compare(p, lots(ch, ref, cand), qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	for _, w := range r.Warnings {
		if w.Code == qa.WarnGauges {
			if !strings.Contains(w.Text, "as these gauges measure them") || !strings.Contains(w.Text, "Bore dia") {
				t.Errorf("got %q, want the claim restricted, and what has no stated uncertainty named", w.Text)
			}
			ch.Uncertainty = &qa.Uncertainty{Reference: 0.001, Candidate: 0.001}
			if r, err = qa.Compare(p, lots(ch, ref, cand), qa.Run{}); err != nil {
				t.Fatal(err)
			}
			if !strings.Contains(r.Warnings[len(r.Warnings)-1].Text, "gauge-bias") {
				t.Errorf("got %v, want the way that counts the stated uncertainty named", r.Warnings)
			}
			return
		}
	}
	t.Errorf("warnings: got %v, want %s", r.Warnings, qa.WarnGauges)
}
