package desk

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"lotpair/importers"
	"lotpair/qa"
)

// Decimal is the decimal mark in which the window shows and takes numbers. Files, records and workbooks have their own.
type Decimal int

// The decimal marks.
const (
	Point Decimal = iota
	Comma
)

// swapped are the two marks, each as the other.
var swapped = strings.NewReplacer(".", ",", ",", ".")

// Number is a number as a person types it; empty is none. The other mark is a decimal mark too, where it cannot be one of
// thousands; where it can, the person is asked, for the two differ by a factor of a thousand.
func (d Decimal) Number(text string) (*float64, error) {
	typed := strings.TrimSpace(text)
	if typed == "" {
		return nil, nil
	}
	pointed := typed
	if d == Comma {
		pointed = swapped.Replace(typed)
	}
	v, _, problem := importers.ParseNumber(pointed, 0) // without a known mark a point is decimal, and a comma where it must be
	switch {
	case problem == nil:
		return &v, nil
	case problem.Code == importers.DecimalAmbiguous:
		small, large := d.own(strings.Replace(pointed, ",", ".", 1)), strings.Replace(pointed, ",", "", 1)
		return nil, fmt.Errorf("found “%s”, want %s or %s; type which", typed, small, large)
	case problem.Code == importers.OutOfRange:
		return nil, fmt.Errorf("found %q, want %s", typed, problem.Want)
	}
	return nil, fmt.Errorf("found %q, want a number such as %s", typed, d.own("0.05"))
}

// own is a number that has a point, with this mark.
func (d Decimal) own(number string) string {
	if d == Comma {
		return strings.Replace(number, ".", ",", 1)
	}
	return number
}

// NumberText is a number as a line to type in shows it, times so much.
func (d Decimal) NumberText(v *float64, times float64) string {
	if v == nil {
		return ""
	}
	if times == 1 {
		return d.own(strconv.FormatFloat(*v, 'f', -1, 64))
	}
	x, err := strconv.ParseFloat(strconv.FormatFloat(*v*times, 'g', 12, 64), 64)
	if err != nil {
		x = *v * times
	}
	return d.own(strconv.FormatFloat(x, 'f', -1, 64))
}

// ParseDecimal is the mark of a word.
func ParseDecimal(word string) (Decimal, error) {
	switch word {
	case "point":
		return Point, nil
	case "comma":
		return Comma, nil
	}
	return Point, errors.New("found " + strconv.Quote(word) + ", want point or comma")
}

// Shown is a text of the window with the decimal mark in each of its numbers. A number is digits, a point and digits that
// stand alone: a part of a word, a date, a version, a file's name or a place in a law is none. What stands in quotation marks
// was found or typed and stays as it is, and so do the names of kept. A comma between two numbers would be lost among decimal
// commas and is a semicolon.
func (d Decimal) Shown(text string, kept []string) string {
	if d == Point || !pointed(text) {
		return text
	}
	var b strings.Builder
	same := heldBack(text, kept)
	for at, mark := 0, false; at < len(text); {
		if text[at] < '0' || text[at] > '9' {
			b.WriteByte(text[at])
			at++
			continue
		}
		end, point := token(text, at)
		decimal := point > 0 && !same(at) && alone(text, at, end)
		if s := b.String(); (decimal || mark) && strings.HasSuffix(strings.TrimRight(s, "−-+±"), ", ") && !same(at) && afterNumber(s) {
			i := strings.LastIndex(s, ", ")
			b.Reset()
			b.WriteString(s[:i] + "; " + s[i+2:])
		}
		if decimal {
			b.WriteString(text[at:point] + "," + text[point+1:end])
		} else {
			b.WriteString(text[at:end])
		}
		at, mark = end, decimal
	}
	return b.String()
}

// KeptOf are those of some names that hold what looks like a number.
func KeptOf(names []string) []string {
	var out []string
	seen := map[string]bool{}
	for _, n := range names {
		if pointed(n) && !seen[n] {
			seen[n], out = true, append(out, n)
		}
	}
	return out
}

