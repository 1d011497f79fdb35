package exports

import (
	"strconv"
	"unicode/utf8"

	"lotpair/qa"
)

// The names of the workbook's sheets, in order.
const (
	SheetSummary     = "Summary"
	SheetResults     = "Results"
	SheetSensitivity = "Sensitivity" // only where the result has any
	SheetFindings    = "Findings"
	SheetReadings    = "Readings"
	SheetLedger      = "Ledger"
	SheetWorkings    = "Workings"
	SheetPictures    = "Pictures"
	SheetTrail       = "Trail"
	SheetMethod      = "Method"
)

// maxText is the longest text a cell of a workbook holds (ECMA-376 leaves it open; common practice of the programs).
const maxText = 32767

// cell is one cell of a sheet: text, a number, or nothing. A text is always written as text, never as a formula. A formula is
// our own, made of nothing but functions, numbers and addresses of our sheets (workings.go); text of a file never gets there.
type cell struct {
	text    string
	number  *float64
	formula string // without "="; number or text is then what it gives, so that no program has to compute to show it
	look    look
	span    int // columns it covers, 0 and 1 alike
}

// look names how a cell is shown; workbook.go holds what each means.
type look int

const (
	plainLook look = iota
	titleLook
	mutedLook
	referenceLook
	candidateLook
	lotLook
	headLook      // heading of a table
	headRightLook // over numbers
	groupLook     // heading of a section
	verdictLook   // the overall verdict
	wrapLook      // running text over several lines
	strongLook
	numberLook // a number shown in full
	smallLook
	rightLotLook // to the right edge: the candidate's page mirrors the reference's
	rightPlainLook
	rightMutedLook
	ruledLook // a table's line
	ruledWrapLook
	ruledNumberLook
	ruledStrongLook
	ruledSmallLook
	signLook
	headPlainLook // names of the result format, over what they mean
	headPlainRightLook
	strongWrapLook
	titleWrapLook
	leftPlainLook // wraps, the counterpart of rightPlainLook
	lastLook      = iota - 1
)

// row is one row of a sheet; a height of 0 leaves it to the program.
type row struct {
	cells  []cell
	height float64
}

// sheet is one sheet as it is to be written, and as verification expects to find it.
type sheet struct {
	name      string
	widths    []float64 // of the columns, in characters
	rows      []row
	more      func(yield func(row) bool) // lines after rows, made one at a time: there may be a million
	frozen    int                        // rows that stay in sight
	heads     int                        // the last of them, which repeat on every printed page
	columns   int                        // columns that stay in sight and repeat on every printed page
	filter    int                        // the heading row from which the table can be filtered; 0 for none
	filterTo  int                        // and its last row
	landscape bool
	flows     bool // over several pages side by side, where as wide as a page would be too small to read
	breaks    []int
	pictures  []picture
}

// picture is laid over the cells from its row and column on. It is painted when the workbook is written, and not when the
// sheets are compared.
type picture struct {
	row, col      int
	width, height float64 // points
	about         string
	paint         func(p *painter) ([]byte, error)
}

// lines are all rows of the sheet with their numbers. A row is good until the next one.
func (s *sheet) lines(yield func(number int, r row) bool) {
	for i, r := range s.rows {
		if !yield(i+1, r) {
			return
		}
	}
	if s.more == nil {
		return
	}
	n := len(s.rows)
	s.more(func(r row) bool {
		n++
		return yield(n, r)
	})
}

func (s *sheet) add(cells ...cell) { s.rows = append(s.rows, row{cells: cells}) }

func (s *sheet) addTall(height float64, cells ...cell) {
	s.rows = append(s.rows, row{cells: cells, height: height})
}

func (s *sheet) gap() { s.rows = append(s.rows, row{height: 8}) }

// text is a text cell. What an XML document cannot hold is replaced, what a cell cannot hold is cut with a mark.
func text(s string, l look) cell {
	s = cleanText(s)
	if utf8.RuneCountInString(s) > maxText {
		r := []rune(s)
		s = string(r[:maxText-1]) + "…"
	}
	return cell{text: s, look: l}
}

// wide is a text cell over several columns.
func wide(s string, l look, span int) cell {
	c := text(s, l)
	c.span = span
	return c
}

// number is a number cell at full precision; nil is an empty cell.
func number(x *float64, l look) cell { return cell{number: x, look: l} }

func whole(n int, l look) cell {
	x := float64(n)
	return number(&x, l)
}

// cleanText replaces what XML 1.0 cannot hold (control characters, lone surrogates, U+FFFE and U+FFFF) by U+FFFD.
func cleanText(s string) string {
	clean := true
	for _, r := range s {
		if !xmlRune(r) {
			clean = false
			break
		}
	}
	if clean {
		return s
	}
	out := make([]rune, 0, len(s))
	for _, r := range s {
		if !xmlRune(r) {
			r = '\uFFFD'
		}
		out = append(out, r)
	}
	return string(out)
}

func xmlRune(r rune) bool {
	return r == '\t' || r == '\n' || r >= 0x20 && r <= 0xD7FF || r >= 0xE000 && r <= 0xFFFD && r != utf8.RuneError || r >= 0x10000 && r <= 0x10FFFF
}

// shortest is the shortest text that reads back as the same double.
func shortest(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }

// sheets lays the whole record out. It is a pure function of the record; digest is that of its content (encodeRecord).
func sheets(rec qa.Record, digest string) []sheet {
	out := []sheet{summarySheet(rec, digest), resultsSheet(rec)}
	if s, ok := sensitivitySheet(rec); ok {
		out = append(out, s)
	}
	out = append(out, findingsSheet(rec), readingsSheet(rec), ledgerSheet(rec), workingsSheet(rec), picturesSheet(rec), trailSheet(rec), methodSheet(rec))
	if rec.Signer == nil {
		for i := range out {
			markDraft(&out[i])
		}
	}
	return out
}

// draft stands on every sheet of a record that nobody has signed yet.
const draft = "UNSIGNED DRAFT"

// markDraft says so in the title of the sheet, besides the head of every printed page. A first column that repeats on every
// page has no room for it.
func markDraft(s *sheet) {
	first := &s.rows[0]
	if s.columns > 0 {
		first.cells = append(first.cells, text(draft, titleLook))
		return
	}
	first.cells[0].text = draft + ": " + first.cells[0].text
}
