package dist

import "math"

// FLower returns P(F <= f) for the F distribution with d1 and d2 degrees of
// freedom.
func FLower(f, d1, d2 float64) float64 {
	lower, _ := fTails(f, d1, d2)
	return lower
}

// FUpper returns P(F >= f) for the F distribution with d1 and d2 degrees of
// freedom.
func FUpper(f, d1, d2 float64) float64 {
	_, upper := fTails(f, d1, d2)
	return upper
}

func fTails(f, d1, d2 float64) (lower, upper float64) {
	switch {
	case math.IsNaN(f) || !proper(d1) || !proper(d2):
		return math.NaN(), math.NaN()
	case f <= 0:
		return 0, 1
	case math.IsInf(f, 1):
		return 1, 0
	}
	return fPoint(f, d1, d2).tails()
}

// fPoint is the point of the incomplete beta function that belongs to f:
// P(F <= f) = I_x(d1/2, d2/2) with x = d1 f / (d1 f + d2).
func fPoint(f, d1, d2 float64) beta {
	r := f * (d1 / d2)
	y := 1 / (1 + r)
	x := r * y
	if r > 1 {
		x = 1 / (1 + 1/r)
	}
	// d1/2*y - d2/2*x = d1/2*(1-f)*y, which does not cancel near f = 1.
	lambda := d1 / 2 * (y - f*y)
	if f < 2 {
		lambda = d1 / 2 * (1 - f) * y
	}
	return beta{a: d1 / 2, b: d2 / 2, x: x, y: y, lambda: lambda}
}

func proper(df float64) bool { return df > 0 && !math.IsInf(df, 1) }
