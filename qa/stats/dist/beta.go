package dist

import "math"

// A beta is one point of the incomplete beta function I_x(a,b).
//
// Both x and y = 1-x are kept because either may be too near 1 to recover the
// other from it, and lambda = a*y - b*x (the distance of x from the mean, times
// a+b) because callers know a form of it that does not cancel.
type beta struct{ a, b, x, y, lambda float64 }

// tails returns I_x(a,b) and 1 - I_x(a,b). The one on the far side of the mean
// is computed directly; the other is large and comes by subtraction.
func (p beta) tails() (lower, upper float64) {
	if p.lambda < 0 {
		upper, lower = beta{p.b, p.a, p.y, p.x, -p.lambda}.tails()
		return lower, upper
	}
	lower = min(1, p.power()*p.fraction())
	return lower, 1 - lower
}

// fraction is I_x(a,b) * B(a,b) / (x^a y^b) for x at or below the mean, by the
// continued fraction of DiDonato & Morris (1992, Algorithm 708, equation 9),
// from memory:
//
//	alpha(1) = 1
//	alpha(n+1) = (a+n-1)(a+b+n-1) n (b-n) x^2 / (a+2n-1)^2
//	beta(n+1) = n + n(b-n)x/(a+2n-1) + (a+n)/(a+2n+1) (lambda + 1 + n(1+y))
//
// It is summed as a series of the differences of its convergents, so a late
// term can only add a small correction.
func (p beta) fraction() float64 {
	const most = 1 << 20
	// Convergents A/B, kept near 1 by dividing with B in each step.
	a0, b0 := 0.0, 1.0
	a1, b1 := 1.0, p.a/(p.a+1)*(p.lambda+1)
	value := a1 / b1
	for i := 1; i < most; i++ {
		n := float64(i)
		d := p.a + 2*n - 1
		alpha := (p.a + n - 1) / d * ((p.a + p.b + n - 1) / d) * n * (p.b - n) * p.x * p.x
		term := n + n*(p.b-n)*p.x/d + (p.a+n)/(d+2)*(p.lambda+1+n*(1+p.y))
		a0, a1 = a1, term*a1+alpha*a0
		b0, b1 = b1, term*b1+alpha*b0
		next := a1 / b1
		if math.Abs(next-value) <= 0x1p-52*next {
			return next
		}
		value = next
		a0, a1, b0, b1 = a0/b1, a1/b1, b0/b1, 1
	}
	return value
}

// power is x^a y^b / B(a,b), by the saddle point of Loader (2000, "Fast and
// accurate computation of binomial probabilities"), from memory:
//
//	sqrt(ab/(2 pi (a+b))) exp(d(a+b) - d(a) - d(b)) (x(a+b)/a)^a (y(a+b)/b)^b
//
// with d the stirling of this file. No difference of large log-gammas appears,
// so nothing is lost for large a or b. A factor whose base is near 1 is taken
// as exp(-a(u - log(1+u))), u = -lambda/a; the a*u of both factors cancel.
func (p beta) power() float64 {
	if p.x == 0 || p.y == 0 {
		return 0
	}
	n := p.a + p.b
	baseX, baseY := n*p.x/p.a, n*p.y/p.b
	u, v := -p.lambda/p.a, p.lambda/p.b
	value := math.Sqrt(p.a / n * p.b / (2 * math.Pi))
	e := stirling(n) - stirling(p.a) - stirling(p.b)
	if away(u) && away(v) {
		// The plain powers have fewer roundings, when neither underflows.
		powX, powY := math.Pow(baseX, p.a), math.Pow(baseY, p.b)
		if min(powX, powY) > 1e-290 && max(powX, powY) < 1e290 {
			return value * math.Exp(e) * powX * powY
		}
	}
	return value * math.Exp(e-p.a*logExcess(u, baseX)-p.b*logExcess(v, baseY))
}

// away says that 1+u is so far from 1 that its logarithm needs no series.
func away(u float64) bool { return u < -0.4 || u > 0.6 }

// logExcess is u - log(1+u) for ratio = 1+u, which the caller knows better than
// a sum would when it is near 0.
func logExcess(u, ratio float64) float64 {
	if away(u) {
		return u - math.Log(ratio)
	}
	// log(1+u) = 2(r + r^3/3 + r^5/5 + ...) with r = u/(2+u), and u - 2r = r*u.
	r := u / (2 + u)
	r2 := r * r
	sum, power := 0.0, 2*r2
	for k := 3.0; k < 60; k += 2 { // r^2 is at most 1/16: 15 terms are enough
		sum += power / k
		power *= r2
		if power < 0x1p-56*sum {
			break
		}
	}
	return r * (u - sum)
}

// stirling is log(z!) minus Stirling's formula:
// log Gamma(z+1) - (z+1/2) log z + z - log(2 pi)/2.
func stirling(z float64) float64 {
	if z < 10 {
		return math.Log(math.Gamma(z+1) * math.Exp(z) / (math.Pow(z, z) * math.Sqrt(2*math.Pi*z)))
	}
	// The Stirling series; the first term left out is below 3e-17 at z = 10.
	r := 1 / (z * z)
	return (1.0/12 - r*(1.0/360-r*(1.0/1260-r*(1.0/1680-r*(1.0/1188-r*(691.0/360360-r/156)))))) / z
}
