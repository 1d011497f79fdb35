package dist

import "math"

// NoncentralTLower returns P(T <= t) for the noncentral t distribution with df
// degrees of freedom and noncentrality delta: T = (Z + delta)/S with Z standard
// normal and df S^2 chi-square with df degrees of freedom.
//
// For df from 0.5 to 1e6 and delta to 1000 the relative error is at most 2e-13
// above 1e-25 and 1e-12 down to 1e-280, in either tail. A df below 0.5 gives NaN.
func NoncentralTLower(t, df, delta float64) float64 {
	lower, _ := noncentralTails(t, df, delta)
	return lower
}

// NoncentralTUpper returns P(T >= t) for the noncentral t distribution with df
// degrees of freedom and noncentrality delta.
func NoncentralTUpper(t, df, delta float64) float64 {
	_, upper := noncentralTails(t, df, delta)
	return upper
}

// Beyond these the noncentral t has a simple form, and no square overflows before;
// with fewer freedoms its tail is too long to sum.
const (
	farDelta       = 1e50
	farT           = 1e100
	fewestFreedoms = 0.5
)

func noncentralTails(t, df, delta float64) (lower, upper float64) {
	switch {
	case math.IsNaN(t) || !(df >= fewestFreedoms) || math.IsNaN(delta) || math.IsInf(delta, 0):
		return math.NaN(), math.NaN()
	case delta < 0:
		upper, lower = noncentralTails(-t, df, -delta)
		return lower, upper
	case math.IsInf(t, 0) || delta == 0:
		return StudentLower(t, df), StudentUpper(t, df)
	case df > manyFreedoms:
		return NormalLower(t - delta), NormalUpper(t - delta)
	case delta > farDelta: // Z is nothing beside it
		r := delta / max(0, t)
		lower, upper = ChiSquareUpper(df*r*r, df), ChiSquareLower(df*r*r, df)
		return lower, upper
	case t > farT: // the tail is its first term, as t^-df
		_, upper = noncentralTails(farT, df, delta)
		upper *= math.Pow(farT/t, df)
		return 1 - upper, upper
	case t < -farT:
		lower, _ = noncentralTails(-farT, df, delta)
		lower *= math.Pow(-farT/t, df)
		return lower, 1 - lower
	case t < delta:
		lower = min(1, mixtureOf(t, df, delta).integral())
		return lower, 1 - lower
	}
	upper = min(1, mixtureOf(-t, df, -delta).integral())
	return 1 - upper, upper
}

// A mixture is the integral over u of P(Z <= tau s - delta) times the density of
// u = log s, where df s^2 is chi-square with df degrees of freedom:
//
//	2 sqrt(a/(2 pi)) exp(-stirling(a)) exp(-a (s^2 - 1 - log s^2)), a = df/2
//
// It is one tail of the noncentral t. The integrand has one maximum and falls
// off on both sides at least exponentially, and it is analytic, so that the
// trapezoidal rule on the whole line gains digits as fast as any rule can
// (Trefethen & Weideman 2014, SIAM Review 56, 385-458, from memory).
type mixture struct {
	df, tau, delta float64
	lead           float64 // of the density of u
	peak           float64 // the u near which the integrand is largest
	step           float64 // width of the coarsest sum
	centre, scale  float64 // where scale is not 0, u = centre + scale sinh(w)
}

func mixtureOf(tau, df, delta float64) mixture {
	a := df / 2
	m := mixture{df: df, tau: tau, delta: delta, lead: 2 * math.Sqrt(a/(2*math.Pi)) * math.Exp(-stirling(a))}
	m.peak = m.findPeak()
	// The widths of the two factors in u, as frequencies: sqrt(2 df) s of the
	// density near its middle, tau s of the normal probability.
	s := math.Exp(m.peak)
	plain := df * (1 + s*s)
	band := 2*df*s*s + tau*s*tau*s
	if band > 20*plain && delta/tau > 0 {
		// A steep step in a wide density: the steps of u grow away from it.
		m.centre, m.scale, m.step = math.Log(delta/tau), 1/math.Abs(delta), 0.25
		return m
	}
	m.step = min(0.25, 0.95/math.Sqrt(band)) // the error is 2 exp(-2 (pi/(step band))^2), 6e-10, or less
	return m
}

