package dist

import "math"

// manyFreedoms is where Student's t and the normal distribution are one in float64,
// however far out.
const manyFreedoms = 1e20

// StudentLower returns P(T <= t) for Student's t with df degrees of freedom.
func StudentLower(t, df float64) float64 { return StudentUpper(-t, df) }

// StudentUpper returns P(T >= t) for Student's t with df degrees of freedom.
func StudentUpper(t, df float64) float64 {
	switch {
	case math.IsNaN(t) || math.IsNaN(df) || df <= 0:
		return math.NaN()
	case df > manyFreedoms:
		return NormalUpper(t)
	case t < 0:
		return 1 - StudentUpper(-t, df)
	case far(t, df):
		return studentFar(t, df)
	case df > t*t && t < 1:
		return 0.5 - studentCentre(t, df)
	}
	tail, _ := studentPoint(t, df).tails()
	return tail / 2
}

// StudentTwoSided returns P(|T| >= |t|) for Student's t with df degrees of
// freedom.
func StudentTwoSided(t, df float64) float64 {
	return 2 * StudentUpper(math.Abs(t), df)
}

// studentCentre is P(0 <= T <= t) for t >= 0, with its own digits near 0, where
// it is far below the 1/2 that the tail would be subtracted from.
func studentCentre(t, df float64) float64 {
	_, centre := studentPoint(t, df).tails()
	return centre / 2
}

// studentPoint is the point of the incomplete beta function that belongs to t:
// P(|T| >= t) = I_x(df/2, 1/2) with x = df/(df+t^2).
func studentPoint(t, df float64) beta {
	s := t * t
	x := df / (df + s)
	// df/2*y - x/2 = x(t^2-1)/2, which does not cancel for large df.
	return beta{a: df / 2, b: 0.5, x: x, y: s / (df + s), lambda: x * (s - 1) / 2}
}

// far says that t^2 is so large against df that x = df/(df+t^2) is below 1e-200:
// then the first term of the series in x is all there is.
func far(t, df float64) bool { return t/math.Sqrt(df) > 1e100 }

// studentFar is the first term of the tail series, x^(df/2) / (df B(df/2, 1/2)).
func studentFar(t, df float64) float64 {
	lead := df * betaHalf(df/2)
	if df < 1 { // t/sqrt(df) may overflow
		return math.Pow(t, -df) * math.Pow(df, df/2) / lead
	}
	return math.Pow(t/math.Sqrt(df), -df) / lead
}

// betaHalf is the complete beta function B(a, 1/2), by Stirling's formula with
// its corrections: sqrt(2 pi/a) (1 + 1/(2a))^-a exp(d(a) + d(1/2) - d(a+1/2)).
func betaHalf(a float64) float64 {
	return math.Sqrt(2*math.Pi/a) * math.Exp(stirling(a)+stirling(0.5)-stirling(a+0.5)-a*math.Log1p(0.5/a))
}
