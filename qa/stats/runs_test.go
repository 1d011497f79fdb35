package stats_test

import (
	"math/bits"
	"testing"

	"lotpair/qa/stats"
)

// TestRunsAgainstCounting holds the exact probability to counting: every order
// of a readings above and b below the median is written out.
func TestRunsAgainstCounting(t *testing.T) {
	for _, c := range []struct{ above, below int }{{1, 1}, {2, 2}, {3, 3}, {5, 5}, {6, 6}, {8, 8}} {
		n := c.above + c.below
		counts := map[int]int{}
		total := 0
		for order := range 1 << n {
			if bits.OnesCount(uint(order)) == c.above {
				counts[runsOf(order, n)]++
				total++
			}
		}
		for order := range 1 << n {
			if bits.OnesCount(uint(order)) != c.above {
				continue
			}
			x := make([]float64, n)
			for i := range x {
				x[i] = float64(order >> i & 1)
			}
			got, err := stats.RunsTest(x)
			if err != nil {
				t.Fatal(err)
			}
			if want := runsOf(order, n); got.Runs != want {
				t.Fatalf("%v: got %d runs, want %d", x, got.Runs, want)
			}
			fewer, more := 0, 0
			for r, count := range counts {
				if r <= got.Runs {
					fewer += count
				}
				if r >= got.Runs {
					more += count
				}
			}
			near(t, "p", got.P, min(1, 2*float64(min(fewer, more))/float64(total)), 1e-14)
		}
	}
}

func runsOf(order, n int) int {
	return 1 + bits.OnesCount(uint((order^order>>1)&(1<<(n-1)-1)))
}

// TestRuns: hand cases, and unequal numbers on the two sides through readings
// equal to the median, which are left out.
func TestRuns(t *testing.T) {
	long := make([]float64, 20000)
	for i := range long {
		long[i] = float64(i)
	}
	for _, c := range []struct {
		name string
		x    []float64
		want stats.Runs
	}{
		// One above, one below; the median itself left out: 2 runs, certain.
		{"three", []float64{1, 2, 3}, stats.Runs{Runs: 2, P: 1}},
		{"one side only", []float64{1, 2, 2}, stats.Runs{Runs: 1, P: 1}},
		// Two above, one below beside two 5s: 3 orders, 2 runs in two of them.
		{"unequal sides", []float64{5, 7, 1, 5, 8}, stats.Runs{Runs: 3, P: 2.0 / 3}},
		// 5 and 5 in two blocks: 2 of 252 orders have 2 runs.
		{"two blocks", []float64{1, 2, 3, 4, 5, 6, 7, 8, 9, 10}, stats.Runs{Runs: 2, P: 4.0 / 252}},
		{"long and sorted", long, stats.Runs{Runs: 2, P: 0}},
	} {
		got, err := stats.RunsTest(c.x)
		if err != nil {
			t.Fatal(err)
		}
		if got.Runs != c.want.Runs {
			t.Errorf("%s: got %d runs, want %d", c.name, got.Runs, c.want.Runs)
		}
		near(t, c.name, got.P, c.want.P, 1e-14)
	}
}
