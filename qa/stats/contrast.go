package stats

import (
	"errors"
	"math"

	"lotpair/qa/stats/dist"
)

// ErrRatioUndefined says that the mean of the reference does not differ from 0 at
// the level asked, so that a ratio to it has no interval.
var ErrRatioUndefined = errors.New("the mean of the reference does not differ from 0")

// A Contrast knows the means of two lots and how sure they are, for questions on
// the ratio of the means. It asks about candidate - theta*reference, which is
// linear in the readings, so that the sampling error of both means counts.
// WelchContrast, PooledContrast and PairedContrast make one.
type Contrast struct {
	ref, cand   float64 // means
	seRef, se   float64 // standard errors of the means; se is that of the candidate
	correlation float64 // of the two means
	apart       float64 // sqrt(1 - correlation^2), with its own digits
	// 1/DF is a convex of the share of the reference in the variance.
	freedom convex
}

// WelchContrast is a Contrast without assuming equal variances: each theta has
// its own degrees of freedom (Satterthwaite 1946, Biometrics Bulletin 2,
// 110-114, from memory). Its errors are those of Welch.
func WelchContrast(ref, cand Summary) (Contrast, error) {
	if _, err := Welch(ref, cand); err != nil {
		return Contrast{}, err
	}
	a, b := float64(ref.N), float64(cand.N)
	return Contrast{
		ref: ref.Mean, cand: cand.Mean,
		seRef: ref.SD / math.Sqrt(a), se: cand.SD / math.Sqrt(b),
		apart: 1, freedom: convex{p: 1 / (b - 1), q: 1 / (a - 1)},
	}, nil
}

// PooledContrast is a Contrast for equal true variances, with n1+n2-2 degrees of
// freedom. Its errors are those of Pooled.
func PooledContrast(ref, cand Summary) (Contrast, error) {
	e, err := Pooled(ref, cand)
	if err != nil {
		return Contrast{}, err
	}
	s := pooledSD(ref, cand)
	return Contrast{
		ref: ref.Mean, cand: cand.Mean,
		seRef: s / math.Sqrt(float64(ref.N)), se: s / math.Sqrt(float64(cand.N)),
		apart: 1, freedom: constant(e.DF),
	}, nil
}

// PairedContrast is a Contrast for parts measured in both lots: the differences
// cand[i] - theta*ref[i], with n-1 degrees of freedom. It needs 2 pairs, and at
// least one of the lots with a spread.
func PairedContrast(ref, cand []float64) (Contrast, error) {
	if len(ref) != len(cand) {
		return Contrast{}, ErrUnequalLengths
	}
	if len(ref) < 2 {
		return Contrast{}, ErrTooFew
	}
	x, y := carefulMoments(ref), carefulMoments(cand)
	n := float64(len(ref))
	c := Contrast{
		ref: math.Ldexp(x.mean.value(), x.exp), cand: math.Ldexp(y.mean.value(), y.exp),
		seRef: math.Ldexp(math.Sqrt(x.squares.value()/(n-1)/n), x.exp),
		se:    math.Ldexp(math.Sqrt(y.squares.value()/(n-1)/n), y.exp),
		apart: 1, freedom: constant(n - 1),
	}
	if unmeasured(math.Hypot(c.seRef, c.se), c.ref, c.cand) {
		return Contrast{}, ErrConstant
	}
	if c.seRef > 0 && c.se > 0 {
		both, apart := products(ref, cand, x, y)
		r := both / math.Sqrt(x.squares.value()) / math.Sqrt(y.squares.value())
		c.correlation, c.apart = max(-1, min(r, 1)), math.Sqrt(max(0, apart))
	}
	return c, nil
}

// constant is a convex that stands for the same df whatever the share.
func constant(df float64) convex { return convex{p: 1 / df, q: -1} }

func (c convex) df(w float64) float64 {
	if c.q < 0 {
		return 1 / c.p
	}
	return 1 / c.at(w)
}

// Value returns the ratio of the means, candidate over reference.
func (c Contrast) Value() float64 { return c.cand / c.ref }

// At returns the estimate of candidate - theta*reference with its own standard
// error and degrees of freedom. Above(0) and Below(0) of it test whether the
// ratio is larger or smaller than theta, for a reference with a mean above 0.
func (c Contrast) At(theta float64) Estimate {
	a, b := c.se, theta*c.seRef
	// a^2 - 2 r a b + b^2 as a sum of squares: nothing cancels.
	se := math.Hypot(a-c.correlation*b, b*c.apart)
	w := 0.0
	if b != 0 {
		w = 1 / (1 + (a/b)*(a/b))
	}
	return Estimate{Value: c.cand - theta*c.ref, SE: se, DF: c.freedom.df(w)}
}

