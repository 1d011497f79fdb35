package dist

import "math"

// converged is the relative step of Newton's method after which nothing is left
// to gain: the error of the next value is about its square.
const converged = 1e-9

// StudentQuantile returns the t with P(T <= t) = p for Student's t with df
// degrees of freedom. It is minus and plus infinity at p = 0 and 1.
func StudentQuantile(p, df float64) float64 {
	switch {
	case !(p >= 0 && p <= 1) || math.IsNaN(df) || df <= 0:
		return math.NaN()
	case df > manyFreedoms:
		return NormalQuantile(p)
	case p == 0.5:
		return 0
	case p > 0.5:
		return studentAbove(1-p, df) // exact: p is within a factor 2 of 1
	}
	return -studentAbove(p, df)
}

// studentAbove returns the t > 0 with P(T >= t) = q, for q < 1/2.
func studentAbove(q, df float64) float64 {
	if q == 0 {
		return math.Inf(1)
	}
	if q > 0.3 && df > 0.3 { // with fewer freedoms even these are far out
		return studentNear(0.5-q, df)
	}
	// The tail is at least the normal one and at least x^a/(2aB): the larger of
	// the two t that follow is still at or below the answer.
	// Its root of x = df/(df+t^2) is written for t, so that x may underflow.
	t := -NormalQuantile(q)
	a := df / 2
	root := math.Pow(q*df*betaHalf(a), 1/df)
	if root < 1 {
		t = max(t, math.Sqrt(df)*math.Sqrt(1-root*root)/root)
	}
	if math.IsInf(t, 1) {
		return t
	}
	// Newton on log P over log t, a concave falling curve: after at most one
	// step to the right every step comes down to the answer.
	want := math.Log(q)
	for range 100 {
		tail := StudentUpper(t, df)
		slope := df
		if !far(t, df) {
			slope = studentPoint(t, df).power() / tail
		}
		step := math.Log1p((tail-q)/q) / slope
		if tail == 0 || tail > 2*q {
			step = (math.Log(tail) - want) / slope
		}
		next := t * math.Exp(max(-1, min(step, 1)))
		if tail == 0 {
			next = t / 2
		}
		if math.Abs(next-t) <= converged*t || math.IsInf(next, 1) {
			return next
		}
		t = next
	}
	return t
}

// studentNear returns the t > 0 with P(0 <= T <= t) = c, for c below 1/4. The
// curve is concave, so Newton's steps from below stay below.
func studentNear(c, df float64) float64 {
	t := c * math.Sqrt(df) * betaHalf(df/2)
	for range 100 {
		next := t + t*(c-studentCentre(t, df))/studentPoint(t, df).power()
		if math.Abs(next-t) <= converged*t {
			return next
		}
		t = next
	}
	return t
}

// FQuantile returns the f with P(F <= f) = p for the F distribution with d1 and
// d2 degrees of freedom. It is 0 and plus infinity at p = 0 and 1.
func FQuantile(p, d1, d2 float64) float64 {
	switch {
	case !(p >= 0 && p <= 1) || !proper(d1) || !proper(d2):
		return math.NaN()
	case p == 0:
		return 0
	case p > 0.5:
		return 1 / FQuantile(1-p, d2, d1) // P(F >= f) is P(1/F <= 1/f), freedoms exchanged
	}
	// Newton on log P over u = log f, a concave rising curve: after at most one
	// step to the left every step comes up to the answer. Where P underflows the
	// step is halved instead.
	const lowest = -744
	u := max(lowest, NormalQuantile(p)*math.Sqrt(2/d1+2/d2))
	above := 0.0
	for range 200 {
		f := math.Exp(u)
		lower := FLower(f, d1, d2)
		if lower == 0 {
			u = (u + above) / 2
			continue
		}
		ratio := lower / p
		diff := math.Log(ratio)
		if ratio > 0.5 && ratio < 2 {
			diff = math.Log1p((lower - p) / p)
		}
		step := diff * lower / fPoint(f, d1, d2).power()
		above = u
		u = max(lowest, u-step)
		if math.Abs(step) <= converged {
			return f * math.Exp(-step)
		}
		if u == lowest && above == lowest {
			return 0
		}
	}
	return math.Exp(u)
}
