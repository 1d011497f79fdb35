package importers

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"

	"lotpair/importers/cells"
)

// detectPart finds the column of part ids that the plan does not name: by its heading, one without repeats first, else a
// column of whole numbers that count up by one within each lot.
func (t *table) detectPart() {
	if t.part > 0 {
		return
	}
	var worded []int
	for _, c := range t.columns {
		if c.col != t.lot && c.col != t.order && c.col != t.group && headingMeans(c.heading) == partHeading && !t.planned(c) && !t.constant(c.col) && t.fills(c.col) {
			worded = append(worded, c.col)
		}
	}
	for _, col := range worded {
		if !t.repeats(col) {
			t.part = col
			break
		}
	}
	if t.part == 0 && len(worded) > 0 {
		t.part = worded[0]
	}
	for _, c := range t.columns {
		if t.part > 0 {
			break
		}
		if c.col != t.lot && c.col != t.order && c.col != t.group && !t.planned(c) && t.counts(c.col) {
			t.part = c.col
		}
	}
	if t.part > 0 {
		t.say("the parts' ids stand in %s.", t.columnText(t.part))
	}
}

// planned says whether the plan takes the column as a characteristic.
func (t *table) planned(c column) bool {
	for _, ch := range t.characteristics {
		if slices.Contains(t.named(ch.Heading()), c.col) {
			return true
		}
	}
	return false
}

// wanted are the rows of the lots looked for; all where none is named.
func (t *table) wanted() []row {
	if t.lot == 0 || len(t.hints.lots) == 0 {
		return t.rows
	}
	if t.wantedRows == nil {
		t.wantedRows = someRows(t.rows, func(lot string) bool {
			return slices.ContainsFunc(t.hints.lots, func(l string) bool { return sameName(l, lot) })
		})
	}
	return t.wantedRows
}

// someRows are the rows of some lots, in place where they follow each other: a tall sheet has millions.
func someRows(rows []row, of func(lot string) bool) []row {
	first, last, n := 0, -1, 0
	known, is := "", of("") // of the row before
	for i, r := range rows {
		if r.lot != known {
			known, is = r.lot, of(r.lot)
		}
		if is {
			if n++; n == 1 {
				first = i
			}
			last = i
		}
	}
	if last+1-first == n {
		return rows[first : last+1 : last+1]
	}
	out := make([]row, 0, n)
	for _, r := range rows {
		if r.lot != known {
			known, is = r.lot, of(r.lot)
		}
		if is {
			out = append(out, r)
		}
	}
	return out
}

func (t *table) cell(r row, col int) cells.Cell {
	if r.turn != nil {
		return r.turn.cell(t.sheet.Rows[r.at], col)
	}
	if t.turned {
		return r.cells[col-1]
	}
	return t.sheet.Rows[r.at].At(col)
}

// constant says whether a column says the same in every row: a part number, not an id.
func (t *table) constant(col int) bool {
	rows := t.wanted()
	for _, r := range rows {
		if filledText(t.cell(r, col)) != filledText(t.cell(rows[0], col)) {
			return false
		}
	}
	return len(rows) > 1
}

func (t *table) fills(col int) bool {
	return slices.ContainsFunc(t.wanted(), func(r row) bool { return filledText(t.cell(r, col)) != "" })
}

// repeats says whether an id stands twice in one lot.
func (t *table) repeats(col int) bool {
	seen := map[[3]string]bool{}
	for _, r := range t.wanted() {
		id := [3]string{r.lot, t.groupOf(r), filledText(t.cell(r, col))}
		if id[2] == "" {
			continue
		}
		if seen[id] {
			return true
		}
		seen[id] = true
	}
	return false
}

// groupOf is the group of a row; empty without a group column.
func (t *table) groupOf(r row) string {
	if t.group == 0 {
		return ""
	}
	return filledText(t.merged(r, t.group))
}

// counts says whether a column holds whole numbers that count up by one within each lot and group, three rows or more, at least two of
// them in one lot.
func (t *table) counts(col int) bool {
	last := map[[2]string]int{}
	rows := t.wanted()
	if len(rows) < 3 {
		return false
	}
	steps := 0
	for _, r := range rows {
		c := t.cell(r, col)
		if c.Kind != cells.Number && c.Kind != cells.Text {
			return false
		}
		n, err := strconv.Atoi(trimmed(c.Text))
		if err != nil {
			return false
		}
		in := [2]string{r.lot, t.groupOf(r)}
		if before, ok := last[in]; ok {
			if n != before+1 {
				return false
			}
			steps++
		}
		last[in] = n
	}
	return steps > 0
}

