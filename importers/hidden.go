package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// rejectWords are what people write beside a reading that they do not want to count.
var rejectWords = words(means("reject", "reject|rejected|rej|nok|n.o.k|not ok|nio|n.i.o|fail|failed|scrap|scrapped|void|invalid|discard|discarded|exclude|excluded|outlier|do not use|not valid|delete|deleted|"+
	"ausschuss|verworfen|gesperrt|ungültig|nicht verwenden|streichen|gestrichen|ausreißer|ausreisser"))

// warnHidden tells of hidden rows, columns and sheets, and of words such as "reject" beside readings: what they hold and stand
// beside is read all the same. out says which cells the plan leaves out.
func (t *table) warnHidden(out func(cells.Cell) bool) {
	if t.sheet.Hidden {
		t.warn("hidden-sheets", "the sheet itself is hidden; it is read.")
	}
	hidden, marks := t.hiddenRows(), t.rejectMarks()
	if len(hidden) == 0 && len(marks) == 0 && len(t.sheet.HiddenCols) == 0 {
		return
	}
	rows := map[int]bool{}        // that hold readings
	var inHidden, beside []string // readings in hidden rows and beside marks
	marked := map[int]bool{}      // rows with marks and readings
	for _, r := range t.wanted() {
		for _, col := range t.measured {
			c := t.cell(r, col)
			if absent(c) {
				continue
			}
			rows[c.Row] = true
			if filledText(c) == "" && c.Kind != cells.FormulaNoValue || missing(c.Text) || out(c) {
				continue
			}
			if hidden[c.Row] {
				inHidden = append(inHidden, c.Name())
			}
			if slices.ContainsFunc(marks[c.Row], func(m cells.Cell) bool { return m.Col != c.Col }) {
				beside, marked[c.Row] = append(beside, c.Name()), true
			}
		}
	}
	t.warnHiddenRows(hidden, rows, inHidden)
	t.warnHiddenColumns(rows)
	var at []string
	for _, r := range t.sheet.Rows {
		if marked[r.Number] {
			for _, m := range marks[r.Number] {
				at = append(at, quoted(m.Text)+" in "+m.Name())
			}
		}
	}
	if len(beside) > 0 {
		t.warn("reject-marks", "%s; the readings of these rows are used (%s). Where they do not count, name their cells under exclude with a reason.", join2(at), join2(beside))
	}
}

// hiddenRows are the numbers of the hidden rows.
func (t *table) hiddenRows() map[int]bool {
	var out map[int]bool
	for _, r := range t.sheet.Rows {
		if r.Hidden {
			if out == nil {
				out = map[int]bool{}
			}
			out[r.Number] = true
		}
	}
	return out
}

// rejectMarks are the cells that say that something is rejected, by row. Where a row is a characteristic, such a word is about
// the characteristic, and none counts.
func (t *table) rejectMarks() map[int][]cells.Cell {
	var out map[int][]cells.Cell
	if t.layout == RowPerCharacteristic || t.book.report != nil {
		return nil
	}
	for _, r := range t.sheet.Rows {
		if r.Number <= t.heading {
			continue
		}
		for _, c := range r.Cells {
			if c.Kind == cells.Text && c.Text != "" && len(c.Text) < 24 && strings.IndexByte("rnfsvideouagRNFSVIDEOUAG", c.Text[0]) >= 0 && rejectWords[word(c.Text)] != "" {
				if out == nil {
					out = map[int][]cells.Cell{}
				}
				out[r.Number] = append(out[r.Number], c)
			}
		}
	}
	return out
}

func (t *table) warnHiddenRows(hidden, rows map[int]bool, readings []string) {
	var numbers []string
	for _, r := range t.sheet.Rows {
		if hidden[r.Number] && rows[r.Number] {
			numbers = append(numbers, itoa(r.Number))
		}
	}
	switch n := qa.Count(len(numbers), "row of the table is", "rows of the table are"); {
	case len(numbers) == 0:
	case len(readings) == 0:
		t.warn("hidden-rows", "%s hidden, by a filter or by hand (%s); no reading in them is used.", n, join2(numbers))
	default:
		t.warn("hidden-rows", "%s hidden, by a filter or by hand (%s); what they hold is used (%s). Where it does not count, name the cells under exclude with a reason.", n, join2(numbers), join2(readings))
	}
}

func (t *table) warnHiddenColumns(rows map[int]bool) {
	if len(t.sheet.HiddenCols) == 0 {
		return
	}
	held := map[int]bool{}
	var cols []int
	for _, r := range t.sheet.Rows {
		if !rows[r.Number] {
			continue
		}
		for _, c := range r.Cells {
			if filledText(c) != "" && !held[c.Col] && t.sheet.HiddenCol(c.Col) {
				held[c.Col] = true
				cols = append(cols, c.Col)
			}
		}
	}
	slices.Sort(cols)
	texts := make([]string, 0, len(cols))
	for _, col := range cols {
		text := cells.Letters(col)
		if head := filledText(t.sheet.At(col, t.heading)); head != "" {
			text += " " + quoted(head)
		}
		texts = append(texts, text)
	}
	if len(texts) > 0 {
		t.warn("hidden-columns", "%s hidden: %s; what they hold is read like any other.", qa.Count(len(cols), "column of the table is", "columns of the table are"), join2(texts))
	}
}

// cellCount is what a sheet holds, for a message.
func cellCount(s cells.Sheet) int {
	n := 0
	for _, row := range s.Rows {
		for _, c := range row.Cells {
			if stored(c) {
				n++
			}
		}
	}
	return n
}

// sheetsHeld writes the names of sheets with the number of cells that each holds.
func sheetsHeld(sheets []cells.Sheet) string {
	texts := make([]string, 0, len(sheets))
	for _, s := range sheets {
		texts = append(texts, quoted(s.Name)+" ("+qa.Count(cellCount(s), "cell", "cells")+")")
	}
	return join2(texts)
}
