package desk

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"lotpair/importers"
	"lotpair/qa"
)

// SheetView is what is said about a file before anything is taken from it.
type SheetView struct {
	Title, Sub, Status string
	ReadAs             string // in one sentence
	Sheet, Decimal     string
	Layout, NonDetect  string
	Unfit              string // what of the plan's own mapping no longer fits
	Columns            []ColumnView
	Rows               int
	Taken              []TakenView
	Counted            string
	Ledger             []LedgerView
	Limits             []string
	Said               []string // what else was stated or detected
	Reasons            []string // why it is read so; nothing while the readings are masked, for they may be named
}

// ColumnView is a column and the part it plays.
type ColumnView struct {
	Letters, Heading, Plays string
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
	for col := 1; col <= x.wide; col++ {
		v.Columns = append(v.Columns, ColumnView{Letters: letters(col), Heading: x.parts.Headings[col], Plays: x.plays(col)})
	}
	v.Layout = layoutWords[x.found.Layout]
	if v.NonDetect = x.Stated.Reading.NonDetect; v.NonDetect == "" && slices.ContainsFunc(x.found.Unread, func(u qa.UnreadResult) bool { return u.TakenAs == qa.TakenNonDetect }) {
		v.NonDetect = "bounds the verdict"
	}
	v.Unfit = x.Unfit
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
	for row, plays := range x.Stated.Rows {
		if _, reading := x.parts.Lots[row]; reading {
			v.Ledger = append(v.Ledger, LedgerView{Place: strings.TrimPrefix(x.found.Sheet+"!", "!") + fmt.Sprint(row), Found: "said to be no part of a lot", Taken: plays + ", left out"})
		}
	}
	for _, said := range x.Stated.Said {
		v.Said = append(v.Said, "You said: "+said+".")
	}
	for _, w := range x.found.Warnings {
		switch {
		case !x.Masked || strings.HasPrefix(w.Code, "hidden"):
			v.Said = append(v.Said, w.Text)
		default: // its words may hold a reading
			v.Said = append(v.Said, "To look at once the readings are seen: "+spaced(w.Code)+".")
		}
	}
	if !x.Masked {
		v.Reasons = x.found.Reasons
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

// layoutWords are the words for the layouts.
var layoutWords = map[string]string{
	importers.RowPerPart: "a row a part", importers.ColumnPerLot: "a column a lot", importers.SheetPerLot: "a sheet a lot", importers.RowPerCharacteristic: "a row a characteristic",
}

// LayoutText is a layout in words.
func LayoutText(layout string) string { return layoutWords[layout] }

// readAs says in one sentence how the file would be read.
func (x Sheet) readAs() string {
	parts := []string{layoutWords[x.found.Layout]}
	var columns []string
	for col := 1; col <= x.wide; col++ {
		switch x.plays(col) {
		case importers.PlaysLot:
			parts = append(parts, "the lot named in column "+letters(col))
		case importers.PlaysCharacteristic:
			columns = append(columns, letters(col))
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
	rows := maps.Clone(x.parts.Rows)
	maps.Copy(rows, x.Stated.Rows)
	for row, part := range rows {
		switch part {
		case "lower limit", "target", "upper limit":
			limits = append(limits, row)
		case "foot":
			foot++
		}
	}
	if len(limits) > 0 {
		slices.Sort(limits)
		var at []string
		for _, r := range limits {
			at = append(at, fmt.Sprint(r))
		}
		parts = append(parts, "limits in "+map[bool]string{true: "row ", false: "rows "}[len(at) == 1]+joinedAnd(at))
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
		for _, l := range c.Lots {
			readings[l.Lot] += l.N
			total += l.N
		}
	}
	for _, c := range x.characteristics() {
		if t := limitsText(c.Name, qa.Limits{Lower: c.Lower, Target: c.Target, Upper: c.Upper}, c.Unit); t != "" {
			v.Limits = append(v.Limits, t)
		}
	}
	left, gone := x.leftRows(x.Lots()...), 0
	rows := map[string]int{}
	for row := range x.Stated.Rows {
		if lot, ok := x.parts.Lots[row]; ok {
			rows[lot]++
		}
	}
	for _, e := range left {
		if row, _ := rowOf(e.Cell); x.ledger[e.Cell].TakenAs != qa.TakenNotANumber && x.ledger[e.Cell].TakenAs != qa.TakenNonDetect {
			readings[x.lotOfRow(row)]--
			gone++
		}
	}
	total -= gone
	for _, l := range x.found.Lots {
		n := l.Rows - rows[l.Lot]
		if x.lot == "" {
			n = l.Rows - rows[""]
		}
		t := TakenView{Lot: l.Lot, Text: qa.Count(n, "part", "parts") + ", " + qa.Count(readings[l.Lot], "reading", "readings")}
		if x.Stated.Reading.PartColumn != "" {
			t.Text = qa.Count(n, "row", "rows") + ", " + qa.Count(readings[l.Lot], "reading", "readings") + ", those of a part averaged"
		}
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
	v.Counted = qa.Count(total, "cell", "cells") + " taken as numbers, " + fmt.Sprint(len(x.found.Unread)+len(left)) + " in the ledger."
}

// lotOfRow is the lot of a row of readings; with one lot that is not named, that one.
func (x Sheet) lotOfRow(row int) string {
	if lot := x.parts.Lots[row]; lot != "" || len(x.found.Lots) != 1 {
		return lot
	}
	return x.found.Lots[0].Lot
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
	return spaced(string(u.TakenAs))
}

// Row is one row as it stands in the file; readings are masked where they are not to be seen.
func (x Sheet) Row(i int) RowView { return x.RowPart(i, 0, x.wide) }

// RowPart is the same of so many columns from a first one, counted from 0.
func (x Sheet) RowPart(i, from, count int) RowView {
	rows := x.book.Sheets[x.at].Rows
	if i < 0 || i >= len(rows) {
		return RowView{}
	}
	r := rows[i]
	v := RowView{Number: r.Number, Part: x.rowPlays(r.Number), Cells: make([]CellView, max(0, min(count, x.wide-from)))}
	for _, c := range r.Cells {
		at := c.Col - 1 - from
		if at < 0 || at >= len(v.Cells) {
			continue
		}
		out := &v.Cells[at]
		out.Text, out.Number = qa.JoinSpace(c.Text), c.Kind.String() == "number"
		u, inLedger := x.ledger[x.placeOf(c.Col, r.Number)]
		_, left := x.Stated.Rows[r.Number]
		out.Struck, out.Heading = v.Part == importers.RowFoot || left, v.Part == importers.RowHeading
		out.Boxed = inLedger && u.TakenAs != qa.TakenSummary && u.TakenAs != qa.TakenMissing
		plays := x.plays(c.Col)
		if plays == importers.PlaysCharacteristic && out.Text != "" {
			out.Number = true // text numbers stand among numbers
		}
		if x.Masked && out.Text != "" && r.Number >= max(x.parts.First, x.found.HeaderRow+1) && v.Part != importers.RowHeading &&
			plays != importers.PlaysLot && plays != importers.PlaysPart && plays != importers.PlaysRepeated {
			out.Text = "•••"
		}
	}
	return v
}
