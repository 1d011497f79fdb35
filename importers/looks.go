package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// looks gathers what the cells of one characteristic carry beside their values: formats that show something else, formulas,
// dates, marks that people read meaning into. It changes nothing.
type looks struct {
	found    map[string][]string
	cells    int
	filled   int
	unit     string
	percents []string
	formulas []string
	format   string // the one looked at last: most cells have that of the one before
	shown    cells.Shown
	percent  bool
}

// see looks at one cell.
func (l *looks) see(c cells.Cell) {
	l.cells++
	if c.Marks != 0 {
		for mark, of := range map[string]cells.Marks{"struck": cells.Struck, "filled": cells.Filled, "commented": cells.Commented} {
			if c.Marks.Has(of) {
				l.add(mark, c)
			}
		}
		if c.Marks.Has(cells.Filled) {
			l.filled++
		}
	}
	if c.Kind == cells.Date || c.Kind == cells.Text && !plainNumber(c.Text) && dateText(c.Text) {
		l.add("date", c)
	}
	if c.Kind != cells.Number {
		return
	}
	if c.Formula {
		l.formulas = append(l.formulas, c.Name())
	}
	if c.Format != "" {
		l.seeFormat(c)
	}
}

func (l *looks) add(key string, c cells.Cell) {
	if l.found == nil {
		l.found = map[string][]string{}
	}
	l.found[key] = append(l.found[key], c.Name())
}

// seeFormat looks at what the number format of a cell shows.
func (l *looks) seeFormat(c cells.Cell) {
	if c.Format != l.format {
		l.format, l.shown, l.percent = c.Format, cells.ShownBy(c.Format), cells.Percent(c.Format)
	}
	f := &l.shown
	if l.percent {
		l.percents = append(l.percents, c.Name())
	}
	if f.Currency != "" {
		l.add("currency", c)
	}
	if f.Thousand > 0 {
		l.add("thousand", c)
	}
	if f.Text != "" && isUnit(f.Text) {
		l.add("unit", c)
		l.unit = f.Text
	}
	places := f.Places
	if f.Percent {
		places += 2
	}
	if f.Places < 0 || f.Thousand > 0 || fewDecimals(c.Text, places) {
		return
	}
	if v, _, err := ParseNumber(c.Text, '.'); err == nil && storedDecimals(c.Text, v) > places {
		l.add("hidden", c)
	}
}

// say tells what was seen of a characteristic. Percent formats and readings that formulas computed are taken as stored.
func (l *looks) say(t *table, name string) {
	if n := len(l.percents); n > 0 {
		t.warn("percent-format", "%s: %s shown in percent and taken as stored, a hundredth of what is shown (%s).", name, qa.Count(n, "cell is", "cells are"), join2(l.percents))
	}
	if n := len(l.formulas); n > 0 {
		t.warn("formula-cells", "%s: %s computed by a formula; the value stored when the file was last calculated is taken, which may be stale (%s).", name, qa.Count(n, "reading is", "readings are"), join2(l.formulas))
	}
	if 2*l.filled > l.cells { // the table's own dress
		delete(l.found, "filled")
	}
	tell := func(key, code, text string) {
		if at := l.found[key]; len(at) > 0 {
			t.warn(code, "%s: %s %s (%s).", name, qa.Count(len(at), "cell", "cells"), text, join2(at))
		}
	}
	tell("struck", "struck-through", "struck through; what they hold is used like any other")
	tell("filled", "filled-cells", "with a fill of their own; what they hold is used like any other")
	tell("commented", "commented-cells", "with a comment; what they hold is used like any other, the comment is not read")
	tell("date", "dates", "where a number is wanted hold a date: a spreadsheet makes dates of numbers such as 12.01 or 5.1987, and no format brings them back. Write them again from the original")
	tell("currency", "currency-format", "shown as money and taken as stored")
	tell("thousand", "scaled-format", "shown in thousands and taken as stored")
	if at := l.found["hidden"]; len(at) > 0 {
		t.say("%s: %s more decimals than the number format shows; the stored numbers are used (%s).", name, qa.Count(len(at), "cell holds", "cells hold"), join2(at))
	}
	if at := l.found["unit"]; len(at) > 0 {
		t.say("%s: the number format of %s shows the unit %s (%s).", name, qa.Count(len(at), "cell", "cells"), l.unit, join2(at))
	}
}

// fewDecimals says quickly that a stored number has no more decimals than so many.
func fewDecimals(text string, places int) bool {
	mark := strings.IndexByte(text, '.')
	return !strings.ContainsAny(text, "eE") && (mark < 0 || len(text)-mark-1 <= places)
}

