package exports

import (
	"bufio"
	"bytes"
	"encoding/json"
	"encoding/xml"
	"errors"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"lotpair/qa"
)

// errOtherForm says that a record's XML is not in the form in which this program writes it.
var errOtherForm = errors.New("record: found another form than this program writes")

// recordScanner reads a record's XML in the one form in which writeRecord writes it: these elements in this order, attributes
// in double quotes, everything but plain characters escaped. Whatever differs is errOtherForm, so that what it reads is what the
// general reader reads (TestScanRecord and FuzzScanRecord hold one against the other).
type recordScanner struct {
	*bufio.Reader
	err  error // the first one stays
	left int64 // of the part's bytes, at most so many are still to come
}

// scanRecord reads a record along.
func scanRecord(r io.Reader, size int64) (*recordXML, error) {
	s := &recordScanner{Reader: bufio.NewReaderSize(r, 1<<16), left: size}
	x := &recordXML{XMLName: xml.Name{Space: recordNamespace, Local: "record"}}
	s.want(strings.TrimSuffix(xml.Header, "\n"))
	if b, err := s.ReadByte(); err != nil || b != '\n' {
		s.fail()
	}
	root, _ := s.attributes(s.tag(), "<record", []string{"xmlns", "format", "calculation"}, 3)
	x.Format, x.Calculation = root[1], s.integer(root[2])
	if root[0] != recordNamespace {
		s.fail()
	}
	x.Plan, x.PlanFile = s.element("plan"), s.element("planFile")
	for range 2 {
		x.Lots = append(x.Lots, s.lot())
	}
	x.Around, x.Result = s.element("around"), s.element("result")
	name := s.tag()
	if name == "<supersedes>" {
		x.Supersedes = s.content("supersedes")
		name = s.tag()
	}
	s.same(name, "<trail>")
	x.Trail = s.content("trail")
	if name = s.tag(); name == "<signer>" {
		x.Signer = s.content("signer")
		name = s.tag()
	}
	s.same(name, "<layout>")
	x.Layout = s.integer(s.content("layout"))
	s.want("</record>")
	if _, err := s.ReadByte(); s.err == nil && !errors.Is(err, io.EOF) {
		s.fail()
	}
	return x, s.err
}

func (s *recordScanner) fail() {
	if s.err == nil {
		s.err = errOtherForm
	}
}

func (s *recordScanner) same(got, want string) {
	if got != want {
		s.fail()
	}
}

func (s *recordScanner) want(tag string) { s.same(s.tag(), tag) }

// slice is what stands up to the next ">", which our form has at the end of tags alone. It is good until the next reading.
func (s *recordScanner) slice() []byte {
	if s.err != nil {
		return nil
	}
	b, err := s.ReadSlice('>')
	if err != nil {
		s.fail()
	}
	s.left -= int64(len(b))
	return b
}

func (s *recordScanner) tag() string { return string(s.slice()) }

func (s *recordScanner) element(name string) string {
	s.want("<" + name + ">")
	return s.content(name)
}

// content is the text of an element whose first tag was read, and its last tag.
func (s *recordScanner) content(name string) string {
	if s.err != nil {
		return ""
	}
	b, err := s.ReadBytes('<')
	if err != nil {
		s.fail()
		return ""
	}
	s.left -= int64(len(b))
	s.want("/" + name + ">")
	text, ok := unescape(string(b[:len(b)-1]))
	if !ok {
		s.fail()
	}
	return text
}

func (s *recordScanner) integer(text string) int {
	n, err := strconv.Atoi(text)
	if err != nil {
		s.fail()
	}
	return n
}

// attributes reads the attributes of a tag in the order of their names, of which the first few have to be there. has says which
// are.
func (s *recordScanner) attributes(tag, head string, names []string, must int) (values [11]string, has [11]bool) {
	rest, ok := strings.CutPrefix(tag, head)
	for i, name := range names {
		after, found := strings.CutPrefix(rest, " ")
		if found {
			after, found = strings.CutPrefix(after, name)
		}
		if found {
			after, found = strings.CutPrefix(after, `="`)
		}
		if !found {
			ok = ok && i >= must
			continue
		}
		value, behind, shut := strings.Cut(after, `"`)
		text, plain := unescape(value)
		values[i], has[i], rest = text, true, behind
		ok = ok && shut && plain
	}
	if !ok || rest != ">" {
		s.fail()
	}
	return values, has
}

