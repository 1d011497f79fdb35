package importers

import (
	"fmt"
	"math"
	"slices"

	"lotpair/qa"
)

// mixShare is how much the share of one group may differ between the lots before it is told. Common practice, no source.
const mixShare = 0.10

// warnMix tells where the lots are mixed of the same groups in other shares: cavities, machines or operators that differ then
// make or hide a difference between the lots. It looks at the plan's group column, else at columns whose headings name such.
func (r *reader) warnMix() {
	a, b := &r.sides[0], &r.sides[1]
	headings := []string{r.plan.Reading.GroupColumn}
	if headings[0] == "" {
		headings = nil
		for _, c := range a.table.columns {
			if headingMeans(c.heading) == groupHeading && !a.table.turned {
				headings = append(headings, c.heading)
			}
		}
	}
	for _, h := range headings {
		x, y := a.shares(h), b.shares(h)
		var groups []string
		common, most := 0, 0.0
		for g := range x {
			groups = append(groups, g)
			if y[g] > 0 {
				common++
			}
		}
		for g := range y {
			if x[g] == 0 {
				groups = append(groups, g)
			}
		}
		slices.Sort(groups)
		text := ""
		for _, g := range groups {
			most = max(most, math.Abs(x[g]/total(x)-y[g]/total(y)))
			if text != "" {
				text += "; "
			}
			text += fmt.Sprintf("%s: %g and %g", g, x[g], y[g])
		}
		if common == 0 || len(groups) < 2 || len(groups) > 50 || most <= mixShare {
			continue
		}
		r.out.Warnings = append(r.out.Warnings, qa.Warning{Code: "group-mix", Text: fmt.Sprintf(
			"the lots hold the groups of %s in other shares (rows of reference and candidate: %s): a difference between the groups then makes or hides one between the lots.", quoted(h), text)})
	}
}

func total(shares map[string]float64) float64 {
	sum := 0.0
	for _, n := range shares {
		sum += n
	}
	return sum
}

// shares counts the lot's rows of each group; nil where the table has no such column.
func (s *lotSide) shares(heading string) map[string]float64 {
	t := s.table
	col := t.group
	if found := t.named(heading); !t.turned && len(found) == 1 {
		col = found[0]
	}
	if col == 0 {
		return nil
	}
	out := map[string]float64{}
	for _, r := range s.rows {
		if g := filledText(t.cell(r, col)); g != "" {
			out[g]++
		}
	}
	return out
}
