package desk

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lotpair/importers"
	"lotpair/qa"
)

// Sheet is a file that is looked at before anything is taken from it.
type Sheet struct {
	File    qa.File
	Side    qa.Side // on whose page it was brought in; empty where on none
	Masked  bool    // no reading is shown
	LeftOut []string

	found    importers.Inspection
	book     importers.Book
	lot      string            // heading of the column that names the lot
	sheets   map[string]string // of each lot, where each has its own
	at       int               // the sheet among the book's
	parts    []Part            // of the columns, from A on
	rows     map[int]string
	ledger   map[string]qa.UnreadResult
	firstRow int // the first row below the heading that belongs to a lot
}

// Part is the part that a column plays.
type Part struct {
	Column  int // from 1
	Heading string
	Plays   string // lot, part, order, characteristic, not used
}

// The parts of a column.
const (
	PlaysLot            = "lot"
	PlaysPart           = "part"
	PlaysCharacteristic = "characteristic"
	PlaysNothing        = "not used"
)

// LookedInto says how a file would be read. An empty sheet is found; masked shows no reading.
func LookedInto(watch qa.Watch, name string, data []byte, sheet string, masked bool) (Sheet, error) {
	in, err := importers.Under(watch).Inspect(name, data, sheet, "")
	if err != nil {
		return Sheet{}, err
	}
	x := Sheet{File: in.File, Masked: masked, found: in, rows: map[int]string{}, ledger: map[string]qa.UnreadResult{}}
	if x.book, err = importers.Under(watch).Open(name, data, ""); err != nil {
		return Sheet{}, err
	}
	m, err := importers.Under(watch).Propose(x.book, qa.ReadingPlan{Sheet: in.Sheet})
	if err != nil {
		return Sheet{}, err
	}
	x.lot = m.Reading.LotColumn
	if m.Reading.Layout == importers.SheetPerLot {
		x.sheets = map[string]string{}
		for _, l := range m.Lots {
			x.sheets[l.Name] = l.Sheet
		}
	}
	for i, s := range x.book.Sheets {
		if s.Name == in.Sheet {
			x.at = i
		}
	}
	for _, u := range in.Unread {
		x.ledger[u.Cell] = u
	}
	x.sortColumns()
	x.sortRows()
	return x, nil
}

// heading is the row of the headings; false where there is none.
func (x *Sheet) heading() (int, bool) {
	for i, r := range x.book.Sheets[x.at].Rows {
		if r.Number == x.found.HeaderRow {
			return i, true
		}
	}
	return 0, false
}

// sortColumns finds the part of each column by its heading.
func (x *Sheet) sortColumns() {
	last := 0
	for _, r := range x.book.Sheets[x.at].Rows {
		for _, c := range r.Cells {
			last = max(last, c.Col)
		}
	}
	x.parts = make([]Part, min(last, 400))
	for i := range x.parts {
		x.parts[i] = Part{Column: i + 1, Plays: PlaysNothing}
	}
	at, ok := x.heading()
	if !ok {
		return
	}
	for _, c := range x.book.Sheets[x.at].Rows[at].Cells {
		if c.Col > len(x.parts) {
			continue
		}
		p := &x.parts[c.Col-1]
		p.Heading = qa.JoinSpace(c.Text)
		switch {
		case p.Heading == "":
		case p.Heading == x.lot:
			p.Plays = PlaysLot
		case slices.ContainsFunc(x.found.Characteristics, func(h importers.InspectedCharacteristic) bool { return sameHeading(p.Heading, h.Name) }):
			p.Plays = PlaysCharacteristic
		case slices.ContainsFunc(x.found.Reasons, func(s string) bool {
			return strings.HasSuffix(s, "the parts' ids stand in column "+letters(c.Col)+" \""+p.Heading+"\".")
		}):
			p.Plays = PlaysPart
		}
	}
}

// sameHeading says whether a heading is that of a characteristic: its name, alone or with its unit behind it.
func sameHeading(heading, name string) bool {
	rest, ok := strings.CutPrefix(heading, name)
	return ok && (rest == "" || strings.ContainsAny(strings.TrimLeft(rest, " ")[:1], "([/,"))
}

