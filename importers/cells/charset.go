package cells

import (
	"bytes"
	"encoding/binary"
	"io"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// begin looks at the first bytes of the part: parts are UTF-8 or UTF-16 (ISO/IEC 29500-2, 8.2). What is UTF-16 is read on as UTF-8.
func (s *scanner) begin() (bool, error) {
	b := s.buf[:s.end]
	var order binary.ByteOrder
	mark := 2
	switch {
	case bytes.HasPrefix(b, []byte("\xef\xbb\xbf")):
		s.at = 3
		return s.end > s.at, nil
	case bytes.HasPrefix(b, []byte("\xff\xfe")):
		order = binary.LittleEndian
	case bytes.HasPrefix(b, []byte("\xfe\xff")):
		order = binary.BigEndian
	case bytes.HasPrefix(b, []byte("<\x00")):
		order, mark = binary.LittleEndian, 0
	case bytes.HasPrefix(b, []byte("\x00<")):
		order, mark = binary.BigEndian, 0
	default:
		return s.end > 0, nil
	}
	s.wide = true
	s.src = &wideReader{s: s, order: order, src: io.MultiReader(bytes.NewReader(bytes.Clone(b[mark:])), s.src)}
	s.at, s.end, s.done = 0, 0, false
	return s.fill()
}

// wideReader reads UTF-16 as UTF-8.
type wideReader struct {
	s     *scanner
	order binary.ByteOrder
	src   io.Reader
	raw   [8 << 10]byte
	have  int // bytes of raw not yet turned
	end   error
	ready []byte
}

// Read turns the next bytes; half a character is an error.
func (w *wideReader) Read(p []byte) (int, error) {
	for len(w.ready) == 0 {
		if w.end != nil {
			if w.end == io.EOF && w.have > 0 {
				return 0, w.s.unsound("half a character at the end")
			}
			return 0, w.end
		}
		var n int
		n, w.end = w.src.Read(w.raw[w.have:])
		if err := w.turn(w.have + n); err != nil {
			return 0, err
		}
	}
	n := copy(p, w.ready)
	w.ready = w.ready[n:]
	return n, nil
}

func (w *wideReader) turn(have int) error {
	ready := w.ready[:0]
	i := 0
	for ; i+2 <= have; i += 2 {
		r := rune(w.order.Uint16(w.raw[i:]))
		if utf16.IsSurrogate(r) {
			if i+4 > have && r < 0xdc00 {
				break
			}
			if i+4 <= have {
				r = utf16.DecodeRune(r, rune(w.order.Uint16(w.raw[i+2:])))
				i += 2
			}
			if r == utf8.RuneError || utf16.IsSurrogate(r) {
				return w.s.unsound("half a character")
			}
		}
		ready = utf8.AppendRune(ready, r)
	}
	w.have = copy(w.raw[:], w.raw[i:have])
	w.ready = ready
	return nil
}

// instruction passes over a processing instruction; the XML declaration must name a version and an encoding that are read.
func (s *scanner) instruction() error {
	n, err := s.find(2, "?>", "a processing instruction")
	if err != nil {
		return err
	}
	raw := s.buf[s.at+2 : s.at+n]
	s.at += n + 2
	target := raw[:nameLength(raw)]
	switch {
	case !validName(target) || len(target) < len(raw) && blank(raw[len(target):]) == 0:
		return s.unsound("a processing instruction without a name")
	case !strings.EqualFold(string(target), "xml"):
		return s.valid(raw)
	case string(target) != "xml" || s.declared || s.rooted:
		return s.unsound("an XML declaration that is not at the beginning")
	}
	s.declared = true
	s.attrs, s.decoded, s.name = s.attrs[:0], s.decoded[:0], target
	for rest := raw[len(target):]; blank(rest) < len(rest); {
		if rest, err = s.attribute(rest[blank(rest):]); err != nil {
			return err
		}
	}
	if v := s.attr("version"); string(v) != "1.0" {
		return s.unsound("version %q", clip(v))
	}
	switch encoding := strings.ToLower(string(s.attr("encoding"))); encoding {
	case "", "utf-8", "us-ascii":
		return nil
	case "utf-16", "utf-16le", "utf-16be":
		if s.wide {
			return nil
		}
	}
	return damaged(s.part, "the encoding %q", clip(s.attr("encoding")))
}
