package stats

// Fisher returns the exact two-sided probability of the counts when both lots fail
// alike (Fisher 1934, Statistical Methods for Research Workers, 5th ed., section
// 21.02, from memory): that of all tables with the same sums that are no more
// probable. Tables as probable within 1e-7 count as equal, as in R.
func (p Proportions) Fisher() float64 {
	failed := p.ref.Failed + p.cand.Failed
	low, high := max(0, failed-p.ref.N), min(failed, p.cand.N)
	// weight(x+1)/weight(x) of x failed in the candidate's lot; walked both ways
	// from the most probable, so that no factorial appears.
	ratio := func(x int) float64 {
		return float64(p.cand.N-x) / float64(x+1) * (float64(failed-x) / float64(p.ref.N-failed+x+1))
	}
	top := int(float64(failed+1) * (float64(p.cand.N+1) / float64(p.ref.N+p.cand.N+2)))
	top = max(low, min(top, high))
	weights := make([]float64, high-low+1)
	weights[top-low] = 1
	for x := top; x < high; x++ {
		weights[x+1-low] = weights[x-low] * ratio(x)
	}
	for x := top; x > low; x-- {
		weights[x-1-low] = weights[x-low] / ratio(x-1)
	}
	seen := weights[p.cand.Failed-low] * (1 + 1e-7)
	// The small ones first from each end, so that they are not lost.
	var all, rarer float64
	for _, way := range [][2]int{{0, 1}, {len(weights) - 1, -1}} {
		for i := way[0]; i != top-low; i += way[1] {
			all += weights[i]
			if weights[i] <= seen {
				rarer += weights[i]
			}
		}
	}
	all++
	if seen >= 1 {
		rarer++
	}
	return min(1, rarer/all)
}
