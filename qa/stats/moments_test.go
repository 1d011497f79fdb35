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
	b.Run("unrolled", func(b *testing.B) { // the peer in four sums at a time
		for b.Loop() {
			var s [4]float64
			for i := 0; i+4 <= len(x); i += 4 {
				s[0] += x[i]
				s[1] += x[i+1]
				s[2] += x[i+2]
				s[3] += x[i+3]
			}
			mean := (s[0] + s[1] + s[2] + s[3]) / float64(len(x))
			var q [4]float64
			for i := 0; i+4 <= len(x); i += 4 {
				q[0] += (x[i] - mean) * (x[i] - mean)
				q[1] += (x[i+1] - mean) * (x[i+1] - mean)
				q[2] += (x[i+2] - mean) * (x[i+2] - mean)
				q[3] += (x[i+3] - mean) * (x[i+3] - mean)
			}
			got = q[0] + q[1] + q[2] + q[3]
		}
	})
	if !(got > 0) {
		b.Errorf("sum of squares: got %v, want above 0", got)
	}
}
