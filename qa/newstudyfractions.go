package qa

import (
	"errors"

	"lotpair/qa/stats"
)

// newStudyOfFractions sizes a new study of an attribute where this one left the verdict undecided: at the reference's fraction in
// both lots, and at the fractions found.
func (c *comparison) newStudyOfFractions(plan Plan) {
	e := c.Equivalence
	if c.Verdict != Undecided || !c.Objective.AgainstMargin() || e == nil || c.Reference.Fraction == nil || c.Candidate.Fraction == nil {
		return
	}
	s := &NewStudyResult{Power: plan.power()}
	ref := *c.Reference.Fraction
	s.AtZero = c.partsForFractions(ref, ref, s.Power, "new_study.at_zero")
	s.AtEstimate = c.partsForFractions(ref, *c.Candidate.Fraction, s.Power, "new_study.at_estimate")
	c.NewStudy = s
}

// partsForFractions is what a study of these true fractions needs; nil where no number would do.
func (c *comparison) partsForFractions(ref, cand, power float64, path string) *StudyParts {
	d := stats.FractionDesign{Aim: aimOf(c.Objective), PRef: ref, PCand: cand, Alpha: c.Alpha}
	// A limit on or beyond every difference is never crossed: just short of it is the same.
	const most = 1 - 1e-12
	if l := c.Equivalence.MarginLower; l != nil {
		d.Lower = max(-most, *l)
	}
	if u := c.Equivalence.MarginUpper; u != nil {
		d.Upper = min(most, *u)
	}
	n, m, _, err := stats.FractionSize(d, c.partsRatio(), power)
	if err != nil {
		if !errors.Is(err, stats.ErrBeyondMargin) {
			c.warn(WarnNotComputable, "", path, "The size of a new study is not given: "+err.Error()+".")
		}
		return nil
	}
	return &StudyParts{Reference: n, Candidate: m}
}
