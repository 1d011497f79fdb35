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
// different signs, by Ridders' method (1979, IEEE Transactions on Circuits and
// Systems 26, 979-980, from memory): the bracket at least halves each step.
func bracketed(a, b float64, f func(float64) float64) float64 {
	fa, fb := f(a), f(b)
	if fa == 0 {
		return a
	}
	if fb == 0 {
		return b
	}
	best := b
	for range 200 {
		middle := a + (b-a)/2
		if middle == a || middle == b {
			break
		}
		fm := f(middle)
		if fm == 0 {
			return middle
		}
		next := middle + (middle-a)*math.Copysign(1, fa)*fm/math.Sqrt(fm*fm-fa*fb)
		if !(next > min(a, b) && next < max(a, b)) {
			next = middle
		}
		fn := f(next)
		if fn == 0 || math.Abs(next-best) <= 0x1p-53*math.Abs(next) {
			return next
		}
		best = next
		switch {
		case (fm < 0) != (fn < 0):
			a, fa, b, fb = middle, fm, next, fn
		case (fa < 0) != (fn < 0):
			b, fb = next, fn
		default:
			a, fa = next, fn
		}
	}
	return best
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
