package stats_test

import (
	"fmt"
	"runtime"
	"testing"

	"lotpair/qa/stats"
)

// BenchmarkResampling: BCa of means and of medians, 10,000 resamples of 1,000 a lot;
// permutation, 100,000 of 100 a lot: drawing and a two-sided test, on one core and
// on all.
func BenchmarkResampling(b *testing.B) {
	for _, workers := range []int{1, runtime.GOMAXPROCS(0)} {
		run := together(workers)
		if workers == 1 {
			run = nil
		}
		big, small := stats.Resampling{Seed: 1, Resamples: 10000, Run: run}, stats.Resampling{Seed: 1, Resamples: 100000, Run: run}
		ref, cand := twoLots(1000, 6)
		b.Run(fmt.Sprintf("means/workers=%d", workers), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := stats.BootstrapMeans(ref, cand, 0.90, big); err != nil {
					b.Fatal(err)
				}
			}
		})
		b.Run(fmt.Sprintf("medians/workers=%d", workers), func(b *testing.B) {
			for b.Loop() {
				if _, err := stats.BootstrapMedians(ref, cand, 0.90, 6, big); err != nil {
					b.Fatal(err)
				}
			}
		})
		b.Run(fmt.Sprintf("permutation/workers=%d", workers), func(b *testing.B) {
			for b.Loop() {
				p, err := stats.Permute(ref[:100], cand[:100], small)
				if err != nil {
					b.Fatal(err)
				}
				p.TwoSided(0)
			}
		})
	}
	ref, cand := twoLots(100, 6)
	p, err := stats.Permute(ref, cand, stats.Resampling{Seed: 1, Resamples: 10000})
	if err != nil {
		b.Fatal(err)
	}
	b.Run("permutation-interval/resamples=10000", func(b *testing.B) {
		for b.Loop() {
			p.Interval(0.90)
		}
	})
}
