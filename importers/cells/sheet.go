package cells

import (
	"slices"
	"strconv"
	"strings"
)

// sheetReader reads one worksheet part. The <dimension> element is not looked at: many writers state it wrongly.
type sheetReader struct {
	*outline
	x      *scanner
	sheet  Sheet
	texts  slab
	block  block
	number int    // of the row being read
	digits string // that number as it stands in addresses
	col    int    // of the last cell of the row being read
	rows   bool   // the rows were read
	value  []byte // the stored value of the cell being read

	rowsMixed, colsMixed bool // not in ascending order so far
}

func (o *outline) sheet(t tab) (Sheet, error) {
	r, err := o.pack.open(t.part)
	if err != nil {
		return Sheet{}, err
	}
	if r == nil {
		return Sheet{}, damaged(t.part, "no such part for the sheet %q", t.name)
	}
	defer func() { _ = r.Close() }()
	s := &sheetReader{outline: o, x: newScanner(t.part, r), sheet: Sheet{Name: t.name, Hidden: t.hidden}}
	if err := s.x.root("worksheet"); err != nil {
		return Sheet{}, err
	}
	if err := s.x.children(s.section); err != nil {
		return Sheet{}, err
	}
	if err := s.x.rest(); err != nil {
		return Sheet{}, err
	}
	if !s.rows {
		return Sheet{}, damaged(t.part, "a sheet without its rows (<sheetData>)")
	}
	return s.sheet, s.orderRows()
}

// section reads one child of <worksheet>.
func (s *sheetReader) section() error {
	switch string(s.x.local()) {
	case "cols":
		return s.x.children(s.hiddenCol)
	case "mergeCells":
		return s.x.children(s.merged)
	case "sheetData":
		if s.rows {
			return damaged(s.x.part, "the rows of the sheet twice")
		}
		s.rows = true
		return s.x.children(s.row)
	case "col", "row", "c", "mergeCell":
		return s.misplaced()
	}
	return nil
}

// misplaced refuses what stands where the format has no place for it: it could hold a reading.
func (s *sheetReader) misplaced() error {
	return damaged(s.x.part, "<%s> in row %d, where it has no place", clip(s.x.name), s.number)
}

func (s *sheetReader) hiddenCol() error {
	if !yes(s.x.attr("hidden")) || !s.x.is("col") {
		return nil
	}
	first, err1 := strconv.Atoi(string(s.x.attr("min")))
	last, err2 := strconv.Atoi(string(s.x.attr("max")))
	if err1 != nil || err2 != nil || first < 1 || first > last || len(s.sheet.HiddenCols) == MaxCol {
		return damaged(s.x.part, "the hidden columns %q to %q", clip(s.x.attr("min")), clip(s.x.attr("max")))
	}
	s.sheet.HiddenCols = append(s.sheet.HiddenCols, Area{FirstCol: first, LastCol: min(last, MaxCol)})
	return nil
}

func (s *sheetReader) merged() error {
	if !s.x.is("mergeCell") {
		return nil
	}
	ref := s.x.attr("ref")
	from, to, ok := strings.Cut(string(ref), ":")
	if !ok {
		to = from
	}
	c1, r1, ok1 := Parse(from)
	c2, r2, ok2 := Parse(to)
	if !ok1 || !ok2 || c2 < c1 || r2 < r1 {
		return damaged(s.x.part, "the merged cells %q", clip(ref))
	}
	if err := s.count(); err != nil {
		return err
	}
	s.sheet.Merged = append(s.sheet.Merged, Area{FirstCol: c1, FirstRow: r1, LastCol: c2, LastRow: r2})
	return nil
}

// row reads one child of <sheetData>.
func (s *sheetReader) row() error {
	if !s.x.is("row") {
		return s.misplaced()
	}
	n := s.number + 1
	if r := s.x.attr("r"); r != nil {
		var ok bool
		if n, ok = whole(r); !ok {
			return damaged(s.x.part, "the row number %q", clip(r))
		}
	}
	if n < 1 || n > MaxRow {
		return damaged(s.x.part, "the row number %d", n)
	}
	if len(s.sheet.Rows) == MaxRow {
		return damaged(s.x.part, "more than %d rows", MaxRow)
	}
	if err := s.count(); err != nil {
		return err
	}
	s.rowsMixed = s.rowsMixed || len(s.sheet.Rows) > 0 && n <= s.number
	s.number, s.digits, s.col, s.colsMixed = n, strconv.Itoa(n), 0, false
	hidden := yes(s.x.attr("hidden"))
	if err := s.cells(); err != nil {
		return err
	}
	if s.colsMixed {
		if err := s.orderCells(); err != nil {
			return err
		}
	}
	s.sheet.Rows = append(s.sheet.Rows, Row{Number: n, Hidden: hidden, Cells: s.block.end()})
	return nil
}

// cells reads the cells of a row to its end: the plain ones in one go, each other one by its tokens.
func (s *sheetReader) cells() error {
	depth := s.x.depth()
	for {
		if !s.x.closing && !s.slow {
			if err := s.plainCells(); err != nil {
				return err
			}
		}
		t, err := s.x.next()
		switch {
		case err != nil:
			return err
		case t == endTag:
			return nil
		case t != startTag:
			continue
		case s.x.is("c"):
			err = s.cell()
		case !s.x.is("extLst"):
			err = s.misplaced()
		}
		if err == nil {
			err = s.x.leave(depth)
		}
		if err != nil {
			return err
		}
	}
}

// add makes room for a cell of the row being read; its column decides whether the order still holds.
func (s *sheetReader) add(col int) (*Cell, error) {
	if err := s.count(); err != nil {
		return nil, err
	}
	s.colsMixed = s.colsMixed || col <= s.col
	s.col = col
	c := s.block.add()
	c.Row, c.Col = s.number, col
	return c, nil
}

// count counts what takes memory: cells, rows and merged areas of all sheets.
func (o *outline) count() error {
	if o.counted++; o.counted > MaxCells {
		return &BoundError{Found: "more than 16777216 cells", Bound: "at most 16777216 in all sheets that are read", Do: "split the file, or take out what is not readings"}
	}
	return nil
}

// orderCells puts the cells of the row in ascending order and refuses an address that stands twice: no rule says which would count.
func (s *sheetReader) orderCells() error {
	row := s.block.row()
	slices.SortStableFunc(row, func(a, b Cell) int { return a.Col - b.Col })
	for i := 1; i < len(row); i++ {
		if row[i].Col == row[i-1].Col {
			return damaged(s.x.part, "the cell %s twice", row[i].Name())
		}
	}
	return nil
}

// orderRows does the same for the rows.
func (s *sheetReader) orderRows() error {
	if !s.rowsMixed {
		return nil
	}
	slices.SortStableFunc(s.sheet.Rows, func(a, b Row) int { return a.Number - b.Number })
	for i, r := range s.sheet.Rows {
		if i > 0 && s.sheet.Rows[i-1].Number == r.Number {
			return damaged(s.x.part, "row %d twice", r.Number)
		}
	}
	return nil
}

// whole reads a whole number of at most nine digits.
func whole(b []byte) (int, bool) {
	n := 0
	for _, c := range b {
		if c < '0' || c > '9' {
			return 0, false
		}
		n = n*10 + int(c-'0')
	}
	return n, len(b) > 0 && len(b) <= 9
}

// yes reads a boolean attribute (xsd:boolean).
func yes(b []byte) bool { return string(b) == "1" || string(b) == "true" }
