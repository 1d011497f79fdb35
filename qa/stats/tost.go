package stats

import "math"

// A TOST holds two one-sided tests of an Estimate against a margin. TLower and
// PLower test that the true value is at most the lower limit, TUpper and PUpper
// that it is at least the upper limit. Both hypotheses rejected at alpha is the
// same as Interval lying strictly inside the margin.
//
// A side that the question does not have (a limit of minus or plus infinity) is
// not tested: its T and P are 0 and must not be read.
type TOST struct {
	TLower, PLower float64
	TUpper, PUpper float64
	Interval       Interval // at level 1 - 2 alpha
}

// TwoOneSided tests e against the margin from lower to upper, each side at alpha
// (Schuirmann 1987, J. Pharmacokinetics and Biopharmaceutics 15, 657-680, from
// memory). lower may be minus infinity or upper plus infinity for a one-sided
// question.
func TwoOneSided(e Estimate, lower, upper, alpha float64) TOST {
	var t TOST
	if !math.IsInf(lower, -1) {
		t.TLower, t.PLower = e.Above(lower)
	}
	if !math.IsInf(upper, 1) {
		t.TUpper, t.PUpper = e.Below(upper)
	}
	t.Interval = e.interval(1-2*alpha, alpha)
	return t
}
