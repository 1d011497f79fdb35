package dist

import "math"

// BetaIntegral returns the integral of f(x, y), y = 1-x, over the density of the
// beta distribution with parameters a and b, both at least 1/2, for x/y from low
// to high.
// f must be smooth and bounded. The error is about 1e-13 of the largest f for whole
// 2a and 2b, and to 1e-9 for others, where the density has a sharp end.
func BetaIntegral(a, b, low, high float64, f func(x, y float64) float64) float64 {
	if !(a >= 0.5 && b >= 0.5) || math.IsInf(a, 1) || math.IsInf(b, 1) || !(low <= high) {
		return math.NaN()
	}
	// Over the angle u with x = sin^2 u the density is 2 sin^(2a-1) cos^(2b-1) / B:
	// no end is singular, and its logarithm is bent by at least bend everywhere,
	// so that beyond reach of its maximum there is less than exp(-38) of that.
	m, n := math.Sqrt(2*a-1), math.Sqrt(2*b-1)
	top := math.Atan2(m, n)
	if m+n == 0 {
		top = math.Pi / 4
	}
	bend := (m + n) * (m + n)
	reach := math.Sqrt(2 * 38 / bend)
	from := max(top-reach, math.Atan(math.Sqrt(max(0, low))))
	to := min(top+reach, math.Atan(math.Sqrt(high)))
	if !(from < to) {
		return 0
	}
	return legendre(func(u float64) float64 {
		s, c := math.Sincos(u)
		x, y := s*s, c*c
		p := beta{a: a, b: b, x: x, y: y, lambda: a*y - b*x}
		return 2 * p.power() / (s * c) * f(x, y)
	}, from, to, 1)
}
