package stats

import (
	"errors"
	"math"

	"lotpair/qa/stats/dist"
)

// ErrBeyondMethod says that a group has more readings than the method is made for.
var ErrBeyondMethod = errors.New("more readings than the method is made for")

// A Normality holds Shapiro and Wilk's test: W near 1 for normal readings, and the
// probability P of so small a W by chance.
type Normality struct{ W, P float64 }

// ShapiroWilk tests whether x may be normal (Shapiro & Wilk 1965, Biometrika 52,
// 591-611), with the weights and the probability of Royston (1995, Applied
// Statistics 44, 547-551, algorithm AS R94, from memory). It is made for 3 to 5000
// readings: else ErrTooFew or ErrBeyondMethod. The probability is an approximation,
// good to two or three digits; where it is below what AS R94 can tell it is 1e-99.
func ShapiroWilk(x []float64) (Normality, error) {
	n := len(x)
	switch {
	case n < 3:
		return Normality{}, ErrTooFew
	case n > 5000:
		return Normality{}, ErrBeyondMethod
	}
	m := momentsOf(x)
	squares := m.squares.value()
	if squares == 0 {
		return Normality{}, ErrConstant
	}
	sorted := rising(x)
	var line, weights double
	for i, a := range shapiroWeights(n) {
		d := m.deviation(sorted[n-1-i]).minus(m.deviation(sorted[i]))
		line = line.plus(d.times(double{high: a}))
		weights = weights.plus(double{high: a}.times(double{high: a}))
	}
	top, all := line.value(), math.Sqrt(2*weights.value()*squares)
	short := max(0, (all-top)*(all+top)/(all*all)) // 1-W, with its own digits near 0
	return Normality{W: 1 - short, P: shapiroP(1-short, short, n)}, nil
}

// shapiroWeights are the weights of the largest reading less the smallest, of the
// second largest less the second smallest, and so on.
func shapiroWeights(n int) []float64 {
	a := make([]float64, n/2)
	if n == 3 {
		a[0] = math.Sqrt(0.5)
		return a
	}
	squares := 0.0
	for i := range a {
		a[i] = -dist.NormalQuantile((float64(i+1) - 0.375) / (float64(n) + 0.25))
		squares += 2 * a[i] * a[i]
	}
	root, u := math.Sqrt(squares), 1/math.Sqrt(float64(n))
	first := a[0]/root + polynomial(u, 0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056)
	replaced := []float64{first}
	if n > 5 {
		replaced = append(replaced, a[1]/root+polynomial(u, 0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633))
	}
	rest, left := squares, 1.0
	for i, v := range replaced {
		rest -= 2 * a[i] * a[i]
		left -= 2 * v * v
	}
	scale := math.Sqrt(rest / left)
	for i := range a {
		a[i] /= scale
	}
	copy(a, replaced)
	return a
}

// shapiroP is the probability of a W so small; short is 1-W.
func shapiroP(w, short float64, n int) float64 {
	if n == 3 { // exact
		return min(1, max(0, 6/math.Pi*(math.Asin(math.Sqrt(w))-math.Asin(math.Sqrt(0.75)))))
	}
	size := float64(n)
	y := math.Log(short)
	var mean, sd float64
	if n <= 11 {
		gamma := polynomial(size, -2.273, 0.459)
		if y >= gamma {
			return 1e-99
		}
		y = -math.Log(gamma - y)
		mean = polynomial(size, 0.544, -0.39978, 0.025054, -6.714e-4)
		sd = math.Exp(polynomial(size, 1.3822, -0.77857, 0.062767, -0.0020322))
	} else {
		u := math.Log(size)
		mean = polynomial(u, -1.5861, -0.31082, -0.083751, 0.0038915)
		sd = math.Exp(polynomial(u, -0.4803, -0.082676, 0.0030302))
	}
	return dist.NormalUpper((y - mean) / sd)
}

// polynomial is c[0] + c[1] x + c[2] x^2 + ...
func polynomial(x float64, c ...float64) float64 {
	sum := 0.0
	for i := len(c) - 1; i >= 0; i-- {
		sum = sum*x + c[i]
	}
	return sum
}
