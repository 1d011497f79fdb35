package desk

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/qa"
)

// SheetView is what is said about a file before anything is taken from it.
type SheetView struct {
	Title, Sub, Status string
	ReadAs             string // in one sentence
	Sheet, Decimal     string
	Columns            []ColumnView
	Rows               int
	Taken              []TakenView
	Counted            string
	Ledger             []LedgerView
	Limits             []string
	Said               []string // what else was detected or done
}

// ColumnView is a column and the part it plays.
type ColumnView struct {
	Letters, Plays string
	Changes        bool // a click changes the part
}

// TakenView is what would be taken of one lot.
type TakenView struct {
	Side      qa.Side // empty for a lot that is not taken
	Lot, Text string
}

// LedgerView is a cell that is not taken as it stands.
type LedgerView struct{ Place, Found, Taken string }

// CellView is one cell as it stands in the file.
type CellView struct {
	Text    string
	Number  bool // stands at the right of its column
	Boxed   bool // stands in the ledger
	Struck  bool // in a row that is no reading
	Heading bool
}

// RowView is one row of the sheet.
type RowView struct {
	Number int
	Part   string
	Cells  []CellView
}

// View says what the file holds.
func (x Sheet) View(p qa.Plan) SheetView {
	v := SheetView{Title: "Readings from " + base(x.File.Name), Status: "nothing is taken in yet", Sheet: x.found.Sheet, Rows: len(x.book.Sheets[x.at].Rows)}
	v.Sub = "sha-256 " + shortDigest(x.File.SHA256) + ", " + grouped(x.File.Bytes) + " bytes"
	if n, hidden := len(x.found.Sheets), 0; !x.book.IsText {
		for _, s := range x.found.Sheets {
			if s.Hidden {
				hidden++
			}
		}
		v.Sub += ", " + qa.Count(n, "sheet", "sheets")
		if hidden > 0 {
			v.Sub += fmt.Sprintf(" (%d hidden)", hidden)
		}
	}
	if x.Masked {
		v.Status = "every reading is masked; nothing is taken in yet"
	}
	if x.book.IsText {
		v.Decimal = map[string]string{".": "point", ",": "comma", "": "not settled: choose"}[x.found.Decimal]
	}
	for _, c := range x.parts {
		v.Columns = append(v.Columns, ColumnView{Letters: letters(c.Column), Plays: c.Plays, Changes: c.Plays == PlaysCharacteristic || slices.Contains(x.LeftOut, c.Heading)})
	}
	v.ReadAs = x.readAs()
	x.sayTaken(&v, p)
	seen := map[int]bool{}
	for _, u := range x.found.Unread {
		if row, ok := rowOf(u.Cell); ok && u.TakenAs == qa.TakenSummary { // a row is one line
			if !seen[row] {
				seen[row] = true
				v.Ledger = append(v.Ledger, LedgerView{Place: strings.TrimPrefix(x.found.Sheet+"!", "!") + fmt.Sprint(row), Found: "under the readings", Taken: takenText(u)})
			}
			continue
		}
		l := LedgerView{Place: u.Cell, Found: fmt.Sprintf("found %q", u.Found), Taken: takenText(u)}
		if x.Masked && u.TakenAs != qa.TakenMissing { // what was found may be a reading
			u.Value = nil
			l.Found, l.Taken = "masked", takenText(u)
		}
		v.Ledger = append(v.Ledger, l)
	}
	for _, w := range x.found.Warnings {
		switch {
		case !x.Masked || strings.HasPrefix(w.Code, "hidden"):
			v.Said = append(v.Said, w.Text)
		default: // its words may hold a reading
			v.Said = append(v.Said, "To look at once the readings are seen: "+strings.ReplaceAll(w.Code, "-", " ")+".")
		}
	}
	return v
}

// grouped writes a count of bytes in groups of three digits.
func grouped(n int64) string {
	s := fmt.Sprint(n)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + " " + s[i:]
	}
	return s
}

// readAs says in one sentence how the file would be read.
func (x Sheet) readAs() string {
	parts := []string{map[string]string{
		"row-per-part": "a row a part", "column-per-lot": "a column a lot", "sheet-per-lot": "a sheet a lot", "row-per-characteristic": "a row a characteristic",
	}[x.found.Layout]}
	var columns []string
	for _, p := range x.parts {
		switch p.Plays {
		case PlaysLot:
			parts = append(parts, "the lot named in column "+letters(p.Column))
		case PlaysCharacteristic:
			columns = append(columns, letters(p.Column))
		}
	}
	n := len(x.characteristics())
	text := qa.Count(n, "characteristic", "characteristics")
	if len(columns) == n && n > 1 {
		text += " in columns " + columns[0] + " to " + columns[n-1]
	} else if len(columns) == n && n == 1 {
		text += " in column " + columns[0]
	}
	parts = append(parts, text)
	var limits []int
	foot := 0
	for row, part := range x.rows {
		switch part {
		case "lower limit", "target", "upper limit":
			limits = append(limits, row)
		case "foot":
			foot++
		}
	}
	if len(limits) > 0 {
		slices.Sort(limits)
		var rows []string
		for _, r := range limits {
			rows = append(rows, fmt.Sprint(r))
		}
		parts = append(parts, "limits in "+map[bool]string{true: "row ", false: "rows "}[len(rows) == 1]+joinedAnd(rows))
	}
	if foot > 0 {
		parts = append(parts, "a foot of "+qa.Count(foot, "summary row", "summary rows")+" left out")
	}
	return "Read as: " + strings.Join(parts, ", ") + "."
}

