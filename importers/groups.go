package importers

import (
	"fmt"
	"math"
	"slices"

	"lotpair/importers/cells"
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
		if g := filledText(t.merged(r, col)); g != "" {
			out[g]++
		}
	}
	return out
}

// merged is a cell of a column of names; where it lies in cells merged down, the first of them.
func (t *table) merged(r row, col int) cells.Cell {
	c := t.cell(r, col)
	if filledText(c) != "" || c.Row == 0 {
		return c
	}
	for _, a := range t.sheet.Merged {
		if a.FirstCol == c.Col && a.LastCol == c.Col && a.FirstRow < c.Row && c.Row <= a.LastRow {
			return t.sheet.At(a.FirstCol, a.FirstRow)
		}
	}
	return c
}

// checkNames refuses readings without a group or pair where the plan names a column for them.
func (r *reader) checkNames() error {
	var faults []Fault
	for _, s := range r.sides {
		for _, p := range []struct {
			key, what string
			col       int
			of        func(qa.Reading) string
		}{
			{"reading.group_column", "group", s.table.group, func(x qa.Reading) string { return x.Group }},
			{"reading.pair_column", "pair", s.table.pair, func(x qa.Reading) string { return x.Pair }},
		} {
			var at []string
			for _, series := range s.lot.Series {
				for _, x := range series.Readings {
					if p.col > 0 && x.Used() && p.of(x) == "" {
						at = append(at, x.Source.Place())
					}
				}
			}
			if len(at) > 0 {
				faults = append(faults, Fault{Place: s.table.place(), Text: fmt.Sprintf("%s: found readings without a %s (%s), want one in each row; write it there, or name the cells under exclude with a reason", p.key, p.what, join2(at))})
			}
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}
