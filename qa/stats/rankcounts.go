package stats

import (
	"math/big"
	"slices"
)

// A NullU holds the exact distribution of Mann & Whitney's U for two lots of
// given sizes without ties. Its zero value is ready to use; it counts again when
// the sizes change. It must not be used by two goroutines at once.
type NullU struct {
	m, n  int
	tails rankTails
}

func (c *NullU) of(m, n int) rankTails {
	m, n = min(m, n), max(m, n) // the distribution is the same
	if c.tails == nil || c.m != m || c.n != n {
		c.m, c.n = m, n
		if m < widest {
			c.tails = countU(m, n, m*n/2)
		} else {
			c.tails = newWaves(m, n)
		}
	}
	return c.tails
}

// halfTails is a distribution on 0..most that is the same from both ends, as sums
// of P from 0 to the middle.
type halfTails struct {
	most int64
	sums []float64
}

func (h *halfTails) lower(twice int64) float64 {
	at := twice >> 1 // floor
	switch {
	case at < 0:
		return 0
	case at >= h.most:
		return 1
	case at >= int64(len(h.sums)):
		return 1 - h.lower(2*(h.most-at-1))
	}
	return h.sums[at]
}

func (h *halfTails) upper(twice int64) float64 { return h.lower(2*h.most - twice) }

// countU counts the orders of m and n readings by U, up to last, at most the
// middle. They are the coefficients of the Gaussian binomial
//
//	product over i = 1..m of (1 - q^(n+i))/(1 - q^i)
//
// taken factor by factor: c'[k] = c[k] - c[k-n-i] + c'[k-i], where every c is a
// count. No count overflows for m+n <= 600.
func countU(m, n, last int) *halfTails {
	old, next := make([]float64, last+1), make([]float64, last+1)
	old[0] = 1
	for i := 1; i <= m; i++ {
		top := min(last, i*n)
		copy(next[:min(i, top+1)], old)
		for k := i; k <= top; k++ {
			// Together one count: those with the i-th reading not last.
			less := next[k-i]
			if k >= n+i {
				less -= old[k-n-i]
			}
			next[k] = old[k] + less
		}
		old, next = next, old
	}
	total := binomial(m+n, m)
	sum := 0.0
	for k, v := range old {
		sum += v
		next[k] = sum / total
	}
	return &halfTails{most: int64(m) * int64(n), sums: next}
}

// binomial is the number of ways to choose k of n, rounded once.
func binomial(n, k int) float64 {
	v, _ := new(big.Float).SetInt(new(big.Int).Binomial(int64(n), int64(k))).Float64()
	return v
}

// wholeTails is a distribution of a whole number from first on: sums from the
// lower end and from the upper, so that each tail has its own digits.
// The number is twice the statistic.
type wholeTails struct {
	first        int64
	below, above []float64
}

func (w *wholeTails) lower(twice int64) float64 {
	at := twice - w.first
	if at < 0 {
		return 0
	}
	return w.below[min(at, int64(len(w.below)-1))]
}

func (w *wholeTails) upper(twice int64) float64 {
	at := twice - w.first
	if at >= int64(len(w.above)) {
		return 0
	}
	return w.above[max(at, 0)]
}

// tailsOf makes the sums of counts; the first count belongs to the number first.
func tailsOf(counts []float64, first int64) *wholeTails {
	w := &wholeTails{first: first, below: make([]float64, len(counts)), above: make([]float64, len(counts))}
	sum := 0.0
	for k, v := range counts {
		sum += v
		w.below[k] = sum
	}
	total := sum
	sum = 0
	for k := len(counts) - 1; k >= 0; k-- {
		sum += counts[k]
		w.above[k] = sum / total
		w.below[k] /= total
	}
	return w
}

// tiedTails is the distribution of twice U for sorted lots with ties: every
// choice of len(y) places among the midranks is as likely as any other.
func tiedTails(x, y []float64) rankTails {
	scores := twiceMidranks(x, y)
	n := len(y)
	// Walks through the readings in rising order: counts[j] holds the choices of
	// j of those passed, by the sum of their doubled midranks, between low and high.
	counts := make([][]float64, n+1)
	low, high := make([]int, n+1), make([]int, n+1)
	most := 0
	for j := range counts {
		counts[j] = make([]float64, most+1)
		low[j], high[j] = most+1, -1
		if j < n {
			most += scores[len(scores)-1-j]
		}
	}
	counts[0][0], low[0], high[0] = 1, 0, 0
	for i, s := range scores {
		rest := len(scores) - i - 1
		for j := min(i+1, n); j >= max(1, n-rest); j-- {
			if high[j-1] < 0 {
				continue
			}
			from := counts[j-1][low[j-1] : high[j-1]+1]
			to := counts[j][low[j-1]+s:]
			to = to[:len(from)]
			for k, v := range from {
				to[k] += v
			}
			low[j], high[j] = min(low[j], low[j-1]+s), max(high[j], high[j-1]+s)
		}
	}
	// Twice U is the doubled sum of the midranks of y less n(n+1).
	return tailsOf(counts[n][low[n]:high[n]+1], int64(low[n]-n*(n+1)))
}

// twiceMidranks returns twice the midrank of every reading of two sorted lots, in
// rising order.
func twiceMidranks(x, y []float64) []int {
	all := append(append(make([]float64, 0, len(x)+len(y)), x...), y...)
	slices.Sort(all)
	ranks := make([]int, len(all))
	for i := 0; i < len(all); {
		j := i
		for j < len(all) && all[j] == all[i] {
			j++
		}
		for k := i; k < j; k++ {
			ranks[k] = i + 1 + j
		}
		i = j
	}
	return ranks
}
