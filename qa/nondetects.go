package qa

import "fmt"

// NonDetect is a cell that states no value but that it lies below or above one.
type NonDetect struct {
	Source     Source   `json:"source"`
	Part       string   `json:"part,omitempty"`
	Group      string   `json:"group,omitempty"`
	Limit      *float64 `json:"limit,omitempty"` // in the unit; nil where the cell states none ("BDL")
	Above      bool     `json:"above,omitempty"` // the value lies above the limit: ">100"
	Decimals   int      `json:"decimals,omitempty"`
	Substitute *float64 `json:"substitute,omitempty"` // what the plan takes it for; nil where it is not among the readings
}

// What a plan may take a non-detect for (contract: plan, non_detect).
const (
	NonDetectExclude   = "exclude"
	NonDetectLimit     = "limit"
	NonDetectHalfLimit = "half-limit"
	NonDetectZero      = "zero"
)

// SubstituteFor is the value that a plan's non_detect takes the cell for; nil where it gives none: exclude, no rule, a rule
// that needs a limit which the cell does not state, and half or zero for what lies above a limit.
func (n NonDetect) SubstituteFor(rule string) *float64 {
	v := 0.0
	switch {
	case rule == NonDetectLimit && n.Limit != nil:
		v = *n.Limit
	case rule == NonDetectHalfLimit && n.Limit != nil && !n.Above:
		v = *n.Limit / 2
	case rule == NonDetectZero && !n.Above:
	default:
		return nil
	}
	return &v
}

// end is the lowest or highest value that the cell can stand for; false where there is none: low end 0 for "<", none for ">"
// on the high side (contract: plan, "Non-detects"). A limit at or below 0 has no low end.
func (n NonDetect) end(high bool) (float64, bool) {
	switch {
	case n.Above != high && n.Limit != nil:
		return *n.Limit, true
	case !n.Above && !high:
		return 0, n.Limit == nil || *n.Limit > 0
	}
	return 0, false
}

// at is the series with every non-detect at one of its ends; false where one has no such end, or was averaged with others.
func (s Series) at(high bool) (Series, bool) {
	out := s
	out.NonDetects, out.NonDetected = 0, nil
	out.Readings = append([]Reading{}, s.Readings...)
	index := map[string]int{}
	for i, r := range out.Readings {
		index[r.Source.String()] = i
	}
	for _, n := range s.NonDetected {
		v, ok := n.end(high)
		if !ok || s.Repeats > 0 {
			return Series{}, false
		}
		if i, found := index[n.Source.String()]; found {
			out.Readings[i].Value = v
			continue
		}
		if n.Substitute != nil {
			return Series{}, false
		}
		out.Readings = append(out.Readings, Reading{Value: v, Source: n.Source, Part: n.Part, Group: n.Group, Decimals: n.Decimals})
	}
	return out, true
}