// formatUnit is the unit that a cell's number format shows behind the number; empty where it shows none.
func formatUnit(format string) string {
	if !strings.ContainsAny(format, `"\`) {
		return ""
	}
	if u := cells.ShownBy(format).Text; isUnit(u) {
		return u
	}
	return ""
}

// sayMixed warns of a characteristic whose readings are stored as numbers in some cells and as text in others.
func (r *reader) sayMixed() {
	for k, c := range r.out.Characteristics {
		if c.Kind == kindAttribute {
			continue
		}
		numbers, texts := [2]int{}, [2]int{}
		for i, s := range r.sides {
			if s.table.book.IsText {
				return
			}
			for _, row := range s.rows {
				switch cell := s.table.cell(row, s.cols[k]); {
				case cell.Kind == cells.Number:
					numbers[i]++
				case cell.Kind == cells.Text && numeric(cell) && !nonDetect(cell.Text):
					texts[i]++
				}
			}
		}
		if n, m := numbers[0]+numbers[1], texts[0]+texts[1]; n > 0 && m > 0 {
			r.sides[0].table.warn("mixed-types", "%s: stored as numbers are %d readings of the reference and %d of the candidate, as text %d and %d; each text stands in the ledger with its value.",
				c.Name, numbers[0], numbers[1], texts[0], texts[1])
		}
	}
}

// months are the names of months and their beginnings in English and German.
var months = words(means("month", "jan|feb|mar|mär|mrz|apr|may|mai|jun|jul|aug|sep|sept|oct|okt|nov|dec|dez|january|february|march|april|june|july|august|"+
	"september|october|november|december|januar|februar|märz|juni|juli|oktober|dezember"))

// dateText says whether a text looks like a date or a time that a spreadsheet may have made of a number: 12-Jan, Jan 87,
// 5/1/1987, 12.01.2026, 2026-01-12, 10:05.
func dateText(text string) bool {
	s := trimmed(text)
	if len(s) < 4 || len(s) > 30 || fewMarks(s) {
		return false
	}
	if _, ok := clock(s); ok {
		return true
	}
	parts := strings.FieldsFunc(s, func(r rune) bool { return strings.ContainsRune("-./ ,T", r) })
	named, numbers := 0, 0
	for _, p := range parts {
		switch low := strings.ToLower(p); {
		case digits(p) && len(p) <= 4:
			numbers++
		case months[low] != "":
			named++
		default:
			if _, ok := clock(p); !ok {
				return false
			}
		}
	}
	if named == 1 {
		return numbers >= 1
	}
	if named > 0 || numbers != 3 || len(parts) > 4 {
		return false
	}
	day := strings.Fields(strings.Replace(s, "T", " ", 1))[0]
	for _, form := range []string{"2006-1-2", "2.1.2006", "2.1.06", "1/2/2006", "2/1/2006", "1/2/06", "2/1/06", "2-1-2006", "2006/1/2"} {
		if dateForm(day, form) {
			return true
		}
	}
	return false
}

// fewMarks says quickly that a text has at most one mark between its digits, as most cells do.
func fewMarks(s string) bool {
	marks := 0
	for i := range len(s) {
		switch c := s[i]; {
		case c >= '0' && c <= '9':
		case c == '.' || c == ',' || c == '-' && i > 0:
			marks++
		case c != '-' && c != '+':
			return false
		}
	}
	return marks < 2
}

// dateForm says whether a text has the digits and marks of a form of dates.
func dateForm(s, form string) bool {
	mark := strings.Trim(form, "0123456789")[:1]
	a, b := strings.Split(s, mark), strings.Split(form, mark)
	if len(a) != 3 {
		return false
	}
	for i := range a {
		if !digits(a[i]) || a[i] == "" || len(b[i]) >= 2 && len(a[i]) != len(b[i]) && len(b[i]) != 2 || len(b[i]) == 1 && len(a[i]) > 2 || len(b[i]) == 2 && len(a[i]) != 2 {
			return false
		}
	}
	return true
}

// oddCharacter names a character that makes a text no number though it looks like one: a digit of another script, a mark that
// is not seen; empty where there is none.
func oddCharacter(text string) string {
	for _, r := range trimmed(text) {
		switch {
		case r < 0x80, r == '\u2212':
		case r >= 0xff10 && r <= 0xff19, r == 0xff0e, r == 0xff0c, r == 0xff0d, r == 0xff0b: // full width
		case r >= 0x660 && r <= 0x66c, r >= 0x6f0 && r <= 0x6f9, r >= 0x966 && r <= 0x96f: // Arabic, Persian, Devanagari
		case r >= 0x200b && r <= 0x200f, r == 0x2060, r == 0xfeff, r == 0xad, r >= 0x202a && r <= 0x202e: // not seen
		default:
			continue
		}
		if r >= 0x80 && r != '\u2212' {
			return fmt.Sprintf("%U", r)
		}
	}
	return ""
}
