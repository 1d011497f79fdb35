package cells

import (
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"unicode/utf16"
)

// walker goes through one part's XML element by element. Raw tokens are read for speed, so the nesting is kept here.
type walker struct {
	part  string
	dec   *xml.Decoder
	stack []string
}

func newWalker(part string, r io.Reader) *walker {
	return &walker{part: part, dec: xml.NewDecoder(r)}
}

// next is the next start, end or text; nil at the sound end of the part.
func (w *walker) next() (xml.Token, error) {
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
func (w *walker) each(f func(xml.StartElement) error) error {
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
func (w *walker) text() (string, error) {
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
func (w *walker) rich() (string, error) {
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
				return unescape(b.String()), nil
			}
		}
	}
}

// unescape turns _xHHHH_ into the character it stands for (ISO/IEC 29500-1, 22.9.2.19).
func unescape(s string) string {
	if !strings.Contains(s, "_x") {
		return s
	}
	var b strings.Builder
	for i := 0; i < len(s); {
		if u, ok := escaped(s[i:]); ok {
			i += 7
			if utf16.IsSurrogate(rune(u)) {
				if low, ok := escaped(s[i:]); ok {
					if r := utf16.DecodeRune(rune(u), rune(low)); r != '\ufffd' {
						b.WriteRune(r)
						i += 7
						continue
					}
				}
			}
			b.WriteRune(rune(u))
			continue
		}
		b.WriteByte(s[i])
		i++
	}
	return b.String()
}

func escaped(s string) (uint16, bool) {
	if len(s) < 7 || s[0] != '_' || s[1] != 'x' || s[6] != '_' {
		return 0, false
	}
	var u uint16
	for _, c := range []byte(s[2:6]) {
		switch {
		case c >= '0' && c <= '9':
			u = u<<4 | uint16(c-'0')
		case c|0x20 >= 'a' && c|0x20 <= 'f':
			u = u<<4 | uint16(c|0x20-'a'+10)
		default:
			return 0, false
		}
	}
	return u, true
}

// attr is an attribute by its local name; empty where there is none.
func attr(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

// yes reads a boolean attribute (xsd:boolean).
func yes(s string) bool { return s == "1" || s == "true" }
