package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// tidyReading is one row of a tidy sheet: what was measured, and the cells that say of what.
type tidyReading struct {
	at                       int
	lot                      string
	name                     int // of the characteristic, from 0
	part, order, group, pair cells.Cell
	value                    cells.Cell
}

// turnTidy turns a sheet with a row a reading into rows of parts. A part's readings of one characteristic beyond the first
// stand in rows of their own: they are repeats.
func (t *table) turnTidy() error {
	if t.tidy == nil {
		return nil
	}
	s := t.tidy
	if s.across == nil {
		t.tidyPart()
	}
	switch {
	case s.across != nil:
		t.part = turnedPart
		t.say("%s: %s to %s.", qa.Count(len(s.across), "column of a part", "columns of parts"), cells.Letters(s.value), cells.Letters(s.across[len(s.across)-1]))
	case t.part > 0:
		s.partColumn = t.column(t.part).heading
		t.say("the parts' ids stand in %s.", t.columnText(t.part))
	}
	names, readings, err := t.tidyReadings()
	if err != nil {
		return err
	}
	columns, err := t.tidyCharacteristics(names, readings)
	if err != nil {
		return err
	}
	rows := t.rows
	t.markTidy(rows, readings)
	t.say("%s below each other: %s.", qa.Count(len(names), "characteristic stands", "characteristics stand"), list(names))
	part := t.part
	if s.across != nil {
		part = 0
	}
	t.keepTexts(t.lot, part, t.order, t.group, t.pair)
	lot := t.lot
	t.columns, t.rows, t.turned, t.wantedRows = columns, nil, true, nil
	type key struct{ lot, group, pair, part string }
	slots := map[key][]int{}       // the rows of each part
	taken := map[key]map[int]int{} // and how many of them hold a characteristic
	for _, r := range readings {
		k := key{r.lot, filledText(r.group), filledText(r.pair), filledText(r.part)}
		if taken[k] == nil {
			taken[k] = map[int]int{}
		}
		n := taken[k][r.name]
		taken[k][r.name]++
		if n == len(slots[k]) {
			out := row{at: r.at, lot: r.lot, cells: make([]cells.Cell, turnedFixed+len(names))}
			if lot > 0 {
				out.cells[turnedLot-1] = t.sheet.Rows[r.at].At(lot)
			}
			out.cells[turnedPart-1], out.cells[turnedOrder-1], out.cells[turnedGroup-1], out.cells[turnedPair-1] = r.part, r.order, r.group, r.pair
			slots[k] = append(slots[k], len(t.rows))
			t.rows = append(t.rows, out)
		}
		t.rows[slots[k][n]].cells[turnedFixed+r.name] = r.value
	}
	t.lot, t.part, t.order, t.group, t.pair = min(t.lot, 1)*turnedLot, min(t.part, 1)*turnedPart, min(t.order, 1)*turnedOrder, min(t.group, 1)*turnedGroup, min(t.pair, 1)*turnedPair
	for _, at := range t.summary {
		t.mark(at, roleSummary)
	}
	t.summary = nil
	t.warnAbsent()
	return nil
}

// tidyPart finds the column of the parts' ids that the plan does not name: by its heading; where several are called so, one
// whose ids are not different in every row, and among those one that has each id once for a characteristic.
func (t *table) tidyPart() {
	if t.part > 0 {
		return
	}
	least := 0
	for _, c := range t.columns {
		if c.col == t.lot || c.col == t.order || c.col == t.group || c.col == t.pair || c.col == t.tidy.name || c.col == t.tidy.value || headingMeans(c.heading) != partHeading || t.constant(c.col) || !t.fills(c.col) {
			continue
		}
		ids, once := map[[3]string]bool{}, map[[4]string]bool{}
		named := map[string]bool{}
		rows := t.wanted()
		twice := 0
		for _, r := range rows {
			id, name := filledText(t.merged(r, c.col)), filledText(t.merged(r, t.tidy.name))
			ids[[3]string{r.lot, t.groupOf(r), id}], named[name] = true, true
			k := [4]string{r.lot, t.groupOf(r), id, name}
			if once[k] {
				twice = 1
			}
			once[k] = true
		}
		if len(named) > 1 && len(ids) == len(rows) { // it counts the rows
			continue
		}
		if score := twice*2*len(rows) + len(ids); least == 0 || score < least {
			least, t.part = score, c.col
		}
	}
}

