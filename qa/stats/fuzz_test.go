package stats_test

import (
	"encoding/binary"
	"math"
	"testing"

	"lotpair/qa/stats"
)

// FuzzSummarize reads the bytes as float64: whatever finite readings arrive, the
// summary is in order and has no NaN. The seeds are in testdata/fuzz.
func FuzzSummarize(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte) {
		var x []float64
		for ; len(data) >= 8; data = data[8:] {
			if v := math.Float64frombits(binary.LittleEndian.Uint64(data)); !math.IsNaN(v) && !math.IsInf(v, 0) {
				x = append(x, v)
			}
		}
		s := stats.Summarize(x)
		inOrder := s.Min <= s.Q1 && s.Q1 <= s.Median && s.Median <= s.Q3 && s.Q3 <= s.Max
		if !inOrder || !(s.Min <= s.Mean && s.Mean <= s.Max) || !(s.SD >= 0) {
			t.Fatalf("%v: got %+v, want numbers in order", x, s)
		}
		if s.Constant() && s.SD != 0 {
			t.Fatalf("%v: got sd %v of equal readings, want 0", x, s.SD)
		}
		if g, err := stats.GrubbsTest(x); err == nil && !(g.P >= 0 && g.P <= 1) {
			t.Fatalf("%v: got %+v, want P in 0..1", x, g)
		}
		if r, err := stats.Lag1(x); err == nil && !(math.Abs(r) <= 1) {
			t.Fatalf("%v: got lag-1 %v, want -1..1", x, r)
		}
		if r, err := stats.RunsTest(x); err == nil && !(r.P >= 0 && r.P <= 1) {
			t.Fatalf("%v: got %+v, want P in 0..1", x, r)
		}
	})
}
