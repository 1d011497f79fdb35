package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// BonettRatio returns the interval of the ratio of the true standard deviations,
// candidate over reference, for readings that need not be normal (Bonett 2006,
// Computational Statistics & Data Analysis 50, 775-782, from memory), inverted
// from the test. A ratio rho is not rejected where
//
//	|ln(q s2^2/(rho^2 s1^2))| < z se(rho), q = (n2/(n2-z))/(n1/(n1-z))
//	se^2 = (g - (n2-3)/n2)/(n2-1) + (g - (n1-3)/n1)/(n1-1)
//	g = (n1+n2) (A + rho^4 B)/(SS2 + rho^2 SS1)^2
//
// with A and B the sums of fourth powers of candidate and reference about their
// means trimmed by 1/(2 sqrt(n-4)) at each end (whole readings, rounded down),
// SS the sums of squares about the means, z the normal quantile of the level. The
// ends are the nearest on each side of sqrt(q) s2/s1.
//
// It needs 5 readings a lot, and more than z: else ErrTooFew. A constant lot is
// ErrConstant.
func BonettRatio(ref, cand []float64, level float64) (Interval, error) {
	const fewest = 5
	z := -dist.NormalQuantile((1 - level) / 2)
	if len(ref) < fewest || len(cand) < fewest || !(float64(min(len(ref), len(cand))) > z) {
		return Interval{}, ErrTooFew
	}
	alpha, sd1, err := fourth(cand)
	if err != nil {
		return Interval{}, err
	}
	beta, sd2, err := fourth(ref)
	if err != nil {
		return Interval{}, err
	}
	n1, n2 := float64(len(ref)), float64(len(cand))
	kurtosis := convex{p: (n1 + n2) * alpha, q: (n1 + n2) * beta}
	se := func(g float64) float64 {
		return math.Sqrt((g-(n2-3)/n2)/(n2-1) + (g-(n1-3)/n1)/(n1-1))
	}
	// rho = s2/s1 e^v; the share of the reference in SS2 + rho^2 SS1 follows.
	share := func(v float64) float64 { return 1 / (1 + (n2-1)/(n1-1)*math.Exp(-2*v)) }
	centre := math.Log((n2/(n2-z))/(n1/(n1-z))) / 2
	_, most := kurtosis.between(0, 1)
	farthest := z * se(most) / 2
	end := func(side float64) float64 {
		f := func(d float64) float64 { return 2*d - z*se(kurtosis.at(share(centre+side*d))) }
		below := func(from, to float64) bool {
			least, _ := kurtosis.between(share(centre+side*from), share(centre+side*to))
			return 2*to < z*se(least)
		}
		return sd1 / sd2 * math.Exp(centre+side*firstRoot(0, farthest, f, below))
	}
	return Interval{Level: level, Lower: end(-1), Upper: end(1)}, nil
}

// fourth returns the sum of fourth powers about the trimmed mean over the square
// of the sum of squares about the mean, and the standard deviation.
func fourth(x []float64) (ratio, sd float64, err error) {
	m := momentsOf(x)
	squares := m.squares.value()
	if squares == 0 {
		return 0, 0, ErrConstant
	}
	n := len(x)
	sorted := rising(x)
	cut := min(int(float64(n)/(2*math.Sqrt(float64(n-4)))), (n-1)/2)
	about := momentsOf(sorted[cut : n-cut])
	centre := math.Ldexp(about.mean.high, about.exp)
	sum := 0.0
	for _, v := range x {
		// Both in units of the largest reading, squares in units of their sum.
		d := (math.Ldexp(v, -m.exp) - math.Ldexp(centre, -m.exp)) / math.Sqrt(squares)
		sum += d * d * d * d
	}
	return sum, math.Ldexp(math.Sqrt(squares/float64(n-1)), m.exp), nil
}
