package cells

// lookahead is how many bytes must be there before a plain cell is tried: more than most have. Others go by their tokens.
const lookahead = 512

// plainCells reads the cells that stand as most programs write them,
//
//	<c r="B7" s="3" t="s"><v>12.5</v></c>   <c r="B7" s="3"/>
//
// and stops before the first that does not. It is the same reading as that by tokens, without the tokens: a value here is
// made of characters that stand for themselves, and what follows closes the element.
func (s *sheetReader) plainCells() error {
	x := s.x
	for {
		if x.end-x.at < lookahead && !x.done {
			if _, err := x.fill(); err != nil {
				return err
			}
		}
		b := x.buf[x.at:x.end]
		if len(b) < lookahead {
			return nil
		}
		b = b[:lookahead]
		if string(b[:6]) != `<c r="` {
			return nil
		}
		col, i := 0, 6
		for ; i < 9 && b[i]-'A' < 26; i++ {
			col = col*26 + int(b[i]-'A') + 1
		}
		end := i + len(s.digits)
		if col == 0 || col > MaxCol || string(b[i:end]) != s.digits || b[end] != '"' {
			return nil
		}
		i = end + 1
		kind, index, styled := byte('n'), 0, false
		for b[i] == ' ' {
			switch {
			case b[i+1] == 's' && b[i+2] == '=' && b[i+3] == '"' && !styled:
				from := i + 4
				for i = from; b[i]-'0' < 10 && i < from+9; i++ {
					index = index*10 + int(b[i]-'0')
				}
				if i == from || b[i] != '"' {
					return nil
				}
				styled = true
				i++
			case b[i+1] == 't' && b[i+2] == '=' && b[i+3] == '"' && b[i+5] == '"' && (b[i+4] == 's' || b[i+4] == 'n') && kind == 'n':
				if kind = b[i+4]; kind == 'n' {
					kind = 'N'
				}
				i += 6
			default:
				return nil
			}
		}
		var value []byte
		switch {
		case string(b[i:i+4]) == "><v>":
			i += 4
			from := i
			for i < lookahead-16 && class[b[i]]&plainCell != 0 {
				i++
			}
			if value = b[from:i]; i == from || string(b[i:i+8]) != "</v></c>" {
				return nil
			}
			i += 8
		case b[i] == '/' && b[i+1] == '>':
			i += 2
		default:
			return nil
		}
		shared := 0
		if kind == 's' && value != nil {
			if n, ok := whole(value); ok && n < len(s.strings) {
				shared = n
			} else {
				return nil
			}
		}
		c, err := s.add(col)
		if err != nil {
			return err
		}
		x.at += i
		date := false
		if index < len(s.styles) {
			c.Format, c.Marks, date = s.styles[index].code, s.marks[index], s.styles[index].date
		}
		switch {
		case value == nil:
		case kind == 's':
			c.Kind, c.Text = Text, s.strings[shared]
		case date:
			c.Kind, c.Text = Date, s.texts.keep(value)
		default:
			c.Kind, c.Text = Number, s.texts.keep(value)
		}
	}
}
