package importers

import (
	"regexp"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The parts that columns and rows of a sheet play, as a person sees and changes them.
const (
	PlaysNothing        = "not used"
	PlaysLot            = "lot"
	PlaysPart           = "part"
	PlaysRepeated       = "part, repeats averaged" // part_column: the readings of one part are averaged
	PlaysOrder          = "order"
	PlaysGroup          = "group"
	PlaysPair           = "pair"
	PlaysOperator       = "operator"
	PlaysGauge          = "gauge"
	PlaysCharacteristic = "characteristic"
	PlaysRepeat         = "repeat reading" // one of several columns of the same characteristic

	RowHeading = "heading"
	RowUnit    = "unit"
	RowLower   = "lower limit"
	RowTarget  = "target"
	RowUpper   = "upper limit"
	RowFoot    = "foot"
)

// Parts says which part each column and row of the inspected sheet plays.
type Parts struct {
	Columns  map[int]string // by the number of the column, from 1
	Headings map[int]string // of the columns that have one, as a plan names them
	Rows     map[int]string // by the number of the row; readings have none
	Lots     map[int]string // of each row of readings its lot; "" where the sheet names none
	Stand    bool           // columns stand under headings: else lots or parts stand side by side, and no column has one part
	First    int            // the first row of readings
}

// InspectAs says how a file would be read where some of it is stated: as in a plan's [reading] and, unless empty, its list of
// characteristics. What no longer fits the file is an error that names it.
func InspectAs(name string, data []byte, stated qa.ReadingPlan, all []qa.Characteristic) (Inspection, error) {
	return Watched{}.InspectAs(name, data, stated, all)
}

// Mapping is how the file would be read.
func (in Inspection) Mapping() Mapping { return in.mapping }

// Book is the file's cells.
func (in Inspection) Book() Book { return in.mapping.tables[0].book }

// Parts says which part each column and row plays.
func (in Inspection) Parts() Parts {
	t := in.mapping.tables[0]
	p := Parts{Columns: map[int]string{}, Headings: map[int]string{}, Rows: map[int]string{}, Lots: map[int]string{}, Stand: !t.turned}
	for _, r := range t.sheet.Rows {
		if r.Number == t.heading || t.headingTop > 0 && r.Number >= t.headingTop && r.Number < t.heading {
			p.Rows[r.Number] = RowHeading
		}
	}
	for i, r := range t.sheet.Rows {
		t.rowPart(&p, i, r)
	}
	if t.turned {
		t.partsBySight(&p)
		return p
	}
	for _, c := range t.columns {
		p.Headings[c.col], p.Columns[c.col] = c.heading, t.columnPart(c)
	}
	for _, r := range t.rows {
		n := t.sheet.Rows[r.at].Number
		p.Lots[n] = r.lot
		if p.First == 0 || n < p.First {
			p.First = n
		}
	}
	return p
}

// columnPart is the part of a column under a heading.
func (t *table) columnPart(c column) string {
	switch {
	case c.col == t.lot:
		return PlaysLot
	case c.col == t.part && t.reading.PartColumn != "":
		return PlaysRepeated
	case c.col == t.order:
		return PlaysOrder
	case c.col == t.group:
		return PlaysGroup
	case c.col == t.pair: // its ids may be the parts' too
		return PlaysPair
	case c.col == t.part:
		return PlaysPart
	case slices.Contains(t.measured, c.col):
		return PlaysCharacteristic
	case headingMeans(c.heading) == takerHeading && strings.ContainsAny(strings.ToLower(c.heading[:1]), "gm"):
		return PlaysGauge
	case headingMeans(c.heading) == takerHeading:
		return PlaysOperator
	}
	return PlaysNothing
}

// rowPart finds the part of a row that holds no readings.
func (t *table) rowPart(p *Parts, i int, r cells.Row) {
	for j := range r.Cells {
		switch t.roles[i][j] {
		case roleUnit:
			p.Rows[r.Number] = RowUnit
		case roleHeading:
			p.Rows[r.Number] = RowHeading
		}
	}
	if slices.Contains(t.summary, i) {
		p.Rows[r.Number] = RowFoot
	}
	words := map[string]string{upperLabel: RowUpper, lowerLabel: RowLower, nominalLabel: RowTarget, upperTol: "upper tolerance", lowerTol: "lower tolerance"}
	for _, all := range t.limits {
		for _, l := range all {
			if l.cell.Row == r.Number && !t.turned {
				p.Rows[r.Number] = words[l.means]
			}
		}
	}
}

// partsBySight says of a turned table what most cells of each column are.
func (t *table) partsBySight(p *Parts) {
	words := map[role]string{roleOtherLot: "reading", rolePart: PlaysPart, roleOrder: PlaysOrder, roleGroup: PlaysGroup, rolePair: PlaysPair, roleLot: PlaysLot, roleHeading: PlaysCharacteristic, roleUnit: "unit", roleLimit: "limit"}
	counts := map[int]map[role]int{}
	for i, r := range t.sheet.Rows {
		for j, c := range r.Cells {
			if counts[c.Col] == nil {
				counts[c.Col] = map[role]int{}
			}
			as := t.roles[i][j]
			if as == roleOtherLot && p.First == 0 {
				p.First = r.Number
			}
			counts[c.Col][as]++
		}
	}
	for col, of := range counts {
		most, plays := 0, PlaysNothing
		for as, word := range words {
			if n := of[as]; n > most || n == most && n > 0 && word < plays {
				most, plays = n, word
			}
		}
		p.Columns[col] = plays
	}
}

// repeatHeading takes the number off the heading of a column of repeat readings: Bore 2 is one of Bore.
var repeatHeading = regexp.MustCompile(`^(.*?)[ _.#-]*\d{1,3}$`)

// RepeatOf is the characteristic of which a heading names one of several repeat readings; "" where it names none.
func RepeatOf(heading string) string {
	name, _ := splitUnit(heading)
	if m := repeatHeading.FindStringSubmatch(name); m != nil {
		return m[1]
	}
	return ""
}
