package main

import (
	"fmt"
	"slices"

	"lotpair/qa/stats"
)

// shifts is Mann–Whitney's p, the Hodges–Lehmann estimate and its interval.
func shifts(n int) func() {
	ref, cand := drawn(1, n, 12, 15), drawn(2, n, 12.001, 15)
	return func() { kept += must(stats.MannWhitney(ref, cand, 0.90, 15, nil)).Shift }
}

func twoSorts(n int) func() {
	ref, cand := drawn(1, n, 12, 15), drawn(2, n, 12.001, 15)
	return func() {
		slices.Sort(slices.Clone(ref))
		slices.Sort(slices.Clone(cand))
	}
}

// allDifferences sorts every difference: what the estimate is by definition.
func allDifferences(n int) func() {
	ref, cand := drawn(1, n, 12, 15), drawn(2, n, 12.001, 15)
	return func() {
		all := make([]float64, 0, n*n)
		for _, y := range cand {
			for _, x := range ref {
				all = append(all, y-x)
			}
		}
		slices.Sort(all)
		kept += all[len(all)/2]
	}
}

func shiftsRow(n int, g goal) benchRow {
	return benchRow{name: fmt.Sprintf("Mann–Whitney and Hodges–Lehmann, 2 x %s", grouped(n)), build: func() work {
		w := work{goal: g, ours: shifts(n), floor: rival{"two sorts", twoSorts(n)}}
		if n <= 2000 {
			w.peers = []rival{{"Go, plain loop", allDifferences(n)}}
		}
		return w
	}}
}

// exactU counts U out, p and interval with it. Drawn with 15 decimals no two readings are equal.
func exactU(n int) func() {
	ref, cand := drawn(1, n, 12, 15), drawn(2, n, 12.001, 15)
	return func() {
		r := must(stats.MannWhitney(ref, cand, 0.90, 15, nil))
		if !r.Exact {
			panic("bench: exact U: got a normal p, want it counted out")
		}
		kept += r.P
	}
}

func exactRow(n int, g goal) benchRow {
	return benchRow{
		name:  fmt.Sprintf("exact U, 2 x %d without ties", n),
		build: func() work { return work{goal: g, ours: exactU(n)} },
	}
}

var rankRows = withGrowth([]benchRow{
	shiftsRow(2000, goal{}), shiftsRow(20_000, goal{seconds: 0.035}), shiftsRow(1_000_000, goal{seconds: 1.5}),
	exactRow(100, goal{}), exactRow(200, goal{seconds: 0.010}), exactRow(300, goal{seconds: 0.040}),
}, map[int]*growth{
	1: {sizes: []int{1000, 10_000, 100_000, 1_000_000}, of: "readings a lot", build: shifts},
	5: {sizes: []int{30, 100, 300}, of: "readings a lot", build: exactU},
})

// withGrowth gives the rows at those places a growth.
func withGrowth(rows []benchRow, of map[int]*growth) []benchRow {
	for i, g := range of {
		rows[i].growth = g
	}
	return rows
}
