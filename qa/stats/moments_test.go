package stats

import (
	"math/rand/v2"
	"testing"
)

// BenchmarkMeanVariance holds the sums of twice the digits against plain ones: peer is the least that a mean and a variance cost.
func BenchmarkMeanVariance(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 2))
	x := make([]float64, 10_000)
	for i := range x {
		x[i] = 100 + r.NormFloat64()
	}
	got := 0.0
	b.Run("ours", func(b *testing.B) {
		for b.Loop() {
			got = momentsOf(x).squares.value()
		}
	})
	b.Run("peer", func(b *testing.B) {
		for b.Loop() {
			sum := 0.0
			for _, v := range x {
				sum += v
			}
			mean := sum / float64(len(x))
			got = 0
			for _, v := range x {
				got += (v - mean) * (v - mean)
			}
		}
	})
	if !(got > 0) {
		b.Errorf("sum of squares: got %v, want above 0", got)
	}
}