// sortRows names the rows that are no readings.
func (x *Sheet) sortRows() {
	rows := x.book.Sheets[x.at].Rows
	at, _ := x.heading()
	x.rows[x.found.HeaderRow] = "heading"
	lot := 0
	for _, p := range x.parts {
		if p.Plays == PlaysLot {
			lot = p.Column
		}
	}
	for _, u := range x.found.Unread {
		if u.TakenAs == qa.TakenSummary {
			if n, ok := rowOf(u.Cell); ok {
				x.rows[n] = "foot"
			}
		}
	}
	x.firstRow = x.found.HeaderRow + 1
	if lot == 0 {
		return
	}
	for _, r := range rows[min(at+1, len(rows)):] {
		if strings.TrimSpace(r.At(lot).Text) != "" && x.belongs(qa.JoinSpace(r.At(lot).Text)) {
			x.firstRow = r.Number
			return
		}
		for _, p := range x.parts {
			if p.Plays != PlaysCharacteristic {
				continue
			}
			if what := x.says(p.Heading, r.At(p.Column).Text); what != "" {
				x.rows[r.Number] = what
				break
			}
		}
	}
}

func (x *Sheet) belongs(lot string) bool {
	return slices.ContainsFunc(x.found.Lots, func(l importers.InspectedLot) bool { return l.Lot == lot })
}

// says is what a cell above the readings is: the unit or a limit of its characteristic.
func (x *Sheet) says(heading, text string) string {
	for _, c := range x.found.Characteristics {
		if !sameHeading(heading, c.Name) {
			continue
		}
		if text != "" && strings.Trim(text, " ()[]") == c.Unit {
			return "unit"
		}
		v, _, problem := importers.ParseNumber(text, x.decimal())
		if problem != nil {
			return ""
		}
		for _, l := range []struct {
			name string
			at   *float64
		}{{"lower limit", c.Limits.Lower}, {"target", c.Limits.Target}, {"upper limit", c.Limits.Upper}} {
			if l.at != nil && *l.at == v {
				return l.name
			}
		}
	}
	return ""
}

func (x *Sheet) decimal() byte {
	if x.found.Decimal == "" {
		return 0
	}
	return x.found.Decimal[0]
}

// letters is the name of a column counted from 1.
func letters(col int) string {
	s := ""
	for ; col > 0; col = (col - 1) / 26 {
		s = string(rune('A'+(col-1)%26)) + s
	}
	return s
}

// rowOf is the row of a place such as "Data!D17".
func rowOf(place string) (int, bool) {
	cell := place[strings.LastIndex(place, "!")+1:]
	n, err := strconv.Atoi(strings.TrimLeft(cell, "ABCDEFGHIJKLMNOPQRSTUVWXYZ"))
	return n, err == nil
}

// Toggled leaves a characteristic's column out, or takes it in again; another column stays as it is.
func (x Sheet) Toggled(column int) Sheet {
	if column < 1 || column > len(x.parts) {
		return x
	}
	p := x.parts[column-1]
	left := slices.Contains(x.LeftOut, p.Heading)
	if p.Plays != PlaysCharacteristic && !left {
		return x
	}
	x.parts = slices.Clone(x.parts)
	if left {
		x.LeftOut = slices.DeleteFunc(slices.Clone(x.LeftOut), func(h string) bool { return h == p.Heading })
		x.parts[column-1].Plays = PlaysCharacteristic
		return x
	}
	x.LeftOut = append(slices.Clone(x.LeftOut), p.Heading)
	x.parts[column-1].Plays = PlaysNothing
	return x
}

