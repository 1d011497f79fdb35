package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// The most readings, of both lots together, for which probabilities of ranks are
// counted out and not taken from the normal curve.
const (
	mostExactTied   = 100
	mostExactUntied = 600
)

// Ranks compares two lots by the order of their readings alone. U is the number
// of pairs in which the candidate is the larger, an equal pair counting one half;
// P is two-sided, and Exact says that it was counted out. Shift is the median of
// all differences candidate minus reference, Interval that of the true shift;
// with too few readings for its level it has no limits (minus and plus infinity).
type Ranks struct {
	U, P     float64
	Exact    bool
	Shift    float64
	Interval Interval
}

// MannWhitney compares the lots by ranks (Mann & Whitney 1947, Annals of
// Mathematical Statistics 18, 50-60; Hodges & Lehmann 1963, same 34, 598-611;
// from memory). P is twice the smaller tail, at most 1: exact, conditional on
// the midranks, for up to 100 readings together with ties and 600 without, else
// normal with the correction for ties and for continuity.
//
// The interval runs from the k-th smallest difference to the k-th largest, with
// k the largest for which 2 P(U <= k-1) <= 1-level; normal, k is
// floor(mn/2 - z sd). Each difference is rounded to the decimals the readings
// were written with, since 12.003-12.001 is not 0.002 in float64; decimals
// below 0 leave it as it is.
//
// null may be nil; a NullU given to several calls with lots of the same sizes
// saves counting again. MannWhitney needs 2 readings a lot, not all equal.
func MannWhitney(ref, cand []float64, level float64, decimals int, null *NullU) (Ranks, error) {
	if len(ref) < 2 || len(cand) < 2 {
		return Ranks{}, ErrTooFew
	}
	x, y := rising(ref), rising(cand)
	twice, ties := merge(x, y)
	if len(ties) == 1 && ties[0] == len(x)+len(y) {
		return Ranks{}, ErrConstant
	}
	m, n := float64(len(x)), float64(len(y))
	r := Ranks{U: float64(twice) / 2}
	together := len(x) + len(y)
	var tails rankTails
	switch {
	case len(ties) == 0 && together <= mostExactUntied:
		if null == nil {
			null = new(NullU)
		}
		tails = null.of(len(x), len(y))
	case len(ties) > 0 && together <= mostExactTied:
		tails = tiedTails(x, y)
	}
	pairs := int64(len(x)) * int64(len(y))
	tail := (1 - level) / 2
	var k int64
	if tails != nil {
		r.Exact = true
		r.P = min(1, 2*min(tails.lower(twice), tails.upper(twice)))
		k = lastRank(tails, tail, pairs)
	} else {
		all := m + n
		sd := math.Sqrt(m * n / 12 * (all + 1 - cubes(ties)/(all*(all-1))))
		r.P = min(1, 2*dist.NormalUpper(max(0, math.Abs(r.U-m*n/2)-0.5)/sd))
		k = int64(math.Floor(m*n/2 + dist.NormalQuantile(tail)*sd))
	}
	r.Shift, r.Interval = shift(pairing{rows: y, columns: x}, pairs, k, level, decimals)
	return r, nil
}

// rankTails are the tails of a rank statistic under chance alone, given as twice
// its value, which is whole.
type rankTails interface {
	lower(twice int64) float64 // P(statistic <= twice/2)
	upper(twice int64) float64 // P(statistic >= twice/2)
}

// lastRank is the largest k with 2 P(statistic <= k-1) <= 2 tail, at most half of
// the pairs. The tail of 3 + 3 readings is exactly 1/20, and 1-level is not
// exactly 0.1: so a rounding is allowed.
func lastRank(tails rankTails, tail float64, pairs int64) int64 {
	allowed := tail * (1 + 1e-12)
	low, high := int64(0), (pairs+1)/2 // low is right or none is
	for low < high {
		k := (low + high + 1) / 2
		if tails.lower(2*(k-1)) <= allowed {
			low = k
		} else {
			high = k - 1
		}
	}
	return low
}

// shift takes the median and the k-th smallest and largest of the pairs.
func shift(p pairing, pairs, k int64, level float64, decimals int) (float64, Interval) {
	ranks := []int64{(pairs + 1) / 2, pairs/2 + 1}
	if k >= 1 {
		ranks = append(ranks, k, pairs+1-k)
	}
	found := p.order(ranks)
	for i, v := range found {
		found[i] = rounded(v, decimals)
	}
	middle := found[0]
	if found[0] != found[1] {
		middle = found[0]/2 + found[1]/2
		if decimals >= 0 {
			middle = rounded(middle, decimals+1)
		}
	}
	if k < 1 {
		return middle, Interval{Level: level, Lower: math.Inf(-1), Upper: math.Inf(1)}
	}
	return middle, Interval{Level: level, Lower: found[2], Upper: found[3]}
}

// merge returns twice the number of pairs of sorted lots with y above x, equal
// pairs counting one half, and the sizes of the groups of more than one equal
// reading in both lots together.
func merge(x, y []float64) (twice int64, ties []int) {
	i, j := 0, 0
	for i < len(x) || j < len(y) {
		v := 0.0
		switch {
		case i == len(x):
			v = y[j]
		case j == len(y):
			v = x[i]
		default:
			v = min(x[i], y[j])
		}
		below := i
		for i < len(x) && x[i] == v {
			i++
		}
		start := j
		for j < len(y) && y[j] == v {
			j++
		}
		twice += int64(j-start) * int64(below+i)
		if t := i - below + j - start; t > 1 {
			ties = append(ties, t)
		}
	}
	return twice, ties
}

// cubes is the sum of t^3 - t over the groups of ties.
func cubes(ties []int) float64 {
	sum := 0.0
	for _, t := range ties {
		n := float64(t)
		sum += n * (n - 1) * (n + 1)
	}
	return sum
}
