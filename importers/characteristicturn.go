package importers

import (
	"strings"

	"lotpair/importers/cells"
)

// pieces are the readings of a cell that holds several, as parts of it: "12.003 / 11.994 / 12.011". nil where a piece is
// neither a number nor a mark for a missing value, or the cell is empty.
func pieces(c cells.Cell) []cells.Cell {
	if c.Kind != cells.Text {
		if filledText(c) == "" && c.Kind != cells.FormulaNoValue {
			return nil
		}
		return []cells.Cell{c}
	}
	var out []cells.Cell
	for _, p := range strings.FieldsFunc(c.Text, func(r rune) bool { return r == '/' || r == ';' || r == '|' || r == '\n' }) {
		piece := c
		if piece.Text = trimmed(p); piece.Text == "" {
			continue
		}
		if !numeric(piece) && !missing(piece.Text) {
			return nil
		}
		out = append(out, piece)
	}
	return out
}

// splitResults takes the readings of each characteristic: the cells under the parts, or those of one cell.
func (s *characteristicSheet) splitResults() error {
	if len(s.parts) > 0 {
		for i, l := range s.lines {
			for _, p := range s.parts {
				s.lines[i].values = append(s.lines[i].values, s.sheet.Rows[l.at].At(p.Col))
			}
		}
		return nil
	}
	first, n := "", 0
	for i, l := range s.lines {
		c := s.sheet.Rows[l.at].At(s.result)
		values := pieces(c)
		if values == nil && c.Kind == cells.Text && strings.ContainsAny(c.Text, "/;|\n") && strings.ContainsAny(c.Text, "0123456789") {
			return planError(s.cellPlace(c), "found %s, want numbers with / between them; correct the cell", quoted(c.Text))
		}
		if values == nil {
			values = []cells.Cell{c}
		}
		switch {
		case n == 0 && len(values) > 1:
			first, n = c.Name(), len(values)
		case n > 0 && len(values) > 1 && len(values) != n:
			return planError(s.cellPlace(c), "found %d readings, want %d as in %s: a part has a reading of each characteristic; write a - where one is missing", len(values), n, first)
		}
		s.lines[i].values = values
	}
	if n > 1 {
		s.warn("several-readings-in-a-cell", "the cells of column %s hold several readings each (%d in %s); they are taken apart and counted as parts in their order.", cells.Letters(s.result), n, first)
	}
	for i := range s.lines {
		for len(s.lines[i].values) < n { // a characteristic without readings
			c := s.lines[i].values[0]
			c.Kind, c.Text = cells.Blank, ""
			s.lines[i].values = append(s.lines[i].values, c)
		}
	}
	return nil
}

// toleranceSigns refuses a column of lower tolerances with and without the minus sign: which of the numbers without one are
// meant to lie above the nominal value is not known. A written plus sign says so.
func (s *characteristicSheet) toleranceSigns() error {
	return s.oneSign(s.limits[lowerTol], func(col int) []cells.Cell {
		var out []cells.Cell
		for _, l := range s.lines {
			out = append(out, s.sheet.Rows[l.at].At(col))
		}
		return out
	})
}

// oneSign does so for the cells of some columns.
func (s *characteristicSheet) oneSign(cols []int, of func(col int) []cells.Cell) error {
	for _, col := range cols {
		var minus, plain cells.Cell
		for _, c := range of(col) {
			v, _, err := ParseNumber(c.Text, s.decimalMark())
			switch {
			case err != nil || v == 0 || strings.HasPrefix(trimmed(c.Text), "+"):
			case v < 0 && minus.Col == 0:
				minus = c
			case v > 0 && plain.Col == 0:
				plain = c
			}
		}
		if minus.Col > 0 && plain.Col > 0 {
			return planError(s.cellPlace(plain), "found the lower tolerance %s without a sign and %s with one in %s, want one way in a column; correct the sheet", quoted(plain.Text), quoted(minus.Text), minus.Name())
		}
	}
	return nil
}

// decimalMark is the decimal mark that the plan states; 0 where it states none.
func (t *table) decimalMark() byte {
	if t.reading.Decimal == "" {
		return 0
	}
	return t.reading.Decimal[0]
}

