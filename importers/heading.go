package importers

import (
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// How far the heading is looked for, in rows that hold something.
const (
	lookHeadings = 200
	lookBelow    = 15
)

// findHeading finds the heading row: where the plan says, else the row with the plan's headings, a heading for the lot or the
// most texts that has a number below one of them.
func (t *table) findHeading() error {
	rows := t.sheet.Rows
	if n := t.reading.HeaderRow; n > 0 {
		r, ok := t.sheet.Row(n)
		if !ok || !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return filledText(c) != "" }) {
			return t.refuse("reading.header_row: found nothing in row %d, want the headings; correct the row number", n)
		}
		t.heading = n
		return nil
	}
	best := 0
	for i, looked := 0, 0; i < len(rows) && looked < lookHeadings; i++ {
		if t.comment(rows[i]) {
			continue
		}
		looked++
		if s := t.headingScore(i); s > best {
			best, t.heading = s, rows[i].Number
		}
	}
	if t.heading == 0 {
		return t.refuse("found no row of headings above numbers, want one such as Lot, Part, Bore; state header_row under [reading]")
	}
	return nil
}

// sideBySide is the row that names all the lots looked for, two or more, as headings; 0 where there is none.
func (t *table) sideBySide() int {
	if len(t.hints.lots) < 2 {
		return 0
	}
	for i, r := range t.sheet.Rows {
		if t.namesLots(i) && !t.readingsAbove(i) {
			return r.Number
		}
		if i == lookHeadings {
			break
		}
	}
	return 0
}

// comment says whether a row is a comment line of a text file.
func (t *table) comment(r cells.Row) bool {
	_, found := slices.BinarySearch(t.book.Comments, r.Number)
	return found
}

// headingScore rates a row as the row of headings; 0 where it cannot be one.
func (t *table) headingScore(i int) int {
	r := t.sheet.Rows[i]
	score, below := 0, false
	for _, c := range r.Cells {
		text := filledText(c)
		if text == "" || c.Kind == cells.Error || c.Kind == cells.FormulaNoValue {
			continue
		}
		if slices.ContainsFunc(t.hints.lots, func(lot string) bool { return qa.JoinSpace(lot) == text }) {
			return 0
		}
		name, _ := splitUnit(text)
		if headingMeans(text) == lotHeading && !t.field(i) || t.reading.LotColumn != "" && (qa.JoinSpace(t.reading.LotColumn) == text || qa.JoinSpace(t.reading.LotColumn) == name) {
			score += 1000
		}
		for _, ch := range t.characteristics {
			if want := qa.JoinSpace(ch.Heading()); want == text || want == name {
				if t.namedAbove(i, c.Col) {
					return 0
				}
				score += 100
				below = below || ch.Kind == kindAttribute && i+1 < len(t.sheet.Rows) && stored(t.sheet.Rows[i+1].At(c.Col))
			}
		}
		if c.Kind == cells.Text && !numeric(c) && !missing(text) {
			score++
		}
		for j := i + 1; j < len(t.sheet.Rows) && j <= i+lookBelow && !below; j++ {
			below = numeric(t.sheet.Rows[j].At(c.Col))
		}
	}
	if !below {
		return 0
	}
	if t.numbersFollow(i) {
		score++
	}
	return score
}

// namedAbove says whether a heading above says that a column names what each row measured: its texts are no headings.
func (t *table) namedAbove(i, col int) bool {
	return slices.ContainsFunc(t.sheet.Rows[max(0, i-lookHeadings):i], func(r cells.Row) bool {
		name, _ := splitUnit(filledText(r.At(col)))
		return characteristicColumn[word(name)] != ""
	})
}

// numbersFollow says whether under one of a row's texts but the first the next rows hold numbers: so it is under headings,
// hardly under the fields of a block.
func (t *table) numbersFollow(i int) bool {
	first := true
	for _, c := range t.sheet.Rows[i].Cells {
		if filledText(c) == "" {
			continue
		}
		if first || c.Kind != cells.Text || numeric(c) {
			first = false
			continue
		}
		numbers, other, rows := 0, 0, 0
		for j := i + 1; j < len(t.sheet.Rows) && rows < 3; j++ {
			r := t.sheet.Rows[j]
			if !slices.ContainsFunc(r.Cells, stored) {
				continue
			}
			rows++
			switch below := r.At(c.Col); {
			case numeric(below):
				numbers++
			case filledText(below) != "" && !missing(below.Text) && !isUnit(below.Text):
				other++
			}
		}
		if numbers > 0 && other == 0 {
			return true
		}
	}
	return false
}

// readHeadings takes the headings apart and gives the rows above them their role.
func (t *table) readHeadings() error {
	above := 0
	for i, r := range t.sheet.Rows {
		if r.Number > t.heading {
			break
		}
		if r.Number < t.heading {
			if t.headingTop > 0 && r.Number >= t.headingTop {
				t.mark(i, roleHeading)
				continue
			}
			if t.comment(r) {
				t.mark(i, roleComment)
				continue
			}
			if len(r.Cells) > 0 {
				above++
			}
			t.warnLimitsAbove(r)
			t.mark(i, roleAbove)
			continue
		}
		t.mark(i, roleHeading)
		t.columns = t.headingsOf(r)
	}
	if t.headingTop > 0 && t.headingTop < t.heading && t.layout != ColumnPerLot {
		t.say("the headings stand in rows %d to %d and are read from top to bottom.", t.headingTop, t.heading)
	} else {
		t.say("the headings stand in row %d.", t.heading)
	}
	if above > 0 {
		t.say("%s above the headings not read.", qa.Count(above, "row", "rows"))
	}
	seen := map[string][]string{}
	for _, c := range t.columns {
		seen[c.heading] = append(seen[c.heading], cells.Name(c.col, t.heading))
	}
	for _, c := range t.columns {
		if at := seen[c.heading]; len(at) > 1 && t.layout != ColumnPerLot {
			t.warn("duplicate-headings", "the heading %s stands in %s.", quoted(c.heading), join2(at))
			delete(seen, c.heading)
		}
	}
	return nil
}

