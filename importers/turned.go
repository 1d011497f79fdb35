package importers

import (
	"slices"
	"strconv"

	"lotpair/importers/cells"
)

// The columns of a turned table: the lot, the part, the order, the group and the pair of each row, then the characteristics.
const (
	turnedLot = iota + 1
	turnedPart
	turnedOrder
	turnedGroup
	turnedPair
	turnedFixed = turnedPair
)

// turning says where in the row of the sheet the cells of a turned table's row stand. It is shared by all rows of a lot: a
// cell of its own for each would be most of what a tall sheet takes.
type turning struct {
	lot  cells.Cell // names the lot where no column does
	cols []int      // of the sheet, by the table's columns from 1; 0 where there is none
}

func (s *turning) cell(r cells.Row, col int) cells.Cell {
	switch at := s.cols[col-1]; {
	case at > 0:
		return r.At(at)
	case col == turnedLot:
		return s.lot
	}
	return cells.Cell{}
}

// width is how many columns a row of a turned table has.
func (r row) width() int {
	if r.turn != nil {
		return len(r.turn.cols)
	}
	return len(r.cells)
}

// footCell is one cell of a summary in a turned table.
type footCell struct {
	cell cells.Cell
	col  int
}

func itoa(n int) string { return strconv.Itoa(n) }

// columnOf is a column with the unit that holds for one lot.
func (t *table) columnOf(col int, lot string) column {
	c := t.column(col)
	if unit, ok := c.units[lot]; ok {
		c.unit = unit
	}
	return c
}

// measureTurned takes the measurements of a turned table: those of the plan, else every one that holds numbers.
func (t *table) measureTurned() error {
	if len(t.characteristics) > 0 {
		return t.findMeasured()
	}
	for _, c := range t.columns {
		numbers, filled := 0, 0
		for _, r := range t.wanted() {
			switch cell := t.cell(r, c.col); {
			case cell.Kind == cells.Blank || cell.Kind == cells.Text && missing(cell.Text):
			case numeric(cell):
				numbers++
				filled++
			default:
				filled++
			}
		}
		switch {
		case filled == 0:
			t.say("%s is not taken as a measurement: it is empty.", t.columnText(c.col))
		case 2*numbers < filled:
			t.say("%s is not taken as a measurement: most of it is no number.", t.columnText(c.col))
		default:
			t.measured = append(t.measured, c.col)
		}
	}
	if len(t.measured) == 0 {
		return t.refuse("found no numbers under the names of the lots or parts, want readings; correct header_row under [reading], or the layout")
	}
	return nil
}

// giveRestTurned gives the cells of a turned table that no lot used their role.
func (r *reader) giveRestTurned(t *table) {
	for _, s := range r.sides {
		if s.table != t {
			continue
		}
		for _, row := range s.rows {
			for _, c := range t.columns {
				if !slices.Contains(s.cols, c.col) {
					t.give(t.cell(row, c.col), roleOtherColumn)
				}
			}
		}
	}
	for i, row := range t.sheet.Rows {
		for j, c := range row.Cells {
			if t.roles[i][j] == roleNone && stored(c) {
				t.roles[i][j] = roleOutside
			}
		}
	}
}

// markTurned gives every cell of the rows the role that it has until it is read.
func (t *table) markTurned() {
	for _, r := range t.rows {
		for col := turnedLot; col <= r.width(); col++ {
			c := t.cell(r, col)
			switch col {
			case turnedLot:
			case turnedPart:
				t.give(c, rolePart)
			case turnedOrder:
				t.give(c, roleOrder)
			case turnedGroup:
				t.give(c, roleGroup)
			case turnedPair:
				if c != t.cell(r, turnedPart) {
					t.give(c, rolePair)
				}
			default:
				t.give(c, roleOtherLot)
			}
		}
	}
}

// unmergedCells refuses merged cells among the readings of a turned table.
func (t *table) unmergedCells(rows []row, col int) error {
	if len(t.sheet.Merged) == 0 {
		return nil
	}
	for _, r := range rows {
		c := t.cell(r, col)
		for _, a := range t.sheet.Merged {
			if c.Col >= a.FirstCol && c.Col <= a.LastCol && c.Row >= a.FirstRow && c.Row <= a.LastRow && (a.FirstCol != a.LastCol || a.FirstRow != a.LastRow) {
				return planError(t.place()+"!"+cells.Name(a.FirstCol, a.FirstRow), "found the merged cells %s:%s among the readings, want one cell a reading; split them in the file",
					cells.Name(a.FirstCol, a.FirstRow), cells.Name(a.LastCol, a.LastRow))
			}
		}
	}
	return nil
}

// trimmedRows takes the rows off the end of a lot that hold nothing in any of the measurements: lots are of unequal lengths.
func (t *table) trimmedRows(rows []row) []row {
	for len(rows) > 0 && !t.anyMeasured(rows[len(rows)-1], func(c cells.Cell) bool {
		return filledText(c) != "" || c.Kind == cells.FormulaNoValue
	}) {
		rows = rows[:len(rows)-1]
	}
	return rows
}

// anyMeasured says whether one of the measurements of a turned table's row is such.
func (t *table) anyMeasured(r row, such func(cells.Cell) bool) bool {
	for col := turnedFixed + 1; col <= r.width(); col++ {
		if such(t.cell(r, col)) {
			return true
		}
	}
	return false
}

// setUnit keeps the unit of each lot of a turned table's column; it is the column's where all lots have one.
func (c *column) setUnit(lot, unit string) {
	if c.units == nil {
		c.units = map[string]string{}
	}
	if c.units[lot] = unit; c.unit == "" {
		c.unit = unit
	}
}
