package qa

import (
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// The scales on which a margin is tested (contract: result, "equivalence.scale").
const (
	scaleDifference = "difference" // candidate minus reference, in the unit
	scaleRatio      = "ratio"      // candidate over reference
	scaleShift      = "shift"      // the candidate's mean from a mean stated beforehand
)

// tested is a margin as it is tested, after the guard; an end that is not asked is nil.
type tested struct {
	stated       MarginResult
	scale        string
	lower, upper *float64
	mean         float64 // scaleShift: the mean that the shift is taken from
	fromSample   bool    // the margin rests on the reference sample: for planning only
}

// resolve turns a margin into the bounds that are tested for what is asked, the guard taken off both ends (JCGM 106, 8.3.2, from
// memory: a guard band shrinks the region of acceptance). ref is the reference sample, which only the kinds that may rest on it
// look at. The error says what is wrong with the plan.
func (m Margin) resolve(c Characteristic, a asked, ref stats.Summary) (tested, error) {
	t := tested{scale: scaleDifference}
	t.stated.Guard, t.stated.Reason, t.stated.ApprovedBy = a.guard, m.Reason, m.ApprovedBy
	kinds := m.Kinds()
	if len(kinds) != 1 {
		return t, fmt.Errorf("margin of %q: found %s, want exactly one kind; state one of %s", c.Name, orNone(kinds), marginKinds)
	}
	t.stated.Kind = kinds[0]
	var err error
	switch kinds[0] {
	case "absolute":
		err = t.symmetric(c, *m.Absolute, m.Absolute)
	case "bounds":
		t.stated.StatedLower, t.stated.StatedUpper = m.Lower, m.Upper
		t.lower, t.upper = copied(m.Lower), copied(m.Upper)
	case "tolerance_fraction":
		err = t.tolerance(c, m)
	case "reference_fraction":
		f := *m.ReferenceFraction
		t.scale, t.stated.Stated = scaleRatio, m.ReferenceFraction
		if !(f > 0 && f < 1) {
			err = fmt.Errorf("margin of %q: found reference_fraction = %v, want a number above 0 and below 1; correct the plan", c.Name, f)
		}
		low, high := 1-f, 1+f
		t.lower, t.upper = &low, &high
	case "ratio_bounds":
		t.scale, t.stated.StatedLower, t.stated.StatedUpper = scaleRatio, m.RatioLower, m.RatioUpper
		t.lower, t.upper = copied(m.RatioLower), copied(m.RatioUpper)
	case "sd_multiple":
		sd := m.SD
		if sd == nil {
			t.fromSample = true
			sd = &ref.SD
		}
		t.stated.SD = copied(sd)
		err = t.symmetric(c, *m.SDMultiple**sd, m.SDMultiple)
	case "keep_ppk":
		err = t.keepPpk(c, m, a, ref)
	}
	if err != nil {
		return t, err
	}
	if err := t.fits(c, a); err != nil {
		return t, err
	}
	return t, t.shrink(c, a)
}

const marginKinds = "absolute, lower and upper, tolerance_fraction, reference_fraction, ratio_lower and ratio_upper, sd_multiple, keep_ppk"

func copied(x *float64) *float64 {
	if x == nil {
		return nil
	}
	v := *x
	return &v
}

// symmetric sets ±width. A width of 0 from a constant reference sample has no bounds to test and is no error of the plan.
func (t *tested) symmetric(c Characteristic, width float64, stated *float64) error {
	t.stated.Stated = stated
	if t.fromSample && width == 0 {
		return nil
	}
	if !(width > 0) || math.IsInf(width, 0) {
		return fmt.Errorf("margin of %q: found %s = %v, want a number above 0; correct the plan", c.Name, t.stated.Kind, *stated)
	}
	low := -width
	t.lower, t.upper = &low, &width
	return nil
}

// tolerance is a part of the tolerance; both widths are stated because which one is meant is often unclear.
func (t *tested) tolerance(c Characteristic, m Margin) error {
	width, ok := c.Tolerance()
	if !ok || !(width > 0) {
		return fmt.Errorf("margin of %q: found tolerance_fraction without both specification limits, want lower and upper; state the limits or an absolute margin", c.Name)
	}
	full, half := *m.ToleranceFraction*width, *m.ToleranceFraction*width/2
	t.stated.Full, t.stated.Half, t.stated.Of = &full, &half, "full"
	if m.Of == "half" {
		t.stated.Of = "half"
		return t.symmetric(c, half, m.ToleranceFraction)
	}
	return t.symmetric(c, full, m.ToleranceFraction)
}

// keepPpk lets the candidate's mean lie wherever Ppk would still be at least p at R times the standard deviation s:
//
//	(lower limit + 3 p R s) - m … (upper limit - 3 p R s) - m
//
// with R the largest acceptable ratio of standard deviations, 1 where none is asked: the joint rule for mean and spread.
func (t *tested) keepPpk(c Characteristic, m Margin, a asked, ref stats.Summary) error {
	t.scale, t.stated.Stated = scaleShift, m.KeepPpk
	mean, sd := m.Mean, m.SD
	if mean == nil || sd == nil {
		t.fromSample = true
		if mean == nil {
			mean = &ref.Mean
		}
		if sd == nil {
			sd = &ref.SD
		}
	}
	t.mean = *mean
	t.stated.Mean, t.stated.SD = mean, sd
	if t.fromSample && ref.N < 2 {
		return nil
	}
	if c.Lower == nil && c.Upper == nil {
		return fmt.Errorf("margin of %q: found keep_ppk without specification limits, want at least one; state the limits", c.Name)
	}
	ratio := 1.0
	if a.spreadRatio != nil {
		ratio = *a.spreadRatio
	}
	strip := 3 * *m.KeepPpk * ratio * *sd
	if c.Lower != nil {
		low := *c.Lower + strip - *mean
		t.lower = &low
	}
	if c.Upper != nil {
		high := *c.Upper - strip - *mean
		t.upper = &high
	}
	if t.lower != nil && !(*t.lower < 0) || t.upper != nil && !(*t.upper > 0) {
		return fmt.Errorf("margin of %q: found no room for a Ppk of %v at mean %v and standard deviation %v, want one that the stated mean itself has; lower keep_ppk or state another margin", c.Name, *m.KeepPpk, *mean, ratio**sd)
	}
	return nil
}

func ptr[T any](x T) *T { return &x }

// fits checks that the bounds are there that the objective needs, and drops the one it does not ask for.
func (t *tested) fits(c Characteristic, a asked) error {
	if t.fromSample && t.lower == nil && t.upper == nil {
		return nil
	}
	if a.objective == Equivalence && (t.lower == nil || t.upper == nil) {
		return fmt.Errorf("margin of %q: found one bound, want lower and upper for the objective equivalence; state both", c.Name)
	}
	if a.objective == NotLower && t.lower == nil || a.objective == NotHigher && t.upper == nil {
		return fmt.Errorf("margin of %q: the bound that %s asks for is missing; state the lower one for not-lower, the upper one for not-higher", c.Name, a.objective)
	}
	if t.lower != nil && t.upper != nil && !(*t.lower < *t.upper) {
		return fmt.Errorf("margin of %q: found %v to %v, want the lower end below the upper; correct the plan", c.Name, *t.lower, *t.upper)
	}
	if a.objective == NotHigher || a.objective == Higher {
		t.lower = nil
	}
	if a.objective == NotLower || a.objective == Lower {
		t.upper = nil
	}
	return nil
}

// shrink takes the guard off both ends.
func (t *tested) shrink(c Characteristic, a asked) error {
	if a.guard == 0 {
		return nil
	}
	if t.scale == scaleRatio {
		return fmt.Errorf("guard of %q: found %v beside a margin that is a ratio, want it only where the margin is in the unit; remove one", c.Name, a.guard)
	}
	beyond := false // an end that the guard takes to 0 or to its other side
	if t.lower != nil {
		beyond = *t.lower < 0 && !(*t.lower+a.guard < 0)
		*t.lower += a.guard
	}
	if t.upper != nil {
		beyond = beyond || *t.upper > 0 && !(*t.upper-a.guard > 0)
		*t.upper -= a.guard
	}
	if beyond || t.lower != nil && t.upper != nil && !(*t.lower < *t.upper) {
		return fmt.Errorf("guard of %q: found %v, want less than the margin; lower the guard or state a wider margin", c.Name, a.guard)
	}
	return nil
}

// ends are the two ends of the margin as shifts of the mean from where the candidate would lie without any: what permits and
// warnings look at. base is the mean that a ratio multiplies.
func (t tested) ends(base float64) (lower, upper *float64) {
	if t.scale != scaleRatio {
		return t.lower, t.upper
	}
	if t.lower != nil {
		lower = ptr((*t.lower - 1) * base)
	}
	if t.upper != nil {
		upper = ptr((*t.upper - 1) * base)
	}
	return lower, upper
}
