package cells

import (
	"encoding/xml"
	"errors"
	"io"
	"slices"
	"strconv"
	"strings"
)

// This file is the reader that came before the scanner: the same rules over encoding/xml, slow and short. The tests hold the
// scanner against it.

// referenceWalker goes through one part's XML element by element. Raw tokens are read for speed, so the nesting is kept here.
type referenceWalker struct {
	part  string
	dec   *xml.Decoder
	stack []string
}

func newReferenceWalker(part string, r io.Reader) *referenceWalker {
	return &referenceWalker{part: part, dec: xml.NewDecoder(r)}
}

// next is the next start, end or text; nil at the sound end of the part.
func (w *referenceWalker) next() (xml.Token, error) {
	for {
		t, err := w.dec.RawToken()
		if err == io.EOF {
			if len(w.stack) > 0 {
				return nil, damaged(w.part, "the end inside <%s>", w.stack[len(w.stack)-1])
			}
			return nil, nil
		}
		if err != nil {
			if bound, ok := errors.AsType[*BoundError](err); ok {
				return nil, bound
			}
			if format, ok := errors.AsType[*FormatError](err); ok {
				return nil, format
			}
			return nil, damaged(w.part, "unsound XML (%s)", err)
		}
		switch t := t.(type) {
		case xml.Directive:
			return nil, damaged(w.part, "a document type declaration")
		case xml.StartElement:
			if len(w.stack) == 64 {
				return nil, damaged(w.part, "elements nested more than 64 deep")
			}
			w.stack = append(w.stack, t.Name.Local)
			return t, nil
		case xml.EndElement:
			if len(w.stack) == 0 || w.stack[len(w.stack)-1] != t.Name.Local {
				return nil, damaged(w.part, "</%s> without its beginning", t.Name.Local)
			}
			w.stack = w.stack[:len(w.stack)-1]
			return t, nil
		case xml.CharData:
			return t, nil
		}
	}
}

// each calls f for every element of the part and stops at its first error.
func (w *referenceWalker) each(f func(xml.StartElement) error) error {
	for {
		t, err := w.next()
		if err != nil || t == nil {
			return err
		}
		if e, ok := t.(xml.StartElement); ok {
			if err := f(e); err != nil {
				return err
			}
		}
	}
}

// text collects the text up to the end of the element just begun, child elements' text left out.
func (w *referenceWalker) text() (string, error) {
	depth := len(w.stack)
	var b strings.Builder
	for {
		t, err := w.next()
		if err != nil {
			return "", err
		}
		switch t := t.(type) {
		case nil:
			return "", damaged(w.part, "the end inside a text")
		case xml.CharData:
			if len(w.stack) == depth {
				b.Write(t)
			}
		case xml.EndElement:
			if len(w.stack) < depth {
				return b.String(), nil
			}
		}
	}
}

// rich collects the text of the <t> elements up to the end of the element just begun: plain or rich text, phonetic runs
// left out (ISO/IEC 29500-1, 18.4.8 and 18.4.6).
func (w *referenceWalker) rich() (string, error) {
	depth := len(w.stack)
	var b strings.Builder
	phonetic := 0
	for {
		t, err := w.next()
		if err != nil {
			return "", err
		}
		switch t := t.(type) {
		case nil:
			return "", damaged(w.part, "the end inside a text")
		case xml.StartElement:
			switch {
			case t.Name.Local == "rPh":
				phonetic++
			case t.Name.Local == "t":
				s, err := w.text()
				if err != nil {
					return "", err
				}
				if phonetic == 0 {
					b.WriteString(s)
				}
			}
		case xml.EndElement:
			if t.Name.Local == "rPh" {
				phonetic--
			}
			if len(w.stack) < depth {
				return string(unescape([]byte(b.String()))), nil
			}
		}
	}
}

// referenceAttr is an attribute by its local name; empty where there is none.
func referenceAttr(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Local == name && a.Name.Space == "" {
			return a.Value
		}
	}
	return ""
}

// referenceYes reads a boolean attribute (xsd:boolean).
func referenceYes(s string) bool { return s == "1" || s == "true" }