// lot reads a lot with its readings.
func (s *recordScanner) lot() lotXML {
	side, _ := s.attributes(s.tag(), "<lot", []string{"side"}, 1)
	l := &qa.Lot{}
	out := lotXML{Side: side[0], Head: s.element("head"), lot: l}
	if s.err != nil || json.Unmarshal([]byte(out.Head), l) != nil {
		s.fail()
		return out
	}
	for s.err == nil {
		switch s.tag() {
		case "</lot>":
			return out
		case "<series>":
			l.Series = append(l.Series, s.series())
		default:
			s.fail()
		}
	}
	return out
}

var readingAttributes = []string{"v", "c", "t", "p", "d", "out", "g", "o", "a", "f", "s"}

// series reads the readings of one characteristic.
func (s *recordScanner) series() qa.Series {
	const least = 18 // bytes of a reading
	var one qa.Series
	if head := s.element("head"); s.err != nil || json.Unmarshal([]byte(head), &one) != nil {
		s.fail()
		return one
	}
	file, sheet := "", ""
	for first := true; s.err == nil; first = false {
		tag := s.slice()
		if !bytes.HasPrefix(tag, []byte("<r ")) {
			s.same(string(tag), "</series>")
			return one
		}
		// One text for all that stands in the tag: what a reading keeps are parts of it.
		v, has := s.attributes(string(tag), "<r", readingAttributes, 2)
		s.want("</r>")
		if first { // so many as the head says, if the part can hold them
			one.Readings = slices.Grow(one.Readings, max(1, min(one.Rows, int(s.left/least))))
		}
		x, err := strconv.ParseFloat(v[0], 64)
		if err != nil {
			s.fail()
			return one
		}
		found, decimals := v[0], 0
		if has[2] {
			found = v[2]
		}
		if has[4] {
			decimals = s.integer(v[4])
		}
		if has[9] {
			file = v[9]
		}
		if has[10] {
			sheet = v[10]
		}
		one.Readings = append(one.Readings, qa.Reading{
			Value: x, Part: v[3], Decimals: decimals, LeftOut: v[5], Group: v[6], Order: v[7], Pair: v[8],
			Source: qa.Source{File: file, Sheet: sheet, Cell: v[1], Text: found},
		})
	}
	return one
}

// escapes are what xml.EscapeText writes in the place of characters.
var escapes = []struct {
	name string
	char byte
}{{"&#34;", '"'}, {"&#39;", '\''}, {"&amp;", '&'}, {"&lt;", '<'}, {"&gt;", '>'}, {"&#x9;", '\t'}, {"&#xA;", '\n'}, {"&#xD;", '\r'}}

// unescape undoes xml.EscapeText. False where it would not have written the text so.
func unescape(s string) (string, bool) {
	if plainText(s) {
		return s, true
	}
	var b strings.Builder
	for i := 0; i < len(s); {
		c := s[i]
		switch {
		case c == '&':
			found := false
			for _, e := range escapes {
				if strings.HasPrefix(s[i:], e.name) {
					b.WriteByte(e.char)
					i += len(e.name)
					found = true
					break
				}
			}
			if !found {
				return "", false
			}
		case c < utf8.RuneSelf:
			if c < ' ' || c == '<' || c == '>' || c == '"' || c == '\'' {
				return "", false
			}
			b.WriteByte(c)
			i++
		default:
			r, n := utf8.DecodeRuneInString(s[i:])
			if r == utf8.RuneError && n == 1 || r == 0xFFFE || r == 0xFFFF {
				return "", false
			}
			b.WriteString(s[i : i+n])
			i += n
		}
	}
	return b.String(), true
}
