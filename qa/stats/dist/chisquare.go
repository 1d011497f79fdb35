package dist

import "math"

// ChiSquareLower returns P(X <= x) for the chi-square distribution with df degrees
// of freedom.
func ChiSquareLower(x, df float64) float64 {
	lower, _ := chiSquareTails(x, df)
	return lower
}

// ChiSquareUpper returns P(X >= x) for the chi-square distribution with df degrees
// of freedom.
func ChiSquareUpper(x, df float64) float64 {
	_, upper := chiSquareTails(x, df)
	return upper
}

func chiSquareTails(x, df float64) (lower, upper float64) {
	switch {
	case math.IsNaN(x) || !proper(df):
		return math.NaN(), math.NaN()
	case x <= 0:
		return 0, 1
	case math.IsInf(x, 1):
		return 1, 0
	}
	return gammaPoint{df / 2, x / 2}.tails()
}

// A gammaPoint is one point of the incomplete gamma function: P(a, x), the lower
// tail at x of the gamma distribution with shape a.
type gammaPoint struct{ a, x float64 }

// tails computes the one away from the mean; the other comes by subtraction.
func (p gammaPoint) tails() (lower, upper float64) {
	if p.x < max(p.a, 1) {
		lower = min(1, p.power()*p.series())
		return lower, 1 - lower
	}
	upper = min(1, p.power()*p.fraction())
	return 1 - upper, upper
}

// power is x^a e^-x / Gamma(a+1) by Stirling's formula with its correction, so
// that no large log-gammas are subtracted.
func (p gammaPoint) power() float64 {
	u := (p.x - p.a) / p.a
	return math.Exp(-p.a*logExcess(u, p.x/p.a)-stirling(p.a)) / math.Sqrt(2*math.Pi*p.a)
}

// series is P(a,x) over power: 1 + x/(a+1) + x^2/((a+1)(a+2)) + ..., all positive.
func (p gammaPoint) series() float64 {
	const most = 1 << 24
	sum, term := 1.0, 1.0
	for n := 1; n < most && term > 0x1p-56*sum; n++ {
		term *= p.x / (p.a + float64(n))
		sum += term
	}
	return sum
}

// fraction is 1 - P(a,x) over power: a times the continued fraction of Legendre
//
//	1/(x+1-a - 1(1-a)/(x+3-a - 2(2-a)/(x+5-a - ...)))
//
// (Abramowitz & Stegun 6.5.31 contracted, from memory), by the method of Lentz
// (1976, Applied Optics 15, 668-671, from memory).
func (p gammaPoint) fraction() float64 {
	const (
		most = 1 << 24
		tiny = 1e-280
	)
	b := p.x + 1 - p.a
	if b == 0 {
		b = tiny
	}
	value, c, d := b, b, 0.0
	for n := 1; n < most; n++ {
		k := float64(n)
		term := -k * (k - p.a)
		b += 2
		if d = b + term*d; d == 0 {
			d = tiny
		}
		if c = b + term/c; c == 0 {
			c = tiny
		}
		d = 1 / d
		step := c * d
		value *= step
		if math.Abs(step-1) <= 0x1p-52 {
			break
		}
	}
	return p.a / value
}

// ChiSquareQuantile returns the x with P(X <= x) = p for the chi-square
// distribution with df degrees of freedom. It is 0 and plus infinity at p = 0 and
// 1.
func ChiSquareQuantile(p, df float64) float64 {
	switch {
	case !(p >= 0 && p <= 1) || !proper(df):
		return math.NaN()
	case p == 0:
		return 0
	case p == 1:
		return math.Inf(1)
	}
	a := df / 2
	s := search{q: p, low: math.Inf(-1), most: 3, rising: true}
	s.tail = func(v float64) (float64, float64) {
		g := gammaPoint{a, math.Exp(v) / 2}
		lower, upper := g.tails()
		if s.rising {
			return lower, a * g.power()
		}
		return upper, -a * g.power()
	}
	if p > 0.5 {
		s.q, s.rising = 1-p, false
	}
	// The cube of a normal variable (Wilson & Hilferty 1931, from memory), or the
	// first term of the series, which is never above the answer.
	c := 2 / (9 * df)
	cube := 1 - c + NormalQuantile(p)*math.Sqrt(c)
	first := math.Ln2 + (math.Log(p)+a*math.Log(a)-a+math.Log(2*math.Pi*a)/2+stirling(a))/a
	start := math.Log(df) + 3*math.Log(max(cube, 0))
	return math.Exp(s.root(max(start, first)))
}
