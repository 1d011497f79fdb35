package cells

import "slices"

// Kind says what a cell holds.
type Kind uint8

// The kinds of cells. A blank cell is one that is not stored, or stored without a value.
const (
	Blank          Kind = iota
	Number              // a number as stored: Text holds its digits
	Text                // a shared, inline or formula text
	Bool                // Text is TRUE or FALSE
	Error               // Text is the error value: #DIV/0!
	Date                // a number or ISO text under a date or time format: Text holds what is stored
	FormulaNoValue      // a formula without a stored value: Text is empty
)

var kindNames = [...]string{"blank", "number", "text", "boolean", "error value", "date", "formula without a stored value"}

// String is the kind in words.
func (k Kind) String() string {
	if int(k) >= len(kindNames) {
		return "unknown"
	}
	return kindNames[k]
}

// Cell is one stored cell. Row and Col count from 1.
type Cell struct {
	Row, Col int
	Text     string // the stored text exactly: "12.003000000000001"
	Format   string // the number format's code; empty for the general format
	Kind     Kind
	Formula  bool // the value was computed by a formula
	Marks    Marks
}

// Name is the cell's address: "D17".
func (c Cell) Name() string { return Name(c.Col, c.Row) }

// Row is one stored row, its cells in ascending columns. Blank cells may be missing.
type Row struct {
	Number int
	Hidden bool
	Cells  []Cell
}

// Area is a rectangle of cells, both corners included.
type Area struct{ FirstCol, FirstRow, LastCol, LastRow int }

// Sheet is one worksheet, its rows in ascending order. Rows without cells may be missing.
type Sheet struct {
	Name       string
	Hidden     bool // hidden or very hidden
	Rows       []Row
	HiddenCols []Area // whole columns: rows are 0
	Merged     []Area
}

// Workbook is every worksheet of one file, in the order of its tabs.
type Workbook struct {
	Sheets   []Sheet
	Date1904 bool // dates count from 1904
	Macros   bool // the file carries macros, which nothing here runs
}

// Sheet finds a worksheet by its name.
func (w Workbook) Sheet(name string) (Sheet, bool) {
	for _, s := range w.Sheets {
		if s.Name == name {
			return s, true
		}
	}
	return Sheet{}, false
}

// At is the cell at the column and row; a blank cell where nothing is stored.
func (s Sheet) At(col, row int) Cell {
	if r, ok := s.Row(row); ok {
		return r.At(col)
	}
	return Cell{Row: row, Col: col}
}

// Row finds a stored row by its number.
func (s Sheet) Row(number int) (Row, bool) {
	if i, ok := s.IndexOf(number); ok {
		return s.Rows[i], true
	}
	return Row{}, false
}

// IndexOf finds where in Rows a row stands by its number.
func (s *Sheet) IndexOf(number int) (int, bool) {
	if i := number - 1; uint(i) < uint(len(s.Rows)) && s.Rows[i].Number == number { // no row before it is missing
		return i, true
	}
	return slices.BinarySearchFunc(s.Rows, number, func(r Row, number int) int { return r.Number - number })
}

// At is the row's cell in the column; a blank cell where nothing is stored.
func (r Row) At(col int) Cell {
	if i, ok := r.IndexOf(col); ok {
		return r.Cells[i]
	}
	return Cell{Row: r.Number, Col: col}
}

// IndexOf finds where in Cells the cell of a column stands.
func (r *Row) IndexOf(col int) (int, bool) {
	if i := col - 1; uint(i) < uint(len(r.Cells)) && r.Cells[i].Col == col { // no cell before it is missing
		return i, true
	}
	low, high := 0, len(r.Cells)
	for low < high {
		mid := int(uint(low+high) >> 1)
		if r.Cells[mid].Col < col {
			low = mid + 1
		} else {
			high = mid
		}
	}
	return low, low < len(r.Cells) && r.Cells[low].Col == col
}

// HiddenCol says whether a column is hidden.
func (s Sheet) HiddenCol(col int) bool {
	for _, a := range s.HiddenCols {
		if col >= a.FirstCol && col <= a.LastCol {
			return true
		}
	}
	return false
}
