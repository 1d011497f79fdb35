package importers

import (
	"regexp"
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// block is the columns of one lot where lots stand side by side.
type block struct {
	lot         cells.Cell
	first, last int
}

// findLotColumns finds the row that names the lots side by side, the columns of each, and the row of headings below it.
func (t *table) findLotColumns() error {
	at := t.lotNamesRow()
	if at < 0 {
		if len(t.hints.lots) > 0 {
			return t.refuse("reading.layout: found no row that names the lots %s side by side, want one above the readings; correct the lots' names, header_row or layout in the plan", list(t.hints.lots))
		}
		return t.refuse("reading.layout: found no row of names above columns of numbers, want the lots side by side; correct header_row or layout in the plan")
	}
	names := t.namesIn(at)
	for _, c := range names {
		b := block{lot: c, first: c.Col, last: c.Col}
		limit := t.nextInRow(at, c.Col)
		if area, ok := t.mergedAt(c); ok {
			limit = min(limit, area.LastCol)
		}
		for b.last < limit && t.columnHolds(b.last+1, at) {
			b.last++
		}
		t.blocks = append(t.blocks, b)
	}
	t.headingTop, t.heading = t.sheet.Rows[at].Number, t.sheet.Rows[at].Number
	if sub := t.nextFilled(at); sub >= 0 && t.subHeadings(sub) {
		t.heading = t.sheet.Rows[sub].Number
		t.headed = true
		return nil
	}
	for i := range t.blocks { // without headings of their own, a column without a name is nobody's
		t.blocks[i].last = t.blocks[i].first
	}
	return nil
}

// nextInRow is the last column before the next text of a row.
func (t *table) nextInRow(at, col int) int {
	for _, c := range t.sheet.Rows[at].Cells {
		if c.Col > col && filledText(c) != "" {
			return c.Col - 1
		}
	}
	return t.lastColumn()
}

// lotNamesRow is the index of the row that names the lots: the plan's, or the row above it that does; -1 where there is none.
func (t *table) lotNamesRow() int {
	rows := t.lookRows()
	if h := t.firstHeading(); h >= 0 {
		for i := h; i >= max(0, h-3); i-- {
			if t.namesLots(i) {
				return i
			}
		}
		return -1
	}
	if t.reading.HeaderRow > 0 {
		return -1
	}
	for _, i := range rows {
		if t.namesLots(i) {
			return i
		}
	}
	return -1
}

// namesLots says whether a row names all the lots looked for; without such names, whether two texts stand above numbers.
func (t *table) namesLots(i int) bool {
	if len(t.hints.lots) == 0 {
		return len(t.namesIn(i)) >= 2
	}
	found := map[string]bool{}
	for _, c := range t.sheet.Rows[i].Cells {
		found[filledText(c)] = true
	}
	return !slices.ContainsFunc(t.hints.lots, func(l string) bool { return !found[qa.JoinSpace(l)] })
}

// namesIn are the cells of a row that name lots: what stands above numbers and is neither a number itself nor the heading of
// parts, order or lots. A number names a lot only where the plan says so.
func (t *table) namesIn(i int) []cells.Cell {
	var out []cells.Cell
	for _, c := range t.sheet.Rows[i].Cells {
		text := filledText(c)
		switch {
		case text == "" || missing(text) || c.Kind == cells.Error || c.Kind == cells.FormulaNoValue:
		case t.isLot(text):
			out = append(out, c)
		case numeric(c) && t.reading.HeaderRow == 0, headingMeans(text) != "", isUnit(text), labelWords[word(text)] != "":
		case len(t.hints.lots) > 0 && !t.numbersBelow(i, c.Col):
		case len(t.hints.lots) == 0 && !t.numbersBelow(i, c.Col):
		default:
			out = append(out, c)
		}
	}
	return out
}

// numbersBelow says whether a number stands in the column in the next rows; under a merged cell, in any of its columns.
func (t *table) numbersBelow(i, col int) bool {
	last := col
	if a, ok := t.mergedAt(t.sheet.Rows[i].At(col)); ok {
		last = a.LastCol
	}
	for j := i + 1; j < len(t.sheet.Rows) && j <= i+lookBelow; j++ {
		for k := col; k <= last; k++ {
			if numeric(t.sheet.Rows[j].At(k)) {
				return true
			}
		}
	}
	return false
}

// mergedAt is the merged area that begins at a cell.
func (t *table) mergedAt(c cells.Cell) (cells.Area, bool) {
	for _, a := range t.sheet.Merged {
		if a.FirstCol == c.Col && a.FirstRow == c.Row && a.LastCol > a.FirstCol {
			return a, true
		}
	}
	return cells.Area{}, false
}

// lastColumn is the last column that holds something.
func (t *table) lastColumn() int {
	last := 0
	for _, r := range t.sheet.Rows {
		for j := len(r.Cells) - 1; j >= 0 && r.Cells[j].Col > last; j-- {
			if stored(r.Cells[j]) {
				last = r.Cells[j].Col
			}
		}
	}
	return last
}

// columnHolds says whether a column holds something below the row.
func (t *table) columnHolds(col, at int) bool {
	return slices.ContainsFunc(t.sheet.Rows[at+1:], func(r cells.Row) bool { return stored(r.At(col)) })
}

// nextFilled is the index of the next row that holds something; -1 where none does.
func (t *table) nextFilled(at int) int {
	for i := at + 1; i < len(t.sheet.Rows); i++ {
		if slices.ContainsFunc(t.sheet.Rows[i].Cells, func(c cells.Cell) bool { return filledText(c) != "" }) {
			return i
		}
	}
	return -1
}

// subHeadings says whether a row below the lots' names holds the headings of each lot's columns: words in every lot, or the
// same numbers counting up under each of several merged names.
func (t *table) subHeadings(at int) bool {
	r := t.sheet.Rows[at]
	if t.isUnitRow(r) {
		return false
	}
	for _, b := range t.blocks {
		texts, numbers, blank := 0, 0, 0
		for col := b.first; col <= b.last; col++ {
			switch c := r.At(col); {
			case filledText(c) == "":
				blank++
			case numeric(c):
				numbers++
			case c.Kind == cells.Text && !missing(c.Text):
				texts++
			}
		}
		switch {
		case texts > 0 && numbers == 0 && (texts > blank || b.last > b.first):
		case b.last > b.first && numbers > 1 && blank == 0 && t.countsAcross(r, b.first, b.last):
		default:
			return false
		}
	}
	return true
}

// countsAcross says whether a row holds 1, 2, 3 … in the columns.
func (t *table) countsAcross(r cells.Row, first, last int) bool {
	for col := first; col <= last; col++ {
		if filledText(r.At(col)) != itoa(col-first+1) {
			return false
		}
	}
	return true
}

// lotLike is what a lot's name looks like where nothing says what it is: letters, then a number.
var lotLike = regexp.MustCompile(`^\pL{1,6}[-_/ .]?\d{2,}[-_/.\pL\d]*$|(?i)\b(reference|candidate|referenz|kandidat|lot|batch|charge|los)\b`)

// lotsAsHeadings says whether the most likely row of headings holds two names or more and each of them looks like a lot's.
func (t *table) lotsAsHeadings() bool {
	best, score := -1, 0
	for _, i := range t.lookRows() {
		if s := t.headingScore(i); s > score {
			best, score = i, s
		}
	}
	for _, i := range t.lookRows() {
		if i != best && i != best-1 {
			continue
		}
		names := t.namesIn(i)
		if len(names) >= 2 && !slices.ContainsFunc(names, func(c cells.Cell) bool {
			name, _ := splitUnit(filledText(c))
			return !lotLike.MatchString(name)
		}) {
			return true
		}
	}
	return false
}

// readingsAbove says whether something stands right above a number that would be a lot's name: then it is a reading or an id
// like those above it.
func (t *table) readingsAbove(i int) bool {
	return i > 0 && t.reading.HeaderRow == 0 && slices.ContainsFunc(t.sheet.Rows[i].Cells, func(c cells.Cell) bool {
		return t.isLot(filledText(c)) && numeric(c) && filledText(t.sheet.Rows[i-1].At(c.Col)) != ""
	})
}

// lotAlone says whether the one lot looked for is named above numbers and no row can be one of headings besides.
func (t *table) lotAlone() bool {
	for _, i := range t.lookRows() {
		if t.headingScore(i) > 0 {
			return false
		}
	}
	return t.lotNamesRow() >= 0
}

// lotsBelow says whether a lot is named again below the row that names them all: then a column names the lots, and that row is
// one of a block above the table. A number may stand anywhere and says nothing.
func (t *table) lotsBelow(number int) bool {
	const look = 5000
	if slices.ContainsFunc(t.hints.lots, isNumber) {
		return false
	}
	looked := 0
	for i, r := range t.sheet.Rows {
		if r.Number <= number {
			continue
		}
		if looked++; looked > look {
			break
		}
		if slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return c.Kind == cells.Text && t.isLot(filledText(c)) }) && !t.namesLots(i) {
			return true
		}
	}
	return false
}
