package qa

import "lotpair/qa/stats"

// RanksResult judges the lots by the order of their readings alone: Mann and Whitney's U (candidate above reference, ties one
// half) or, paired, Wilcoxon's V, with the Hodges–Lehmann shift and its interval of level 1 - 2 alpha.
type RanksResult struct {
	U     *float64 `json:"u,omitempty"`
	V     *float64 `json:"v,omitempty"`
	P     float64  `json:"p"` // two-sided
	Exact bool     `json:"exact"`
	Shift float64  `json:"shift"`
	Level float64  `json:"level"`
	Lower *float64 `json:"lower"` // nil where the lots are too small for the level
	Upper *float64 `json:"upper"`
}

// ranks fills the block; with lots that are constant or too small there is none.
func (c *comparison) ranks() {
	level := 1 - 2*c.Alpha
	var out RanksResult
	var in stats.Interval
	if c.Method == "paired" {
		r, err := stats.WilcoxonSignedRank(c.pairDifferences(), level, written(c.ref, c.cand))
		if err != nil || !finite(r.V, r.P, r.Shift) {
			return
		}
		out, in = RanksResult{V: ptr(r.V), P: r.P, Exact: r.Exact, Shift: r.Shift, Level: level}, r.Interval
	} else {
		r, err := stats.MannWhitney(c.ref.sorted, c.cand.sorted, level, written(c.ref, c.cand), &c.known.ranks)
		if err != nil || !finite(r.U, r.P, r.Shift) {
			return
		}
		out, in = RanksResult{U: ptr(r.U), P: r.P, Exact: r.Exact, Shift: r.Shift, Level: level}, r.Interval
	}
	if out.P < smallestP {
		out.P = *c.pValue(out.P, "ranks.p")
	}
	if finite(in.Lower) {
		out.Lower = ptr(in.Lower)
	}
	if finite(in.Upper) {
		out.Upper = ptr(in.Upper)
	}
	c.Ranks = &out
}
