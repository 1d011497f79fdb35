package stats

import (
	"errors"
	"math"

	"lotpair/qa/stats/dist"
)

// ErrUnequalLengths says that readings that belong together in pairs do not have
// the same number.
var ErrUnequalLengths = errors.New("pairs of unequal number")

// A PairedSpread compares the spreads of two lots of the same parts: SDRatio is
// candidate over reference, T with DF degrees of freedom the statistic, P
// two-sided, Interval that of the ratio of the true standard deviations,
// Correlation that of the pairs.
type PairedSpread struct {
	SDRatio, T, DF, P float64
	Interval          Interval
	Correlation       float64
}

// PitmanMorgan tests whether two lots of the same parts have the same spread, for
// normal pairs (Pitman 1939 and Morgan 1939, Biometrika 31, 9-12 and 13-19, from
// memory). With F the ratio of the variances and r the correlation of the pairs:
//
//	t = (F-1) sqrt(n-2) / (2 sqrt(F (1-r^2))), n-2 degrees of freedom
//
// The interval is every ratio not rejected at 1-level: with q the quantile of t
// and K = 1 + 2 (1-r^2) q^2/(n-2), the ratio of variances lies between
// F/(K + sqrt(K^2-1)) and F (K + sqrt(K^2-1)).
//
// It needs 3 pairs, a spread in both lots, and a spread about the line through
// the pairs: else ErrTooFew or ErrConstant.
func PitmanMorgan(ref, cand []float64, level float64) (PairedSpread, error) {
	if len(ref) != len(cand) {
		return PairedSpread{}, ErrUnequalLengths
	}
	if len(ref) < 3 {
		return PairedSpread{}, ErrTooFew
	}
	x, y := carefulMoments(ref), carefulMoments(cand)
	sx, sy := x.squares.value(), y.squares.value()
	if sx == 0 || sy == 0 {
		return PairedSpread{}, ErrConstant
	}
	both, rest := products(ref, cand, x, y)
	if rest < 0x1p-80 {
		return PairedSpread{}, ErrConstant
	}
	n := float64(len(ref))
	ratio := math.Ldexp(math.Sqrt(sy/sx), y.exp-x.exp)
	s := PairedSpread{SDRatio: ratio, DF: n - 2, Correlation: both / math.Sqrt(sx*sy)}
	// (F-1)/sqrt(F) as ratio - 1/ratio, which no square overflows.
	s.T = (ratio - 1/ratio) / 2 * math.Sqrt(s.DF/rest)
	s.P = dist.StudentTwoSided(s.T, s.DF)
	q := dist.StudentQuantile((1-level)/2, s.DF)
	k := 2 * rest * q * q / s.DF // K - 1
	width := math.Sqrt(1 + k + math.Sqrt(k*(k+2)))
	s.Interval = Interval{Level: level, Lower: ratio / width, Upper: ratio * width}
	return s, nil
}

// products returns the sum of the products of the deviations of the pairs, and
// 1-r^2 for their correlation r. That is a difference of near equals for
// well-paired readings, so it is taken with all digits of the sums. Both lots
// must vary.
func products(ref, cand []float64, x, y moments) (both, apart float64) {
	var sum double
	for i := range ref {
		sum = sum.plus(x.deviation(ref[i]).times(y.deviation(cand[i])))
	}
	squares := x.squares.times(y.squares)
	return sum.value(), squares.minus(sum.times(sum)).value() / squares.value()
}
