package importers

import (
	"strconv"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// warnIDless warns of rows of readings without a part's id where most rows have one: a mean under a block looks so.
func (t *table) warnIDless() {
	part := t.part
	for _, c := range t.columns {
		if part == 0 && t.layout == ColumnPerLot && headingMeans(c.heading) == partHeading {
			part = c.col
		}
	}
	if part == 0 || t.tidy != nil {
		return
	}
	rows := t.wanted()
	t.wantedRows = nil // the sheet may yet be turned
	var without []string
	for _, r := range rows {
		if c := t.merged(r, part); filledText(c) == "" && c.Kind != cells.FormulaNoValue && t.holdsNumber(r) {
			without = append(without, strconv.Itoa(t.sheet.Rows[r.at].Number))
		}
		if 3*len(without) > len(rows) {
			return
		}
	}
	if len(without) > 0 {
		t.warn("rows-without-id", "%s of numbers without a part's id in %s where the others have one: %s. They are used as readings; if they are means or other summaries, name their cells under exclude with a reason.",
			qa.Count(len(without), "row", "rows"), t.columnText(part), join2(without))
	}
}

// holdsNumber says whether a number stands in a row outside the columns of lots, orders and groups.
func (t *table) holdsNumber(r row) bool {
	for _, c := range t.sheet.Rows[r.at].Cells {
		if c.Col != t.lot && c.Col != t.order && c.Col != t.group && numeric(c) {
			return true
		}
	}
	return false
}