// join2 writes addresses for a message, at most 12 of them.
func join2(addresses []string) string {
	more := ""
	if n := len(addresses); n > 12 {
		addresses, more = addresses[:12], " and "+qa.Count(n-12, "more", "more")
	}
	text := ""
	for i, a := range addresses {
		if i > 0 {
			text += ", "
		}
		text += a
	}
	return text + more
}

// findLotColumn finds the column that names the lots: as the plan says, else by its heading, else by its holding the lots.
func (t *table) findLotColumn() error {
	if name := t.reading.LotColumn; name != "" {
		col, err := t.only("reading.lot_column", name)
		t.lot = col
		return err
	}
	if t.reading.Layout == SheetPerLot {
		return t.oneLotASheet()
	}
	var byHeading, byContent []int
	for _, c := range t.columns {
		if headingMeans(c.heading) == lotHeading {
			byHeading = append(byHeading, c.col)
		}
	}
	if len(t.hints.lots) > 0 && !slices.ContainsFunc(t.hints.lots, isNumber) { // a number may stand anywhere
		for _, col := range t.contentColumns() {
			if t.holds(col) {
				byContent = append(byContent, col)
			}
		}
	}
	both := byHeading
	if len(byHeading) > 1 {
		both = slices.DeleteFunc(slices.Clone(byHeading), func(col int) bool { return !t.holds(col) })
	}
	switch {
	case len(both) == 1:
		t.lot = both[0]
	case len(byHeading) == 1:
		t.lot = byHeading[0]
	case len(byHeading) == 0 && len(byContent) == 1 && !t.singleColumn(byContent[0]):
		t.lot = byContent[0]
	case len(byHeading) > 1 || len(byContent) > 1:
		candidates := byHeading
		if len(candidates) < 2 {
			candidates = byContent
		}
		texts := make([]string, 0, len(candidates))
		for _, col := range candidates {
			texts = append(texts, t.columnText(col))
		}
		return t.refuse("reading.lot_column: found %s, want one column that names the lots; state lot_column under [reading]", join2(texts))
	default:
		if t.findSections() {
			return nil
		}
		if t.whole {
			t.say("no column names the lots; every row of the sheet is taken as the one lot.")
			return nil
		}
		headings := make([]string, 0, len(t.columns))
		for _, c := range t.columns {
			headings = append(headings, c.heading)
		}
		return t.refuse("reading.lot_column: found the headings %s and no column that names the lots %s, want one; state lot_column under [reading], or correct the lots' names in the plan",
			list(headings), list(t.hints.lots))
	}
	t.say("the lots are named in %s.", t.columnText(t.lot))
	return nil
}

// singleColumn says whether the table has no other column: its numbers are readings, not lots.
func (t *table) singleColumn(col int) bool { return len(t.columns) == 1 && t.columns[0].col == col }

// contentColumns are the columns that hold something below the headings.
func (t *table) contentColumns() []int {
	seen := map[int]bool{}
	var cols []int
	for _, r := range t.below() {
		for _, c := range r.Cells {
			if stored(c) && !seen[c.Col] {
				seen[c.Col] = true
				cols = append(cols, c.Col)
			}
		}
	}
	slices.Sort(cols)
	return cols
}

// below are the rows under the headings.
func (t *table) below() []cells.Row {
	for i, r := range t.sheet.Rows {
		if r.Number > t.heading {
			return t.sheet.Rows[i:]
		}
	}
	return nil
}

// holds says whether a column holds the names of all the lots looked for.
func (t *table) holds(col int) bool {
	missing := map[string]bool{}
	for _, l := range t.hints.lots {
		missing[qa.JoinSpace(l)] = true
	}
	for _, r := range t.below() {
		if delete(missing, filledText(r.At(col))); len(missing) == 0 {
			return true
		}
	}
	return false
}

// findPartColumn takes the plan's columns for parts, order, groups and pairs; what the plan leaves out is found once the rows are known.
func (t *table) findPartColumn() (err error) {
	if name := t.reading.PartColumn; name != "" {
		if t.part, err = t.only("reading.part_column", name); err != nil {
			return err
		}
	}
	if name := t.reading.OrderColumn; name != "" {
		if t.order, err = t.only("reading.order_column", name); err != nil {
			return err
		}
	}
	if name := t.reading.GroupColumn; name != "" {
		if t.group, err = t.only("reading.group_column", name); err != nil {
			return err
		}
	}
	if name := t.reading.PairColumn; name != "" {
		t.pair, err = t.only("reading.pair_column", name)
	}
	return err
}

// oneLotASheet takes every row as the one lot of the sheet, as the plan says; a column that names several lots speaks against it.
func (t *table) oneLotASheet() error {
	for _, c := range t.columns {
		if headingMeans(c.heading) != lotHeading {
			continue
		}
		var names []string
		for _, r := range t.below() {
			if name := filledText(r.At(c.col)); name != "" && !slices.Contains(names, name) && len(names) < 30 && labelWords[word(name)] == "" {
				names = append(names, name)
			}
		}
		if len(names) > 1 {
			return t.refuse("reading.layout: found the lots %s in %s, want one lot a sheet; state the layout row-per-part", list(names), t.columnText(c.col))
		}
	}
	t.say("every row of the sheet is taken as the one lot.")
	return nil
}
