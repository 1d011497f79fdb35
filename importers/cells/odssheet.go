package cells

import (
	"slices"
	"strings"
)

// table reads one sheet. Sheets that hold copies of other files' cells, which formulas refer to, are left out.
func (o *odsReader) table(w *Workbook) error {
	name, hidden := string(o.attr("table:name")), o.hides[string(o.attr("table:style-name"))]
	if strings.HasPrefix(name, "'file:") || strings.HasPrefix(name, "'http") {
		return nil
	}
	for _, s := range w.Sheets {
		if strings.EqualFold(s.Name, name) {
			return damaged(o.x.part, "the sheet name %q twice", name)
		}
	}
	o.sheet = Sheet{Name: name, Hidden: hidden}
	o.spans, o.number, o.col = nil, 0, 0
	if err := o.tableChildren(); err != nil {
		return err
	}
	w.Sheets = append(w.Sheets, o.sheet)
	return nil
}

// tableChildren reads columns and rows, through the groups that they may stand in.
func (o *odsReader) tableChildren() error {
	return o.x.children(func() error {
		switch string(o.usual(o.x.name)) {
		case "table:table-column-group", "table:table-header-columns", "table:table-columns",
			"table:table-row-group", "table:table-header-rows", "table:table-rows":
			return o.tableChildren()
		case "table:table-column":
			return o.tableColumn()
		case "table:table-row":
			return o.tableRow()
		case "table:table-cell", "table:covered-table-cell", "table:table":
			return damaged(o.x.part, "<%s> behind row %d, where it has no place", clip(o.x.name), o.number)
		}
		return nil
	})
}

func (o *odsReader) tableColumn() error {
	n, err := o.repeated(o.attr("table:number-columns-repeated"))
	if err != nil {
		return err
	}
	first := o.col + 1
	o.col = min(o.col+n, MaxCol)
	if first > MaxCol {
		return nil
	}
	o.spans = append(o.spans, span{last: o.col, style: string(o.attr("table:default-cell-style-name"))})
	if hiddenODS(o.attr("table:visibility")) {
		o.sheet.HiddenCols = append(o.sheet.HiddenCols, Area{FirstCol: first, LastCol: o.col})
	}
	return nil
}

// hiddenODS reads table:visibility: visible, collapse or filter.
func hiddenODS(v []byte) bool { return string(v) == "collapse" || string(v) == "filter" }

// tableRow reads a row; one that repeats is there as often as it says, up to the bounds, where it holds something.
func (o *odsReader) tableRow() error {
	n, err := o.repeated(o.attr("table:number-rows-repeated"))
	if err != nil {
		return err
	}
	hidden := hiddenODS(o.attr("table:visibility"))
	o.rowOf = string(o.attr("table:default-cell-style-name"))
	o.col = 0
	from := len(o.sheet.Merged)
	err = o.x.children(func() error {
		switch string(o.usual(o.x.name)) {
		case "table:table-cell":
			return o.cell(n)
		case "table:covered-table-cell":
			return o.cell(n)
		case "table:table-row":
			return damaged(o.x.part, "a row inside row %d", o.number+1)
		}
		return nil
	})
	if err != nil {
		return err
	}
	cells := o.block.end()
	first := o.number + 1
	o.number = min(o.number+n, 1<<30)
	if len(cells) == 0 {
		o.sheet.Merged = o.sheet.Merged[:from] // a merged area of blank cells says nothing
		return nil
	}
	if o.number > MaxRow {
		return &BoundError{Part: o.x.part, Found: "readings below row 1048576", Bound: "at most so many rows", Do: "split the file"}
	}
	for number := first; number <= o.number; number++ {
		row := cells
		if number > first {
			row = slices.Clone(cells)
			for i := range row {
				row[i].Row = number
				if err := o.again(true); err != nil {
					return err
				}
			}
		}
		if err := o.again(number > first); err != nil {
			return err
		}
		o.sheet.Rows = append(o.sheet.Rows, Row{Number: number, Hidden: hidden, Cells: row})
	}
	return nil
}

// defaultStyle is the style of a cell that names none: the row's, else the column's.
func (o *odsReader) defaultStyle(col int) string {
	if o.rowOf != "" {
		return o.rowOf
	}
	i, _ := slices.BinarySearchFunc(o.spans, col, func(s span, col int) int { return s.last - col })
	if i < len(o.spans) {
		return o.spans[i].style
	}
	return ""
}

// maxRepeats is how many cells and rows may stand in a file once and count many times: a small file could else fill the memory.
const maxRepeats = 1 << 20

// again counts a cell or row; repeated says that it stands in the file only once, further in front.
func (o *odsReader) again(repeated bool) error {
	if repeated {
		if o.repeats++; o.repeats > maxRepeats {
			return &BoundError{
				Part: o.x.part, Found: "more than 1048576 cells that repeat others", Bound: "at most so many",
				Do: "take out what is not readings, or split the file",
			}
		}
	}
	return o.count()
}
