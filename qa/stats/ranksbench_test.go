package stats_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"lotpair/qa/stats"
)

// twoLots draws normal readings, written with so many decimals.
func twoLots(n, decimals int) (ref, cand []float64) {
	r := rand.New(rand.NewPCG(uint64(n), 9))
	draw := func(mean float64) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = math.Round((mean+0.01*r.NormFloat64())*math.Pow10(decimals)) / math.Pow10(decimals)
		}
		return x
	}
	return draw(12), draw(12.001)
}

// BenchmarkRanks is the whole of MannWhitney; sort-only is its floor, the two sorts,
// and all-differences a peer that sorts them all.
func BenchmarkRanks(b *testing.B) {
	for _, n := range []int{100, 1000, 20000, 1000000} {
		for _, decimals := range []int{3, 15} {
			ref, cand := twoLots(n, decimals)
			b.Run(fmt.Sprintf("whole/n=%d/decimals=%d", n, decimals), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					if _, err := stats.MannWhitney(ref, cand, 0.90, decimals, nil); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
		ref, cand := twoLots(n, 15)
		if n <= 1000 {
			b.Run(fmt.Sprintf("all-differences/n=%d", n), func(b *testing.B) {
				for b.Loop() {
					all := make([]float64, 0, n*n)
					for _, y := range cand {
						for _, x := range ref {
							all = append(all, y-x)
						}
					}
					slices.Sort(all)
				}
			})
		}
		b.Run(fmt.Sprintf("sort-only/n=%d", n), func(b *testing.B) {
			for b.Loop() {
				slices.Sort(slices.Clone(ref))
				slices.Sort(slices.Clone(cand))
			}
		})
	}
}

// BenchmarkExactRanks counts U out: 300 a lot without ties, 50 a lot with.
func BenchmarkExactRanks(b *testing.B) {
	for _, c := range []struct{ n, decimals int }{{50, 3}, {30, 3}, {100, 15}, {200, 15}, {300, 15}} {
		ref, cand := twoLots(c.n, c.decimals)
		b.Run(fmt.Sprintf("n=%d/decimals=%d", c.n, c.decimals), func(b *testing.B) {
			for b.Loop() {
				if r, err := stats.MannWhitney(ref, cand, 0.90, c.decimals, nil); err != nil || !r.Exact {
					b.Fatalf("got %+v %v, want an exact answer", r, err)
				}
			}
		})
	}
}

func BenchmarkSignedRank(b *testing.B) {
	for _, n := range []int{100, 20000} {
		ref, cand := twoLots(n, 6)
		d := stats.Differences(ref, cand, 6)
		b.Run(fmt.Sprintf("n=%d", n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := stats.WilcoxonSignedRank(d, 0.90, 6); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkRatioAndSpread(b *testing.B) {
	ref, cand := twoLots(100, 3)
	c, err := stats.WelchContrast(stats.Summarize(ref), stats.Summarize(cand))
	if err != nil {
		b.Fatal(err)
	}
	b.Run("ratio-interval", func(b *testing.B) {
		for b.Loop() {
			if _, err := c.Interval(0.90); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("bonett", func(b *testing.B) {
		for b.Loop() {
			if _, err := stats.BonettRatio(ref, cand, 0.90); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("shapiro-wilk", func(b *testing.B) {
		for b.Loop() {
			if _, err := stats.ShapiroWilk(ref); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("esd", func(b *testing.B) {
		for b.Loop() {
			if _, _, err := stats.GeneralizedESD(ref, 10, 0.05); err != nil {
				b.Fatal(err)
			}
		}
	})
	p, err := stats.CompareProportions(stats.Counts{N: 80, Failed: 48}, stats.Counts{N: 70, Failed: 56})
	if err != nil {
		b.Fatal(err)
	}
	b.Run("miettinen-nurminen", func(b *testing.B) {
		for b.Loop() {
			p.Interval(0.90)
		}
	})
}