// findMeasured takes the columns of measurements: those of the plan, else every column that holds numbers and plays no other
// part. What is not taken is said.
func (t *table) findMeasured() error {
	if t.tidy != nil && len(t.characteristics) == 0 {
		return t.measureTurned()
	}
	if len(t.characteristics) > 0 {
		var faults []Fault
		for _, ch := range t.characteristics {
			col, err := t.only("characteristic "+quoted(ch.Name), ch.Heading())
			if err != nil {
				faults = append(faults, faultsOf(err)...)
				continue
			}
			if col == t.lot || col == t.group || col == t.pair || col == t.part && t.reading.PartColumn != "" || slices.Contains(t.measured, col) {
				faults = append(faults, Fault{Place: t.place(), Text: "characteristic " + quoted(ch.Name) + ": found " + t.columnText(col) +
					", which plays another part already, want a column of its own; correct the plan"})
			}
			t.measured = append(t.measured, col)
		}
		if len(faults) > 0 {
			return &PlanError{Faults: faults}
		}
		return nil
	}
	if err := t.countsOfParts(); err != nil {
		return err
	}
	var numbered []column // whose heading is a number
	counts := t.contents()
	for i, c := range t.columns {
		if t.playsPart(c.col) {
			continue
		}
		numbers, dates, filled := counts[i].numbers, counts[i].dates, counts[i].filled
		why := ""
		switch {
		case filled == 0:
			why = "it is empty"
		case isNumber(c.heading):
			numbered = append(numbered, c)
			continue
		case headingMeans(c.heading) == orderHeading || 2*dates > filled:
			why = "it holds dates or an order"
		case headingMeans(c.heading) == partHeading:
			why = "it holds part numbers or ids"
		case limitHeading(c.heading):
			why = "it holds limits or nominal values; state them in the plan"
		case t.groupsLots(c.col) > 1:
			why = fmt.Sprintf("it names %d groups of lots; to compare those, name it as lot_column and the column of lots as group_column, with claim = \"sources\" where the sources are meant and not these lots alone", t.groupsLots(c.col))
		case headingMeans(c.heading) == groupHeading:
			why = "it holds groups; name it as group_column to keep them"
		case headingMeans(c.heading) == takerHeading:
			why = "it says who or what measured"
		case t.counts(c.col):
			why = "it counts up by one"
		case 2*numbers < filled:
			why = "most of it is no number"
		default:
			t.measured = append(t.measured, c.col)
			continue
		}
		t.say("%s is not taken as a measurement: %s.", t.columnText(c.col), why)
	}
	t.measureNumbered(numbered)
	t.warnReplicates()
	if all := t.foundLots(); len(t.measured) == 0 && len(t.wanted()) == 0 && len(all) > 0 {
		return t.refuse("found the lots %s, want %s; correct the lots' names in the plan%s", list(names(all)), list(t.hints.lots), datedLots(all))
	}
	if len(t.measured) == 0 {
		return t.refuse("found no column of measurements, want at least one; name it under [[characteristic]] in the plan, with kind = \"attribute\" and failed where it holds words such as OK and NOK")
	}
	return nil
}

// measureNumbered takes columns under whole numbers as measurements where no other is one. Else a number is no heading: it is
// the first of numbers beside the table.
func (t *table) measureNumbered(numbered []column) {
	whole := !slices.ContainsFunc(numbered, func(c column) bool { return !wholeHeading.MatchString(c.heading) })
	for _, c := range numbered {
		if whole && (len(t.measured) == 0 || wholeHeading.MatchString(t.column(t.measured[0]).heading)) {
			t.measured = append(t.measured, c.col)
			continue
		}
		t.warn("number-as-heading", "%s is not taken as a measurement: a number is no heading, and what stands under it may be a summary; name the column under [[characteristic]] to take it.", t.columnText(c.col))
	}
}

// wholeHeading is a whole number as a heading.
var wholeHeading = regexp.MustCompile(`^\d{1,4}$`)

// playsPart says whether a column names the lots, parts, order, groups or pairs.
func (t *table) playsPart(col int) bool {
	return col == t.lot || col == t.part || col == t.order || col == t.group || col == t.pair
}

// holding counts what a column holds in the rows that are wanted.
type holding struct{ numbers, dates, filled int }

// contents are those of the columns, gone through row by row as they lie in memory.
func (t *table) contents() []holding {
	counts := make([]holding, len(t.columns))
	for _, r := range t.wanted() {
		for i, c := range t.columns {
			if t.playsPart(c.col) {
				continue
			}
			switch cell := t.cell(r, c.col); {
			case cell.Kind == cells.Blank || cell.Kind == cells.Text && missing(cell.Text):
			case cell.Kind == cells.Date:
				counts[i].dates++
				counts[i].filled++
			case numeric(cell):
				counts[i].numbers++
				counts[i].filled++
			default:
				counts[i].filled++
			}
		}
	}
	return counts
}

// holdsText says whether a column holds a text in the rows that are wanted.
func (t *table) holdsText(col int) bool {
	if t.turned {
		return true // by its own columns, which are few
	}
	if t.textual == nil {
		t.textual = map[int]bool{}
		for _, r := range t.wanted() {
			for _, c := range t.sheet.Rows[r.at].Cells {
				if c.Kind == cells.Text && !t.textual[c.Col] {
					t.textual[c.Col] = true
				}
			}
		}
	}
	return t.textual[col]
}

// groupsLots is how many groups of lots a column of groups names: each lot lies in one of them, and one holds several; 0 where it does not.
func (t *table) groupsLots(col int) int {
	if t.lot == 0 || t.turned || headingMeans(t.column(col).heading) != groupHeading {
		return 0
	}
	of, groups := map[string]string{}, map[string]bool{}
	for _, r := range t.rows {
		g := filledText(t.merged(r, col))
		if had, ok := of[r.lot]; g == "" || ok && had != g {
			return 0
		}
		of[r.lot], groups[g] = g, true
	}
	if len(groups) == len(of) {
		return 0
	}
	return len(groups)
}

// limitHeading says whether a heading names a nominal value, a limit or a tolerance.
func limitHeading(heading string) bool {
	return isLimit(labelWords[word(heading)])
}

// faultsOf are the faults of an error of this package.
func faultsOf(err error) []Fault {
	switch e := err.(type) {
	case *PlanError:
		return e.Faults
	case *FileError:
		return e.Faults
	}
	return []Fault{{Text: err.Error()}}
}
