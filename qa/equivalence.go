package qa

import (
	"errors"
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// answer is what the two one-sided tests gave on one scale: everything of an EquivalenceResult that the readings decide.
type answer struct {
	estimate       float64
	se, df         *float64 // nil on the ratio scale of means, where each end has its own
	dfLower        *float64
	dfUpper        *float64
	tLower, pLower float64
	tUpper, pUpper float64
	lower, upper   float64 // the 1 - 2 alpha interval
}

// equivalence holds what was estimated against the margin on the margin's own scale.
func (c *comparison) equivalence(est stats.Estimate) error {
	if c.Equivalence == nil {
		return nil
	}
	var a answer
	var err error
	switch {
	case c.margin.lower == nil && c.margin.upper == nil:
		return nil
	case c.margin.scale == scaleShift:
		a, err = c.shift()
	case c.Method == "log":
		a, err = c.logRatio()
	case c.margin.scale == scaleRatio:
		a, err = c.meanRatio()
	default:
		a = oneScale(est, c.margin.lower, c.margin.upper, c.Alpha)
	}
	switch {
	case errors.Is(err, stats.ErrRatioUndefined):
		c.warn(WarnRatioUndefined, "", "equivalence", "The reference's mean does not differ from 0: a ratio to it has no interval.")
		return nil
	case errors.Is(err, stats.ErrTooFew), errors.Is(err, stats.ErrConstant), errors.Is(err, errNotPositive):
		return nil // said already
	case err != nil:
		return err
	}
	c.answered(a)
	return nil
}

// oneScale is the pair of tests of one estimate (Schuirmann 1987).
func oneScale(est stats.Estimate, lower, upper *float64, alpha float64) answer {
	low, high := math.Inf(-1), math.Inf(1)
	if lower != nil {
		low = *lower
	}
	if upper != nil {
		high = *upper
	}
	t := stats.TwoOneSided(est, low, high, alpha)
	return answer{
		estimate: est.Value, se: ptr(est.SE), df: ptr(est.DF),
		tLower: t.TLower, pLower: t.PLower, tUpper: t.TUpper, pUpper: t.PUpper, lower: t.Interval.Lower, upper: t.Interval.Upper,
	}
}

// shift tests the candidate's mean against the mean of keep_ppk: one sample, n - 1 degrees of freedom.
func (c *comparison) shift() (answer, error) {
	s := c.cand.summary
	if s.N < 2 {
		return answer{}, stats.ErrTooFew
	}
	if s.Constant() || !(s.SD > 0) {
		c.warn(WarnNoVariation, Candidate, "equivalence", "The candidate's readings are equal: the shift of its mean has no standard error.")
		return answer{}, stats.ErrConstant
	}
	est := stats.Estimate{Value: s.Mean - c.margin.mean, SE: s.SD / math.Sqrt(float64(s.N)), DF: float64(s.N - 1)}
	return oneScale(est, c.margin.lower, c.margin.upper, c.Alpha), nil
}

// errNotPositive says that a reading is not above 0, so that it has no logarithm.
var errNotPositive = errors.New("a reading is not above 0")

// logRatio tests the ratio of the geometric means by Welch's test on the logarithms.
func (c *comparison) logRatio() (answer, error) {
	x, ok1 := c.ref.logarithms()
	y, ok2 := c.cand.logarithms()
	if !ok1 || !ok2 {
		return answer{}, errNotPositive
	}
	est, err := stats.Welch(stats.MeanAndSD(x), stats.MeanAndSD(y))
	if err != nil {
		return answer{}, err
	}
	lower, upper := logOf(c.margin.lower), logOf(c.margin.upper)
	a := oneScale(est, lower, upper, c.Alpha)
	a.estimate, a.lower, a.upper = math.Exp(a.estimate), math.Exp(a.lower), math.Exp(a.upper)
	return a, nil
}

func logOf(x *float64) *float64 {
	if x == nil {
		return nil
	}
	return ptr(math.Log(*x))
}

// contrast is what is asked of the ratio of the means: candidate - theta reference, so that the reference's own sampling error
// counts.
func (c *comparison) contrast() (stats.Contrast, error) {
	ref, cand := c.ref.summary, c.cand.summary
	if c.asked.grouped {
		var ok bool
		if ref, cand, ok = c.groupMeans(); !ok {
			return stats.Contrast{}, stats.ErrTooFew
		}
	}
	switch c.Method {
	case "pooled":
		return stats.PooledContrast(ref, cand)
	case "paired":
		return stats.PairedContrast(c.ref.values, c.cand.values)
	}
	return stats.WelchContrast(ref, cand)
}

// meanRatio tests the ratio of the means on their contrasts; the interval is that of Fieller 1954.
func (c *comparison) meanRatio() (answer, error) {
	if ref := c.ref.summary; ref.N > 0 && ref.Mean < 0 {
		return answer{}, fmt.Errorf("margin of %q: found reference_fraction with a reference mean of %v, want one above 0; state the margin in the unit", c.Name, ref.Mean)
	}
	contrast, err := c.contrast()
	if err != nil {
		return answer{}, err
	}
	in, err := contrast.Interval(1 - 2*c.Alpha)
	if err != nil {
		return answer{}, err
	}
	a := answer{estimate: contrast.Value(), lower: in.Lower, upper: in.Upper}
	if c.margin.lower != nil {
		e := contrast.At(*c.margin.lower)
		a.tLower, a.pLower = e.Above(0)
		a.dfLower = ptr(e.DF)
	}
	if c.margin.upper != nil {
		e := contrast.At(*c.margin.upper)
		a.tUpper, a.pUpper = e.Below(0)
		a.dfUpper = ptr(e.DF)
	}
	return a, nil
}

// answered writes an answer into the result and gives the verdict of the mean.
func (c *comparison) answered(a answer) {
	e := c.Equivalence
	e.Estimate, e.SE, e.DF, e.DFLower, e.DFUpper = c.number(a.estimate, "equivalence.estimate"), a.se, a.df, a.dfLower, a.dfUpper
	level := 1 - 2*c.Alpha
	e.Level = &level
	e.Lower, e.Upper = c.number(a.lower, "equivalence.lower"), c.number(a.upper, "equivalence.upper")
	if e.MarginLower != nil {
		e.TLower, e.PLower = c.number(a.tLower, "equivalence.t_lower"), c.pValue(a.pLower, "equivalence.p_lower")
		e.P = e.PLower
	}
	if e.MarginUpper != nil {
		e.TUpper, e.PUpper = c.number(a.tUpper, "equivalence.t_upper"), c.pValue(a.pUpper, "equivalence.p_upper")
		if e.P == nil || e.PUpper != nil && *e.PUpper > *e.P {
			e.P = e.PUpper
		}
	}
	if e.Lower == nil || e.Upper == nil {
		return
	}
	e.SmallestMargin = ptr(smallestMargin(c.Objective, e.Scale, *e.Lower, *e.Upper) + e.Margin.Guard)
	o := c.Objective
	if !o.AgainstMargin() {
		o = Equivalence
	}
	e.Verdict = againstMargin(o, *e.Lower, *e.Upper, e.MarginLower, e.MarginUpper)
	if c.margin.fromSample {
		e.Verdict = Undecided
	}
}

// smallestMargin is the smallest symmetric margin at which it would have been shown (contract: result, "Definitions").
func smallestMargin(o Objective, scale string, lower, upper float64) float64 {
	zero := 0.0
	if scale == scaleRatio {
		zero = 1
	}
	switch o {
	case NotLower:
		return math.Max(0, zero-lower)
	case NotHigher:
		return math.Max(0, upper-zero)
	}
	return math.Max(math.Abs(zero-lower), math.Abs(upper-zero))
}
