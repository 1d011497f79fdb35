package cells

import (
	"bytes"
	"unicode/utf8"
)

// tagLength gives the length of the tag that comes next, with its brackets.
func (s *scanner) tagLength() (int, error) {
	quote := byte(0)
	for i := 1; ; i++ {
		if s.at+i >= s.end {
			if ok, err := s.fill(); err != nil {
				return 0, err
			} else if !ok {
				return 0, s.unsound("the end inside a tag")
			}
		}
		switch c := s.buf[s.at+i]; {
		case c == quote:
			quote = 0
		case c == '<':
			return 0, s.unsound("a < inside a tag")
		case quote != 0:
		case c == '>':
			return i + 1, nil
		case c == '"' || c == '\'':
			quote = c
		}
	}
}

func (s *scanner) endTag() error {
	n, err := s.tagLength()
	if err != nil {
		return err
	}
	name := bytes.TrimRight(s.buf[s.at+2:s.at+n-1], " \t\r\n")
	if last := len(s.marks) - 1; last < 0 || !bytes.Equal(name, s.names[s.marks[last]:]) {
		return s.unsound("</%s> without its beginning", clip(name))
	}
	s.at += n
	s.pop()
	return nil
}

func (s *scanner) startTag() error {
	n, err := s.tagLength()
	if err != nil {
		return err
	}
	tag := s.buf[s.at+1 : s.at+n-1]
	s.at += n
	if last := len(tag) - 1; last >= 0 && tag[last] == '/' {
		tag = tag[:last]
		s.closing = true
	}
	i := nameLength(tag)
	s.name = tag[:i]
	if !validName(s.name) {
		return s.unsound("the name %q", clip(s.name))
	}
	s.attrs, s.decoded = s.attrs[:0], s.decoded[:0]
	for tag = tag[i:]; ; {
		space := blank(tag)
		if space == len(tag) {
			return s.push()
		}
		if space == 0 {
			return s.unsound("no space before an attribute of <%s>", clip(s.name))
		}
		if tag, err = s.attribute(tag[space:]); err != nil {
			return err
		}
	}
}

// attribute takes one attribute off the front of the tag.
func (s *scanner) attribute(tag []byte) ([]byte, error) {
	i := nameLength(tag)
	a := attribute{name: tag[:i]}
	if !validName(a.name) {
		return nil, s.unsound("the attribute name %q", clip(a.name))
	}
	i += blank(tag[i:])
	if i == len(tag) || tag[i] != '=' {
		return nil, s.unsound("the attribute %s without a value", clip(a.name))
	}
	i++
	i += blank(tag[i:])
	if i == len(tag) || tag[i] != '"' && tag[i] != '\'' {
		return nil, s.unsound("the attribute %s without quotes", clip(a.name))
	}
	end := bytes.IndexByte(tag[i+1:], tag[i])
	if end < 0 {
		return nil, s.unsound("the attribute %s without its end", clip(a.name))
	}
	a.value = tag[i+1 : i+1+end]
	for _, b := range s.attrs {
		if bytes.Equal(a.name, b.name) {
			return nil, s.unsound("the attribute %s twice", clip(a.name))
		}
	}
	if len(s.attrs) == maxAttrs {
		return nil, s.unsound("more than %d attributes in <%s>", maxAttrs, clip(s.name))
	}
	for _, c := range a.value {
		if class[c]&plainValue == 0 {
			from := len(s.decoded)
			var err error
			if s.decoded, err = s.decode(s.decoded, a.value, inValue); err != nil {
				return nil, err
			}
			a.value = s.decoded[from:len(s.decoded):len(s.decoded)]
			break
		}
	}
	s.attrs = append(s.attrs, a)
	return tag[i+end+2:], nil
}

// maxAttrs is more than any writer gives one element; the root of a sheet declares some thirty name spaces.
const maxAttrs = 256

// The bits of class.
const (
	plainText  = 1 << iota // stands for itself in a text
	plainValue             // stands for itself in an attribute's value
	plainCell              // may stand in a stored value that is taken as it is
	nameByte               // may stand in a name; bytes of longer characters are checked by validName
)

var class = func() (t [256]uint8) {
	for c := ' '; c <= '~'; c++ {
		if c != '<' && c != '&' {
			t[c] |= plainText | plainValue
			if c != ' ' && c != '_' && c != ']' && c != '>' {
				t[c] |= plainCell
			}
		}
	}
	t[']'] &^= plainText // may begin ]]>
	t['\n'] |= plainText
	t['\t'] |= plainText
	for c := range 256 {
		if c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c >= '0' && c <= '9' || c >= 0x80 || c == '_' || c == ':' || c == '-' || c == '.' {
			t[c] |= nameByte
		}
	}
	return t
}()

func nameLength(b []byte) int {
	for i, c := range b {
		if class[c]&nameByte == 0 {
			return i
		}
	}
	return len(b)
}

// validName takes letters beyond ASCII without asking for their classes: such names have no meaning here.
func validName(b []byte) bool {
	if len(b) == 0 || b[0] >= '0' && b[0] <= '9' || b[0] == '-' || b[0] == '.' {
		return false
	}
	colon := bytes.IndexByte(b, ':')
	if colon == 0 || colon == len(b)-1 || bytes.IndexByte(b[colon+1:], ':') >= 0 && colon > 0 {
		return false
	}
	return utf8.Valid(b)
}

// blank is how many white space bytes stand in front.
func blank(b []byte) int {
	for i, c := range b {
		if c != ' ' && c != '\t' && c != '\n' && c != '\r' {
			return i
		}
	}
	return len(b)
}

// clip shortens what a message quotes.
func clip(b []byte) []byte {
	if len(b) > 60 {
		return append(bytes.ToValidUTF8(b[:60:60], nil), "…"...)
	}
	return b
}