// referenceReader reads one worksheet part. The <dimension> element is not looked at: many writers state it wrongly.
type referenceReader struct {
	*outline
	w     *referenceWalker
	sheet Sheet
	row   *Row // the row being read
	last  int  // the number of the last row, for rows without r
}

func (o *outline) reference(t tab) (Sheet, error) {
	r, err := o.pack.open(t.part)
	if err != nil {
		return Sheet{}, err
	}
	if r == nil {
		return Sheet{}, damaged(t.part, "no such part for the sheet %q", t.name)
	}
	defer func() { _ = r.Close() }()
	s := &referenceReader{outline: o, w: newReferenceWalker(t.part, r), sheet: Sheet{Name: t.name, Hidden: t.hidden}}
	if err := s.w.each(s.element); err != nil {
		return Sheet{}, err
	}
	if err := s.order(); err != nil {
		return Sheet{}, err
	}
	return s.sheet, nil
}

func (s *referenceReader) element(e xml.StartElement) error {
	switch e.Name.Local {
	case "col":
		first, err1 := strconv.Atoi(referenceAttr(e, "min"))
		last, err2 := strconv.Atoi(referenceAttr(e, "max"))
		if referenceYes(referenceAttr(e, "hidden")) && err1 == nil && err2 == nil && first > 0 && first <= last {
			s.sheet.HiddenCols = append(s.sheet.HiddenCols, Area{FirstCol: first, LastCol: min(last, MaxCol)})
		}
	case "row":
		return s.startRow(e)
	case "c":
		return s.cell(e)
	case "mergeCell":
		from, to, ok := strings.Cut(referenceAttr(e, "ref"), ":")
		if !ok {
			to = from
		}
		c1, r1, ok1 := Parse(from)
		c2, r2, ok2 := Parse(to)
		if !ok1 || !ok2 || c2 < c1 || r2 < r1 {
			return damaged(s.w.part, "the merged cells %q", referenceAttr(e, "ref"))
		}
		s.sheet.Merged = append(s.sheet.Merged, Area{FirstCol: c1, FirstRow: r1, LastCol: c2, LastRow: r2})
	}
	return nil
}

func (s *referenceReader) startRow(e xml.StartElement) error {
	n := s.last + 1
	if r := referenceAttr(e, "r"); r != "" {
		var err error
		if n, err = strconv.Atoi(r); err != nil {
			return damaged(s.w.part, "the row number %q", r)
		}
	}
	if n < 1 || n > MaxRow {
		return damaged(s.w.part, "the row number %d", n)
	}
	s.last = n
	s.sheet.Rows = append(s.sheet.Rows, Row{Number: n, Hidden: referenceYes(referenceAttr(e, "hidden"))})
	s.row = &s.sheet.Rows[len(s.sheet.Rows)-1]
	return nil
}

// cell reads one <c> element to its end.
func (s *referenceReader) cell(e xml.StartElement) error {
	if s.row == nil {
		return damaged(s.w.part, "a cell outside a row")
	}
	c := Cell{Row: s.row.Number, Col: 1}
	if n := len(s.row.Cells); n > 0 {
		c.Col = s.row.Cells[n-1].Col + 1
	}
	kind, style := "", 0
	for _, a := range e.Attr {
		if a.Name.Space != "" {
			continue
		}
		switch a.Name.Local {
		case "r":
			col, row, ok := Parse(a.Value)
			if !ok || row != c.Row {
				return damaged(s.w.part, "the cell %q in row %d", a.Value, c.Row)
			}
			c.Col = col
		case "t":
			kind = a.Value
		case "s":
			n, err := strconv.Atoi(a.Value)
			if err != nil || n < 0 {
				return damaged(s.w.part, "the style %q in %s", a.Value, c.Name())
			}
			style = n
		}
	}
	if c.Col > MaxCol {
		return damaged(s.w.part, "more than %d columns in row %d", MaxCol, c.Row)
	}
	value, has, err := s.content(&c)
	if err != nil {
		return err
	}
	if err := s.settle(&c, kind, style, value, has); err != nil {
		return err
	}
	s.row.Cells = append(s.row.Cells, c)
	return nil
}

