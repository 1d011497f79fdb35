package importers

import (
	"slices"

	"lotpair/importers/cells"
)

// spanHeadings finds headings of two rows: a heading over several columns with one heading for each of them below it. The row
// found may be either of them.
func (t *table) spanHeadings() {
	at := slices.IndexFunc(t.sheet.Rows, func(r cells.Row) bool { return r.Number == t.heading })
	t.headingTop = t.heading
	if next := at + 1; next < len(t.sheet.Rows) && t.sheet.Rows[next].Number == t.heading+1 && t.splits(at, next) {
		t.heading = t.sheet.Rows[next].Number
		return
	}
	if at > 0 && t.sheet.Rows[at-1].Number == t.heading-1 && !t.comment(t.sheet.Rows[at-1]) && t.splits(at-1, at) {
		t.headingTop = t.sheet.Rows[at-1].Number
	}
}

// splits says whether a heading in one row spans columns that have their own headings in the next: merged over some columns
// but not all of the table; in a text file, a heading with none beside it. Every column has a heading in one of the two rows.
func (t *table) splits(top, sub int) bool {
	upper, lower := t.sheet.Rows[top], t.sheet.Rows[sub]
	if t.isUnitRow(lower) {
		return false
	}
	spans := t.spans(upper, lower)
	if len(spans) == 0 {
		return false
	}
	covered := 0
	for _, s := range spans {
		for col := s.FirstCol; col <= s.LastCol; col++ {
			c := lower.At(col)
			if filledText(c) == "" || missing(c.Text) || numeric(c) && !t.countsAcross(lower, s.FirstCol, s.LastCol) || c.Kind != cells.Text && c.Kind != cells.Number {
				return false
			}
			covered++
		}
	}
	outside := false // a heading beside the spans: a title over the whole table is none
	for _, c := range append(slices.Clone(upper.Cells), lower.Cells...) {
		if filledText(c) == "" || slices.ContainsFunc(spans, func(a cells.Area) bool { return a.FirstCol <= c.Col && c.Col <= a.LastCol }) {
			continue
		}
		if outside = true; numeric(c) || c.Kind != cells.Text {
			return false
		}
	}
	return covered > 1 && (outside || len(spans) > 1)
}

// spans are the headings of a row that reach over several columns.
func (t *table) spans(upper, lower cells.Row) []cells.Area {
	var out []cells.Area
	for i, c := range upper.Cells {
		if filledText(c) == "" {
			continue
		}
		if a, ok := t.mergedAt(c); ok {
			if a.LastRow == a.FirstRow {
				out = append(out, a)
			}
			continue
		}
		if !t.book.IsText {
			continue
		}
		next := t.lastColumn() + 1
		for _, x := range upper.Cells[i+1:] {
			if filledText(x) != "" {
				next = x.Col
				break
			}
		}
		a := cells.Area{FirstCol: c.Col, LastCol: c.Col, FirstRow: c.Row, LastRow: c.Row}
		for a.LastCol+1 < next && filledText(lower.At(a.LastCol+1)) != "" {
			a.LastCol++
		}
		if a.LastCol > a.FirstCol && filledText(lower.At(a.FirstCol)) != "" {
			out = append(out, a)
		}
	}
	return out
}

// headingsOf are the columns with their headings: of two rows, the upper and the lower text together.
func (t *table) headingsOf(r cells.Row) []column {
	var upper cells.Row
	var spans []cells.Area
	if t.headingTop > 0 && t.headingTop < t.heading && t.layout != ColumnPerLot {
		upper, _ = t.sheet.Row(t.headingTop)
		spans = t.spans(upper, r)
	}
	var out []column
	for col := 1; col <= t.headingsEnd(upper, r); col++ {
		h := filledText(r.At(col))
		above := filledText(upper.At(col))
		for _, s := range spans {
			if s.FirstCol <= col && col <= s.LastCol {
				above = filledText(upper.At(s.FirstCol))
			}
		}
		if h == "" && t.layout == ColumnPerLot && !slices.ContainsFunc(t.blocks, func(b block) bool { return b.first <= col && col <= b.last }) {
			beside, _ := t.sheet.Row(t.headingTop) // a column beside the lots has its heading in the row of their names
			above = filledText(beside.At(col))
		}
		switch {
		case h == "":
			h = above
		case above != "":
			h = above + " " + h
		}
		if h != "" {
			name, unit := splitUnit(h)
			out = append(out, column{col: col, heading: h, name: name, unit: unit})
		}
	}
	return out
}

// headingsEnd is the last column with a heading.
func (t *table) headingsEnd(rows ...cells.Row) int {
	last := 0
	for _, r := range rows {
		if n := len(r.Cells); n > 0 {
			last = max(last, r.Cells[n-1].Col)
		}
	}
	return last
}
