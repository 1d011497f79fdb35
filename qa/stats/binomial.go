package stats

import "lotpair/qa/stats/dist"

// binomialLower is P(X <= k) for n trials with probability p each: the tail of the
// F distribution (Johnson, Kotz & Kemp 1992, Univariate Discrete Distributions,
// from memory).
func binomialLower(k, n int, p float64) float64 {
	switch {
	case k < 0:
		return 0
	case k >= n || p <= 0:
		return 1
	case p >= 1:
		return 0
	}
	a, b := float64(k+1), float64(n-k)
	return dist.FUpper(b*p/(a*(1-p)), 2*a, 2*b)
}

// binomialUpper is P(X >= k).
func binomialUpper(k, n int, p float64) float64 {
	switch {
	case k <= 0:
		return 1
	case k > n || p <= 0:
		return 0
	case p >= 1:
		return 1
	}
	a, b := float64(k), float64(n-k+1)
	return dist.FLower(b*p/(a*(1-p)), 2*a, 2*b)
}
