package dist

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// NormalLower returns P(Z <= z) for the standard normal distribution.
func NormalLower(z float64) float64 { return NormalUpper(-z) }

// NormalUpper returns P(Z >= z) for the standard normal distribution.
func NormalUpper(z float64) float64 {
	// 1/sqrt(2) as the sum of two float64: the rounding of z/sqrt(2) alone would
	// cost z^2 units of the last place in the tail.
	const (
		high = 0.70710678118654757
		low  = -4.8336466567264567e-17
	)
	w := z * high
	p := math.Erfc(w)
	if rest := math.FMA(z, high, -w) + z*low; p > 0 && !math.IsInf(z, 0) {
		p -= rest * (2 / math.SqrtPi) * math.Exp(-w*w)
	}
	return p / 2
}

// NormalQuantile returns the z with P(Z <= z) = p. It is minus and plus infinity
// at p = 0 and 1.
func NormalQuantile(p float64) float64 {
	switch {
	case !(p >= 0 && p <= 1):
		return math.NaN()
	case p == 0:
		return math.Inf(-1)
	case p == 1:
		return math.Inf(1)
	}
	return mathext.NormalQuantile(p)
}
