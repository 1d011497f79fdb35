package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// parts of the columns that a block or the columns beside the blocks hold; 0 where there is none.
type beside struct{ part, order, group, pair int }

// turnLots turns a sheet with the lots side by side into rows: a row a part of a lot.
func (t *table) turnLots() error {
	physical, rows, limits := t.columns, t.rows, t.limits
	inBlock := func(col int) bool {
		return slices.ContainsFunc(t.blocks, func(b block) bool { return b.first <= col && col <= b.last })
	}
	shared, err := t.besideOf(physical, func(c column) bool { return !inBlock(c.col) })
	if err != nil {
		return err
	}
	for _, c := range physical {
		if shared.part == 0 && !inBlock(c.col) && c.col != shared.order && c.col != shared.group && t.counts(c.col) {
			shared.part = c.col
		}
	}
	var names []string             // of the characteristics
	where := map[string][]column{} // by characteristic, in the order of the blocks; col 0 where a block lacks it
	own := make([]beside, len(t.blocks))
	for i, b := range t.blocks {
		if own[i], err = t.besideOf(physical, func(c column) bool { return b.first <= c.col && c.col <= b.last && b.last > b.first }); err != nil {
			return err
		}
		for _, c := range t.blockColumns(b, physical, own[i]) {
			had := where[c.name]
			if had == nil {
				had = make([]column, len(t.blocks))
				names = append(names, c.name)
			}
			if had[i].col > 0 {
				return t.refuse("found the heading %s in %s and %s of one lot, want it once; give each column its own heading in the file",
					quoted(c.name), cells.Name(had[i].col, t.heading), cells.Name(c.col, t.heading))
			}
			had[i] = c
			where[c.name] = had
		}
	}
	if err := t.besideFound(append(own, shared), physical); err != nil {
		return err
	}
	if err := t.lotsOnce(); err != nil {
		return err
	}
	t.columns, t.rows, t.limits, t.turned, t.part, t.order, t.group, t.pair, t.lot = nil, nil, map[int][]limit{}, true, 0, 0, 0, 0, turnedLot
	for _, name := range names {
		if err := t.turnColumn(name, where[name], limits); err != nil {
			return err
		}
	}
	for i, b := range t.blocks {
		t.turnBlock(i, b, rows, names, where, shared, own[i])
	}
	t.markTurned()
	t.markBeside(rows, physical)
	for _, b := range t.blocks {
		t.give(b.lot, roleLot)
	}
	t.say("the lots are named in row %d.", t.headingTop)
	if !t.headed && len(t.characteristics) == 0 {
		t.say("nothing names what was measured; it is called %s after the sheet or file.", quoted(t.onlyName()))
	}
	return nil
}

// lotsOnce refuses a lot looked for that is named over two blocks.
func (t *table) lotsOnce() error {
	at := map[string]string{}
	for _, b := range t.blocks {
		name := filledText(b.lot)
		if had, ok := at[name]; ok && (t.isLot(name) || len(t.hints.lots) == 0) {
			return t.refuse("found the lot %s named in %s and %s, want it once; give each its own name, or merge the cells above its columns", quoted(name), had, b.lot.Name())
		}
		at[name] = b.lot.Name()
	}
	return nil
}

// besideOf finds the columns for part, order and group among some columns: as the plan names them, else by their headings.
func (t *table) besideOf(physical []column, among func(column) bool) (beside, error) {
	var b beside
	for _, p := range []struct {
		key, name, means string
		into             *int
	}{
		{"reading.part_column", t.reading.PartColumn, partHeading, &b.part},
		{"reading.order_column", t.reading.OrderColumn, "", &b.order},
		{"reading.group_column", t.reading.GroupColumn, "", &b.group},
		{"reading.pair_column", t.reading.PairColumn, "", &b.pair},
	} {
		var found []string
		for _, c := range physical {
			want := qa.JoinSpace(p.name)
			if !among(c) || p.name != "" && c.heading != want && c.name != want || p.name == "" && (p.means == "" || headingMeans(c.heading) != p.means || t.planned(c)) {
				continue
			}
			if found = append(found, cells.Name(c.col, t.heading)); len(found) == 1 {
				*p.into = c.col
			}
		}
		if len(found) > 1 && p.name != "" {
			return b, t.refuse("%s: found the heading %s in %s, want it once; give each column its own heading in the file", p.key, quoted(p.name), join2(found))
		}
	}
	return b, nil
}

