package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// An Interval is a confidence interval at Level (0.95 for 95 %).
type Interval struct{ Level, Lower, Upper float64 }

// An Estimate is a difference of two means, candidate minus reference, with its
// standard error and the degrees of freedom of the t distribution that belongs
// to it. An Estimate that came with ErrConstant has only its Value; every p and
// limit taken from it is NaN.
type Estimate struct{ Value, SE, DF float64 }

// Welch returns the difference of the means of cand and ref without assuming
// equal variances (Welch 1947, Biometrika 34, 28-35):
//
//	SE = sqrt(s1^2/n1 + s2^2/n2)
//
// with the degrees of freedom of Satterthwaite (1946, Biometrics Bulletin 2,
// 110-114):
//
//	DF = (s1^2/n1 + s2^2/n2)^2 / ((s1^2/n1)^2/(n1-1) + (s2^2/n2)^2/(n2-1))
//
// both from memory. It returns ErrTooFew when a group has fewer than 2
// readings. It returns ErrConstant, and an Estimate with only its Value, when
// SE is below ten roundings of the larger mean (the guard of R's t.test): then
// no spread was measured and no probability means anything. One constant group
// beside a varying one is allowed.
func Welch(ref, cand Summary) (Estimate, error) {
	if ref.N < 2 || cand.N < 2 {
		return Estimate{}, ErrTooFew
	}
	e := Estimate{Value: cand.above(ref)}
	a := ref.SD / math.Sqrt(float64(ref.N))
	b := cand.SD / math.Sqrt(float64(cand.N))
	se := math.Hypot(a, b) // of standard errors, so that no variance overflows
	const roundings = 10 * 0x1p-52
	if se == 0 || se < roundings*max(math.Abs(ref.Mean), math.Abs(cand.Mean)) {
		return e, ErrConstant
	}
	e.SE = se
	// Shares of the variance: they add to 1, and none can overflow.
	p, q := (a/se)*(a/se), (b/se)*(b/se)
	e.DF = (p + q) * (p + q) / (p*p/float64(ref.N-1) + q*q/float64(cand.N-1))
	return e, nil
}

// Above tests the hypothesis that the true value is at most h0, against a larger
// one: t = (Value - h0)/SE and p = P(T >= t).
func (e Estimate) Above(h0 float64) (t, p float64) {
	t = (e.Value - h0) / e.SE
	return t, dist.StudentUpper(t, e.DF)
}

// Below tests the hypothesis that the true value is at least h0, against a
// smaller one: t = (Value - h0)/SE and p = P(T <= t).
func (e Estimate) Below(h0 float64) (t, p float64) {
	t = (e.Value - h0) / e.SE
	return t, dist.StudentLower(t, e.DF)
}

// TwoSided tests the hypothesis that the true value is h0: t = (Value - h0)/SE
// and p = P(|T| >= |t|).
func (e Estimate) TwoSided(h0 float64) (t, p float64) {
	t = (e.Value - h0) / e.SE
	return t, dist.StudentTwoSided(t, e.DF)
}

// Interval returns the two-sided confidence interval of the true value.
func (e Estimate) Interval(level float64) Interval {
	return e.interval(level, (1-level)/2)
}

// interval takes the tail beside the level, for a caller who knows it unrounded.
func (e Estimate) interval(level, tail float64) Interval {
	half := -dist.StudentQuantile(tail, e.DF) * e.SE
	return Interval{Level: level, Lower: e.Value - half, Upper: e.Value + half}
}
