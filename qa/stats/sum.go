package stats

import "math"

// A double is an unevaluated sum of two float64, about 32 digits.
type double struct{ high, low float64 }

func (d double) value() float64 { return d.high + d.low }

// twoSum is a+b with its rounding error (Knuth, The Art of Computer
// Programming 2, section 4.2.2, theorem B).
func twoSum(a, b float64) double {
	s := a + b
	t := s - a
	return double{s, (a - (s - t)) + (b - t)}
}

// fastSum is twoSum for a not smaller in size than b.
func fastSum(a, b float64) double {
	s := a + b
	return double{s, b - (s - a)}
}

func (d double) plus(e double) double {
	s := twoSum(d.high, e.high)
	t := twoSum(d.low, e.low)
	s = fastSum(s.high, s.low+t.high)
	return fastSum(s.high, s.low+t.low)
}

func (d double) minus(e double) double { return d.plus(double{-e.high, -e.low}) }

// times has the rounding error of the product of the high parts from the fused
// multiply-add.
func (d double) times(e double) double {
	p := d.high * e.high
	rest := math.FMA(d.high, e.high, -p)
	return fastSum(p, rest+(d.high*e.low+d.low*e.high))
}

func (d double) over(n float64) double {
	q := d.high / n
	rest := math.FMA(-q, n, d.high) + d.low
	return fastSum(q, rest/n)
}

// moments holds the mean of x*2^-exp and the sum of the squared deviations from
// it. The exponent brings the largest reading near 1 where a square could overflow.
type moments struct {
	exp           int
	mean, squares double
}

func momentsOf(x []float64) moments {
	if len(x) == 0 {
		return moments{}
	}
	low, high := x[0], x[0]
	for _, v := range x {
		if v < low {
			low = v
		}
		if v > high {
			high = v
		}
	}
	if m, ok := quickMoments(x, low, high); ok {
		return m
	}
	return carefulMoments(x)
}

// carefulMoments keeps twice the digits of a float64, for readings of any size and
// spread and for those who take differences of what it returns.
func carefulMoments(x []float64) moments {
	largest := 0.0
	for _, v := range x {
		largest = max(largest, math.Abs(v))
	}
	_, exp := math.Frexp(largest)
	m := moments{exp: exp}
	// One factor does where it is itself a number, and readings it takes below the
	// smallest number are nothing beside the largest.
	scale := math.Ldexp(1, -exp)
	if math.Abs(float64(exp)) > 1000 {
		scaled := make([]float64, len(x))
		for i, v := range x {
			scaled[i] = math.Ldexp(v, -exp)
		}
		x, scale = scaled, 1
	}
	// From the first reading, so that equal readings have exactly that mean.
	first := x[0] * scale
	var sum tally
	for _, v := range x {
		d := twoSum(v*scale, -first)
		sum.add(d.high, d.low)
	}
	m.mean = fastSum(sum.high, sum.low).over(float64(len(x))).plus(double{high: first})
	var squares tally
	for _, v := range x {
		d := twoSum(v*scale, -m.mean.high)
		d = twoSum(d.high, d.low-m.mean.low)
		p := d.high * d.high
		rest := math.FMA(d.high, d.high, -p)
		squares.add(p, rest+float64(2*d.high*d.low))
	}
	m.squares = fastSum(squares.high, squares.low)
	return m
}

// A tally is a sum whose roundings are kept and added apart: as good as one of twice
// the digits, rounded (Ogita, Rump & Oishi 2005, SIAM J. Scientific Computing 26,
// 1955-1988, algorithm 4.4, from memory).
type tally struct{ high, low float64 }

func (t *tally) add(high, low float64) {
	s := twoSum(t.high, high)
	t.high = s.high
	t.low += s.low + low
}

func (m moments) deviation(v float64) double {
	if m.exp != 0 {
		v = math.Ldexp(v, -m.exp)
	}
	return double{high: v}.minus(m.mean)
}
