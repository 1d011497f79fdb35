package importers

import (
	"slices"

	"lotpair/importers/cells"
)

// choosePanel keeps one of several tables side by side with a blank column between them, each with its own column of lots:
// the only one that holds the lots looked for and has the characteristics of the plan. The others are not in the table.
func (t *table) choosePanel() error {
	at := slices.IndexFunc(t.sheet.Rows, func(r cells.Row) bool { return r.Number == t.heading })
	all := t.panels()
	withLots := slices.DeleteFunc(slices.Clone(all), func(a cells.Area) bool {
		return !slices.ContainsFunc(t.sheet.Rows[at].Cells, func(c cells.Cell) bool {
			return a.FirstCol <= c.Col && c.Col <= a.LastCol && headingMeans(c.Text) == lotHeading
		})
	})
	if len(withLots) < 2 || len(withLots) < len(all) {
		t.spanHeadings()
		return nil
	}
	fit := slices.DeleteFunc(slices.Clone(withLots), func(a cells.Area) bool { return !t.fits(at, a) })
	var texts []string
	for _, a := range withLots {
		texts = append(texts, cells.Letters(a.FirstCol)+" to "+cells.Letters(a.LastCol))
	}
	if t.show {
		fit = withLots[:1]
	}
	if len(fit) != 1 {
		t.torn = len(fit) == 0
		return t.refuse("found tables side by side in the columns %s, %d of which hold the lots and characteristics asked for, want one; name a characteristic that one of them alone has, or put each table on its own sheet", join2(texts), len(fit))
	}
	keep := fit[0]
	why := "alone holds the lots and characteristics asked for and is read"
	if t.show {
		why = "is shown; a plan takes the one that holds its lots and characteristics"
	}
	t.warn("second-table", "tables stand side by side in the columns %s; the one in %s to %s %s.", join2(texts), cells.Letters(keep.FirstCol), cells.Letters(keep.LastCol), why)
	t.keepColumns(keep)
	t.spanHeadings()
	return nil
}

// panels are the runs of columns from the headings down with no blank column in them.
func (t *table) panels() []cells.Area {
	seen := map[int]bool{}
	for _, r := range t.sheet.Rows {
		if r.Number < t.heading {
			continue
		}
		for _, c := range r.Cells {
			if filledText(c) != "" || c.Kind == cells.FormulaNoValue {
				seen[c.Col] = true
			}
		}
	}
	cols := make([]int, 0, len(seen))
	for c := range seen {
		cols = append(cols, c)
	}
	slices.Sort(cols)
	var out []cells.Area
	for _, c := range cols {
		if n := len(out); n > 0 && out[n-1].LastCol == c-1 {
			out[n-1].LastCol = c
			continue
		}
		out = append(out, cells.Area{FirstCol: c, LastCol: c})
	}
	return out
}

// fits says whether a table has the characteristics of the plan and holds the lots looked for.
func (t *table) fits(at int, a cells.Area) bool {
	within := func(c cells.Cell) bool { return a.FirstCol <= c.Col && c.Col <= a.LastCol }
	for _, ch := range t.characteristics {
		want := joined(ch.Heading())
		if !slices.ContainsFunc(t.sheet.Rows[at].Cells, func(c cells.Cell) bool {
			name, _ := splitUnit(filledText(c))
			return within(c) && (name == want || filledText(c) == want)
		}) {
			return false
		}
	}
	missing := map[string]bool{}
	for _, l := range t.hints.lots {
		missing[joined(l)] = true
	}
	for _, r := range t.sheet.Rows[at+1:] {
		for _, c := range r.Cells {
			if len(missing) > 0 && within(c) {
				delete(missing, filledText(c))
			}
		}
	}
	return len(missing) == 0
}

// keepColumns leaves the cells of other columns out of the sheet as it is read; they are counted as not in the table.
func (t *table) keepColumns(keep cells.Area) {
	rows := slices.Clone(t.sheet.Rows)
	for i, r := range rows {
		var kept []cells.Cell
		for _, c := range r.Cells {
			if keep.FirstCol <= c.Col && c.Col <= keep.LastCol {
				kept = append(kept, c)
			} else if stored(c) {
				t.cut++
			}
		}
		rows[i].Cells = kept
		t.roles[i] = make([]role, len(kept))
	}
	t.sheet.Rows, t.keep = rows, keep
}

// tornError says that several tables stand side by side and each holds some of the lots.
type tornError struct{ error }

func torn(err error) bool {
	_, ok := err.(*tornError)
	return ok
}

// chooseTorn takes each lot from its own one of several tables side by side on one sheet.
func (r *reader) chooseTorn(sheet cells.Sheet, h hints) error {
	for i := range r.sides {
		s := &r.sides[i]
		if h.lots = nil; s.plan.Lot != "" {
			h.lots = []string{s.plan.Lot}
		}
		t, err := newTable(r.books[s.plan.File], sheet, h)
		if err != nil {
			return faultsError(err)
		}
		s.table = t
		r.tables = append(r.tables, t)
	}
	a, b := r.tables[0], r.tables[1]
	if a.keep == b.keep {
		return a.refuse("found both lots in the columns %s to %s, want one table; state lot_column under [reading]", cells.Letters(a.keep.FirstCol), cells.Letters(a.keep.LastCol))
	}
	for _, row := range b.sheet.Rows { // each cell of the sheet is counted once
		for _, c := range row.Cells {
			if stored(c) {
				a.cut--
			}
		}
	}
	b.cut = 0
	return nil
}

// faultsError is an error without the mark of a torn sheet.
func faultsError(err error) error {
	if e, ok := err.(*tornError); ok {
		return e.error
	}
	return err
}
