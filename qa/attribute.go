package qa

import (
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// FisherResult is Fisher's exact test, two-sided over the tables no more probable. It decides nothing.
type FisherResult struct {
	P float64 `json:"p"`
}

// compareAttribute compares the fractions of parts that failed by the score method (Miettinen and Nurminen 1985). A reading of
// an attribute is 1 for a failed part and 0 for a good one; the margin is in fractions.
func compareAttribute(plan Plan, ch Characteristic, ref, cand Series) (Comparison, error) {
	a := plan.askedOf(ch)
	c := &comparison{ch: ch, asked: a, Comparison: Comparison{
		Name: ch.Name, Unit: ch.Unit, Kind: "attribute", Objective: a.objective, Alpha: a.alpha, Method: "miettinen-nurminen", Warnings: []Warning{},
	}}
	c.ref, c.cand = newSample(Reference, ref, ref.used()), newSample(Candidate, cand, cand.used())
	if a.margin != nil {
		t, err := a.margin.resolve(ch, a, c.ref.summary)
		if err != nil {
			return Comparison{}, err
		}
		c.margin = t
		c.Equivalence = &EquivalenceResult{Scale: scaleDifference, Margin: t.stated, MarginLower: t.lower, MarginUpper: t.upper, Verdict: Undecided}
	} else if a.objective.AgainstMargin() {
		return Comparison{}, fmt.Errorf("margin of %q: found none, want one for the objective %s; state it under [criterion] or in the characteristic", ch.Name, a.objective)
	}
	var x, y stats.Counts
	c.Reference, x = c.counts(c.ref)
	c.Candidate, y = c.counts(c.cand)
	c.Decimals = Decimals(ch, ref, cand)
	if p, err := stats.CompareProportions(x, y); err != nil {
		c.warn(WarnTooFew, "", "difference", "A comparison of fractions needs at least one part in each lot.")
	} else {
		c.fractions(p)
	}
	c.decide(ref, cand)
	c.absence()
	c.newStudyOfFractions(plan)
	return c.Comparison, nil
}

// counts describes one lot's parts.
func (c *comparison) counts(s sample) (SampleResult, stats.Counts) {
	out := SampleResult{
		Rows: s.series.Rows, Parts: s.summary.N, N: s.summary.N, Excluded: s.series.Excluded(),
		Missing: s.series.Missing, NonDetects: s.series.NonDetects, Unread: s.series.Unread, Repeats: s.series.Repeats,
	}
	failed := 0
	for _, v := range s.values {
		if v != 0 {
			failed++
		}
	}
	out.Failed = &failed
	if out.N > 0 {
		out.Fraction = ptr(float64(failed) / float64(out.N))
	}
	return out, stats.Counts{N: out.N, Failed: failed}
}

// fractions fills difference, equivalence, Fisher's test and Newcombe's interval.
func (c *comparison) fractions(p stats.Proportions) {
	d := &c.Difference
	d.Method = c.Method
	d.Estimate = ptr(p.Difference())
	_, two := p.TwoSided(0)
	d.PTwoSided = c.pValue(two, "difference.p_two_sided")
	d.P, d.Alternative = d.PTwoSided, "two-sided"
	level := 1 - c.Alpha
	switch c.Objective {
	case Lower:
		_, q := p.Below(0)
		d.P, d.Alternative, level = c.pValue(q, "difference.p"), "lower", 1-2*c.Alpha
	case Higher:
		_, q := p.Above(0)
		d.P, d.Alternative, level = c.pValue(q, "difference.p"), "higher", 1-2*c.Alpha
	}
	in := p.Interval(level)
	d.Level, d.Lower, d.Upper = &level, c.number(in.Lower, "difference.lower"), c.number(in.Upper, "difference.upper")
	c.Detectable = d.PTwoSided != nil && *d.PTwoSided < c.Alpha
	if f := p.Fisher(); finite(f) {
		c.Fisher = &FisherResult{P: max(f, smallestP)}
	}
	e := c.Equivalence
	if e == nil {
		return
	}
	narrow := p.Interval(1 - 2*c.Alpha)
	answer := answer{estimate: p.Difference(), lower: narrow.Lower, upper: narrow.Upper}
	if e.MarginLower != nil {
		e.ZLower, answer.pLower = score(p.Above(math.Max(-1, *e.MarginLower)))
	}
	if e.MarginUpper != nil {
		e.ZUpper, answer.pUpper = score(p.Below(math.Min(1, *e.MarginUpper)))
	}
	c.answered(answer)
	e.TLower, e.TUpper = nil, nil
	if n := p.Newcombe(1 - 2*c.Alpha); finite(n.Lower, n.Upper) && c.Objective.AgainstMargin() {
		c.Sensitivity = append(c.Sensitivity, SensitivityResult{
			Method: "newcombe", Estimate: d.Estimate, Level: ptr(n.Level), Lower: ptr(n.Lower), Upper: ptr(n.Upper),
			Verdict: againstMargin(c.Objective, n.Lower, n.Upper, e.MarginLower, e.MarginUpper),
		})
		c.flips()
	}
}

// score keeps a statistic that is a number: where the hypothesis leaves no spread it is none.
func score(z, p float64) (*float64, float64) {
	if !finite(z) {
		return nil, p
	}
	return &z, p
}