// content reads the children of <c>: the formula, the stored value and the inline text.
func (s *referenceReader) content(c *Cell) (value string, has bool, err error) {
	depth := len(s.w.stack)
	for {
		t, err := s.w.next()
		if err != nil {
			return "", false, err
		}
		switch t := t.(type) {
		case nil:
			return "", false, damaged(s.w.part, "the end inside a cell")
		case xml.StartElement:
			if len(s.w.stack) != depth+1 { // of an extension
				continue
			}
			switch t.Name.Local {
			case "f":
				c.Formula = true
			case "v":
				if value, err = s.w.text(); err != nil {
					return "", false, err
				}
				has = true
			case "is":
				if value, err = s.w.rich(); err != nil {
					return "", false, err
				}
				has = true
			}
		case xml.EndElement:
			if len(s.w.stack) < depth {
				return value, has, nil
			}
		}
	}
}

// settle says what the stored value is (ISO/IEC 29500-1, 18.18.11).
func (s *referenceReader) settle(c *Cell, kind string, index int, value string, has bool) error {
	var st style
	if index < len(s.styles) {
		st = s.styles[index]
	}
	c.Format = st.code
	c.Text = value
	switch kind {
	case "s":
		if n := strings.TrimSpace(value); n == "" {
			has = false
		} else if i, err := strconv.Atoi(n); err != nil || i < 0 || i >= len(s.strings) {
			return damaged(s.w.part, "the shared text %q in %s", value, c.Name())
		} else {
			c.Kind, c.Text = Text, s.strings[i]
		}
	case "str":
		c.Kind, c.Text = Text, string(unescape([]byte(value)))
	case "inlineStr":
		c.Kind = Text
	case "b":
		c.Kind = Bool
		if c.Text = "FALSE"; referenceYes(strings.TrimSpace(value)) {
			c.Text = "TRUE"
		}
	case "e":
		c.Kind = Error
	case "d":
		c.Kind = Date
	case "", "n":
		c.Text = strings.Trim(value, " \t\r\n")
		has = has && c.Text != ""
		if c.Kind = Number; st.date {
			c.Kind = Date
		}
	default:
		return damaged(s.w.part, "the cell type %q in %s", kind, c.Name())
	}
	if !has {
		c.Kind, c.Text = Blank, ""
		if c.Formula {
			c.Kind = FormulaNoValue
		}
	}
	return nil
}

// order puts rows and cells in ascending order and refuses an address that stands twice: no rule says which would count.
func (s *referenceReader) order() error {
	byNumber := func(a, b Row) int { return a.Number - b.Number }
	if !slices.IsSortedFunc(s.sheet.Rows, byNumber) {
		slices.SortStableFunc(s.sheet.Rows, byNumber)
	}
	for i, r := range s.sheet.Rows {
		if i > 0 && s.sheet.Rows[i-1].Number == r.Number {
			return damaged(s.w.part, "row %d twice", r.Number)
		}
		byCol := func(a, b Cell) int { return a.Col - b.Col }
		if !slices.IsSortedFunc(r.Cells, byCol) {
			slices.SortStableFunc(r.Cells, byCol)
		}
		for j := 1; j < len(r.Cells); j++ {
			if r.Cells[j].Col == r.Cells[j-1].Col {
				return damaged(s.w.part, "the cell %s twice", r.Cells[j].Name())
			}
		}
	}
	return nil
}

// referenceStrings reads the shared strings, plain and rich.
func referenceStrings(p *pack, name string) ([]string, error) {
	r, err := p.open(name)
	if err != nil || r == nil {
		return nil, err
	}
	defer func() { _ = r.Close() }()
	var all []string
	w := newReferenceWalker(name, r)
	err = w.each(func(e xml.StartElement) error {
		if e.Name.Local != "si" {
			return nil
		}
		s, err := w.rich()
		all = append(all, s)
		return err
	})
	return all, err
}
