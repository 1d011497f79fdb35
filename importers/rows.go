package importers

import (
	"slices"
	"strconv"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// sortRows tells the rows below the headings apart: unit row, limits, summaries, notes and rows of the lots.
func (t *table) sortRows() error {
	data := make([]row, 0, len(t.sheet.Rows))
	lot, under := "", -1 // of the rows so far; the last row that the name of a summary above it speaks of
	for i, r := range t.sheet.Rows {
		if r.Number <= t.heading || !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return filledText(c) != "" || c.Kind == cells.FormulaNoValue }) {
			continue
		}
		switch {
		case t.beyondTable(r.Number), i <= under:
			continue
		case t.comment(r), t.book.IsText && len(r.Cells) == 1 && len(r.Cells[0].Text) > 3 && ruler(r.Cells[0].Text):
			t.mark(i, roleComment)
		case t.sectionTitle(r.Number):
			t.mark(i, roleLot)
		case len(data) == 0 && r.Number == t.heading+1 && t.isUnitRow(r):
			t.takeUnits(r)
			t.mark(i, roleUnit)
		case t.repeatsHeading(r), len(data) > 0 && len(t.belowLabel(i, lot)) != 1 && t.summaryHeading(r, t.sheet.Rows[data[len(data)-1].at]):
			if !t.sameHeading(r) {
				if t.reading.HeaderRow == 0 && !t.show {
					return t.refuse("row %d: found a second table with other headings than in row %d, want one; state header_row = %d or %d under [reading], or put it on its own sheet", r.Number, t.heading, t.heading, r.Number)
				}
				t.warn("second-table", "row %d begins a table with other headings, which is not read; header_row = %d under [reading] picks it.", r.Number, r.Number)
				t.end = r.Number
				continue
			}
			if len(t.sections) == 0 {
				t.warn("second-table", "row %d repeats the headings; the rows below it are read as the same table.", r.Number)
			}
			t.mark(i, roleHeading)
		default:
			if below := t.belowLabel(i, lot); len(data) > 0 && len(below) > 0 {
				if err := t.takeBelowLabel(i, below); err != nil {
					return err
				}
				under = below[len(below)-1]
				continue
			}
			if t.lot > 0 && filledText(r.At(t.lot)) != "" {
				lot = filledText(r.At(t.lot))
			}
			data = append(data, row{at: i})
		}
	}
	data = t.takeLabelled(data)
	if err := t.fillLots(data); err != nil {
		return err
	}
	if t.layout != ColumnPerLot && t.tidy == nil {
		t.detectPart()
	}
	t.warnIDless()
	return nil
}

// isUnitRow says whether the row under the headings holds units only.
func (t *table) isUnitRow(r cells.Row) bool {
	units, labelled := 0, false
	for _, c := range r.Cells {
		text := filledText(c)
		switch {
		case c.Col == t.lot && text != "" && !missing(text) && labelWords[word(text)] != unitLabel:
			return false // lots are called A, V or N
		case text == "" || missing(text):
		case labelWords[word(text)] == unitLabel && !isUnit(text):
			labelled = true
		case c.Kind == cells.Text && isUnit(text):
			units++
		case !labelled || numeric(c) || c.Kind != cells.Text:
			return false
		default:
			units++
		}
	}
	return units > 0
}

func (t *table) takeUnits(r cells.Row) {
	for i := range t.columns {
		c := r.At(t.columns[i].col)
		text := filledText(c)
		if text == "" || missing(text) || labelWords[word(text)] == unitLabel && !isUnit(text) {
			continue
		}
		unit := unbracket(text)
		if had := t.columns[i].unit; had != "" && unitKey(had) != unitKey(unit) {
			t.warn("units-differ", "%s: the heading says %s, the unit row %s; the unit row is taken.", t.columnText(t.columns[i].col), quoted(had), quoted(unit))
		}
		t.columns[i].unit = unit
	}
	t.say("row %d holds the units.", r.Number)
}

// repeatsHeading says whether a row is a heading again: the lot column's heading stands in it, or all headings do.
func (t *table) repeatsHeading(r cells.Row) bool {
	if t.lot > 0 {
		text := filledText(r.At(t.lot))
		return text != "" && text == t.column(t.lot).heading && !slices.ContainsFunc(t.hints.lots, func(l string) bool { return qa.JoinSpace(l) == text })
	}
	return (len(t.columns) > 1 || len(t.sections) > 0) && t.sameHeading(r)
}

func (t *table) sameHeading(r cells.Row) bool {
	head, _ := t.sheet.Row(t.heading)
	for _, c := range t.columns {
		if filledText(r.At(c.col)) != filledText(head.At(c.col)) {
			return false
		}
	}
	return true
}

