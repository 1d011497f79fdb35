package importers

import (
	"regexp"
	"slices"

	"lotpair/qa"
)

// turnReplicates takes columns that hold repeat readings of one characteristic - Bore 1, Bore 2, Bore 3 - where the plan asks
// for Bore and no column is called so: each row is turned into as many readings of its part, which part_column averages.
func (t *table) turnReplicates() error {
	if t.turned || t.reading.PartColumn == "" || len(t.characteristics) == 0 {
		return nil
	}
	var all [][]column
	for _, ch := range t.characteristics {
		if len(t.named(ch.Heading())) > 0 {
			all = append(all, nil)
			continue
		}
		all = append(all, t.replicates(ch))
	}
	n := 0
	for i, cols := range all {
		switch {
		case len(cols) == 0 && n == 0:
		case i > 0 && len(cols) != n:
			return t.refuse("characteristic %s: found %d columns of repeat readings, want %d as of %s; compare characteristics with as many repeats in one plan", quoted(t.characteristics[i].Name), max(1, len(cols)), max(1, n), quoted(t.characteristics[0].Name))
		}
		if i == 0 {
			n = len(cols)
		}
	}
	if n < 2 {
		return nil
	}
	t.replicateRows(all, n)
	return nil
}

// repeatNumber is the heading of a column of repeat readings: Bore 1, Bore_2, Bore #3.
var repeatNumber = regexp.MustCompile(`^(.*?)[ _.#-]*(\d{1,3})$`)

// replicates are the columns called by the characteristic's heading and 1, 2, 3 …
func (t *table) replicates(ch qa.Characteristic) []column {
	want := qa.JoinSpace(ch.Heading())
	var out []column
	for _, c := range t.columns {
		if m := repeatNumber.FindStringSubmatch(c.name); m != nil && m[1] == want && m[2] == itoa(len(out)+1) {
			out = append(out, c)
		}
	}
	return out
}

// warnReplicates tells of columns that may hold repeat readings of one characteristic and are read as characteristics of their own.
func (t *table) warnReplicates() {
	var names []string
	counts := map[string]int{}
	for _, col := range t.measured {
		m := repeatNumber.FindStringSubmatch(t.column(col).name)
		if m == nil || m[1] == "" {
			continue
		}
		if counts[m[1]]++; counts[m[1]] == 2 {
			names = append(names, m[1])
		}
	}
	for _, n := range names {
		t.warn("repeat-columns", "%s are read as a characteristic each; if they are repeat readings of a part, name the characteristic %s and part_column, and they are averaged.",
			qa.Count(counts[n], "column", "columns")+" called "+quoted(n)+" and a number", quoted(n))
	}
}

// replicateRows makes a row of each repeat reading of each part.
func (t *table) replicateRows(all [][]column, n int) {
	head, _ := t.sheet.Row(t.heading)
	rows, limits, physical, summary := t.rows, t.limits, t.columns, t.summary
	lot, part, order, group, pair := t.lot, t.part, t.order, t.group, t.pair
	turns := make([]*turning, n)
	for k := range turns {
		turns[k] = &turning{cols: []int{lot, part, order, group, pair}}
		for _, cols := range all {
			turns[k].cols = append(turns[k].cols, cols[k].col)
		}
	}
	t.columns, t.rows, t.limits, t.summary, t.turned = nil, nil, map[int][]limit{}, nil, true
	t.lot, t.part, t.order, t.group = min(lot, 1)*turnedLot, turnedPart, min(order, 1)*turnedOrder, min(group, 1)*turnedGroup
	t.pair = min(pair, 1) * turnedPair
	for i, cols := range all {
		v := turnedFixed + i + 1
		name := qa.JoinSpace(t.characteristics[i].Heading())
		c := column{col: v, heading: name, name: name, unit: cols[0].unit, head: head.At(cols[0].col)}
		t.columns = append(t.columns, c)
		for _, p := range cols {
			t.limits[v] = append(t.limits[v], limits[p.col]...)
		}
		t.say("%s is read from %s of repeat readings.", quoted(name), qa.Count(n, "column", "columns"))
	}
	for _, r := range rows {
		for _, turn := range turns {
			t.rows = append(t.rows, row{at: r.at, lot: r.lot, turn: turn})
		}
	}
	for _, s := range summary {
		for _, turn := range turns {
			t.addFeet(row{at: s, turn: turn})
		}
		t.mark(s, roleSummary)
	}
	t.markTurned()
	for _, r := range t.rows {
		t.give(t.cell(r, turnedLot), roleLot)
	}
	for _, r := range rows {
		for j, c := range t.sheet.Rows[r.at].Cells {
			if t.roles[r.at][j] == roleNone && stored(c) {
				t.roles[r.at][j] = roleNoHeading
				if slices.ContainsFunc(physical, func(p column) bool { return p.col == c.Col }) {
					t.roles[r.at][j] = roleOtherColumn
				}
			}
		}
	}
}
