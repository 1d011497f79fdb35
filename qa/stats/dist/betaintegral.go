package dist

import "math"

// BetaIntegral returns the integral of f(x, y), y = 1-x, over the density of the
// beta distribution with parameters a and b, for x/y from low to high. f must be
// smooth in log(x/y) and at most about 1; the absolute error is then about 1e-13.
func BetaIntegral(a, b, low, high float64, f func(x, y float64) float64) float64 {
	if !proper(a) || !proper(b) || !(low <= high) {
		return math.NaN()
	}
	// Over v = log(x/y) the density is x^a y^b / B(a,b), with one maximum, analytic
	// everywhere near the real line and falling off at least exponentially: slowly so
	// where a or b is small, which is why the steps of v grow away from the maximum,
	// v = mode + 2 sinh(w).
	const grow = 2
	mode := math.Log(a / b)
	at := func(w float64) float64 {
		e := math.Exp(w)
		v := mode + grow*(e-1/e)/2
		x, y := 1/(1+math.Exp(-v)), 1/(1+math.Exp(v))
		return grow * (e + 1/e) / 2 * beta{a: a, b: b, x: x, y: y, lambda: a*y - b*x}.power() * f(x, y)
	}
	place := func(v float64) float64 { return math.Asinh((v - mode) / grow) }
	wide := math.Sqrt(1/a + 1/b) // about the standard deviation of v
	from, to := betaReach(a, b, -wide), betaReach(a, b, wide)
	if low <= math.Exp(from) && high >= math.Exp(to) {
		return between(at, place(from), place(to), min(0.25, 0.95*wide/grow))
	}
	from, to = place(max(from, math.Log(low))), place(min(to, math.Log(high)))
	if !(from < to) {
		return 0
	}
	return legendre(at, from, to, 1+int((to-from)/min(1, 16*wide/grow)))
}

// betaReach is a v, on the side that step points to, beyond which there is less
// than exp(-38) of the density's maximum.
func betaReach(a, b, step float64) float64 {
	const cut = 38
	mode := math.Log(a / b)
	top := a*math.Log1p(b/a) + b*math.Log1p(a/b)
	fall := func(v float64) float64 { return a*math.Log1p(math.Exp(-v)) + b*math.Log1p(math.Exp(v)) - top }
	near, far := 0.0, 8*step
	for fall(mode+far) < cut {
		near, far = far, 2*far
	}
	for range 4 {
		if middle := (near + far) / 2; fall(mode+middle) < cut {
			near = middle
		} else {
			far = middle
		}
	}
	return mode + far
}

// between is the trapezoidal rule for what is nothing at both ends, with steps
// halved until the sum stays. At 0.95 standard deviations the density's own error is
// 2 exp(-2 (pi/0.95)^2), 6e-10 (see mixture).
func between(value func(v float64) float64, from, to, step float64) float64 {
	const enough = 1e-10 // the error left is then below 1e-13
	n := math.Ceil((to - from) / step)
	step = (to - from) / n
	sum := 0.0
	for i := 0.0; i <= n; i++ {
		sum += value(from + i*step)
	}
	for range 10 {
		more := 0.0
		for i := 0.5; i < n; i++ {
			more += value(from + i*step)
		}
		change := math.Abs(more-sum) * step
		sum += more
		step /= 2
		n *= 2
		if !(change > enough) {
			break
		}
	}
	return sum * step
}
