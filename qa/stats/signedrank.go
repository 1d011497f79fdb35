package stats

import (
	"cmp"
	"math"
	"slices"

	"lotpair/qa/stats/dist"
)

// A SignedRank judges differences of pairs by their order alone. V is the sum of
// the ranks of the positive ones among all by size, P two-sided, Exact says that
// it was counted out. Shift is the median of the Walsh averages (the means of two
// differences, or of one with itself), Interval that of the true shift; with too
// few differences for its level it has no limits.
type SignedRank struct {
	V, P     float64
	Exact    bool
	Shift    float64
	Interval Interval
}

// WilcoxonSignedRank judges differences candidate minus reference (Wilcoxon 1945,
// Biometrics Bulletin 1, 80-83; Hodges & Lehmann 1963, Annals of Mathematical
// Statistics 34, 598-611; from memory). For V and P differences of 0 are left
// out; equal sizes have their midrank. P is twice the smaller tail, at most 1:
// exact, conditional on the midranks, for up to 100 differences with ties and 600
// without, else normal with the correction for ties and for continuity.
//
// Shift and interval are of all differences, those of 0 included: the interval
// runs from the k-th smallest Walsh average to the k-th largest, with k the
// largest for which 2 P(V <= k-1) <= 1-level; normal, k is floor(M/2 - z sd) for
// M averages. Averages are rounded to one decimal more than the differences were
// written with; decimals below 0 leave them as they are.
//
// It needs 2 differences, not all equal.
func WilcoxonSignedRank(diffs []float64, level float64, decimals int) (SignedRank, error) {
	if len(diffs) < 2 {
		return SignedRank{}, ErrTooFew
	}
	sorted := slices.Clone(diffs)
	slices.Sort(sorted)
	if sorted[0] == sorted[len(sorted)-1] {
		return SignedRank{}, ErrConstant
	}
	bySize := slices.Clone(sorted)
	slices.SortFunc(bySize, func(a, b float64) int { return cmp.Compare(math.Abs(a), math.Abs(b)) })
	zeros := 0
	for bySize[zeros] == 0 {
		zeros++
	}
	some := newSigns(bySize[zeros:])
	s := SignedRank{V: float64(some.twice) / 2}
	tails, sd := some.tails()
	middle := some.most() / 2
	if tails != nil {
		s.Exact = true
		s.P = min(1, 2*min(tails.lower(some.twice), tails.upper(some.twice)))
	} else {
		s.P = min(1, 2*dist.NormalUpper(max(0, math.Abs(s.V-middle)-0.5)/sd))
	}
	all := some
	if zeros > 0 {
		all = newSigns(bySize)
		tails, sd = all.tails()
	}
	n := int64(len(sorted))
	averages := n * (n + 1) / 2
	tail := (1 - level) / 2
	k := int64(math.Floor(all.most()/2 + dist.NormalQuantile(tail)*sd))
	if tails != nil {
		k = lastRank(tails, tail, averages)
	}
	// Half of each difference, so that the sums of a pairing are the averages.
	halves := each(sorted, func(v float64) float64 { return v / 2 })
	minus := each(halves, func(v float64) float64 { return -v })
	slices.Sort(minus)
	if decimals >= 0 {
		decimals++
	}
	s.Shift, s.Interval = shift(pairing{rows: halves, columns: minus, triangle: true}, averages, k, level, decimals)
	return s, nil
}

// signs are differences in rising order of size, with their doubled midranks.
type signs struct {
	ranks []int
	twice int64 // the doubled ranks of the positive ones
	ties  []int
}

func newSigns(bySize []float64) signs {
	s := signs{ranks: make([]int, len(bySize))}
	for i := 0; i < len(bySize); {
		j := i
		for j < len(bySize) && math.Abs(bySize[j]) == math.Abs(bySize[i]) {
			j++
		}
		for k := i; k < j; k++ {
			s.ranks[k] = i + 1 + j
			if bySize[k] > 0 {
				s.twice += int64(i + 1 + j)
			}
		}
		if j-i > 1 {
			s.ties = append(s.ties, j-i)
		}
		i = j
	}
	return s
}

// most is the largest V there can be.
func (s signs) most() float64 {
	n := float64(len(s.ranks))
	return n * (n + 1) / 2
}

// tails counts V out where that is agreed, else gives its standard deviation.
func (s signs) tails() (tails rankTails, sd float64) {
	n := len(s.ranks)
	switch {
	case len(s.ties) == 0 && n <= mostExactUntied:
		return countV(n), 0
	case len(s.ties) > 0 && n <= mostExactTied:
		return tiedV(s.ranks), 0
	}
	size := float64(n)
	return nil, math.Sqrt(size*(size+1)*(2*size+1)/24 - cubes(s.ties)/48)
}

// countV counts the 2^n ways to sign the ranks 1..n by V, up to the middle.
func countV(n int) *halfTails {
	most := n * (n + 1) / 2
	counts := make([]float64, most/2+1)
	counts[0] = 1
	for i := 1; i <= n; i++ {
		// From above, so that each rank is used once.
		for k := min(i*(i+1)/2, most/2); k >= i; k-- {
			counts[k] += counts[k-i]
		}
	}
	total := math.Ldexp(1, n)
	sum := 0.0
	for k, v := range counts {
		sum += v
		counts[k] = sum / total
	}
	return &halfTails{most: int64(most), sums: counts}
}

// tiedV counts the ways to sign midranks by twice V.
func tiedV(twiceRanks []int) *wholeTails {
	most := 0
	for _, r := range twiceRanks {
		most += r
	}
	counts := make([]float64, most+1)
	counts[0] = 1
	reached := 0
	for _, r := range twiceRanks {
		reached += r
		for k := reached; k >= r; k-- {
			counts[k] += counts[k-r]
		}
	}
	return tailsOf(counts, 0)
}
