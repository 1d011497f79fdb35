package importers

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// hints are what is known before a sheet is looked at: the plan, or nothing. Lots are the names that the sheet must hold.
type hints struct {
	reading         qa.ReadingPlan
	lots            []string
	characteristics []qa.Characteristic
	whole           bool // the sheet may hold one lot without naming it
	watch           Watched
	show            bool // nothing is asked for yet: what a plan must settle is shown, not refused
}

// column is one column of the table with its heading taken apart.
type column struct {
	col     int
	heading string // white space joined
	name    string // without the unit in brackets
	unit    string // from brackets or the unit row

	head  cells.Cell        // of a turned table: the cell that names it
	units map[string]string // of a turned table: the unit of each lot
}

// row is one part of a lot: a row of the sheet, or in a turned table the cells wherever they stand.
type row struct {
	at    int          // index into the sheet's rows; without meaning where cells holds the row
	lot   string       // white space joined; empty where the sheet is one lot
	cells []cells.Cell // of a turned table, by its columns from 1; nil where turned says where they stand
	turn  *turning
}

// table is one sheet as it is read: which row and column plays which part. Every cell of the sheet has a role.
type table struct {
	book  Book
	sheet cells.Sheet
	hints

	layout     string // as in the plan
	confidence Confidence
	reasons    []string // for the layout

	heading          int // row number of the last row of headings
	headingTop       int // of the first; 0 where it is the last
	columns          []column
	names            columnNames
	lot, part, order int // columns; 0 where there is none
	group, pair      int
	turned           bool // rows have their own cells: the lots or the parts stand in columns
	feet             []footCell
	keep             cells.Area          // the columns of this one of several tables side by side; none where 0
	cut              int                 // cells of the others
	torn             bool                // no one of them holds all the lots looked for
	end              int                 // the row where another table begins; 0 where none does
	sections         []section           // tables below each other, each under its lot's name
	blocks           []block             // the lots side by side
	headed           bool                // and headings below their names
	tidy             *tidySheet          // a row a reading; nil where a row is a part
	texts            [turnedFixed]string // of a turned table: what its columns for lot, part, order, group and pair are called
	unclear          map[int]error       // limits that only a person can read, by column
	rows             []row
	wantedRows       []row           // of the lots looked for
	textual          map[int]bool    // columns that hold texts in them; nil where it is not known yet
	limits           map[int][]limit // by column
	summary          []int           // rows, by index
	measured         []int           // columns taken as characteristics
	filled           int             // rows whose lot was filled down
	notes            []string        // rows without a lot and without readings
	roles            [][]role        // of each stored cell

	said     []string
	warnings []qa.Warning
}

// columnNames finds columns by the whole heading and by the heading without its unit.
type columnNames struct {
	of          *column // the first of the columns that it was made of
	whole, bare map[string][]int
}

// role is the part that one cell plays; over a sheet the counts of all roles add up to all its cells.
type role uint8

const (
	roleNone role = iota // stored without content
	roleOutside
	roleAbove
	roleComment
	roleHeading
	roleUnit
	roleLimit
	roleSummary
	roleLot
	rolePart
	roleOrder
	roleGroup
	rolePair
	roleOtherColumn
	roleNoHeading
	roleOtherLot
	roleNote
	roleUsed
	roleLeftOut
	roleMissing
	roleNonDetect
	roleUnread
	roles
)

// roleNames are how the record calls the roles.
var roleNames = [roles]string{
	roleOutside: "not in the table", roleAbove: "above the heading", roleComment: "comment lines", roleHeading: "headings",
	roleUnit: "unit row", roleLimit: "limits and nominal values", roleSummary: "summary rows", roleLot: "lot names", rolePart: "part ids",
	roleOrder: "order", roleGroup: "groups", rolePair: "pairs", roleOtherColumn: "columns not taken as measurements", roleNoHeading: "columns without a heading",
	roleOtherLot: "other lots", roleNote: "notes", roleUsed: "readings used", roleLeftOut: "readings left out", roleMissing: "missing",
	roleNonDetect: "non-detects", roleUnread: "not read as numbers",
}

// newTable reads how a sheet is laid out. The error is a *PlanError: what the plan must say.
func newTable(book Book, sheet cells.Sheet, h hints) (*table, error) {
	t := &table{book: book, sheet: sheet, hints: h, limits: map[int][]limit{}}
	t.roles = make([][]role, len(sheet.Rows))
	for i, r := range sheet.Rows {
		t.roles[i] = make([]role, len(r.Cells))
	}
	steps := t.steps()
	for i, step := range steps {
		if err := t.watch.told(layingOut, t.place(), int64(i), int64(len(steps))); err != nil {
			return nil, err
		}
		if err := step(); err != nil {
			if t.torn {
				return nil, &tornError{err}
			}
			return nil, err
		}
	}
	return t, nil
}

