package desk

import (
	"math"
	"sort"

	"lotpair/qa"
)

// Sorting is the order of the spine's lines.
type Sorting int

// The orders of the spine.
const (
	ByFile      Sorting = iota // as in the plan or the file
	ByVerdict                  // what stands in the way first
	ByCloseness                // the interval that goes farthest beyond its margin first
)

// String names the order.
func (b Sorting) String() string {
	switch b {
	case ByVerdict:
		return "verdict"
	case ByCloseness:
		return "closeness"
	}
	return "file order"
}

// Next is the order after b, round and round.
func (b Sorting) Next() Sorting { return (b + 1) % 3 }

// lines are the places of the characteristics in the order of the spine.
func (s State) lines() []int {
	cs := s.Record.Result.Characteristics
	n := len(cs)
	if s.Drafting {
		n = len(s.Record.Plan.Characteristics)
	}
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	if s.Drafting {
		return out
	}
	var key func(qa.Comparison) float64
	switch s.Sorted {
	case ByVerdict:
		key = func(c qa.Comparison) float64 { return float64(rank(c.Verdict)) }
	case ByCloseness:
		key = room
	default:
		return out
	}
	keys := make([]float64, len(cs))
	for i, c := range cs {
		keys[i] = key(c)
	}
	sort.SliceStable(out, func(a, b int) bool { return keys[out[a]] < keys[out[b]] })
	return out
}

// rank orders verdicts by how much they stand in the way.
func rank(v qa.Verdict) int {
	switch {
	case v.Refuted():
		return 0
	case v == qa.Undecided:
		return 1
	case !v.Shown():
		return 2
	}
	return 3
}

// room is how far the interval stays inside the margin, in margins: below 0 where an end lies beyond. Without an interval
// nothing is known, which comes first; without a margin there is nothing to be close to, which comes last.
func room(c qa.Comparison) float64 {
	e := c.Equivalence
	if e == nil || !c.Objective.AgainstMargin() {
		return math.Inf(1)
	}
	if e.Lower == nil || e.Upper == nil {
		return math.Inf(-1)
	}
	least, unit := math.Inf(1), 0.0
	if e.MarginLower != nil {
		least, unit = math.Min(least, *e.Lower-*e.MarginLower), math.Abs(*e.MarginLower)
	}
	if e.MarginUpper != nil {
		least, unit = math.Min(least, *e.MarginUpper-*e.Upper), math.Max(unit, math.Abs(*e.MarginUpper))
	}
	if unit == 0 {
		unit = 1
	}
	return least / unit
}

// Stepped is the characteristic that lies the given number of lines below the selected one on the spine, held at its ends.
func (s State) Stepped(by int) int {
	lines := s.lines()
	for at, i := range lines {
		if i == s.Selected {
			return lines[max(0, min(len(lines)-1, at+by))]
		}
	}
	return s.Selected
}
