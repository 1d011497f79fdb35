package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// section is one of several tables below each other with the same headings, under the name of its lot.
type section struct {
	title   cells.Cell
	lot     string
	heading int // row number
}

// titles says whether all the lots looked for are named in rows of their own, each above a row of headings.
func (t *table) titles() bool {
	if len(t.hints.lots) < 2 {
		return false
	}
	rows := map[int]bool{}
	for _, l := range t.hints.lots {
		at := slices.IndexFunc(t.sheet.Rows, func(r cells.Row) bool {
			_, name := title(r)
			return name == qa.JoinSpace(l)
		})
		if at < 0 {
			return false
		}
		next := t.nextFilled(at)
		if next < 0 || t.headingScore(next) == 0 {
			return false
		}
		rows[at] = true
	}
	return len(rows) == len(t.hints.lots)
}

// title is the name that a row of one or two cells gives what stands below: "REF-0417", "Lot: REF-0417" or "Lot", "REF-0417".
func title(r cells.Row) (cells.Cell, string) {
	var filled [2]cells.Cell
	n := 0
	for _, c := range r.Cells {
		if filledText(c) == "" {
			continue
		}
		if n == 2 {
			return cells.Cell{}, ""
		}
		filled[n] = c
		n++
	}
	if n == 0 || n == 2 && headingMeans(filled[0].Text) != lotHeading {
		return cells.Cell{}, ""
	}
	c := filled[n-1]
	name := filledText(c)
	if before, after, ok := strings.Cut(name, ":"); ok && headingMeans(before) == lotHeading {
		name = joined(after)
	}
	return c, name
}

// findSections finds tables with the same headings below each other, each under the name of its lot: two or more, among them
// all the lots looked for.
func (t *table) findSections() bool {
	var all []section
	for i, r := range t.sheet.Rows {
		if r.Number < t.heading || !t.sameHeading(r) {
			continue
		}
		above := -1
		for j := i - 1; j >= 0 && above < 0; j-- {
			if slices.ContainsFunc(t.sheet.Rows[j].Cells, func(c cells.Cell) bool { return filledText(c) != "" }) {
				above = j
			}
		}
		if above < 0 {
			return false
		}
		c, name := title(t.sheet.Rows[above])
		if name == "" || c.Kind != cells.Text && !t.isLot(name) {
			return false
		}
		all = append(all, section{title: c, lot: name, heading: r.Number})
	}
	named := func(l string) bool {
		return slices.ContainsFunc(all, func(s section) bool { return s.lot == qa.JoinSpace(l) })
	}
	if len(all) < 2 || slices.ContainsFunc(t.hints.lots, func(l string) bool { return !named(l) }) {
		return false
	}
	t.sections = all
	t.say("%s below each other, each under the name of its lot.", qa.Count(len(all), "table stands", "tables stand"))
	return true
}

// sectionTitle says whether a row names the lot of a section.
func (t *table) sectionTitle(number int) bool {
	return slices.ContainsFunc(t.sections, func(s section) bool { return s.title.Row == number })
}

// beyondTable says whether a row belongs to another table.
func (t *table) beyondTable(number int) bool { return t.end > 0 && number >= t.end }

// turnSections gives the rows of sections the lot that is named above them.
func (t *table) turnSections() error {
	if len(t.sections) == 0 {
		return nil
	}
	physical, rows, summary := t.columns, t.rows, t.summary
	part, order, group, pair := t.part, t.order, t.group, t.pair
	for _, c := range physical {
		if t.limits[c.col] != nil {
			return t.refuse("found limits in tables below each other, want them in one place; state the limits in the plan and take them out of the sheet, or bring the tables into one")
		}
	}
	t.columns, t.rows, t.summary, t.turned, t.lot = nil, nil, nil, true, turnedLot
	t.part, t.order, t.group = min(part, 1)*turnedPart, min(order, 1)*turnedOrder, min(group, 1)*turnedGroup
	t.pair = min(pair, 1) * turnedPair
	for _, p := range physical {
		if p.col == part || p.col == order || p.col == group || p.col == pair || headingMeans(p.heading) == orderHeading {
			continue
		}
		head, _ := t.sheet.Row(t.heading)
		p.head, p.col = head.At(p.col), turnedFixed+len(t.columns)+1
		t.columns = append(t.columns, p)
	}
	turns := make([]*turning, len(t.sections))
	for i, s := range t.sections {
		turns[i] = &turning{lot: s.title, cols: []int{0, part, order, group, pair}}
		for _, c := range t.columns {
			turns[i].cols = append(turns[i].cols, c.head.Col)
		}
	}
	turn := func(at int) row { // under the last heading above it
		i := len(t.sections) - 1
		for i > 0 && t.sections[i].heading >= t.sheet.Rows[at].Number {
			i--
		}
		return row{at: at, lot: t.sections[i].lot, turn: turns[i]}
	}
	for _, r := range rows {
		t.rows = append(t.rows, turn(r.at))
	}
	for _, at := range summary {
		t.addFeet(turn(at))
		t.mark(at, roleSummary)
	}
	t.markTurned()
	for _, r := range rows {
		t.mark(r.at, roleOtherColumn)
	}
	return nil
}
