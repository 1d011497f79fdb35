package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// GroupMeans returns the mean of each group. Where groups are a random sample (lots
// of a source, heats of a lot), they are the readings that a comparison of sources
// rests on, each counting once however many readings it has; their summaries go to
// Welch or Pooled. Groups must not be empty.
func GroupMeans(groups [][]float64) []float64 {
	means := make([]float64, len(groups))
	for i, g := range groups {
		m := momentsOf(g)
		means[i] = math.Ldexp(m.mean.value(), m.exp)
	}
	return means
}

// An Anova is a one-way analysis of variance: SDWithin is the standard deviation
// inside a group, SDBetween that of the true group means (0 where the estimate of
// its square is negative), F and P test that the latter is 0.
type Anova struct {
	SSBetween, DFBetween, SSWithin, DFWithin float64
	F, P                                     float64
	SDBetween, SDWithin                      float64
}

// OneWay divides the spread of grouped readings into that between and that within
// the groups, for groups of unequal size (Searle, Casella & McCulloch 1992, Variance
// Components, section 3.6, from memory): with mean squares B and W of k groups of
// n[i] readings, N together,
//
//	SDBetween^2 = (B - W)/n0, n0 = (N - sum n[i]^2/N)/(k-1)
//
// It needs 2 groups, none empty, one of them of 2 readings: else ErrTooFew. Where
// there is no spread within the groups it returns ErrConstant, and F and P must not
// be read.
func OneWay(groups [][]float64) (Anova, error) {
	var all []float64
	for _, g := range groups {
		if len(g) == 0 {
			return Anova{}, ErrTooFew
		}
		all = append(all, g...)
	}
	if len(groups) < 2 || len(all) == len(groups) {
		return Anova{}, ErrTooFew
	}
	whole := momentsOf(all)
	var between, within double
	sizes := 0.0
	for _, g := range groups {
		n := float64(len(g))
		sizes += n * n
		// About the mean of all, in its unit: deviations first, so that nothing is
		// lost to a large common part.
		var sum double
		for _, v := range g {
			sum = sum.plus(whole.deviation(v))
		}
		mean := sum.over(n)
		between = between.plus(mean.times(mean).times(double{high: n}))
		for _, v := range g {
			d := whole.deviation(v).minus(mean)
			within = within.plus(d.times(d))
		}
	}
	k, n := float64(len(groups)), float64(len(all))
	a := Anova{
		SSBetween: scaled(between.value(), whole.exp), DFBetween: k - 1,
		SSWithin: scaled(within.value(), whole.exp), DFWithin: n - k,
	}
	msBetween, msWithin := between.value()/a.DFBetween, within.value()/a.DFWithin
	a.SDWithin = math.Ldexp(math.Sqrt(msWithin), whole.exp)
	n0 := (n - sizes/n) / (k - 1)
	a.SDBetween = math.Ldexp(math.Sqrt(max(0, (msBetween-msWithin)/n0)), whole.exp)
	if msWithin == 0 {
		return a, ErrConstant
	}
	a.F = msBetween / msWithin
	a.P = dist.FUpper(a.F, a.DFBetween, a.DFWithin)
	return a, nil
}

// scaled brings a sum of squares back to the unit of the readings; it may overflow
// where they are near the largest float64.
func scaled(squares float64, exp int) float64 {
	return min(math.MaxFloat64, math.Ldexp(squares, 2*exp))
}
