package main

import (
	"math/rand/v2"
	"runtime"
	"slices"
	"sync"

	"lotpair/qa/stats"
)

// onAll does the blocks on every processor; the answer is the same for any number of them.
func onAll(blocks int, do func(block int)) {
	var wait sync.WaitGroup
	next := make(chan int)
	for range runtime.GOMAXPROCS(0) {
		wait.Go(func() {
			for block := range next {
				do(block)
			}
		})
	}
	for block := range blocks {
		next <- block
	}
	close(next)
	wait.Wait()
}

func resampled(resamples int, run func(int, func(int))) stats.Resampling {
	return stats.Resampling{Seed: 1, Resamples: resamples, Run: run}
}

func bootstrapMeans(n int, run func(int, func(int))) func() {
	ref, cand := drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)
	return func() { kept += must(stats.BootstrapMeans(ref, cand, 0.90, resampled(10_000, run))).Interval.Lower }
}

func bootstrapMedians(n int) func() {
	ref, cand := drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)
	return func() {
		kept += must(stats.BootstrapMedians(ref, cand, 0.90, 6, resampled(10_000, nil))).Interval.Lower
	}
}

func permute(n, resamples int, run func(int, func(int))) func() {
	ref, cand := drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)
	return func() {
		_, p := must(stats.Permute(ref, cand, resampled(resamples, run))).TwoSided(0)
		kept += p
	}
}

// numbersAlone draws so many random numbers and nothing else, with the generator of the product.
func numbersAlone(n int) func() {
	return func() {
		source, all := rand.NewPCG(1, 2), uint64(0)
		for range n {
			all ^= source.Uint64()
		}
		kept += float64(all & 1)
	}
}

// plainBootstrap draws the means as one would write it with the standard library, without an interval.
func plainBootstrap(n, resamples int) func() {
	x, y := drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)
	return func() {
		random := rand.New(rand.NewPCG(1, 2))
		for range resamples {
			for range x {
				kept += y[random.IntN(len(y))] - x[random.IntN(len(x))]
			}
		}
	}
}

// plainMedians draws whole lots and sorts them.
func plainMedians(n, resamples int) func() {
	x, y := drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)
	return func() {
		random, again := rand.New(rand.NewPCG(1, 2)), make([]float64, n)
		for range resamples {
			for _, lot := range [][]float64{x, y} {
				for i := range again {
					again[i] = lot[random.IntN(n)]
				}
				slices.Sort(again)
				kept += again[n/2]
			}
		}
	}
}

func plainShuffle(n, resamples int) func() {
	all := append(drawn(1, n, 12, 6), drawn(2, n, 12.001, 6)...)
	return func() {
		random := rand.New(rand.NewPCG(1, 2))
		for range resamples {
			random.Shuffle(len(all), func(i, j int) { all[i], all[j] = all[j], all[i] })
			for _, v := range all[:n] {
				kept += v
			}
		}
	}
}

var resamplingRows = []benchRow{
	{
		name: "BCa of means, 10,000 resamples of 2 x 1,000, one core",
		build: func() work {
			return work{
				goal: goal{seconds: 0.060}, ours: bootstrapMeans(1000, nil),
				floor: rival{"a random number for two readings", numbersAlone(10_000 * 1000)},
				peers: []rival{{"Go, plain loop", plainBootstrap(1000, 10_000)}},
			}
		},
		growth: &growth{sizes: []int{100, 1000, 10_000}, of: "readings a lot", build: func(n int) func() { return bootstrapMeans(n, nil) }},
	},
	{
		name:  "BCa of means, 10,000 resamples of 2 x 1,000, all cores",
		build: func() work { return work{wall: true, goal: goal{seconds: 0.035}, ours: bootstrapMeans(1000, onAll)} },
	},
	{
		name: "BCa of medians, 10,000 resamples of 2 x 1,000",
		build: func() work {
			return work{goal: goal{seconds: 0.020}, ours: bootstrapMedians(1000), peers: []rival{{"Go, plain loop", plainMedians(1000, 10_000)}}}
		},
		growth: &growth{sizes: []int{100, 1000, 10_000, 100_000}, of: "readings a lot", build: bootstrapMedians},
	},
	{
		name: "permutation, 100,000 of 2 x 100, one core",
		build: func() work {
			return work{
				goal: goal{seconds: 0.060}, ours: permute(100, 100_000, nil),
				floor: rival{"a random number for two readings drawn", numbersAlone(100_000 * 50)},
				peers: []rival{{"Go, plain loop", plainShuffle(100, 100_000)}},
			}
		},
		growth: &growth{sizes: []int{100, 1000, 10_000}, of: "readings a lot, 10,000 permutations", build: func(n int) func() { return permute(n, 10_000, nil) }},
	},
}
