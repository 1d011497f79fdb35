package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// A Grubbs holds the test of the reading farthest from the mean: G is its
// distance in standard deviations, Index its place in the readings, and P an
// upper bound of the two-sided probability.
type Grubbs struct {
	G, P  float64
	Index int
}

// GrubbsTest tests whether the reading farthest from the mean belongs to the
// others, for normal readings (Grubbs 1969, Technometrics 11, 1-21, from
// memory):
//
//	t = sqrt(n(n-2)G^2 / ((n-1)^2 - nG^2)), P = min(1, 2n P(T > t)), n-2 freedoms
//
// P counts both ends of the scale. It is 0 when all other readings are equal. It
// needs 3 readings; equally far readings give the first.
func GrubbsTest(x []float64) (Grubbs, error) {
	if len(x) < 3 {
		return Grubbs{}, ErrTooFew
	}
	m := momentsOf(x)
	squares := m.squares.value()
	if squares == 0 {
		return Grubbs{}, ErrConstant
	}
	index, farthest := 0, double{}
	for i, v := range x {
		if d := m.deviation(v); math.Abs(d.value()) > math.Abs(farthest.value()) {
			index, farthest = i, d
		}
	}
	n := float64(len(x))
	d := math.Abs(farthest.value())
	// (n-1)^2 - nG^2 is rest*(n-1)/squares, where rest is the sum of squares of
	// the others about their own mean. It is a difference of near equals when
	// one reading is far away, so it is taken with all digits of the sums.
	others := func(m moments) float64 {
		far := m.deviation(x[index])
		return m.squares.minus(far.times(far).times(double{high: n}).over(n - 1)).value()
	}
	rest := others(m)
	if rest < 0x1p-8*squares {
		c := carefulMoments(x)
		rest = math.Ldexp(others(c), 2*(c.exp-m.exp))
	}
	t := math.Inf(1)
	if rest > 0x1p-90*squares {
		t = d * math.Sqrt(n*(n-2)/((n-1)*rest))
	}
	return Grubbs{
		G:     d / math.Sqrt(squares/(n-1)),
		P:     min(1, 2*n*dist.StudentUpper(t, n-2)),
		Index: index,
	}, nil
}
