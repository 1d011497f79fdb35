package importers

import (
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The layouts (contract: plan, "Layouts").
const (
	RowPerPart           = "row-per-part"
	ColumnPerLot         = "column-per-lot"
	SheetPerLot          = "sheet-per-lot"
	RowPerCharacteristic = "row-per-characteristic"
)

// Layouts are the layouts that a plan may name.
var Layouts = []string{RowPerPart, ColumnPerLot, SheetPerLot, RowPerCharacteristic}

// Confidence says how sure a proposed layout is, in a word.
type Confidence string

// The confidences.
const (
	Stated Confidence = "stated"  // the plan says so
	Clear  Confidence = "clear"   // the sheet can hardly be meant otherwise
	Likely Confidence = "likely"  // another reading is possible: look at it
	Unsure Confidence = "unclear" // nothing speaks for another layout, little for this one
)

// steps are the ways of reading the sheet's layout, in order.
func (t *table) steps() []func() error {
	if t.book.report != nil {
		return []func() error{t.readReport, t.measureTurned}
	}
	t.chooseLayout()
	switch t.layout {
	case RowPerCharacteristic:
		return []func() error{t.uselessKeys, t.readCharacteristicRows, t.measureTurned}
	case ColumnPerLot:
		return []func() error{t.uselessKeys, t.findLotColumns, t.readHeadings, t.sortRows, t.turnLots, t.measureTurned}
	}
	return []func() error{
		t.findHeading, t.choosePanel, t.readHeadings, t.findLotColumn, t.findPartColumn, t.findTidy, t.sortRows, t.turnTidy, t.turnSections, t.turnReplicates, t.findMeasured,
	}
}

// chooseLayout takes the plan's layout, else the one that the sheet speaks for. Within a sheet of one lot (sheet-per-lot) the
// rows may still be parts or characteristics.
func (t *table) chooseLayout() {
	because := func(layout string, c Confidence, reason string) {
		t.layout, t.confidence, t.reasons = layout, c, append(t.reasons, reason)
	}
	said := t.reading.Layout
	if said != "" && said != SheetPerLot {
		because(said, Stated, "the plan or the call says so.")
		return
	}
	characteristics, _ := slices.BinarySearchFunc(t.sheet.Rows, t.characteristicHeading(), func(r cells.Row, n int) int { return r.Number - n })
	rowsOfCharacteristics := t.characteristicHeading() > 0 && !t.namesLotColumn(characteristics) // a lot's name may stand in the block above
	lotHeadings := slices.ContainsFunc(t.lookRows(), func(i int) bool { return t.namesLotColumn(i) && t.headingScore(i) > 0 })
	switch row := t.sideBySide(); {
	case said == SheetPerLot && rowsOfCharacteristics:
		because(RowPerCharacteristic, Likely, "a lot a sheet, as the plan or the call says; in the sheet the headings name a characteristic, its limits and then a column a part.")
	case said == SheetPerLot:
		because(RowPerPart, Stated, "a lot a sheet, as the plan or the call says; in the sheet a row is a part.")
	case rowsOfCharacteristics:
		because(RowPerCharacteristic, Clear, "the headings name a characteristic, its limits and then a column a part.")
	case lotHeadings:
		because(RowPerPart, Clear, "a heading says that its column names the lot, and a row is a part.")
	case row > 0 && !t.titles() && !t.lotsBelow(row):
		because(ColumnPerLot, Clear, "the lots are named side by side in row "+itoa(row)+", each above its readings.")
	case len(t.hints.lots) == 1 && t.whole && t.lotAlone():
		because(ColumnPerLot, Likely, "the lot's name stands above its readings and there is no other heading.")
	case len(t.hints.lots) == 0 && t.lotsAsHeadings():
		because(ColumnPerLot, Likely, "the headings look like names of lots, each above its readings; if they are characteristics, state the layout row-per-part.")
	case t.titles() || len(t.hints.lots) > 0 && !t.whole:
		because(RowPerPart, Likely, "the lots are named below each other.")
	default:
		because(RowPerPart, Likely, "a row is a part and a column a characteristic; if the columns are lots, state the layout column-per-lot.")
	}
}

// namesLotColumn says whether a row has the heading of a column that names the lots.
func (t *table) namesLotColumn(i int) bool {
	return slices.ContainsFunc(t.sheet.Rows[i].Cells, func(c cells.Cell) bool {
		text := filledText(c)
		if c.Kind != cells.Text || text == "" {
			return false
		}
		name, _ := splitUnit(text)
		want := qa.JoinSpace(t.reading.LotColumn)
		return headingMeans(text) == lotHeading && !t.field(i) || want != "" && (want == text || want == name)
	})
}

// field says whether a row is a field of a block above the table and no headings: a name and one value, and below it no number.
func (t *table) field(i int) bool {
	filled := 0
	var last cells.Cell
	for _, c := range t.sheet.Rows[i].Cells {
		if filledText(c) != "" {
			filled++
			last = c
		}
	}
	next := t.nextFilled(i)
	if filled != 2 || next < 0 {
		return false
	}
	below := t.sheet.Rows[next].At(last.Col)
	return !numeric(below) && !missing(below.Text) && !isUnit(below.Text) || filledText(below) == ""
}

// lookRows are the indices of the rows that may be headings.
func (t *table) lookRows() []int {
	var at []int
	for i, r := range t.sheet.Rows {
		if len(at) == lookHeadings {
			break
		}
		if !t.comment(r) && slices.ContainsFunc(r.Cells, stored) {
			at = append(at, i)
		}
	}
	return at
}

// firstHeading is the plan's row of headings as an index, -1 where the plan states none.
func (t *table) firstHeading() int {
	for i, r := range t.sheet.Rows {
		if t.reading.HeaderRow > 0 && r.Number == t.reading.HeaderRow {
			return i
		}
	}
	return -1
}

// isLot says whether a text is the name of a lot looked for.
func (t *table) isLot(text string) bool {
	return slices.ContainsFunc(t.hints.lots, func(l string) bool { return qa.JoinSpace(l) == text })
}

// uselessKeys refuses keys of the plan that a layout has no use for: they would be passed over in silence.
func (t *table) uselessKeys() error {
	keys := [][2]string{{"reading.lot_column", t.reading.LotColumn}}
	if t.layout == RowPerCharacteristic {
		keys = append(keys, [][2]string{
			{"reading.part_column", t.reading.PartColumn},
			{"reading.order_column", t.reading.OrderColumn},
			{"reading.group_column", t.reading.GroupColumn},
			{"reading.pair_column", t.reading.PairColumn},
		}...)
	}
	for _, k := range keys {
		if k[1] != "" {
			return t.refuse("%s: found %s, want none with the layout %s; take it out of the plan, or state another layout", k[0], quoted(k[1]), t.layout)
		}
	}
	return nil
}
