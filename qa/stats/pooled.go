package stats

import "math"

// Pooled returns the difference of the means of cand and ref for equal true
// variances (Student's two-sample t):
//
//	SE = s sqrt(1/n1 + 1/n2), s^2 = ((n1-1)s1^2 + (n2-1)s2^2)/DF, DF = n1+n2-2
//
// Its errors are those of Welch. Where the sizes and the spreads of the lots
// both differ its probabilities are wrong; Welch is not.
func Pooled(ref, cand Summary) (Estimate, error) {
	if ref.N < 2 || cand.N < 2 {
		return Estimate{}, ErrTooFew
	}
	e := Estimate{Value: cand.above(ref)}
	a, b := float64(ref.N), float64(cand.N)
	se := pooledSD(ref, cand) * math.Sqrt(1/a+1/b)
	if unmeasured(se, ref.Mean, cand.Mean) {
		return e, ErrConstant
	}
	e.SE, e.DF = se, a+b-2
	return e, nil
}

// pooledSD is taken from standard deviations, so that no variance overflows.
func pooledSD(ref, cand Summary) float64 {
	a, b := float64(ref.N-1), float64(cand.N-1)
	return math.Hypot(ref.SD*math.Sqrt(a/(a+b)), cand.SD*math.Sqrt(b/(a+b)))
}

// unmeasured says that a standard error is below ten roundings of the larger
// mean (the guard of R's t.test): no spread was measured.
func unmeasured(se, mean1, mean2 float64) bool {
	const roundings = 10 * 0x1p-52
	return se == 0 || se < roundings*max(math.Abs(mean1), math.Abs(mean2))
}