func joinedAnd(s []string) string {
	if len(s) == 1 {
		return s[0]
	}
	return strings.Join(s[:len(s)-1], ", ") + " and " + s[len(s)-1]
}

// sayTaken says what would be taken of each lot, and the limits that were found.
func (x Sheet) sayTaken(v *SheetView, p qa.Plan) {
	ref, cand, _ := x.lots(p) // without a lot there is nothing to say
	readings := map[string]int{}
	total := 0
	for _, c := range x.found.Characteristics {
		if slices.ContainsFunc(x.LeftOut, func(h string) bool { return sameHeading(h, c.Name) }) {
			continue
		}
		for _, l := range c.Lots {
			readings[l.Lot] += l.N
			total += l.N
		}
		if t := limitsText(c.Name, c.Limits, c.Unit); t != "" {
			v.Limits = append(v.Limits, t)
		}
	}
	for _, l := range x.found.Lots {
		t := TakenView{Lot: l.Lot, Text: qa.Count(l.Rows, "part", "parts") + ", " + qa.Count(readings[l.Lot], "reading", "readings")}
		switch l.Lot {
		case ref:
			t.Side = qa.Reference
		case cand:
			t.Side = qa.Candidate
		default:
			t.Text += ", not taken"
		}
		v.Taken = append(v.Taken, t)
	}
	v.Counted = qa.Count(total, "cell", "cells") + " taken as numbers, " + fmt.Sprint(len(x.found.Unread)) + " in the ledger."
}

func limitsText(name string, l qa.Limits, unit string) string {
	switch {
	case l.Lower != nil && l.Upper != nil:
		return withUnit(name+" "+qa.Plain(*l.Lower)+" to "+qa.Plain(*l.Upper), unit)
	case l.Upper != nil:
		return withUnit(name+" to "+qa.Plain(*l.Upper), unit)
	case l.Lower != nil:
		return withUnit(name+" from "+qa.Plain(*l.Lower), unit)
	}
	return ""
}

// takenText says what a cell of the ledger is taken as.
func takenText(u qa.UnreadResult) string {
	switch u.TakenAs {
	case qa.TakenMissing:
		return "taken as missing"
	case qa.TakenNonDetect:
		return "a non-detect: it bounds the verdict"
	case qa.TakenSummary:
		return "a summary row, left out"
	case qa.TakenNumber:
		if u.Value != nil {
			return "read as " + qa.Plain(*u.Value)
		}
		return "read as a number"
	case qa.TakenNotANumber:
		return "no number: undecided until it is corrected, or left out with a reason"
	}
	return strings.ReplaceAll(string(u.TakenAs), "-", " ")
}

// Row is one row as it stands in the file; readings are masked where they are not to be seen.
func (x Sheet) Row(i int) RowView {
	rows := x.book.Sheets[x.at].Rows
	if i < 0 || i >= len(rows) {
		return RowView{}
	}
	r := rows[i]
	v := RowView{Number: r.Number, Part: x.rows[r.Number], Cells: make([]CellView, len(x.parts))}
	for _, c := range r.Cells {
		if c.Col > len(v.Cells) {
			continue
		}
		out := &v.Cells[c.Col-1]
		out.Text, out.Number = qa.JoinSpace(c.Text), c.Kind.String() == "number"
		place := letters(c.Col) + fmt.Sprint(r.Number)
		if x.found.Sheet != "" {
			place = x.found.Sheet + "!" + place
		}
		u, inLedger := x.ledger[place]
		out.Struck, out.Heading = v.Part == "foot", v.Part == "heading"
		out.Boxed = inLedger && u.TakenAs != qa.TakenSummary && u.TakenAs != qa.TakenMissing
		plays := x.parts[c.Col-1].Plays
		if plays == PlaysCharacteristic && out.Text != "" {
			out.Number = true // text numbers stand among numbers
		}
		if x.Masked && out.Text != "" && r.Number >= x.firstRow && v.Part != "heading" && plays != PlaysLot && plays != PlaysPart {
			out.Text = "•••"
		}
	}
	return v
}