// turn makes a row of every part and a column of every characteristic.
func (s *characteristicSheet) turn() {
	t := s.table
	t.turned, t.unclear = true, map[int]error{}
	t.part = turnedPart
	if len(s.parts) == 0 {
		t.part = 0
	}
	names := map[string]int{}
	for _, l := range s.lines {
		name, _ := splitUnit(filledText(t.sheet.Rows[l.at].At(s.name)))
		names[name]++
	}
	for _, l := range s.lines {
		t.columns = append(t.columns, s.column(l, names))
	}
	count := 0
	for _, l := range s.lines {
		count = max(count, len(l.values))
	}
	for k := range count {
		r := row{cells: make([]cells.Cell, turnedFixed, turnedFixed+len(s.lines))}
		if len(s.parts) > 0 {
			p := s.parts[k]
			lot, ok := s.lotOf[p.Col]
			if t.lot > 0 && !ok {
				continue
			}
			r.lot, r.cells[turnedLot-1], r.cells[turnedPart-1] = filledText(lot), lot, p
		}
		for _, l := range s.lines {
			r.cells = append(r.cells, l.values[k])
		}
		t.rows = append(t.rows, r)
	}
	t.trimLots()
	t.markTurned()
	for _, r := range t.rows {
		t.give(r.cells[turnedLot-1], roleLot)
	}
	for _, l := range s.lines { // what is left of a row
		for j, c := range t.sheet.Rows[l.at].Cells {
			if t.roles[l.at][j] == roleNone && stored(c) {
				t.roles[l.at][j] = roleOtherColumn
			}
		}
	}
}

// trimLots takes the columns of a form that hold nothing off the end of each lot.
func (t *table) trimLots() {
	var lots []string
	by := map[string][]row{}
	for _, r := range t.rows {
		if by[r.lot] == nil {
			lots = append(lots, r.lot)
		}
		by[r.lot] = append(by[r.lot], r)
	}
	t.rows = nil
	for _, l := range lots {
		t.rows = append(t.rows, t.trimmedRows(by[l])...)
	}
}

// column is one characteristic with its unit, limits and requirement.
func (s *characteristicSheet) column(l line, names map[string]int) column {
	t := s.table
	r := t.sheet.Rows[l.at]
	c := column{col: turnedFixed + len(t.columns) + 1, heading: filledText(r.At(s.name)), head: r.At(s.name)}
	c.name, c.unit = splitUnit(c.heading)
	if s.name == s.number { // Char No 1
		head := fieldNumber.ReplaceAllString(filledText(t.sheet.Rows[s.at].At(s.name)), "")
		c.name = joined(head + " " + c.heading)
	}
	if number := filledText(r.At(s.number)); names[c.name] > 1 && s.number > 0 && s.number != s.name && number != "" {
		c.heading = number + " " + c.heading
		c.name, _ = splitUnit(c.heading)
	}
	t.give(c.head, roleHeading)
	if u := r.At(s.unit); s.unit > 0 && filledText(u) != "" && !missing(u.Text) {
		c.unit = unbracket(filledText(u))
		t.give(u, roleUnit)
	}
	for means, cols := range s.limits {
		for _, col := range cols {
			if limitCell := r.At(col); stored(limitCell) {
				t.limits[c.col] = append(t.limits[c.col], limit{means: means, cell: limitCell})
				t.give(limitCell, roleLimit)
			}
		}
	}
	s.takeRequirement(r, &c)
	return c
}

// takeRequirement takes the limits from the text of a requirement, where no columns hold them. A text that cannot be read in
// one way only is a fault until the plan says what it asks.
func (s *characteristicSheet) takeRequirement(r cells.Row, c *column) {
	at := r.At(s.requirement)
	if s.requirement == 0 {
		if at = r.At(s.name); len(s.limits) > 0 {
			return
		}
	}
	if filledText(at) == "" || missing(at.Text) {
		return
	}
	req, ok := parseRequirement(at.Text, s.decimalMark())
	if s.requirement > 0 {
		s.give(at, roleLimit)
	}
	switch {
	case !ok && s.requirement == 0: // a name, nothing more
	case !ok && len(s.table.limits[c.col]) == 0:
		s.unclear[c.col] = planError(s.cellPlace(at), "found the requirement %s of %s, want one such as 12.000 ±0.050, 12 +0.05/-0.02, max 0.8 or ≥ 45 HRC; state lower, upper or target of the characteristic in the plan",
			quoted(at.Text), quoted(c.name))
	case !ok:
		s.say("%s: the requirement %s is not read; the limits are taken from their columns.", c.name, quoted(at.Text))
	default:
		if req.unit != "" && c.unit == "" {
			c.unit = req.unit
		}
		for _, l := range []struct {
			means string
			value *float64
		}{{nominalLabel, req.nominal}, {lowerLabel, req.lower}, {upperLabel, req.upper}} {
			if l.value != nil {
				cell := at
				cell.Kind, cell.Text = cells.Number, tomlNumber(*l.value)
				s.table.limits[c.col] = append(s.table.limits[c.col], limit{means: l.means, cell: cell})
			}
		}
		s.say("%s: the requirement %s is read as %s.", c.name, quoted(at.Text), req)
	}
}
