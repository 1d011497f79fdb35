package stats_test

import (
	"fmt"
	"math/rand/v2"
	"runtime"
	"testing"

	"lotpair/qa/stats"
)

// What a benchmark computes is kept, so that it is computed.
var (
	sink float64
	mash uint64
)

// BenchmarkResampling: BCa of means and of medians, 10,000 resamples of 1,000 a lot;
// permutation, 100,000 of 100 a lot: drawing and a two-sided test, on one core and
// on all; beside them plain loops with the standard library's draws (the peers) and
// the random numbers alone (the floor).
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
	b.Run("means-peer/IntN", func(b *testing.B) {
		x, y := twoLots(1000, 6)
		random := rand.New(rand.NewPCG(1, 2))
		for b.Loop() {
			for range 10000 {
				sum := 0.0
				for range x {
					sum += y[random.IntN(len(y))] - x[random.IntN(len(x))]
				}
				sink += sum
			}
		}
	})
	b.Run("means-floor/PCG-alone", func(b *testing.B) { // half as many numbers as readings drawn
		source := rand.NewPCG(1, 2)
		for b.Loop() {
			for range 10000 * 1000 {
				mash ^= source.Uint64()
			}
		}
	})
	b.Run("permutation-peer/Shuffle", func(b *testing.B) {
		x, y := twoLots(100, 6)
		all := append(x, y...)
		random := rand.New(rand.NewPCG(1, 2))
		for b.Loop() {
			for range 100000 {
				random.Shuffle(len(all), func(i, j int) { all[i], all[j] = all[j], all[i] })
				sum := 0.0
				for _, v := range all[:100] {
					sum += v
				}
				sink += sum
			}
		}
	})
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
