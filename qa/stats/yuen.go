package stats

import (
	"math"
	"slices"
)

// Yuen returns the difference of the trimmed means of cand and ref: the fifth of
// each lot that is largest and the fifth that is smallest (20 % at each end, whole
// readings, rounded down) are left out of the mean, so that a few wild readings
// do not move it. The share is fixed, not chosen from the data; it is the usual
// one (Wilcox 2012, from memory). Standard error and degrees of freedom are those
// of Yuen (1974, Biometrika 61, 165-170, from memory), without assuming equal
// variances: with h readings left and w^2 the variance of the lot in which those
// left out count as the nearest one kept,
//
//	d = (n-1) w^2/(h(h-1)), SE = sqrt(d1 + d2), DF = SE^4/(d1^2/(h1-1) + d2^2/(h2-1))
//
// It needs 2 readings a lot. Where the readings kept are all equal in both lots it
// returns ErrConstant and an Estimate with only its Value.
func Yuen(ref, cand []float64) (Estimate, error) {
	if len(ref) < 2 || len(cand) < 2 {
		return Estimate{}, ErrTooFew
	}
	mean1, a, h1 := trimmed(ref)
	mean2, b, h2 := trimmed(cand)
	e := Estimate{Value: mean2 - mean1}
	se := math.Hypot(a, b)
	if unmeasured(se, mean1, mean2) {
		return e, ErrConstant
	}
	e.SE = se
	p, q := (a/se)*(a/se), (b/se)*(b/se)
	e.DF = (p + q) * (p + q) / (p*p/(h1-1) + q*q/(h2-1))
	return e, nil
}

// trimmed returns the mean without a fifth at each end, the root of Yuen's d and
// the number of readings kept.
func trimmed(x []float64) (mean, root, kept float64) {
	sorted := slices.Clone(x)
	slices.Sort(sorted)
	n := len(x)
	g := n / 5
	middle := momentsOf(sorted[g : n-g])
	for i := range g {
		sorted[i], sorted[n-1-i] = sorted[g], sorted[n-1-g]
	}
	winsorized := momentsOf(sorted)
	h := float64(n - 2*g)
	root = math.Ldexp(math.Sqrt(winsorized.squares.value()/(h*(h-1))), winsorized.exp)
	return math.Ldexp(middle.mean.value(), middle.exp), root, h
}
