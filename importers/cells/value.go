package cells

import (
	"bytes"
	"strconv"
)

// cell reads one <c> element by its tokens.
func (s *sheetReader) cell() error {
	c := Cell{Row: s.number, Col: s.col + 1}
	kind, index := "", 0
	for _, a := range s.x.attrs {
		switch string(a.name) {
		case "r":
			col, row, ok := Parse(string(a.value))
			if !ok || row != c.Row {
				return damaged(s.x.part, "the cell %q in row %d", clip(a.value), c.Row)
			}
			c.Col = col
		case "t":
			kind = kindOf(a.value)
		case "s":
			var ok bool
			if index, ok = whole(a.value); !ok {
				return damaged(s.x.part, "the style %q in %s", clip(a.value), c.Name())
			}
		}
	}
	if c.Col > MaxCol {
		return damaged(s.x.part, "more than %d columns in row %d", MaxCol, c.Row)
	}
	has, err := s.content(&c, kind)
	if err != nil {
		return err
	}
	if index < len(s.styles) {
		c.Format, c.Marks = s.styles[index].code, s.marks[index]
	}
	if err := s.settle(&c, kind, index < len(s.styles) && s.styles[index].date, has); err != nil {
		return err
	}
	room, err := s.add(c.Col)
	if err == nil {
		*room = c
	}
	return err
}

// kindOf spares an allocation for the types there are.
func kindOf(b []byte) string {
	for _, k := range [...]string{"s", "n", "str", "b", "e", "inlineStr", "d"} {
		if k == string(b) {
			return k
		}
	}
	return string(b)
}

// content reads the children of <c>: the formula, and into s.value the stored value or the inline text.
func (s *sheetReader) content(c *Cell, kind string) (has bool, err error) {
	s.value = s.value[:0]
	depth := s.x.depth()
	for {
		t, err := s.x.next()
		if err != nil {
			return false, err
		}
		if t == startTag {
			switch string(s.x.local()) {
			case "f":
				c.Formula = true
			case "v":
				if has {
					return false, damaged(s.x.part, "two values in %s", c.Name())
				}
				has = true
				s.value, err = s.x.gather(s.value)
			case "is":
				if has || kind != "inlineStr" {
					return false, damaged(s.x.part, "an inline text beside a value or another type in %s", c.Name())
				}
				has = true
				s.value, err = s.x.rich(s.value)
			case "extLst":
			default:
				return false, damaged(s.x.part, "<%s> in the cell %s, where it has no place", clip(s.x.name), c.Name())
			}
			if err == nil {
				err = s.x.leave(depth)
			}
			if err != nil {
				return false, err
			}
		}
		if s.x.depth() < depth {
			return has, nil
		}
	}
}

// settle says what the stored value is (ISO/IEC 29500-1, 18.18.11).
func (s *sheetReader) settle(c *Cell, kind string, date, has bool) error {
	trimmed := trim(s.value)
	switch kind {
	case "", "n":
		has = has && len(trimmed) > 0
		if c.Kind = Number; date {
			c.Kind = Date
		}
		c.Text = s.texts.keep(trimmed)
	case "s":
		c.Kind = Text
		if has = has && len(trimmed) > 0; has {
			i, ok := whole(trimmed)
			if !ok || i >= len(s.strings) {
				return damaged(s.x.part, "the shared text %q in %s", clip(s.value), c.Name())
			}
			c.Text = s.strings[i]
		}
	case "str", "inlineStr":
		c.Kind, c.Text = Text, s.texts.keep(unescape(s.value))
	case "b":
		switch c.Kind = Bool; string(bytes.ToLower(trimmed)) {
		case "1", "true":
			c.Text = "TRUE"
		case "0", "false":
			c.Text = "FALSE"
		default:
			if has = has && len(trimmed) > 0; has {
				return damaged(s.x.part, "the truth value %q in %s", clip(s.value), c.Name())
			}
		}
	case "e":
		c.Kind, c.Text = Error, s.texts.keep(s.value)
	case "d":
		c.Kind, c.Text = Date, s.texts.keep(s.value)
	default:
		return damaged(s.x.part, "the cell type %q in %s", clip([]byte(kind)), c.Name())
	}
	if !has {
		c.Kind, c.Text = Blank, ""
		if c.Formula {
			c.Kind = FormulaNoValue
		}
	}
	return nil
}

// gather appends the text of the element just begun, to its end; child elements' text is left out.
func (s *scanner) gather(to []byte) ([]byte, error) {
	depth := s.depth()
	from := len(to)
	for {
		t, err := s.next()
		if err != nil {
			return to, err
		}
		if t == charData && s.depth() == depth {
			to = append(to, s.chars...)
			if len(to)-from > MaxText {
				return to, s.tooLong()
			}
		}
		if s.depth() < depth {
			return to, nil
		}
	}
}

// rich appends the text of the <t> elements up to the end of the element just begun: plain or rich text, phonetic runs left
// out (ISO/IEC 29500-1, 18.4.8 and 18.4.6).
func (s *scanner) rich(to []byte) ([]byte, error) {
	depth := s.depth()
	for {
		t, err := s.next()
		if err == nil && t == startTag {
			switch string(s.local()) {
			case "t":
				to, err = s.gather(to)
			case "rPh":
				err = s.leave(s.depth() - 1)
			}
			if len(to) > MaxText {
				err = s.tooLong()
			}
		}
		if err != nil {
			return to, err
		}
		if s.depth() < depth {
			return to, nil
		}
	}
}

func (s *scanner) tooLong() error {
	return &BoundError{
		Part: s.part, Found: "a tag or text of more than 1 MiB", Bound: "at most " + strconv.Itoa(MaxText>>20) + " MiB",
		Do: "shorten the text (a cell holds 32767 characters) and save it again as .xlsx",
	}
}