// besideFound refuses a column of the plan that no lot and no column beside them has.
func (t *table) besideFound(all []beside, physical []column) error {
	var headings []string
	for _, c := range physical {
		headings = append(headings, c.heading)
	}
	for _, p := range []struct {
		key, name string
		col       func(beside) int
	}{
		{"reading.part_column", t.reading.PartColumn, func(b beside) int { return b.part }},
		{"reading.order_column", t.reading.OrderColumn, func(b beside) int { return b.order }},
		{"reading.group_column", t.reading.GroupColumn, func(b beside) int { return b.group }},
		{"reading.pair_column", t.reading.PairColumn, func(b beside) int { return b.pair }},
	} {
		if p.name != "" && !slices.ContainsFunc(all, func(b beside) bool { return p.col(b) > 0 }) {
			return t.refuse("%s: found the headings %s, want %s; the nearest is %s: correct the name in the plan", p.key, list(headings), quoted(p.name), quoted(nearest(p.name, headings)))
		}
	}
	return nil
}

// blockColumns are the columns of measurements of one lot.
func (t *table) blockColumns(b block, physical []column, own beside) []column {
	if !t.headed {
		c := column{col: b.first, name: t.onlyName()}
		for _, p := range physical {
			if p.col == b.first {
				c.unit = p.unit
			}
		}
		c.heading = c.name
		return []column{c}
	}
	var out []column
	for _, c := range physical {
		if c.col < b.first || c.col > b.last || c.col == own.part || c.col == own.order || c.col == own.group || c.col == own.pair {
			continue
		}
		if means := headingMeans(c.heading); means == orderHeading || means == partHeading && !t.planned(c) {
			continue
		}
		out = append(out, c)
	}
	return out
}

// onlyName names the characteristic where each lot is one column: as the only one of the plan, else after the sheet.
func (t *table) onlyName() string {
	if len(t.characteristics) == 1 {
		return qa.JoinSpace(t.characteristics[0].Heading())
	}
	if t.sheet.Name != "" {
		return joined(t.sheet.Name)
	}
	name := t.book.File.Name
	if i := strings.LastIndexByte(name, '.'); i > 0 {
		name = name[:i]
	}
	return joined(name)
}

// turnColumn makes one characteristic of its columns in the blocks, with the units and limits that stand there.
func (t *table) turnColumn(name string, where []column, limits map[int][]limit) error {
	v := turnedFixed + len(t.columns) + 1
	c := column{col: v, heading: name, name: name}
	for i, b := range t.blocks {
		p, lot := where[i], filledText(b.lot)
		if p.col == 0 {
			if t.isLot(lot) {
				t.say("%s is not under the lot %s and takes no part.", quoted(name), quoted(lot))
			}
			if t.isLot(lot) || len(t.hints.lots) == 0 {
				return nil
			}
			continue
		}
		if c.head.Col == 0 {
			row, _ := t.sheet.Row(t.heading)
			if c.head = row.At(p.col); t.headed {
				c.heading = p.heading
			}
		}
		c.setUnit(lot, p.unit)
		if len(t.hints.lots) > 0 && !t.isLot(lot) {
			continue
		}
		for _, l := range limits[p.col] {
			for _, had := range t.limits[v] {
				if had.means == l.means && had.cell.Col != l.cell.Col && trimmed(had.cell.Text) != trimmed(l.cell.Text) {
					return planError(t.cellPlace(l.cell), "found %s as the %s limit or nominal value, want %s as for the other lot in %s; the lots were made to other limits, or the sheet is wrong: correct it, or state the limits in the plan and take them out of the sheet",
						quoted(l.cell.Text), l.means, quoted(had.cell.Text), had.cell.Name())
				}
			}
			t.limits[v] = append(t.limits[v], l)
		}
	}
	t.columns = append(t.columns, c)
	return nil
}