// Interval returns the interval of the ratio: every theta between the roots
// nearest the estimate of
//
//	|candidate - theta*reference| = t(1-tail, DF(theta)) SE(theta), tail = (1-level)/2
//
// (Fieller 1954, J. Royal Statistical Society B 16, 175-185, for constant DF;
// from memory). Where the mean of the reference does not differ from 0 at the
// level it returns ErrRatioUndefined.
func (c Contrast) Interval(level float64) (Interval, error) {
	tail := (1 - level) / 2
	none := Interval{Level: level, Lower: math.Inf(-1), Upper: math.Inf(1)}
	far := -dist.StudentQuantile(tail, c.freedom.df(1))
	if !(math.Abs(c.ref) > far*c.seRef) {
		return none, ErrRatioUndefined
	}
	var lower, upper float64
	switch {
	case c.freedom.q < 0:
		lower, upper = c.fieller(far)
	case c.seRef == 0:
		half := -dist.StudentQuantile(tail, c.freedom.df(0)) * c.se
		lower, upper = (c.cand-half)/c.ref, (c.cand+half)/c.ref
	case c.se == 0: // the reference alone is uncertain
		half := far * c.seRef
		lower, upper = c.cand/(c.ref+half), c.cand/(c.ref-half)
	default:
		lower, upper = c.end(tail, -1), c.end(tail, 1)
	}
	return Interval{Level: level, Lower: min(lower, upper), Upper: max(lower, upper)}, nil
}

// fieller solves the quadratic of a constant quantile t: with m the means, v
// their variances and covariance, times t^2,
//
//	theta^2 (m1^2 - v11) - 2 theta (m1 m2 - v12) + m2^2 - v22 = 0
func (c Contrast) fieller(t float64) (lower, upper float64) {
	// Everything in units of the reference's mean and of the larger of the other
	// two, so that nothing overflows.
	g, h, m := t*c.seRef/c.ref, t*c.se/c.ref, c.cand/c.ref
	unit := max(math.Abs(h), math.Abs(m))
	if unit == 0 {
		return 0, 0
	}
	h, m = h/unit, m/unit
	lead := (1 - g) * (1 + g)
	r := c.correlation
	across := g * c.apart
	square := math.Sqrt(max(0, (h-m*r*g)*(h-m*r*g)+across*across*(m-h)*(m+h)))
	centre := m - r*g*h
	return unit * ((centre - square) / lead), unit * ((centre + square) / lead)
}

// end is the end of Welch's interval on one side of the estimate. With a and b
// the standard errors and theta = (a/b) tan(phi), the statistic
// (candidate - theta*reference)/SE is -R sin(delta), R^2 = (m2/a)^2 + (m1/b)^2,
// delta the angle from that of the estimate: so the root is looked for in the
// angle, where all theta to infinity are a stretch of finite length.
func (c Contrast) end(tail, side float64) float64 {
	r := math.Hypot(c.cand/c.se, c.ref/c.seRef)
	m := c.cand / c.ref
	slope := m * (c.seRef / c.se) // the tangent of the estimate's angle
	angle := math.Atan(slope)
	last := math.Atan2(1, side*slope) // where theta is infinite
	theta := func(delta float64) float64 {
		t := side * math.Tan(delta)
		return (m + c.se/c.seRef*t) / (1 - slope*t)
	}
	share := func(delta float64) float64 {
		sine := math.Sin(angle + side*delta)
		return sine * sine
	}
	quantile := func(df float64) float64 { return -dist.StudentQuantile(tail, df) }
	f := func(delta float64) float64 {
		return r*math.Sin(delta) - quantile(c.freedom.df(share(delta)))
	}
	quarter := math.Pi / 2
	below := func(from, to float64) bool {
		largest := max(math.Sin(from), math.Sin(to))
		if from < quarter && quarter < to {
			largest = 1
		}
		wa, wb := share(from), share(to)
		low, high := min(wa, wb), max(wa, wb)
		if (angle+side*from)*(angle+side*to) < 0 { // theta passes 0, where the reference has no share
			low = 0
		}
		least, _ := c.freedom.between(low, high)
		return r*largest < quantile(1/least)
	}
	// Before first even the smallest quantile is not reached.
	least, _ := c.freedom.between(0, 1)
	first := math.Asin(min(1, quantile(1/least)/r))
	if first >= last {
		return theta(last)
	}
	return theta(firstRoot(first, last, f, below))
}
