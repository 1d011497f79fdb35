package cells

import (
	"bytes"
	"strconv"
	"unicode/utf8"
)

// place is where characters stand; their escapes differ by it.
type place int

const (
	inText place = iota
	inValue
	inCDATA
)

// text takes the characters up to the next tag.
func (s *scanner) text() error {
	i := 0
	for {
		if n := bytes.IndexByte(s.buf[s.at+i:s.end], '<'); n >= 0 {
			i += n
			break
		}
		i = s.end - s.at
		if ok, err := s.fill(); err != nil {
			return err
		} else if !ok {
			break
		}
	}
	raw := s.buf[s.at : s.at+i]
	s.at += i
	if len(s.marks) == 0 && blank(raw) < len(raw) {
		return s.unsound("text outside the root")
	}
	s.chars = raw
	return s.asMeant(inText)
}

// declaration takes what begins with <!: a comment is passed over, and true says that it was characters.
func (s *scanner) declaration() (bool, error) {
	const comment, section = "<!--", "<![CDATA["
	for s.end-s.at < len(section) {
		if ok, err := s.fill(); err != nil {
			return false, err
		} else if !ok {
			break
		}
	}
	switch b := s.buf[s.at:s.end]; {
	case bytes.HasPrefix(b, []byte(comment)):
		return false, s.comment(len(comment))
	case bytes.HasPrefix(b, []byte(section)):
		return true, s.section(len(section))
	}
	return false, damaged(s.part, "a document type declaration")
}

// comment passes over a comment whose beginning is i bytes long.
func (s *scanner) comment(i int) error {
	n, err := s.find(i, "--", "a comment")
	if err != nil {
		return err
	}
	c, ok, err := s.byteAt(n + 2)
	if err != nil {
		return err
	}
	if !ok || c != '>' {
		return s.unsound("-- inside a comment")
	}
	err = s.valid(s.buf[s.at+i : s.at+n])
	s.at += n + 3
	return err
}

// section takes a CDATA section whose beginning is i bytes long.
func (s *scanner) section(i int) error {
	n, err := s.find(i, "]]>", "a CDATA section")
	if err != nil {
		return err
	}
	s.chars = s.buf[s.at+i : s.at+n]
	s.at += n + 3
	if len(s.marks) == 0 {
		return s.unsound("text outside the root")
	}
	return s.asMeant(inCDATA)
}

// asMeant decodes s.chars where they do not stand for themselves.
func (s *scanner) asMeant(where place) error {
	for _, c := range s.chars {
		if class[c]&plainText == 0 {
			var err error
			s.decoded, err = s.decode(s.decoded[:0], s.chars, where)
			s.chars = s.decoded
			return err
		}
	}
	return nil
}

// decode appends characters as they are meant: escapes resolved, line ends as LF (XML 1.0, 2.11), white space in values as
// spaces (3.3.3).
func (s *scanner) decode(to, raw []byte, where place) ([]byte, error) {
	for i := 0; i < len(raw); {
		switch c := raw[i]; {
		case c == '&' && where != inCDATA:
			end := bytes.IndexByte(raw[i:min(len(raw), i+16)], ';')
			r, ok := rune(0), false
			if end > 0 {
				r, ok = reference(raw[i+1 : i+end])
			}
			if !ok {
				return nil, s.unsound("the escape %q", clip(raw[i:min(len(raw), i+max(end+1, 8))]))
			}
			to = utf8.AppendRune(to, r)
			i += end + 1
		case c == '\r':
			if i++; i < len(raw) && raw[i] == '\n' {
				i++
			}
			if where == inValue {
				to = append(to, ' ')
			} else {
				to = append(to, '\n')
			}
		case (c == '\t' || c == '\n') && where == inValue:
			to = append(to, ' ')
			i++
		case c == ']' && where == inText && bytes.HasPrefix(raw[i:], []byte("]]>")):
			return nil, s.unsound("]]> inside a text")
		case c < utf8.RuneSelf:
			if !validRune(rune(c)) {
				return nil, s.unsound("the character %U", c)
			}
			to = append(to, c)
			i++
		default:
			r, size := utf8.DecodeRune(raw[i:])
			if r == utf8.RuneError && size == 1 {
				return nil, s.unsound("the byte %#x that is not UTF-8", c)
			}
			if !validRune(r) {
				return nil, s.unsound("the character %U", r)
			}
			to = append(to, raw[i:i+size]...)
			i += size
		}
	}
	return to, nil
}

// valid checks characters that are passed over.
func (s *scanner) valid(raw []byte) error {
	for i := 0; i < len(raw); {
		r, size := utf8.DecodeRune(raw[i:])
		if r == utf8.RuneError && size == 1 || !validRune(r) {
			return s.unsound("the byte %#x", raw[i])
		}
		i += size
	}
	return nil
}

// validRune says whether XML 1.0 allows the character (2.2).
func validRune(r rune) bool {
	return r >= ' ' && r <= 0xd7ff || r == '\t' || r == '\n' || r == '\r' || r >= 0xe000 && r <= 0xfffd || r >= 0x10000 && r <= 0x10ffff
}

// reference is the character that a name or number between & and ; stands for.
func reference(name []byte) (rune, bool) {
	switch string(name) {
	case "lt":
		return '<', true
	case "gt":
		return '>', true
	case "amp":
		return '&', true
	case "quot":
		return '"', true
	case "apos":
		return '\'', true
	}
	base := 10
	digits, ok := bytes.CutPrefix(name, []byte("#"))
	if hex, is := bytes.CutPrefix(digits, []byte("x")); ok && is {
		base, digits = 16, hex
	}
	if !ok || len(digits) == 0 || digits[0] == '+' || digits[0] == '-' {
		return 0, false
	}
	n, err := strconv.ParseInt(string(digits), base, 32)
	return rune(n), err == nil && validRune(rune(n))
}