// nonDetects compares again with the non-detects at their ends: all of the reference low and all of the candidate high, and
// the reverse. Without a rule the verdict is given only where both agree; with one it stands, and an end that gives another
// is told.
func (c *comparison) nonDetects(plan Plan, ch Characteristic, ref, cand Series) {
	all := len(ref.NonDetected) + len(cand.NonDetected)
	if all == 0 && ref.NonDetects+cand.NonDetects == 0 {
		return
	}
	open := 0 // what the rule settles nothing for
	for _, n := range append(append([]NonDetect{}, ref.NonDetected...), cand.NonDetected...) {
		if n.Substitute == nil {
			open++
		}
	}
	ruled := plan.Reading.NonDetect != "" && (open == 0 || plan.Reading.NonDetect == NonDetectExclude)
	cells := Count(max(all, ref.NonDetects+cand.NonDetects), "cell", "cells")
	higher, ok1 := atEnds(plan, ch, c.known, ref, cand, false)
	lower, ok2 := atEnds(plan, ch, c.known, ref, cand, true)
	if !ok1 || !ok2 || all == 0 {
		if ruled {
			c.warn(WarnNonDetects, "", "verdict", fmt.Sprintf("%s below or above a detection limit, taken as the plan says (non_detect = %q). What the verdict would be at their bounds cannot be computed: one of them has no such bound.", cells, plan.Reading.NonDetect))
			return
		}
		c.undecided(WarnNonDetects, cells+" below or above a detection limit, one of them without a bound: what such a cell counts as is not settled, so nothing is decided. State non_detect under [reading].")
		return
	}
	best, worst := higher, lower
	if p, q := decidingP(higher), decidingP(lower); p != nil && q != nil && *q < *p {
		best, worst = lower, higher
	}
	c.Sensitivity = append(c.Sensitivity, sensitivityOf("non-detects-best", best), sensitivityOf("non-detects-worst", worst))
	ends := fmt.Sprintf("with the reference's at their low end and the candidate's at their high end it is %q (%s), the other way about %q (%s)",
		higher.Verdict, intervalText(higher), lower.Verdict, intervalText(lower))
	agree := higher.Verdict == lower.Verdict
	switch {
	case ruled && agree && higher.Verdict == c.Verdict:
		c.warn(WarnNonDetects, "", "verdict", fmt.Sprintf("%s below or above a detection limit, taken as the plan says (non_detect = %q). The verdict is the same at their bounds: %s.", cells, plan.Reading.NonDetect, ends))
	case ruled:
		c.warn(WarnNonDetects, "", "verdict", fmt.Sprintf("%s below or above a detection limit, taken as the plan says (non_detect = %q).", cells, plan.Reading.NonDetect))
		c.warn(WarnFlips, "", "verdict", fmt.Sprintf("The verdict rests on what the non-detects are taken for: %s.", ends))
	case agree && higher.Verdict != Undecided && ref.Unread+cand.Unread == 0:
		c.Verdict = higher.Verdict
		if c.Equivalence != nil && higher.Equivalence != nil {
			c.Equivalence.Verdict = higher.Equivalence.Verdict
		}
		c.warn(WarnNonDetects, "", "verdict", fmt.Sprintf("%s below or above a detection limit. The verdict holds wherever they lie: %s. The figures shown are of the readings with a value alone.", cells, ends))
	case agree:
		c.undecided(WarnNonDetects, fmt.Sprintf("%s below or above a detection limit, and nothing is decided wherever they lie: %s.", cells, ends))
	default:
		c.undecided(WarnNonDetects, fmt.Sprintf("%s below or above a detection limit, and the verdict is not the same wherever they lie: %s. State beforehand what they count as (non_detect under [reading]).", cells, ends))
	}
}

// atEnds is the comparison with the reference's non-detects at one end and the candidate's at the other.
func atEnds(plan Plan, ch Characteristic, k *known, ref, cand Series, refHigh bool) (Comparison, bool) {
	x, ok1 := ref.at(refHigh)
	y, ok2 := cand.at(!refHigh)
	if !ok1 || !ok2 {
		return Comparison{}, false
	}
	of := *k
	of.verdictOnly = true
	c, err := compareOne(plan, ch, &of, x, y)
	return c, err == nil
}

// decidingP is the p-value that the verdict rests on; nil where there is none.
func decidingP(c Comparison) *float64 {
	if c.Objective.AgainstMargin() {
		if c.Equivalence == nil {
			return nil
		}
		return c.Equivalence.P
	}
	return c.Difference.P
}

// intervalText is the interval that the verdict rests on, for a sentence.
func intervalText(c Comparison) string {
	low, high := c.Difference.Lower, c.Difference.Upper
	if c.Objective.AgainstMargin() && c.Equivalence != nil {
		low, high = c.Equivalence.Lower, c.Equivalence.Upper
	}
	if low == nil || high == nil {
		return "no interval"
	}
	return unit(shown(c, *low)+" to "+shown(c, *high), c.Unit)
}