// pointed says whether a point stands between two digits.
func pointed(s string) bool {
	for i := 1; i+1 < len(s); i++ {
		if s[i] == '.' && isDigit(s[i-1]) && isDigit(s[i+1]) {
			return true
		}
	}
	return false
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// token is where the digits at a place end, and where the point among them stands; 0 where there is none.
func token(s string, at int) (end, point int) {
	end = at
	for end < len(s) && isDigit(s[end]) {
		end++
	}
	if end+1 < len(s) && s[end] == '.' && isDigit(s[end+1]) {
		point = end
		for end++; end < len(s) && isDigit(s[end]); end++ {
		}
	}
	return end, point
}

// alone says whether the number from at to end is no part of something else.
func alone(s string, at, end int) bool {
	before, n := utf8.DecodeLastRuneInString(s[:at])
	if before == '-' {
		before, _ = utf8.DecodeLastRuneInString(s[:at-n]) // a sign, or a hyphen within a name
	}
	if unicode.IsLetter(before) || unicode.IsDigit(before) || strings.ContainsRune(`.,_#/\:@`, before) || strings.HasSuffix(s[:at], "CFR ") {
		return false
	}
	rest := s[end:]
	if len(rest) > 1 && (rest[0] == 'e' || rest[0] == 'E') {
		power := strings.TrimPrefix(strings.TrimPrefix(strings.TrimPrefix(rest[1:], "+"), "-"), "−")
		if power != "" && isDigit(power[0]) {
			rest = strings.TrimLeft(power, "0123456789")
		}
	}
	after, n := utf8.DecodeRuneInString(rest)
	if after == '.' || after == '-' || after == ':' { // an end of a sentence, or the middle of a name
		after, _ = utf8.DecodeRuneInString(rest[n:])
		return !unicode.IsLetter(after) && !unicode.IsDigit(after)
	}
	return !unicode.IsLetter(after) && !strings.ContainsRune(`(_/\@`, after)
}

// afterNumber says whether a digit stands before the last comma.
func afterNumber(s string) bool {
	i := strings.LastIndex(s, ", ")
	return i > 0 && isDigit(s[i-1])
}

// heldBack says of each place of a text whether it stays as it is.
func heldBack(text string, kept []string) func(at int) bool {
	var spans [][2]int
	for _, n := range kept {
		for from := 0; n != ""; {
			i := strings.Index(text[from:], n)
			if i < 0 {
				break
			}
			i += from
			from = i + len(n)
			before, _ := utf8.DecodeLastRuneInString(text[:i])
			after, _ := utf8.DecodeRuneInString(text[from:])
			if !wordly(before) && !wordly(after) {
				spans = append(spans, [2]int{i, from})
			}
		}
	}
	opened := -1
	for i, r := range text {
		before, _ := utf8.DecodeLastRuneInString(text[:i])
		switch {
		case opened < 0 && (r == '“' || r == '"' && (i == 0 || before == ' ' || before == '(')):
			opened = i
		case opened >= 0 && (r == '”' || r == '"'):
			spans, opened = append(spans, [2]int{opened, i}), -1
		}
	}
	return func(at int) bool {
		for _, s := range spans {
			if at >= s[0] && at < s[1] {
				return true
			}
		}
		return false
	}
}

func wordly(r rune) bool { return unicode.IsLetter(r) || unicode.IsDigit(r) }

// Names are what the record calls things: they are shown as they are, whatever mark is in them.
func (s State) Names() []string {
	p, r := s.Record.Plan, s.Record.Readings
	out := []string{
		p.Title, p.Supports, p.Reference.Lot, p.Reference.Source, p.Reference.File, p.Candidate.Lot, p.Candidate.Source, p.Candidate.File,
		p.Record.Part, p.Record.Revision, p.Record.GaugeReference, p.Record.GaugeCandidate, base(s.Path), base(s.Workbook.Path),
	}
	for _, c := range p.Characteristics {
		out = append(out, c.Name, c.Column)
	}
	for _, c := range r.Characteristics {
		out = append(out, c.Name, c.Column)
	}
	for _, c := range s.Record.Result.Characteristics {
		out = append(out, c.Name)
	}
	for _, f := range s.Files {
		out = append(out, f.Name, base(f.Name))
	}
	for _, l := range []qa.Lot{r.Reference, r.Candidate} {
		out = append(out, l.Name, l.Source)
		for _, f := range l.Files {
			out = append(out, f.Name, base(f.Name))
		}
		for _, x := range l.Series {
			if len(x.Readings) > 0 {
				out = append(out, x.Readings[0].Source.Sheet)
			}
		}
	}
	if x := s.Sheet; x != nil {
		out = append(out, x.File.Name, base(x.File.Name), x.found.Sheet)
		for _, h := range x.parts.Headings {
			out = append(out, h)
		}
	}
	return out
}
