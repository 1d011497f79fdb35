package cells

import "strings"

// slab keeps many short texts in few allocations: each text is a piece of one long string.
type slab struct{ b strings.Builder }

const (
	slabSize = 64 << 10
	longText = 1 << 10 // from here a text has its own allocation
)

func (s *slab) keep(text []byte) string {
	if len(text) >= longText {
		return string(text)
	}
	if s.b.Cap()-s.b.Len() < len(text) {
		size := min(max(2*s.b.Cap(), 512), slabSize)
		s.b.Reset() // the texts kept so far hold their own pieces
		s.b.Grow(max(size, len(text)))
	}
	from := s.b.Len()
	s.b.Write(text)
	return s.b.String()[from:]
}

// block holds the cells of many rows in few allocations.
type block struct {
	cells []Cell
	from  int // where the row being read begins
}

const blockSize = 1 << 12

// add gives room for one more cell of the row being read.
func (b *block) add() *Cell {
	if len(b.cells) == cap(b.cells) {
		row := b.cells[b.from:]
		next := make([]Cell, len(row), max(min(2*cap(b.cells), blockSize), 2*len(row), 16))
		copy(next, row)
		b.cells, b.from = next, 0
	}
	b.cells = b.cells[:len(b.cells)+1]
	return &b.cells[len(b.cells)-1]
}

// row is the row being read.
func (b *block) row() []Cell { return b.cells[b.from:] }

// end ends the row; appending to what it gives leaves the next row whole.
func (b *block) end() []Cell {
	row := b.cells[b.from:len(b.cells):len(b.cells)]
	b.from = len(b.cells)
	if len(row) == 0 {
		return nil
	}
	return row
}
