package cells

import "strings"

// odsCell is what the attributes of a cell say; they hold only until its content is read.
type odsCell struct {
	kind, value, style string
	formula, failed    bool
	has                bool // a value of its kind is stored
	inText             bool // the paragraphs hold it
	columns, across    int
	down               int
}

// cell reads one cell of the row being read, and its repetitions. rows is how often the row repeats.
func (o *odsReader) cell(rows int) error {
	c, err := o.cellAttributes()
	if err != nil {
		return err
	}
	o.text, o.comment = o.text[:0], false
	o.plain = c.has && !c.formula && c.kind != "string" // what is shown does not matter
	if err := o.paragraphs(); err != nil {
		return err
	}
	out, filled := o.settleODS(c)
	first := o.col + 1
	o.col = min(o.col+c.columns, 1<<30)
	if c.across > 1 || c.down > 1 {
		if err := o.count(); err != nil {
			return err
		}
		last, bottom := min(first+c.across-1, MaxCol), min(o.number+c.down, MaxRow)
		if first <= MaxCol && rows == 1 {
			o.sheet.Merged = append(o.sheet.Merged, Area{FirstCol: first, FirstRow: o.number + 1, LastCol: last, LastRow: bottom})
		}
	}
	if !filled {
		return nil
	}
	if o.col > MaxCol {
		return &BoundError{Part: o.x.part, Found: "cells beyond column 16384", Bound: "at most so many columns", Do: "split the file"}
	}
	if c.style == "" {
		c.style = o.defaultStyle(first)
	}
	s := o.style(c.style)
	out.Format, out.Marks = s.code, s.marks
	if o.comment {
		out.Marks |= Commented
	}
	for col := first; col <= o.col; col++ {
		if err := o.again(col > first); err != nil {
			return err
		}
		room := o.block.add()
		*room = out
		room.Row, room.Col = o.number+1, col
	}
	return nil
}

func (o *odsReader) cellAttributes() (odsCell, error) {
	c := odsCell{columns: 1, across: 1, down: 1}
	var err error
	number := func(v []byte) int {
		n, e := o.repeated(v)
		if e != nil {
			err = e
		}
		return n
	}
	var plain, date, time, boolean, text []byte
	for _, a := range o.x.attrs {
		switch string(o.usual(a.name)) {
		case "table:style-name":
			c.style = string(a.value)
		case "table:formula":
			c.formula = true
		case "table:number-columns-repeated":
			c.columns = number(a.value)
		case "table:number-columns-spanned":
			c.across = number(a.value)
		case "table:number-rows-spanned":
			c.down = number(a.value)
		case "office:value-type":
			c.kind = odsKind(a.value)
		case "calcext:value-type":
			c.failed = string(a.value) == "error"
		case "office:value":
			plain = a.value
		case "office:date-value":
			date = a.value
		case "office:time-value":
			time = a.value
		case "office:boolean-value":
			boolean = a.value
		case "office:string-value":
			text = a.value
		}
	}
	c.has = c.kind != ""
	value := plain
	switch c.kind {
	case "date":
		value = date
	case "time":
		value = time
	case "boolean":
		value = boolean
	case "string":
		value, c.inText = text, text == nil
	}
	c.value = o.texts.keep(value)
	if c.has && value == nil && c.kind != "string" {
		return c, damaged(o.x.part, "a cell of the kind %q without its value in row %d", c.kind, o.number+1)
	}
	return c, err
}

// odsKind spares an allocation for the kinds there are (part 3, 19.385).
func odsKind(b []byte) string {
	for _, k := range [...]string{"float", "string", "date", "time", "percentage", "currency", "boolean"} {
		if k == string(b) {
			return k
		}
	}
	return string(b)
}

// settleODS says what a cell holds; false where it holds nothing.
func (o *odsReader) settleODS(c odsCell) (Cell, bool) {
	shown := strings.TrimSpace(string(o.text))
	out := Cell{Formula: c.formula, Text: c.value}
	if c.inText {
		out.Text = o.texts.keep(o.text)
	}
	switch {
	case !c.has && c.formula:
		return Cell{Kind: FormulaNoValue, Formula: true}, true
	case !c.has && shown != "": // text without a kind: some writers leave it off
		out.Kind, out.Text = Text, o.texts.keep(o.text)
	case !c.has:
		return Cell{}, false
	case c.failed || c.formula && (strings.HasPrefix(shown, "#") || strings.HasPrefix(shown, "Err:")):
		out.Kind, out.Text = Error, o.texts.keep([]byte(shown))
	case c.kind == "string":
		out.Kind = Text
	case c.kind == "boolean":
		out.Kind, out.Text = Bool, strings.ToUpper(c.value)
	case c.kind == "date" || c.kind == "time":
		out.Kind = Date
	default: // float, percentage, currency
		out.Kind, out.Text = Number, strings.TrimSpace(c.value)
	}
	return out, true
}

// paragraphs gathers the text of the cell just begun, a line break between paragraphs; comments and drawings are passed over.
func (o *odsReader) paragraphs() error {
	some := false
	return o.x.children(func() error {
		switch string(o.usual(o.x.name)) {
		case "office:annotation":
			o.comment = true
		case "text:p", "text:h":
			if some {
				o.text = append(o.text, '\n')
			}
			some = true
			if o.plain {
				return nil
			}
			return o.paragraph()
		case "table:table", "table:table-cell", "table:table-row":
			return damaged(o.x.part, "<%s> inside a cell of row %d", clip(o.x.name), o.number+1)
		}
		return nil
	})
}

// paragraph appends the text of one paragraph: runs of white space count as one space (part 3, 6.1.2), others are elements.
func (o *odsReader) paragraph() error {
	depth, from := o.x.depth(), len(o.text)
	for {
		t, err := o.x.next()
		if err != nil {
			return err
		}
		switch t {
		case charData:
			for _, b := range o.x.chars {
				if blank([]byte{b}) == 1 {
					if n := len(o.text); n == from || o.text[n-1] == ' ' {
						continue
					}
					b = ' '
				}
				o.text = append(o.text, b)
			}
		case startTag:
			err = o.inline()
		}
		if err != nil {
			return err
		}
		if len(o.text) > MaxText {
			return o.x.tooLong()
		}
		if o.x.depth() < depth {
			return nil
		}
	}
}

// inline takes an element inside a paragraph: white space that is meant, and what is no text of the cell.
func (o *odsReader) inline() error {
	switch string(o.usual(o.x.name)) {
	case "text:s":
		n, err := o.repeated(o.attr("text:c"))
		if err != nil {
			return err
		}
		if n > MaxText {
			return o.x.tooLong()
		}
		for range n {
			o.text = append(o.text, ' ')
		}
	case "text:tab":
		o.text = append(o.text, '\t')
	case "text:line-break":
		o.text = append(o.text, '\n')
	case "office:annotation":
		o.comment = true
		return o.x.leave(o.x.depth() - 1)
	case "text:note", "text:ruby-text":
		return o.x.leave(o.x.depth() - 1)
	}
	return nil
}
