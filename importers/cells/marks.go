package cells

// Marks are what a cell carries that people read meaning into and that is no value: it is told, never obeyed.
type Marks uint8

// The marks of a cell.
const (
	Struck    Marks = 1 << iota // its font is struck through
	Filled                      // it has a fill of its own
	Commented                   // a comment hangs on it
)

// Has says whether the cell carries the mark.
func (m Marks) Has(mark Marks) bool { return m&mark != 0 }
