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

// BenchmarkWelchMany is Welch's test with its two-sided p for 1,000 characteristics of 2 x 1,000 readings; its peer is plain means
// and variances of the same readings, which is the least that it costs.
func BenchmarkWelchMany(b *testing.B) {
	x := make([][]float64, 2000)
	for i := range x {
		x[i] = knuth(uint64(i), 1000, 25, 0.01)
	}
	got := 0.0
	b.Run("ours", func(b *testing.B) {
		for b.Loop() {
			for i := 0; i < len(x); i += 2 {
				e, err := stats.Welch(stats.MeanAndSD(x[i]), stats.MeanAndSD(x[i+1]))
				if err != nil {
					b.Fatal(err)
				}
				_, got = e.TwoSided(0)
			}
		}
	})
	b.Run("peer", func(b *testing.B) {
		for b.Loop() {
			for _, lot := range x {
				sum := 0.0
				for _, v := range lot {
					sum += v
				}
				mean := sum / float64(len(lot))
				got = 0
				for _, v := range lot {
					got += (v - mean) * (v - mean)
				}
			}
		}
	})
	if !(got > 0) {
		b.Errorf("got %v, want above 0", got)
	}
}
