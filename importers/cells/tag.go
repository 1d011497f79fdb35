package cells

import (
	"bytes"
	"unicode/utf8"
)

// tagLength gives the length of the tag that comes next, with its brackets.
func (s *scanner) tagLength() (int, error) {
	quote := byte(0)
	for i := 1; ; {
		b := s.buf[s.at:s.end]
		for ; i < len(b); i++ {
			c := b[i]
			switch {
			case class[c]&nameByte != 0:
			case c == '<':
				return 0, s.unsound("a < inside a tag")
			case c == quote:
				quote = 0
			case quote != 0:
			case c == '>':
				return i + 1, nil
			case c == '"' || c == '\'':
				quote = c
			}
		}
		if ok, err := s.fill(); err != nil {
			return 0, err
		} else if !ok {
			return 0, s.unsound("the end inside a tag")
		}
	}
}

func (s *scanner) endTag() error {
	last := len(s.marks) - 1
	if last >= 0 { // without white space
		open := s.names[s.marks[last]:]
		if end := s.at + 2 + len(open); end < s.end && s.buf[end] == '>' && bytes.Equal(s.buf[s.at+2:end], open) {
			s.at = end + 1
			s.pop()
			return nil
		}
	}
	n, err := s.tagLength()
	if err != nil {
		return err
	}
	name := s.buf[s.at+2 : s.at+n-1]
	i := nameLength(name)
	if last < 0 || !bytes.Equal(name[:i], s.names[s.marks[last]:]) || blank(name[i:]) < len(name)-i {
		return s.unsound("</%s> without its beginning", clip(name))
	}
	s.at += n
	s.pop()
	return nil
}

func (s *scanner) startTag() error {
	s.attrs, s.decoded = s.attrs[:0], s.decoded[:0]
	i := nameLength(s.buf[s.at+1 : s.end])
	var tag []byte
	if end := s.at + 1 + i; end < s.end && s.buf[end] == '>' { // without attributes
		tag = s.buf[s.at+1 : end]
		s.at = end + 1
	} else {
		n, err := s.tagLength()
		if err != nil {
			return err
		}
		tag = s.buf[s.at+1 : s.at+n-1]
		s.at += n
		if last := len(tag) - 1; last >= 0 && tag[last] == '/' {
			tag = tag[:last]
			s.closing = true
		}
		i = nameLength(tag)
	}
	s.name = tag[:i]
	if !validName(s.name) {
		return s.unsound("the name %q", clip(s.name))
	}
	s.colon = 0
	if i > 1 {
		s.colon = bytes.IndexByte(s.name, ':') + 1
	}
	for tag = tag[i:]; len(tag) > 0; {
		space := blank(tag)
		if space == len(tag) {
			break
		}
		if space == 0 {
			return s.unsound("no space before an attribute of <%s>", clip(s.name))
		}
		var err error
		if tag, err = s.attribute(tag[space:]); err != nil {
			return err
		}
	}
	return s.push()
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
	if len(b) == 0 || b[0] >= '0' && b[0] <= '9' || b[0] == '-' || b[0] == '.' || b[0] == ':' || b[len(b)-1] == ':' {
		return false
	}
	colons, wide := 0, byte(0)
	for _, c := range b {
		if wide |= c; c == ':' {
			colons++
		}
	}
	return colons <= 1 && (wide < utf8.RuneSelf || utf8.Valid(b))
}

// trim takes white space off both ends.
func trim(b []byte) []byte {
	b = b[blank(b):]
	for len(b) > 0 && blank(b[len(b)-1:]) == 1 {
		b = b[:len(b)-1]
	}
	return b
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