// tidyReadings are the rows with what each of them says, and the names of the characteristics in their order. A row that holds
// a reading and does not say of what is a fault.
func (t *table) tidyReadings() (names []string, readings []tidyReading, err error) {
	s := t.tidy
	if s.across != nil {
		return t.readingsAcross()
	}
	number := map[string]int{}
	var nameless, partless []string
	wanted := t.wantedLot()
	for _, r := range t.rows {
		x := tidyReading{at: r.at, lot: r.lot, value: t.sheet.Rows[r.at].At(s.value)}
		name := filledText(t.merged(r, s.name))
		filled := filledText(x.value) != "" || x.value.Kind == cells.FormulaNoValue
		if name == "" || missing(name) {
			if filled && wanted(r.lot) {
				nameless = append(nameless, x.value.Name())
			}
			continue
		}
		for _, p := range []struct {
			col  int
			into *cells.Cell
		}{{t.part, &x.part}, {t.order, &x.order}, {t.group, &x.group}, {t.pair, &x.pair}} {
			if p.col > 0 {
				*p.into = t.merged(r, p.col)
			}
		}
		if filled && t.part > 0 && filledText(x.part) == "" && wanted(r.lot) {
			partless = append(partless, x.value.Name())
		}
		n, ok := number[name]
		if !ok {
			n = len(names)
			number[name] = n
			names = append(names, name)
		}
		x.name = n
		readings = append(readings, x)
	}
	switch {
	case t.show:
		if len(nameless) > 0 {
			t.warn("nameless-readings", "readings that do not say what was measured (%s); write the characteristic's name in %s there.", join2(nameless), t.columnText(s.name))
		}
		if len(partless) > 0 {
			t.warn("nameless-readings", "readings without a part's id (%s); write it in %s there.", join2(partless), t.columnText(t.part))
		}
	case len(nameless) > 0:
		return nil, nil, t.refuse("%s: found readings that do not say what was measured (%s), want the characteristic's name in each row; write it there, or delete what is no reading", t.columnText(s.name), join2(nameless))
	case len(partless) > 0:
		return nil, nil, t.refuse("%s: found readings without a part's id (%s), want the id in each row; write it there, or delete what is no reading", t.columnText(t.part), join2(partless))
	}
	spelt := map[string]string{}
	for _, n := range names {
		if had, ok := spelt[spelling(n)]; ok {
			t.warn("characteristic-spellings", "%s beside %s: read as two characteristics; if they are one, write the name alike in the file.", quoted(n), quoted(had))
		}
		spelt[spelling(n)] = n
	}
	return names, readings, nil
}

// wantedLot says of a lot's name whether it is looked for; every one is where none is named.
func (t *table) wantedLot() func(string) bool {
	if t.lot == 0 || len(t.hints.lots) == 0 {
		return func(string) bool { return true }
	}
	known := map[string]bool{}
	for _, l := range t.hints.lots {
		known[joined(l)] = true
	}
	return func(lot string) bool { return known[lot] }
}

// tidyCharacteristics makes a column of each characteristic with the units and limits that its rows state: the same in each.
func (t *table) tidyCharacteristics(names []string, readings []tidyReading) ([]column, error) {
	s := t.tidy
	t.unclear = map[int]error{}
	head, value := t.column(s.name), t.column(s.value)
	row, _ := t.sheet.Row(t.heading)
	requirements := &characteristicSheet{table: t, requirement: s.requirement, limits: s.limits}
	columns := make([]column, len(names))
	for i, n := range names {
		c := column{col: turnedFixed + i + 1, heading: n, head: row.At(head.col)}
		if c.name, c.unit = splitUnit(n); c.unit == "" {
			c.unit = value.unit
		}
		columns[i] = c
	}
	rowLimits := t.limits // of limit rows below the headings: they would be of every characteristic
	if len(rowLimits) > 0 {
		t.say("limits in rows of their own are not taken: they do not say of which characteristic.")
	}
	t.limits = map[int][]limit{}
	wanted := t.wantedLot()
	units := map[int]map[string]cells.Cell{} // where the unit of each lot stands first
	type saying struct {
		name        int
		means, text string
	}
	said := map[saying]bool{} // what rows say alike is kept once
	for _, r := range readings {
		if !wanted(r.lot) {
			continue
		}
		c := &columns[r.name]
		of := t.rowAt(r.at, r.lot)
		if u := t.merged(of, max(1, s.unit)); s.unit > 0 && filledText(u) != "" && !missing(u.Text) {
			unit := unbracket(filledText(u))
			if units[r.name] == nil {
				units[r.name] = map[string]cells.Cell{}
			}
			first, ok := units[r.name][r.lot]
			switch had := unbracket(filledText(first)); {
			case !ok:
				units[r.name][r.lot] = u
				if len(units[r.name]) == 1 {
					c.unit = unit
				}
				c.setUnit(r.lot, unit)
			case unitKey(had) == unitKey(unit):
			case t.show:
				if key := (saying{r.name, unitLabel, ""}); !said[key] {
					t.warn("units-differ", "%s: the unit is %s in %s and %s in %s.", c.heading, quoted(had), first.Name(), quoted(unit), u.Name())
					said[key] = true
				}
			default:
				return nil, planError(t.cellPlace(u), "found %s as the unit of %s, want %s as in %s of the same lot; correct the sheet", quoted(unit), quoted(c.heading), quoted(had), first.Name())
			}
		}
		for means, cols := range s.limits {
			for _, col := range cols {
				l := t.merged(of, col)
				if key := (saying{r.name, means, l.Text}); stored(l) && !said[key] {
					said[key] = true
					t.limits[c.col] = append(t.limits[c.col], limit{means: means, cell: l})
				}
			}
		}
		if s.requirement > 0 {
			q := t.merged(of, s.requirement)
			if key := (saying{r.name, requirementHeading, q.Text}); filledText(q) != "" && !said[key] {
				said[key] = true
				requirements.takeRequirement(cells.Row{Number: q.Row, Cells: []cells.Cell{q}}, c)
			}
		}
	}
	return columns, requirements.oneSign(s.limits[lowerTol], t.tidyLimitCells(readings, wanted))
}

