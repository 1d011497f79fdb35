package dist

import "math"

// NoncentralTQuantile returns the t with P(T <= t) = p for the noncentral t
// distribution with df degrees of freedom and noncentrality delta. It is minus
// and plus infinity at p = 0 and 1. Its relative error is at most 2e-13 where the
// probability pins it down so far, which it does not near t = 0. A df below 0.5 and
// a delta beyond 1e50 give NaN.
func NoncentralTQuantile(p, df, delta float64) float64 {
	switch {
	case !(p >= 0 && p <= 1) || !(df >= fewestFreedoms) || !(math.Abs(delta) <= farDelta):
		return math.NaN()
	case p == 0 || p == 1 || delta == 0:
		return StudentQuantile(p, df)
	case df > manyFreedoms:
		return delta + NormalQuantile(p)
	case delta < 0 && p > 0.5:
		return -noncentralBelow(1-p, df, -delta)
	case delta < 0:
		return -noncentralAbove(p, df, -delta)
	case p > 0.5:
		return noncentralAbove(1-p, df, delta)
	}
	return noncentralBelow(p, df, delta)
}

// noncentralAbove returns the t with P(T >= t) = q, for q at most 1/2 and delta
// above 0: then t is above 0, and above that of the central distribution.
func noncentralAbove(q, df, delta float64) float64 {
	z := -NormalQuantile(q)
	start := max(delta+z*math.Sqrt(1+delta*delta/(2*df)), -StudentQuantile(q, df))
	if math.IsInf(start, 1) {
		return start
	}
	s := search{q: q, most: 3, low: math.Inf(-1), tail: func(v float64) (float64, float64) {
		t := math.Exp(v)
		_, upper := noncentralTails(t, df, delta)
		return upper, -t * noncentralDensity(t, df, delta)
	}}
	return math.Exp(s.root(math.Log(start)))
}

// noncentralBelow returns the t with P(T <= t) = q, for q at most 1/2 and delta
// above 0.
func noncentralBelow(q, df, delta float64) float64 {
	if q < NormalUpper(delta) { // P(T <= 0)
		start := -StudentQuantile(q, df)
		if start == 0 || math.IsInf(start, 1) { // 1/2 as near as float64 says, or beyond it
			return -start
		}
		s := search{q: q, most: 3, low: math.Inf(-1), tail: func(v float64) (float64, float64) {
			t := -math.Exp(v)
			lower, _ := noncentralTails(t, df, delta)
			return lower, t * noncentralDensity(t, df, delta)
		}}
		return -math.Exp(s.root(math.Log(start)))
	}
	s := search{q: q, most: 1 + delta, rising: true, tail: func(t float64) (float64, float64) {
		lower, _ := noncentralTails(t, df, delta)
		return lower, noncentralDensity(t, df, delta)
	}}
	// A low T comes from a high S, about the cube of a normal variable (Wilson &
	// Hilferty 1931, from memory), or from a low Z.
	z := -NormalQuantile(q)
	c := 2 / (9 * df)
	high := math.Sqrt(math.Pow(1-c+z*math.Sqrt(c), 3))
	return s.root(min(delta/high, max(delta-z, delta/2)))
}

// A search is for the place where a tail probability, rising or falling, is q.
// tail also gives its slope, a few digits of which are enough. The place is above
// low, and no step is longer than most.
type search struct {
	q, low, most float64
	rising       bool
	tail         func(v float64) (p, slope float64)
}

// root finds the place by Newton's method on the logarithm of the tail, and by
// halving where that would leave what is known to hold the root.
func (s search) root(v float64) float64 {
	low, high := s.low, math.Inf(1)
	for range 500 {
		p, slope := s.tail(v)
		if p == s.q {
			return v
		}
		up := s.rising == (p < s.q)
		if up {
			low = v
		} else {
			high = v
		}
		diff := math.Log(p / s.q)
		if p > s.q/2 && p < 2*s.q {
			diff = math.Log1p((p - s.q) / s.q)
		}
		step := -diff * p / slope
		switch {
		case math.Abs(step) <= converged*min(1, math.Abs(v)):
			return v + step
		case !(math.Abs(step) < s.most) && up: // also where the tail underflows
			step = s.most
		case !(math.Abs(step) < s.most):
			step = -s.most
		}
		next := v + step
		if !(next > low && next < high) {
			next = low + (high-low)/2
		}
		if next == v {
			return v
		}
		v = next
	}
	return v
}

// noncentralDensity is the density at t to about seven digits.
func noncentralDensity(t, df, delta float64) float64 {
	if math.Abs(t) > farT {
		lower, upper := noncentralTails(t, df, delta)
		return df * min(lower, upper) / math.Abs(t)
	}
	tau, d := t, delta
	if t >= delta {
		tau, d = -t, -delta
	}
	m := mixtureOf(tau, df, d)
	value := func(w float64) float64 {
		u, rate := m.place(w)
		weight, x, s := m.at(u)
		return rate * weight * s * normalDensity(x)
	}
	first := m.first()
	middle := value(first)
	return m.step * (middle + outwards(value, first, m.step, m.step, middle))
}
