package desk

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lotpair/importers"
	"lotpair/qa"
)

// Sheet is a file that is looked at before anything is taken from it.
type Sheet struct {
	File   qa.File
	Side   qa.Side // on whose page it was brought in; empty where on none
	Masked bool    // no reading is shown
	Stated Stated
	Unfit  string // what of the plan's own mapping no longer fits this file; empty where all does

	found  importers.Inspection
	parts  importers.Parts
	book   importers.Book
	lot    string            // heading of the column that names the lot
	sheets map[string]string // of each lot, where each has its own
	at     int               // the sheet among the book's
	wide   int               // columns that are shown
	ledger map[string]qa.UnreadResult
}

// mostColumns is how many columns of a sheet are shown.
const mostColumns = 1 << 14

// LookedInto says how a file would be read as it is stated; what is not stated is found. masked shows no reading.
func LookedInto(w qa.Watch, name string, data []byte, stated Stated, masked bool) (Sheet, error) {
	in, err := importers.Under(w).InspectAs(name, data, stated.Reading, stated.asked())
	if err != nil {
		return Sheet{}, err
	}
	x := Sheet{File: in.File, Masked: masked, Stated: stated, found: in, parts: in.Parts(), book: in.Book(), ledger: map[string]qa.UnreadResult{}}
	m := in.Mapping()
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
	for _, r := range x.book.Sheets[x.at].Rows {
		for _, c := range r.Cells {
			x.wide = max(x.wide, c.Col)
		}
	}
	x.wide = min(x.wide, mostColumns)
	return x, nil
}

// LookedIntoBy says how a file would be read by the mapping of a plan, as the file before it was. What no longer fits is
// named, and found anew.
func LookedIntoBy(w qa.Watch, p qa.Plan, name string, data []byte, masked bool) (Sheet, error) {
	unfit := ""
	for _, stated := range []Stated{statedBy(p, true), statedBy(p, false)} { // the next file may have its sheet and headings elsewhere
		x, err := LookedInto(w, name, data, stated, masked)
		if err == nil {
			x.Unfit = unfit
			return x, nil
		}
		if stopped := (*qa.StoppedError)(nil); errors.As(err, &stopped) {
			return Sheet{}, err
		}
		unfit = err.Error()
	}
	x, err := LookedInto(w, name, data, Stated{}, masked)
	x.Unfit = unfit
	return x, err
}

// Plan is a plan file to start from, with blanks where only a person can say.
func (x Sheet) Plan() string { return x.found.Plan() }

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

// plays is the part of a column.
func (x Sheet) plays(column int) string {
	if named := x.Stated.Named[x.parts.Headings[column]]; named != "" {
		return named
	}
	if p := x.parts.Columns[column]; p != "" {
		return p
	}
	return importers.PlaysNothing
}

// rowPlays is the part of a row that is no reading; empty for one that is.
func (x Sheet) rowPlays(row int) string {
	if p := x.Stated.Rows[row]; p != "" {
		return p
	}
	return x.parts.Rows[row]
}

// Unmasked shows the readings.
func (x Sheet) Unmasked() Sheet {
	x.Masked = false
	return x
}

// columnOf is the column of a characteristic; 0 where it has none of its own.
func (x Sheet) columnOf(c importers.InspectedCharacteristic) int {
	for col, h := range x.parts.Headings {
		if x.parts.Columns[col] == importers.PlaysCharacteristic && (h == c.Name || sameHeading(h, c.Name)) {
			return col
		}
	}
	return 0
}

// sameHeading says whether a heading is that of a characteristic: its name, alone or with its unit behind it.
func sameHeading(heading, name string) bool {
	rest, ok := strings.CutPrefix(heading, name)
	return ok && (rest == "" || strings.ContainsAny(strings.TrimLeft(rest, " ")[:1], "([/,"))
}

// characteristics are those that would be taken, as a plan names them. A row that was said to hold units or limits is read.
func (x Sheet) characteristics() []qa.Characteristic {
	var out []qa.Characteristic
	for _, f := range x.found.Characteristics {
		c := qa.Characteristic{Name: f.Name, Unit: f.Unit, Lower: f.Limits.Lower, Target: f.Limits.Target, Upper: f.Limits.Upper}
		for row, plays := range x.Stated.Rows {
			col := x.columnOf(f)
			if col == 0 {
				continue
			}
			text := qa.JoinSpace(x.book.Sheets[x.at].At(col, row).Text)
			if plays == importers.RowUnit && text != "" {
				c.Unit = strings.Trim(text, "()[]")
				continue
			}
			if to := map[string]**float64{importers.RowLower: &c.Lower, importers.RowTarget: &c.Target, importers.RowUpper: &c.Upper}[plays]; to != nil {
				if v, _, problem := importers.ParseNumber(text, x.decimal()); problem == nil {
					*to = &v
				}
			}
		}
		out = append(out, c)
	}
	return out
}

// reading is how the file is laid out, as a plan says it: what was found and what was stated.
func (x Sheet) reading() qa.ReadingPlan {
	r := x.Stated.Reading
	r.Layout, r.Sheet, r.HeaderRow, r.LotColumn, r.Encoding = x.found.Layout, x.found.Sheet, x.found.HeaderRow, x.lot, x.found.Encoding
	r.Decimal = x.Stated.Reading.Decimal
	if x.book.IsText {
		r.Decimal = x.found.Decimal
	}
	return r
}

// leftRows are the cells of the rows that were said to be no readings, as the plan leaves them out.
func (x Sheet) leftRows(lots ...string) []qa.Exclusion {
	var out []qa.Exclusion
	sheet := x.book.Sheets[x.at]
	for _, r := range sheet.Rows {
		plays := x.Stated.Rows[r.Number]
		lot, reading := x.parts.Lots[r.Number]
		if plays == "" || !reading || x.lot != "" && !slices.Contains(lots, lot) {
			continue
		}
		for _, c := range r.Cells {
			text := strings.TrimSpace(c.Text)
			place := x.placeOf(c.Col, r.Number)
			if x.parts.Columns[c.Col] != importers.PlaysCharacteristic || text == "" || x.ledger[place].TakenAs == qa.TakenMissing {
				continue
			}
			out = append(out, qa.Exclusion{Cell: place, File: x.File.Name, Reason: fmt.Sprintf("row %d is no part: %s", r.Number, plays)})
		}
	}
	return out
}

// placeOf is a cell as a plan names it.
func (x Sheet) placeOf(col, row int) string {
	place := letters(col) + fmt.Sprint(row)
	if x.found.Sheet != "" {
		place = x.found.Sheet + "!" + place
	}
	return place
}

// Sheets are the names of the file's sheets.
func (x Sheet) Sheets() []string {
	var out []string
	for _, s := range x.found.Sheets {
		out = append(out, s.Name)
	}
	return out
}

// Lots are the names of the lots that were found.
func (x Sheet) Lots() []string {
	var out []string
	for _, l := range x.found.Lots {
		out = append(out, l.Lot)
	}
	return out
}

// lots are the two lots that would be taken, by their names in the file: with one lot in it only that of the page it was
// brought in on.
func (x Sheet) lots(p qa.Plan) (ref, cand string, err error) {
	names := x.Lots()
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
