package stats

import "math"

// firstRoot returns the place nearest to a, between a and b, where f turns from
// below 0 to 0 or above. below says that f is proved to be below 0 everywhere
// between two places; it may say no without proof. Half after half is left out
// by proof, so no root is stepped over. It returns b where all is below.
func firstRoot(a, b float64, f func(float64) float64, below func(a, b float64) bool) float64 {
	root, found := isolate(a, b, f, below, 0)
	if !found {
		return b
	}
	return root
}

// isolate is firstRoot within halves: deep enough, a part with a change of sign
// is so short that it is taken to have one root.
func isolate(a, b float64, f func(float64) float64, below func(a, b float64) bool, depth int) (float64, bool) {
	if below(a, b) {
		return 0, false
	}
	const shallow, deepest = 10, 45
	if depth >= shallow && f(b) >= 0 {
		return bracketed(a, b, f), true
	}
	if depth == deepest {
		return b, true // cannot be left out by proof: a root, within roundings
	}
	middle := a + (b-a)/2
	if root, found := isolate(a, middle, f, below, depth+1); found {
		return root, true
	}
	return isolate(middle, b, f, below, depth+1)
}

// bracketed returns the root of f between a and b, where f(a) and f(b) have
// different signs, to the last digit: inverse quadratic steps where they are safe,
// else halves (Chandrupatla 1997, Advances in Engineering Software 28, 145-149,
// from memory).
func bracketed(a, b float64, f func(float64) float64) float64 {
	fa, fb := f(a), f(b)
	c, fc := a, fa
	t := 0.5
	for range 300 {
		x := a + t*(b-a)
		fx := f(x)
		if (fx < 0) == (fa < 0) {
			c, fc = a, fa
		} else {
			c, fc, b, fb = b, fb, a, fa
		}
		a, fa = x, fx
		best, least := a, fa
		if math.Abs(fb) < math.Abs(fa) {
			best, least = b, fb
		}
		near := (0x1p-53*math.Abs(best) + 1e-300) / math.Abs(b-a)
		if least == 0 || near > 0.5 {
			return best
		}
		xi, phi := (a-b)/(c-b), (fa-fb)/(fc-fb)
		t = 0.5
		if phi*phi < xi && (1-phi)*(1-phi) < 1-xi {
			t = fa/(fb-fa)*(fc/(fb-fc)) + (c-a)/(b-a)*(fa/(fc-fa))*(fb/(fc-fb))
		}
		t = min(1-near, max(near, t))
	}
	return a
}

// A convex is p (1-w)^2 + q w^2 for w in 0..1, with p and q at least 0: one over
// Satterthwaite's degrees of freedom, or a pooled kurtosis, where w is the share
// of the reference.
type convex struct{ p, q float64 }

func (c convex) at(w float64) float64 { return c.p*(1-w)*(1-w) + c.q*w*w }

// between returns the least and the largest value for w from a to b.
func (c convex) between(a, b float64) (least, most float64) {
	at := c.p / (c.p + c.q) // where it is least
	return c.at(min(max(at, min(a, b)), max(a, b))), max(c.at(a), c.at(b))
}
