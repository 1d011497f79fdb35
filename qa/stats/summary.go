package stats

import (
	"math"
	"slices"
)

// A Summary describes one group of readings. SD has denominator N-1; it is 0 when
// all readings are equal, and also when N is below 2, so a caller checks N first.
type Summary struct {
	N                        int
	Mean, SD                 float64
	Min, Q1, Median, Q3, Max float64

	rest float64 // what rounding took from Mean
}

// Summarize returns the summary of x. The quartiles are of type 7 in Hyndman &
// Fan (1996, "Sample Quantiles in Statistical Packages"). The summary of
// nothing is zero.
//
// Sums are kept to far more digits than those of a float64, so Mean and SD are
// those of the numbers given, rounded about once. Numbers near the largest or
// smallest float64 do not overflow or vanish on the way.
func Summarize(x []float64) Summary {
	return SummarizeSorted(rising(x))
}

// rising is x in rising order, x itself where it is: not to be changed.
func rising(x []float64) []float64 {
	if slices.IsSorted(x) {
		return x
	}
	sorted := slices.Clone(x)
	slices.Sort(sorted)
	return sorted
}

// SummarizeSorted is Summarize for readings in rising order.
func SummarizeSorted(sorted []float64) Summary {
	if len(sorted) == 0 {
		return Summary{}
	}
	s := momentsOf(sorted).summary(len(sorted))
	s.Min, s.Max = sorted[0], sorted[len(sorted)-1]
	s.Q1, s.Median, s.Q3 = quantile(sorted, 0.25), quantile(sorted, 0.5), quantile(sorted, 0.75)
	return s
}

// MeanAndSD is Summarize for one who needs no more: it does not sort, and the
// extremes and quartiles of what it returns are NaN.
func MeanAndSD(x []float64) Summary {
	if len(x) == 0 {
		return Summary{}
	}
	s := momentsOf(x).summary(len(x))
	none := math.NaN()
	s.Min, s.Q1, s.Median, s.Q3, s.Max = none, none, none, none, none
	return s
}

// summary is what the moments of n readings say.
func (m moments) summary(n int) Summary {
	s := Summary{
		N:    n,
		Mean: math.Ldexp(m.mean.value(), m.exp),
		rest: math.Ldexp(m.mean.high-m.mean.value()+m.mean.low, m.exp),
	}
	if n > 1 {
		s.SD = math.Ldexp(math.Sqrt(m.squares.value()/float64(n-1)), m.exp)
	}
	return s
}

// above is the mean of s minus that of t: of means far from 0 the difference keeps
// the digits that each alone has lost.
func (s Summary) above(t Summary) float64 { return (s.Mean - t.Mean) + (s.rest - t.rest) }

// MedianOf returns the median of readings in rising order, 0 of none.
func MedianOf(sorted []float64) float64 {
	if len(sorted) == 0 {
		return 0
	}
	return quantile(sorted, 0.5)
}

// Constant says that all readings are equal.
func (s Summary) Constant() bool { return s.Min == s.Max }

// quantile is the quantile of type 7: linear between the order statistics
// around position 1 + (n-1)p.
func quantile(sorted []float64, p float64) float64 {
	at := float64(len(sorted)-1) * p
	below := int(at)
	part := at - float64(below)
	low := sorted[below]
	if part == 0 {
		return low
	}
	// Each form rises with p whatever is rounded; the first may overflow, for
	// ends of different sign.
	high := sorted[below+1]
	if (low < 0) == (high < 0) {
		return min(low+part*(high-low), high)
	}
	return low*(1-part) + high*part
}