// turnBlock adds the rows of one lot.
func (t *table) turnBlock(i int, b block, rows []row, names []string, where map[string][]column, shared, own beside) {
	pick := func(own, shared int) int {
		if own > 0 {
			return own
		}
		return shared
	}
	part, order, group, pair := pick(own.part, shared.part), pick(own.order, shared.order), pick(own.group, shared.group), pick(own.pair, shared.pair)
	for _, p := range []struct {
		col, turned int
		into        *int
	}{{part, turnedPart, &t.part}, {order, turnedOrder, &t.order}, {group, turnedGroup, &t.group}, {pair, turnedPair, &t.pair}} {
		if p.col > 0 {
			*p.into = p.turned
		}
	}
	turn := &turning{lot: b.lot, cols: []int{0, part, order, group, pair}}
	for _, name := range names {
		if slices.ContainsFunc(t.columns, func(c column) bool { return c.name == name }) {
			turn.cols = append(turn.cols, where[name][i].col)
		}
	}
	name := filledText(b.lot)
	lot := make([]row, 0, len(rows))
	for _, r := range rows {
		lot = append(lot, row{at: r.at, lot: name, turn: turn})
	}
	lot = t.withoutBlockFeet(t.trimmedRows(lot), own.part > 0)
	lot = t.trimmedRows(lot)
	t.rows = append(slices.Grow(t.rows, len(lot)*(len(t.blocks)-i)), lot...)
	for _, s := range t.summary {
		t.addFeet(row{at: s, turn: turn})
	}
}

// addFeet keeps the cells of a row as those of a summary.
func (t *table) addFeet(r row) (at []string) {
	for col := turnedFixed + 1; col <= r.width(); col++ {
		if c := t.cell(r, col); stored(c) {
			t.feet = append(t.feet, footCell{cell: c, col: col})
			at = append(at, c.Name())
		}
	}
	return at
}

// withoutBlockFeet takes formulas below a lot of readings that are no formulas off its end: a mean without a label.
func (t *table) withoutBlockFeet(lot []row, ownPart bool) []row {
	computed := func(r row) bool {
		some := false
		for col := turnedFixed + 1; col <= r.width(); col++ {
			if c := t.cell(r, col); filledText(c) != "" || c.Kind == cells.FormulaNoValue {
				if some = c.Formula; !some {
					return false
				}
			}
		}
		return some && !(ownPart && filledText(t.cell(r, turnedPart)) != "")
	}
	n := len(lot)
	for n > 0 && computed(lot[n-1]) {
		n--
	}
	if n == 0 || n == len(lot) || slices.ContainsFunc(lot[:n], func(r row) bool {
		return t.anyMeasured(r, func(c cells.Cell) bool { return c.Formula })
	}) {
		return lot
	}
	var at []string
	for _, r := range lot[n:] {
		at = append(at, t.addFeet(r)...)
	}
	t.say("formulas without a label below the readings of %s not taken as readings: %s.", quoted(lot[0].lot), join2(at))
	return lot[:n]
}

// markBeside gives the cells beside the blocks their role, and tells of numbers that stand under no heading.
func (t *table) markBeside(rows []row, physical []column) {
	for _, s := range t.summary {
		t.mark(s, roleSummary)
	}
	t.summary = nil
	numbers := map[int]int{}
	for _, r := range rows {
		for j, c := range t.sheet.Rows[r.at].Cells {
			if t.roles[r.at][j] != roleNone || !stored(c) {
				continue
			}
			t.roles[r.at][j] = roleNoHeading
			if slices.ContainsFunc(physical, func(p column) bool { return p.col == c.Col }) {
				t.roles[r.at][j] = roleOtherColumn
			} else if numeric(c) {
				numbers[c.Col]++
			}
		}
	}
	var texts []string
	for _, col := range t.contentColumns() {
		if n := numbers[col]; n > 0 && !slices.ContainsFunc(t.feet, func(f footCell) bool { return f.cell.Col == col }) {
			texts = append(texts, "column "+cells.Letters(col)+" ("+qa.Count(n, "number", "numbers")+")")
		}
	}
	if len(texts) > 0 {
		t.warn("column-without-heading", "numbers without a heading are not read: %s.", join2(texts))
	}
}