// fillLots gives each row its lot, and tells unlabelled foot rows and notes apart.
func (t *table) fillLots(data []row) error {
	if t.lot == 0 {
		t.rows = t.withoutNotes(t.withoutFeet(data, func(row) bool { return true }))
		return nil
	}
	direct := func(d row) string { return filledText(t.sheet.Rows[d.at].At(t.lot)) }
	data = t.withoutFeet(data, func(d row) bool { return direct(d) == "" })
	down := t.filledDown(data, direct)
	current, last := "", -1
	var lost []string
	t.rows = make([]row, 0, len(data))
	for _, d := range data {
		r := t.sheet.Rows[d.at]
		named := direct(d)
		d.lot = named
		if i, _ := slices.BinarySearch(t.summary, last); i < len(t.summary) && t.summary[i] < d.at { // a summary ends a block
			current = ""
		}
		last = d.at
		if d.lot == "" {
			if a, ok := t.mergedLot(r.Number); ok {
				d.lot = a
				t.filled++
			}
		}
		switch {
		case characteristicWords[word(named)] == requirementHeading && !t.isLot(named):
			t.mark(d.at, roleNote)
			t.warn("limits-above", "row %d says %s in the place of a lot and is not read; if it states limits, state lower, target and upper of each characteristic in the plan.", r.Number, quoted(named))
			continue
		case named != "":
			if current = d.lot; down && t.alone(r, t.lot) {
				continue // the lot's name stands in a row of its own
			}
		case d.lot == "" && down && current != "":
			d.lot = current
			t.filled++
		case d.lot == "":
			if t.note(r) || t.idle(r) {
				t.mark(d.at, roleNote)
				t.notes = append(t.notes, strconv.Itoa(r.Number))
				continue
			}
			lost = append(lost, cells.Name(t.lot, r.Number))
			continue
		}
		t.rows = append(t.rows, d)
	}
	if len(lost) > 0 {
		return t.refuse("found readings in rows without a lot's name (%s), want the name in each row; write the lot's name there, or delete what is no reading", join2(lost))
	}
	if n := len(t.notes); n > 0 {
		t.say("%s without a lot and without readings not read: %s.", qa.Count(n, "row", "rows"), join2(t.notes))
	}
	if t.filled > 0 {
		t.warn("lot-filled-down", "the lot's name stands only in the first row of its block; it is taken for %s below.", qa.Count(t.filled, "row", "rows"))
	}
	return nil
}

// filledDown says whether lots are named only where a block of rows begins: the first row names one, no two neighbouring rows
// name the same, and at least as many rows name none.
func (t *table) filledDown(data []row, lot func(row) string) bool {
	named, blank := 0, 0
	for i, d := range data {
		name := lot(d)
		if _, merged := t.mergedLot(t.sheet.Rows[d.at].Number); merged && name == "" {
			continue
		}
		switch {
		case name == "" && i == 0:
			return false
		case name == "":
			blank++
		case i > 0 && lot(data[i-1]) == name:
			return false
		default:
			named++
		}
	}
	return blank >= named && blank > 0
}

// mergedLot is the lot's name of a merged cell that covers the lot column in a row.
func (t *table) mergedLot(number int) (string, bool) {
	for _, a := range t.sheet.Merged {
		if a.FirstCol <= t.lot && t.lot <= a.LastCol && a.FirstRow < number && number <= a.LastRow && a.FirstRow > t.heading {
			name := filledText(t.sheet.At(a.FirstCol, a.FirstRow))
			return name, name != ""
		}
	}
	return "", false
}

// alone says whether a row holds something in one column only.
func (t *table) alone(r cells.Row, col int) bool {
	return !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return c.Col != col && filledText(c) != "" })
}

// note says whether a row without a lot holds words only.
func (t *table) note(r cells.Row) bool {
	return !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool {
		return c.Kind != cells.Blank && (c.Kind != cells.Text || numeric(c))
	})
}

// idle says whether a row without a lot holds nothing but a part's id or an order: a form's row that was not used.
func (t *table) idle(r cells.Row) bool {
	return !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool {
		if filledText(c) == "" && c.Kind != cells.FormulaNoValue {
			return false
		}
		means := headingMeans(t.column(c.Col).heading)
		return c.Col != t.part && c.Col != t.order && means != partHeading && means != orderHeading
	})
}

// withoutNotes takes the words off the end of a sheet that is one lot.
func (t *table) withoutNotes(data []row) []row {
	for len(t.columns) > 1 && len(data) > 0 {
		at := data[len(data)-1].at
		if r := t.sheet.Rows[at]; len(r.Cells) == 0 || !t.note(r) || !t.alone(r, r.Cells[0].Col) || missing(r.Cells[0].Text) {
			break
		}
		t.mark(at, roleNote)
		t.say("row %d is taken as a note.", t.sheet.Rows[at].Number)
		data = data[:len(data)-1]
	}
	return data
}

// withoutFeet takes unlabelled foot rows out: rows without a part that hold formulas where the row above holds none.
func (t *table) withoutFeet(data []row, may func(row) bool) []row {
	var rest []row // nil as long as it is all of the rows so far
	feet := []string{}
	foot := false // the row above is one
	for i, d := range data {
		r := t.sheet.Rows[d.at]
		formulas, other := 0, 0
		for _, c := range r.Cells {
			if filledText(c) == "" && c.Kind != cells.FormulaNoValue {
				continue
			}
			if c.Formula && (foot || i > 0 && !t.sheet.Rows[data[i-1].at].At(c.Col).Formula) {
				formulas++
			} else {
				other++
			}
		}
		if foot = may(d) && i > 0 && formulas > 0 && other == 0; foot {
			if len(feet) == 0 {
				rest = slices.Clone(data[:i])
			}
			t.summary = append(t.summary, d.at)
			feet = append(feet, strconv.Itoa(r.Number))
			continue
		}
		if len(feet) > 0 {
			rest = append(rest, d)
		}
	}
	slices.Sort(t.summary)
	if len(feet) == 0 {
		rest = data
	} else {
		t.say("%s of formulas without a label not taken as readings: %s.", qa.Count(len(feet), "row", "rows"), join2(feet))
	}
	return rest
}
