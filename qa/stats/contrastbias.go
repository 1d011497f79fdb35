package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// knownDF are the degrees of freedom of what is known as well as it can be: beyond, t
// is the normal distribution.
const knownDF = 1e9

// AtWithBias is At where besides each lot's measuring system adds a bias that no reading
// shows, of these standard uncertainties and independent of each other. The contrast
// holds the reference's theta times, so the variances add up as
//
//	SE^2 + uCand^2 + theta^2 uRef^2
//
// and the degrees of freedom are Welch and Satterthwaite's, with none lost for what is
// stated (JCGM 100, G.4.1, from memory).
func (c Contrast) AtWithBias(theta, uRef, uCand float64) Estimate {
	e := c.At(theta)
	all := math.Hypot(e.SE, math.Hypot(uCand, theta*uRef))
	share := e.SE / all
	e.SE, e.DF = all, min(e.DF/(share*share*share*share), knownDF)
	return e
}

// IntervalWithBias is Interval of AtWithBias.
func (c Contrast) IntervalWithBias(level, uRef, uCand float64) (Interval, error) {
	all := c.biased(uRef, uCand)
	if all.freedom.q >= 0 {
		return all.Interval(level)
	}
	// Of one standard deviation for all theta: the ends lie between those of the least
	// and the most degrees of freedom that any theta has.
	tail := (1 - level) / 2
	wide, narrow := -dist.StudentQuantile(tail, c.freedom.df(0)), -dist.StudentQuantile(tail, knownDF)
	if !(math.Abs(c.ref) > wide*all.seRef) {
		return Interval{Level: level, Lower: math.Inf(-1), Upper: math.Inf(1)}, ErrRatioUndefined
	}
	beyond := func(theta float64) float64 {
		e := c.AtWithBias(theta, uRef, uCand)
		return math.Abs(e.Value)/e.SE + dist.StudentQuantile(tail, e.DF)
	}
	far1, far2 := all.fieller(wide)
	near1, near2 := all.fieller(narrow)
	return Interval{
		Level: level,
		Lower: nearest(min(near1, near2), min(far1, far2), beyond), Upper: nearest(max(near1, near2), max(far1, far2), beyond),
	}, nil
}

// nearest is the place nearest to from where beyond turns to 0, which it has by to.
func nearest(from, to float64, beyond func(theta float64) float64) float64 {
	const steps = 16
	last := from
	for i := 1; i <= steps; i++ {
		next := from + (to-from)*float64(i)/steps
		if beyond(next) >= 0 {
			if beyond(last) >= 0 {
				return last // the same within roundings
			}
			return bracketed(last, next, beyond)
		}
		last = next
	}
	return to
}

// biased is the contrast with the variances of the biases added to those of the means.
func (c Contrast) biased(uRef, uCand float64) Contrast {
	out := c
	out.seRef, out.se = math.Hypot(c.seRef, uRef), math.Hypot(c.se, uCand)
	// The shares of the readings, and of the biases, in the two standard errors.
	part := func(of, all float64) float64 {
		if all == 0 {
			return 0
		}
		return of / all
	}
	p, q := part(c.se, out.se), part(c.seRef, out.seRef)
	u, v := part(uCand, out.se), part(uRef, out.seRef)
	out.correlation = c.correlation * p * q
	// 1 - correlation^2, without a difference of near equals.
	out.apart = math.Sqrt(square(p*q*c.apart) + square(p*v) + square(u*q) + square(u*v))
	if out.se == 0 || out.seRef == 0 {
		out.apart = 1
	}
	if c.freedom.q >= 0 {
		out.freedom = convex{p: max(1/knownDF, c.freedom.p*square(p*p)), q: max(1/knownDF, c.freedom.q*square(q*q))}
	}
	return out
}
