package dist

import "math"

// OwenQ1 returns the integral from 0 to r of Phi(t x/sqrt(df) - delta) over the
// density of chi with df degrees of freedom (Owen 1965, Biometrika 52, 437-446,
// from memory). The relative error is about 1e-13 where that is above 1e-14.
func OwenQ1(df, t, delta, r float64) float64 {
	return owen(df, t, delta, 0, r)
}

// OwenQ2 returns the same integral from r to infinity.
func OwenQ2(df, t, delta, r float64) float64 {
	return owen(df, t, delta, r, math.Inf(1))
}

func owen(df, t, delta, from, to float64) float64 {
	if !(df >= fewestFreedoms) || !proper(df) || math.IsNaN(t) || math.IsInf(t, 0) || math.IsNaN(delta) || math.IsInf(delta, 0) || !(from >= 0 && to >= 0) {
		return math.NaN()
	}
	c := chi{df: df, mixture: mixture{df: df, tau: t, delta: delta, lead: chiLead(df)}}
	switch {
	case t > 0:
		c.rate, c.steep, c.flat = t, (delta-nothing)/t, (delta+whole)/t
	case t < 0:
		c.rate, c.steep, c.flat = -t, (delta+whole)/t, (delta-nothing)/t
	}
	root := math.Sqrt(df)
	if s := from / root; s > 1 && !math.IsInf(s, 1) { // a tail of chi, small against the whole
		c.gain = df / 2 * (s*s - 1 - 2*math.Log(s))
	}
	return min(1, c.integral(from/root, to/root, func(u float64) float64 {
		weight, x, _ := c.at(u)
		return weight * NormalLower(x)
	}))
}

// StudentBetween returns P(t S - below <= Z <= above - t S) for Z standard normal
// and df S^2 chi-square with df degrees of freedom, t above 0. It is the chance
// that two one-sided t tests both reject: the true value lies below standard
// errors above the lower limit and above standard errors below the upper one, and
// t is the critical value. Either may be plus infinity, a limit that does not
// exist, or negative, a true value beyond the limit.
//
// The relative error is about 1e-13 above 1e-40, 1e-12 above 1e-100.
func StudentBetween(t, df, below, above float64) float64 {
	switch {
	case !(df >= fewestFreedoms) || !proper(df) || !(t > 0) || math.IsInf(t, 1) || math.IsNaN(below) || math.IsNaN(above):
		return math.NaN()
	case math.IsInf(below, -1) || math.IsInf(above, -1) || below+above <= 0:
		return 0
	case math.IsInf(below, 1) && math.IsInf(above, 1):
		return 1
	case math.IsInf(above, 1):
		return NoncentralTUpper(t, df, below)
	case math.IsInf(below, 1):
		return NoncentralTUpper(t, df, above)
	}
	near := min(below, above)
	c := chi{df: df, rate: t, steep: (near - whole) / t, flat: (near + nothing) / t, mixture: mixture{df: df, lead: chiLead(df)}}
	total := below + above
	if near < t { // Phi(near)/Phi(near-t), roughly
		c.gain = (near-t)*(near-t)/2 - min(0, near)*min(0, near)/2
	}
	return min(1, c.integral(0, total/(2*t), func(u float64) float64 {
		weight, _, s := c.at(u)
		return weight * normalBetween(t*s-below, above-t*s, total-2*t*s)
	}))
}

// normalBetween is P(low <= Z <= high), width being high - low with all its digits.
func normalBetween(low, high, width float64) float64 {
	switch {
	case width <= 0:
		return 0
	case width < 0.01:
		// The Taylor series about the middle; the next term is below 1e-14 of it.
		middle := (low + high) / 2
		m, w := middle*middle, width*width
		return normalDensity(middle) * width * (1 + w/24*(m-1) + w*w/1920*(m*m-6*m+3))
	case low+high < 0: // the tails above 0 keep their digits
		low, high = -high, -low
	}
	return (math.Erfc(low*math.Sqrt2/2) - math.Erfc(high*math.Sqrt2/2)) / 2
}

// Beyond these a normal tail is nothing to float64, or nothing beside 1.
const (
	nothing = 40
	whole   = 9
)

// chi is an integral over s, where df s^2 is chi-square with df degrees of
// freedom, of something that varies like Phi(rate s) from s = steep to flat and not
// elsewhere. gain is how much larger that may be at s = 0 than at 1, as a logarithm.
type chi struct {
	df, rate, steep, flat, gain float64
	mixture
}

func chiLead(df float64) float64 {
	a := df / 2
	return 2 * math.Sqrt(a/(2*math.Pi)) * math.Exp(-stirling(a))
}

// integral is that of value over u = log s for s from from to to.
func (c chi) integral(from, to float64, value func(u float64) float64) float64 {
	// Beyond these u the density is below exp(-cut) of its largest value:
	// df/2 (e^y - 1 - y) = cut for y = 2u.
	cut := 36 + c.gain
	w := 2 * cut / c.df
	y := math.Sqrt(2 * w)
	for range 4 { // from above, as the curve is convex
		y -= (math.Expm1(y) - y - w) / math.Expm1(y)
	}
	high := min(y/2, math.Log(to))
	steep := math.Inf(-1)
	if high < 0 { // the density rises up to high, at least as fast as there
		above := math.Expm1(2*high) - 2*high
		steep = high + cut/(c.df*math.Expm1(2*high))
		w += above
	}
	low := max(steep, -(w+math.Sqrt(w*w+8*w))/4) // e^-y - 1 + y >= y^2/(2+y)
	low = max(low, math.Log(from))
	if !(low < high) {
		return 0
	}
	s := math.Exp(high)
	if fast := c.fast(s); c.df >= 20 && high < math.Log(to) && low > math.Log(from) && (high-low)*fast < 200 {
		// Nothing is cut off: the trapezoidal rule does it with half the points. Its
		// error is 2 exp(-2 (pi/0.7)^2), 4e-18 (see mixture).
		sum := 0.0
		for u := low; u < high; u += 0.7 / fast {
			sum += value(u)
		}
		return sum * 0.7 / fast
	}
	first, second := math.Log(max(0, c.steep)), math.Log(max(0, c.flat))
	calm := c
	calm.rate = 0
	return calm.panels(low, min(high, first), value) + c.panels(max(low, first), min(high, second), value) + calm.panels(max(low, second), high, value)
}

// fast is how fast the integrand may vary over u at s.
func (c chi) fast(s float64) float64 { return math.Sqrt(2*c.df*s + c.rate*s*c.rate*s) }

// panels integrates from low to high in panels that are short against the rates of
// the two factors, which both slow down with s; 48 points see 24 radians to the last
// digit, found by trial.
func (c chi) panels(low, high float64, value func(u float64) float64) float64 {
	const most = 24
	sum := 0.0
	for low < high {
		fast := c.fast(math.Exp(high))
		width := min(high-low, max(2, most/fast))
		sum += legendre(value, high-width, high, 1+int(min(fast*width/most, 4096)))
		high -= width
	}
	return sum
}