// WithDecimal reads the numbers of a text file with the decimal mark that a person states: cells that could be read in two
// ways are then numbers.
func (x Sheet) WithDecimal(mark string) Sheet {
	if !x.book.IsText || mark != "." && mark != "," || mark == x.found.Decimal {
		return x
	}
	x.found.Decimal = mark
	lot := 0
	for _, p := range x.parts {
		if p.Plays == PlaysLot {
			lot = p.Column
		}
	}
	var unread []qa.UnreadResult
	x.found.Characteristics = slices.Clone(x.found.Characteristics)
	for i := range x.found.Characteristics {
		x.found.Characteristics[i].Lots = slices.Clone(x.found.Characteristics[i].Lots)
	}
	for _, u := range x.found.Unread {
		_, _, problem := importers.ParseNumber(u.Found, mark[0])
		if u.TakenAs != qa.TakenNotANumber || problem != nil || !x.count(u.Cell, lot) {
			unread = append(unread, u)
		}
	}
	x.found.Unread = unread
	x.found.Warnings = slices.DeleteFunc(slices.Clone(x.found.Warnings), func(w qa.Warning) bool { return w.Code == importers.DecimalAmbiguous })
	x.ledger = map[string]qa.UnreadResult{}
	for _, u := range unread {
		x.ledger[u.Cell] = u
	}
	return x
}

// count counts the cell of a place among the readings of its lot and characteristic; false where it belongs to none.
func (x *Sheet) count(place string, lot int) bool {
	row, ok := rowOf(place)
	if !ok {
		return false
	}
	cell := place[strings.LastIndex(place, "!")+1:]
	for i, r := range x.book.Sheets[x.at].Rows {
		if r.Number != row {
			continue
		}
		name := ""
		if lot > 0 {
			name = qa.JoinSpace(x.book.Sheets[x.at].Rows[i].At(lot).Text)
		}
		for _, p := range x.parts {
			if letters(p.Column)+strconv.Itoa(row) != cell {
				continue
			}
			for k, c := range x.found.Characteristics {
				for j, l := range c.Lots {
					if sameHeading(p.Heading, c.Name) && (lot == 0 || l.Lot == name) {
						x.found.Characteristics[k].Lots[j].N++
						return true
					}
				}
			}
		}
	}
	return false
}

// Unmasked shows the readings.
func (x Sheet) Unmasked() Sheet {
	x.Masked = false
	return x
}

// characteristics are those that would be taken, as a plan names them.
func (x Sheet) characteristics() []qa.Characteristic {
	var out []qa.Characteristic
	for _, c := range x.found.Characteristics {
		if slices.ContainsFunc(x.LeftOut, func(h string) bool { return sameHeading(h, c.Name) }) {
			continue
		}
		out = append(out, qa.Characteristic{Name: c.Name, Unit: c.Unit, Lower: c.Limits.Lower, Target: c.Limits.Target, Upper: c.Limits.Upper})
	}
	return out
}

// reading is how the file is laid out, as a plan says it.
func (x Sheet) reading() qa.ReadingPlan {
	r := qa.ReadingPlan{Layout: x.found.Layout, Sheet: x.found.Sheet, HeaderRow: x.found.HeaderRow, LotColumn: x.lot, Encoding: x.found.Encoding}
	if x.book.IsText {
		r.Decimal = x.found.Decimal
	}
	return r
}

// Sheets are the names of the file's sheets, the hidden ones said to be so.
func (x Sheet) Sheets() []string {
	var out []string
	for _, s := range x.found.Sheets {
		out = append(out, s.Name)
	}
	return out
}

// lots are the two lots that would be taken, by their names in the file: with one lot in it only that of the page it was
// brought in on.
func (x Sheet) lots(p qa.Plan) (ref, cand string, err error) {
	names := make([]string, 0, len(x.found.Lots))
	for _, l := range x.found.Lots {
		names = append(names, l.Lot)
	}
	switch {
	case len(names) == 0:
		return "", "", fmt.Errorf("%s: found no lot, want at least one; choose another sheet or file", x.File.Name)
	case len(names) == 1 && x.Side == qa.Candidate:
		return "", names[0], nil
	case len(names) == 1:
		return names[0], "", nil
	}
	ref, cand = p.Reference.Lot, p.Candidate.Lot
	if !slices.Contains(names, ref) {
		ref = ""
	}
	if !slices.Contains(names, cand) || cand == ref {
		cand = ""
	}
	for _, n := range names {
		switch {
		case ref == "" && n != cand:
			ref = n
		case cand == "" && n != ref:
			cand = n
		}
	}
	return ref, cand, nil
}
