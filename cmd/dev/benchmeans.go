package main

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"lotpair/qa/stats"
)

// What the work computes is kept, so that it is computed.
var kept float64

// drawn are n normal readings about mean with standard deviation 0.01, written with so many decimals.
func drawn(seed uint64, n int, mean float64, decimals int) []float64 {
	r := rand.New(rand.NewPCG(seed, uint64(n)))
	x := make([]float64, n)
	for i := range x {
		x[i] = rounded(mean+0.01*r.NormFloat64(), decimals)
	}
	return x
}

// lots are so many pairs of lots of n readings.
func lots(k, n int) (refs, cands [][]float64) {
	for i := range k {
		refs = append(refs, drawn(uint64(2*i), n, 12, 6))
		cands = append(cands, drawn(uint64(2*i+1), n, 12.001, 6))
	}
	return refs, cands
}

// twoSided is Welch's two-sided p alone.
func twoSided(ref, cand []float64) {
	_, p := must(stats.Welch(stats.MeanAndSD(ref), stats.MeanAndSD(cand))).TwoSided(0)
	kept += p
}

// welch is the difference of two means with both one-sided tests, the two-sided p and the interval.
func welch(ref, cand []float64) {
	e := must(stats.Welch(stats.MeanAndSD(ref), stats.MeanAndSD(cand)))
	t := stats.TwoOneSided(e, -0.02, 0.02, 0.05)
	_, p := e.TwoSided(0)
	kept += p + t.PLower
}

var meansRows = []benchRow{
	{
		name: "Welch, two-sided p, 1,000 characteristics x 2 x 1,000 readings",
		build: func() work {
			refs, cands := lots(1000, 1000)
			return work{
				goal: goal{ofFloor: 1.5},
				ours: func() {
					for i := range refs {
						twoSided(refs[i], cands[i])
					}
				},
				floor: rival{"plain means and variances", func() {
					for i := range refs {
						kept += plainVariance(refs[i]) + plainVariance(cands[i])
					}
				}},
				peers: []rival{{"gonum", func() {
					for i := range refs {
						kept += gonumWelch(refs[i], cands[i])
					}
				}}},
			}
		},
		growth: &growth{sizes: []int{1000, 10_000, 100_000, 1_000_000}, of: "readings a lot", build: func(n int) func() {
			refs, cands := lots(1, n)
			return func() { twoSided(refs[0], cands[0]) }
		}},
	},
	{
		name: "Welch, both tests, p and interval, one pair of lots, 2 x 30",
		build: func() work {
			refs, cands := lots(1, 30)
			return work{
				ours:  func() { welch(refs[0], cands[0]) },
				floor: rival{"plain means and variances", func() { kept += plainVariance(refs[0]) + plainVariance(cands[0]) }},
				peers: []rival{{"gonum", func() { kept += gonumWelch(refs[0], cands[0]) }}},
			}
		},
	},
	{
		name: "Yuen–Welch, 2 x 1,000",
		build: func() work {
			refs, cands := lots(1, 1000)
			return work{ours: func() {
				_, p := must(stats.Yuen(refs[0], cands[0])).TwoSided(0)
				kept += p
			}}
		},
	},
	shapiroRow(100), shapiroRow(5000),
}

func shapiroRow(n int) benchRow {
	build := func(n int) func() {
		x := drawn(5, n, 12, 6)
		return func() { kept += must(stats.ShapiroWilk(x)).P }
	}
	row := benchRow{
		name: fmt.Sprintf("Shapiro–Wilk, %s readings", grouped(n)),
		build: func() work {
			x := drawn(5, n, 12, 6)
			return work{ours: build(n), floor: rival{"one sort", func() { slices.Sort(slices.Clone(x)) }}}
		},
	}
	if n == 5000 {
		row.growth = &growth{sizes: []int{50, 500, 5000}, of: "readings", build: build}
	}
	return row
}

// plainVariance is the least that a mean and a variance cost: two passes, no care for rounding.
func plainVariance(x []float64) float64 {
	sum := 0.0
	for _, v := range x {
		sum += v
	}
	mean, squares := sum/float64(len(x)), 0.0
	for _, v := range x {
		squares += (v - mean) * (v - mean)
	}
	return squares / float64(len(x)-1)
}

// gonumWelch is the two-sided p alone, as one would write it with gonum.
func gonumWelch(ref, cand []float64) float64 {
	m1, v1 := stat.MeanVariance(ref, nil)
	m2, v2 := stat.MeanVariance(cand, nil)
	n1, n2 := float64(len(ref)), float64(len(cand))
	a, b := v1/n1, v2/n2
	df := (a + b) * (a + b) / (a*a/(n1-1) + b*b/(n2-1))
	t := (m2 - m1) / math.Sqrt(a+b)
	return 2 * distuv.StudentsT{Sigma: 1, Nu: df}.CDF(-math.Abs(t))
}