// place is the sheet in a message: "hub-shell.xlsx!Data".
func (t *table) place() string {
	if t.sheet.Name == "" {
		return t.book.File.Name
	}
	return t.book.File.Name + "!" + t.sheet.Name
}

func (t *table) cellPlace(c cells.Cell) string {
	return t.book.source(t.sheet.Name, c).String()
}

func (t *table) refuse(format string, args ...any) error {
	return planError(t.place(), format, args...)
}

func (t *table) say(format string, args ...any) {
	t.said = append(t.said, t.place()+": "+fmt.Sprintf(format, args...))
}

func (t *table) warn(code, format string, args ...any) {
	t.warnings = append(t.warnings, qa.Warning{Code: code, Text: t.place() + ": " + fmt.Sprintf(format, args...)})
}

// column is the table's column at a column number.
func (t *table) column(col int) column {
	if i, ok := slices.BinarySearchFunc(t.columns, col, func(c column, n int) int { return c.col - n }); ok {
		return t.columns[i]
	}
	return column{col: col}
}

// address is where a column's heading stands.
func (t *table) address(col int) string {
	if c := t.column(col); c.head.Col > 0 {
		return c.head.Name()
	}
	return cells.Name(col, t.heading)
}

func (t *table) columnText(col int) string {
	if t.turned {
		c := t.column(col)
		if c.head.Col > 0 {
			return fmt.Sprintf("%s in %s", quoted(c.heading), c.head.Name())
		}
		if c.heading == "" && col > 0 && col <= turnedFixed && t.texts[col-1] != "" {
			return t.texts[col-1]
		}
		return quoted(c.heading)
	}
	return fmt.Sprintf("column %s %s", cells.Letters(col), quoted(t.column(col).heading))
}

// named finds the columns that a name from the plan means: by the whole heading, else by the heading without its unit.
func (t *table) named(name string) []int {
	want := qa.JoinSpace(name)
	if len(t.columns) == 0 {
		return nil
	}
	if t.names.of != &t.columns[0] { // new headings
		t.names = columnNames{of: &t.columns[0], whole: map[string][]int{}, bare: map[string][]int{}}
		for _, c := range t.columns {
			t.names.whole[c.heading] = append(t.names.whole[c.heading], c.col)
			if c.name != c.heading {
				t.names.bare[c.name] = append(t.names.bare[c.name], c.col)
			}
		}
	}
	if whole := t.names.whole[want]; len(whole) > 0 {
		return whole
	}
	return t.names.bare[want]
}

// only is the one column that a name from the plan means; key is the plan's key for messages.
func (t *table) only(key, name string) (int, error) {
	found := t.named(name)
	switch len(found) {
	case 1:
		return found[0], nil
	case 0:
		headings := make([]string, 0, len(t.columns))
		for _, c := range t.columns {
			headings = append(headings, c.heading)
		}
		return 0, t.refuse("%s: found the headings %s, want %s; the nearest is %s: correct the name in the plan", key, list(headings), quoted(name), quoted(nearest(name, headings)))
	}
	addresses := make([]string, 0, len(found))
	for _, col := range found {
		addresses = append(addresses, t.address(col))
	}
	return 0, t.refuse("%s: found the heading %s in %s, want it once; give each column its own heading in the file", key, quoted(name), strings.Join(addresses, ", "))
}

// list writes texts for a message, at most 30 of them.
func list(texts []string) string {
	if len(texts) == 0 {
		return "none"
	}
	var b strings.Builder
	for i, s := range texts {
		if i == 30 {
			fmt.Fprintf(&b, " and %d more", len(texts)-i)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		b.WriteString(quoted(s))
	}
	return b.String()
}

// mark gives a role to every cell of a row with content that has none yet.
func (t *table) mark(at int, r role) {
	for j, c := range t.sheet.Rows[at].Cells {
		if t.roles[at][j] == roleNone && stored(c) {
			t.roles[at][j] = r
		}
	}
}

// stored says whether a cell holds something: blank cells may be stored for their format alone.
func stored(c cells.Cell) bool { return c.Kind != cells.Blank }

// filledText is a cell's text with white space joined; empty where it holds nothing to see.
func filledText(c cells.Cell) string { return joined(c.Text) }

// joined is qa.JoinSpace, without its work where there is nothing to join: it is called for every cell.
func joined(s string) string {
	for i := range len(s) {
		if c := s[i]; c <= ' ' || c >= 0x80 {
			return qa.JoinSpace(s)
		}
	}
	return s
}
