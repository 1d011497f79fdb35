package stats_test

import (
	"math"
	"testing"

	"lotpair/qa/stats"
)

func BenchmarkSummarize(b *testing.B) {
	x := make([]float64, 10000)
	for i := range x {
		x[i] = 12 + 0.01*math.Sin(float64(i*i))
	}
	b.ReportAllocs()
	for b.Loop() {
		stats.Summarize(x)
	}
}

// BenchmarkWelch is one whole comparison: estimate, both tests, interval.
func BenchmarkWelch(b *testing.B) {
	ref := stats.Summary{N: 12, Mean: 12.0039166667, SD: 0.00766880734}
	cand := stats.Summary{N: 12, Mean: 12.0081666667, SD: 0.00885061203}
	b.ReportAllocs()
	for b.Loop() {
		e, err := stats.Welch(ref, cand)
		if err != nil {
			b.Fatal(err)
		}
		stats.TwoOneSided(e, -0.02, 0.02, 0.05)
	}
}