// rowAt is a row of the sheet as a row of the table.
func (t *table) rowAt(at int, lot string) row { return row{at: at, lot: lot} }

// tidyLimitCells are the cells of a column in the rows of the lots looked for.
func (t *table) tidyLimitCells(readings []tidyReading, wanted func(string) bool) func(col int) []cells.Cell {
	return func(col int) []cells.Cell {
		var out []cells.Cell
		for _, r := range readings {
			if wanted(r.lot) {
				out = append(out, t.sheet.Rows[r.at].At(col))
			}
		}
		return out
	}
}

// markTidy gives every cell of the rows its role.
func (t *table) markTidy(rows []row, readings []tidyReading) {
	s := t.tidy
	as := map[int]role{s.name: roleHeading, s.unit: roleUnit, s.requirement: roleLimit, t.lot: roleLot, t.part: rolePart, t.order: roleOrder, t.group: roleGroup, t.pair: rolePair}
	for _, cols := range s.limits {
		for _, col := range cols {
			as[col] = roleLimit
		}
	}
	for _, c := range t.columns {
		if _, ok := as[c.col]; !ok {
			as[c.col] = roleOtherColumn
		}
	}
	placed := make(map[int]bool, len(readings))
	for _, r := range readings {
		placed[r.at] = true
	}
	numbers := map[int]int{}
	for _, r := range rows {
		for j, c := range t.sheet.Rows[r.at].Cells {
			if t.roles[r.at][j] != roleNone || !stored(c) {
				continue
			}
			is, ok := as[c.Col]
			switch {
			case (c.Col == s.value || slices.Contains(s.across, c.Col)) && placed[r.at]:
				is = roleOtherLot
			case !ok:
				is = roleNoHeading
				if numeric(c) {
					numbers[c.Col]++
				}
			}
			t.roles[r.at][j] = is
		}
	}
	t.warnNumbers(numbers)
}

// warnAbsent tells of parts of which a characteristic has no row: nothing was read in their place.
func (t *table) warnAbsent() {
	wanted := t.wantedLot()
	parts := map[string][]string{} // by lot, in their order
	has := map[[2]string]map[int]bool{}
	var lots []string
	for _, r := range t.rows {
		if !wanted(r.lot) {
			continue
		}
		id := filledText(r.cells[turnedPart-1])
		k := [2]string{r.lot, id}
		if has[k] == nil {
			if parts[r.lot] == nil {
				lots = append(lots, r.lot)
			}
			has[k] = map[int]bool{}
			parts[r.lot] = append(parts[r.lot], id)
		}
		for i, c := range r.cells[turnedFixed:] {
			if !absent(c) {
				has[k][i] = true
			}
		}
	}
	for i, c := range t.columns {
		for _, l := range lots {
			var without []string
			for _, id := range parts[l] {
				if !has[[2]string{l, id}][i] {
					without = append(without, id)
				}
			}
			of := ""
			if l != "" {
				of = " of the lot " + quoted(l)
			}
			switch n := len(without); {
			case n == 0:
			case n == len(parts[l]):
				t.say("%s: no row%s.", c.heading, of)
			default:
				t.warn("parts-without-row", "%s: no row for %s%s (%s).", c.heading, qa.Count(n, "part", "parts"), of, join2(without))
			}
		}
	}
}

// absent says whether a cell of a turned table is nowhere in the sheet: a part that lacks a characteristic's row.
func absent(c cells.Cell) bool { return c.Row == 0 }

// keepTexts keeps what messages call the columns of a table that is turned.
func (t *table) keepTexts(cols ...int) {
	for i, col := range cols {
		if col > 0 {
			t.texts[i] = t.columnText(col)
		}
	}
}

// severalRows says whether names stand below each other for part after part: no row a characteristic.
func (s *characteristicSheet) severalRows() bool {
	return !s.differ() && slices.ContainsFunc(s.sheet.Rows[s.at].Cells, func(c cells.Cell) bool {
		m := headingMeans(filledText(c))
		return (m == partHeading && s.number == 0 || m == lotHeading) && strings.TrimSpace(c.Text) != ""
	})
}