// findPeak solves d log(integrand)/du = df(1-s^2) + tau s r(tau s - delta) = 0
// for u = log s, r being the ratio of the normal density and probability. The
// left side divided by s falls with s, so there is one root. A rough one will do.
func (m mixture) findPeak() float64 {
	// Far out r(x) is -x, which leaves a quadratic equation.
	q := m.df + m.tau*m.tau
	b := m.tau * m.delta / q
	c := m.df / q
	s := b/2 + math.Sqrt(b*b/4+c)
	if b < 0 {
		s = c / (math.Sqrt(b*b/4+c) - b/2)
	}
	if m.tau*s > m.delta {
		s = 1
	}
	u := math.Log(s)
	for range 50 {
		s = math.Exp(u)
		x := m.tau*s - m.delta
		r := normalHazard(x)
		slope := m.df*(1-s*s) + m.tau*s*r
		curve := m.df*(1+s*s) + m.tau*s*m.tau*s*max(0, r*(x+r))
		move := max(-1, min(slope/curve, 1))
		u += move
		if math.Abs(move)*math.Sqrt(curve) < 0.3 {
			break
		}
	}
	return u
}

// normalHazard is the normal density over P(Z <= x).
func normalHazard(x float64) float64 {
	if x < -30 {
		return -x - 1/x
	}
	return normalDensity(x) / NormalLower(x)
}

func normalDensity(x float64) float64 { return math.Exp(-x*x/2) / math.Sqrt(2*math.Pi) }

// place is u and du/dw at w.
func (m mixture) place(w float64) (u, rate float64) {
	if m.scale == 0 {
		return m.peak + w, 1
	}
	e := math.Exp(w)
	return m.centre + m.scale*(e-1/e)/2, m.scale * (e + 1/e) / 2
}

// at is the weight of the point u, the normal argument there, and s.
func (m mixture) at(u float64) (weight, x, s float64) {
	if math.Abs(u) > 0.5 {
		s = math.Exp(u)
		return m.lead * math.Exp(-m.df/2*(s*s-1-2*u)), math.FMA(m.tau, s, -m.delta), s
	}
	// Near s = 1 both differences are written so that they do not cancel.
	e := math.Expm1(u)
	return m.lead * math.Exp(-m.df/2*expExcess(2*u)), m.tau - m.delta + m.tau*e, 1 + e
}

// expExcess is e^y - 1 - y for y from -1 to 1, by its series.
func expExcess(y float64) float64 {
	terms := 18 // the next one is below 1e-17 of the sum
	if math.Abs(y) < 0.25 {
		terms = 12
	}
	sum := 0.0
	for k := terms; k > 2; k-- {
		sum = (1 + sum) * y * inverse[k]
	}
	return (1 + sum) * y * y / 2
}

// inverse holds 1/k at k.
var inverse = [...]float64{0, 1, 1.0 / 2, 1.0 / 3, 1.0 / 4, 1.0 / 5, 1.0 / 6, 1.0 / 7, 1.0 / 8, 1.0 / 9, 1.0 / 10, 1.0 / 11, 1.0 / 12, 1.0 / 13, 1.0 / 14, 1.0 / 15, 1.0 / 16, 1.0 / 17, 1.0 / 18}

// value is the integrand at w.
func (m mixture) value(w float64) float64 {
	u, rate := m.place(w)
	weight, x, _ := m.at(u)
	if weight == 0 {
		return 0
	}
	return rate * weight * NormalLower(x)
}

// integral halves the step until the sum stays: then the error of the last sum
// is about the square of the change or less.
func (m mixture) integral() float64 { return trapezoid(m.value, m.first(), m.step) }

// first is the w of the peak.
func (m mixture) first() float64 {
	if m.scale == 0 {
		return 0
	}
	return math.Asinh((m.peak - m.centre) / m.scale)
}

// trapezoid sums value over the whole line from the place of its maximum
// outwards, with steps halved until the sum stays.
func trapezoid(value func(w float64) float64, from, step float64) float64 {
	const enough = 1e-9
	middle := value(from)
	sum := middle + outwards(value, from, step, step, middle)
	for range 12 {
		more := outwards(value, from, step/2, step, sum)
		change := math.Abs(more - sum)
		sum += more
		step /= 2
		if !(change > enough*sum) {
			break
		}
	}
	return sum * step
}

// outwards sums value at from +- (first, first+step, ...) until nothing is added
// to what there is.
func outwards(value func(w float64) float64, from, first, step, have float64) float64 {
	const most = 1 << 16
	sum := 0.0
	for _, side := range [2]float64{-1, 1} {
		last := 0.0
		for i := range most {
			v := value(from + side*(first+float64(i)*step))
			sum += v
			if v <= last && v <= 0x1p-57*(have+sum) {
				break
			}
			last = v
		}
	}
	return sum
}
