package desk

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"lotpair/importers"
	"lotpair/qa"
)

// Stated is what a person said of how a file is to be read; the rest is found.
type Stated struct {
	Reading qa.ReadingPlan
	Taken   []qa.Characteristic // the columns that are characteristics; none where they are found
	Named   map[string]string   // columns that say who or what measured, by their headings
	Rows    map[int]string      // rows that are no readings, and what they are
	Said    []string            // each change in words, as the trail has it
}

// asked are the characteristics that are looked for.
func (t Stated) asked() []qa.Characteristic { return t.Taken }

// statedBy is how a plan reads its files. placed: with the sheet and the row of headings, which a next file may have elsewhere.
func statedBy(p qa.Plan, placed bool) Stated {
	t := Stated{Reading: p.Reading, Taken: p.Characteristics}
	t.Reading.Exclude = nil // cells of the files before
	if !placed {
		t.Reading.Sheet, t.Reading.HeaderRow = "", 0
	}
	return t
}

// WithSheetNamed reads another sheet of the file.
func (t Stated) WithSheetNamed(name string) Stated {
	t.Reading.Sheet, t.Reading.HeaderRow = name, 0
	t.Rows = nil
	return t.saying("sheet " + name)
}

// WithDecimal reads the numbers of a text file with a decimal mark.
func (t Stated) WithDecimal(mark string) Stated {
	t.Reading.Decimal = mark
	return t.saying("decimal mark " + map[string]string{".": "point", ",": "comma"}[mark])
}

// WithLayout reads the file in another layout; "" finds it.
func (t Stated) WithLayout(layout string) Stated {
	t.Reading.Layout = layout
	return t.saying("layout " + strings.ReplaceAll(layout, "-", " "))
}

// WithNonDetect says what a reading below a detection limit counts as.
func (t Stated) WithNonDetect(as string) Stated {
	t.Reading.NonDetect = as
	return t.saying("non-detects count as " + as)
}

func (t Stated) saying(what string) Stated {
	t.Said = append(slices.Clone(t.Said), what)
	return t
}

// ColumnParts are the parts that a column can be given, in the order in which they are offered.
var ColumnParts = []string{
	importers.PlaysCharacteristic, importers.PlaysLot, importers.PlaysRepeated, importers.PlaysOrder, importers.PlaysGroup,
	importers.PlaysPair, importers.PlaysRepeat, importers.PlaysOperator, importers.PlaysGauge, importers.PlaysNothing,
}

// RowParts are the parts that a row can be given.
var RowParts = []string{RowReading, importers.RowHeading, importers.RowUnit, importers.RowLower, importers.RowTarget, importers.RowUpper, importers.RowFoot}

// RowReading is a row that is a part of a lot.
const RowReading = "reading"

// Playing is what is stated where a column plays another part. The file is read again by it; what cannot be is an error.
func (x Sheet) Playing(column int, part string) (Stated, error) {
	heading, place := x.parts.Headings[column], "column "+letters(column)
	was := x.plays(column)
	switch {
	case !x.parts.Stand:
		return x.Stated, fmt.Errorf("%s: found lots or parts side by side, which have no column of their own, want a part that each column plays; choose another layout first", place)
	case heading == "":
		return x.Stated, fmt.Errorf("%s: found no heading, want one, by which a plan names the column; choose the row of headings first", place)
	case part == was:
		return x.Stated, nil
	}
	t := x.Stated
	t.Named = maps.Clone(t.Named)
	if t.Named == nil {
		t.Named = map[string]string{}
	}
	delete(t.Named, heading)
	for _, c := range t.columns() {
		if *c == heading {
			*c = ""
		}
	}
	t.Taken = x.taken(heading)
	switch part {
	case importers.PlaysCharacteristic:
		t.Taken = append(t.Taken, x.characteristicOf(heading))
	case importers.PlaysLot:
		t.Reading.LotColumn = heading
	case importers.PlaysRepeated:
		t.Reading.PartColumn = heading
	case importers.PlaysOrder:
		t.Reading.OrderColumn = heading
	case importers.PlaysGroup:
		t.Reading.GroupColumn = heading
	case importers.PlaysPair:
		t.Reading.PairColumn = heading
	case importers.PlaysOperator, importers.PlaysGauge:
		t.Named[heading] = part
	case importers.PlaysRepeat:
		if err := x.repeating(&t, place, heading); err != nil {
			return x.Stated, err
		}
	case importers.PlaysNothing:
		if found := x.parts.Columns[column]; found == importers.PlaysLot && x.Stated.Reading.LotColumn == "" {
			return x.Stated, fmt.Errorf("%s: found the lots named in it, want them named in another; choose that one first", place)
		}
	}
	if len(t.Taken) == 0 {
		return x.Stated, fmt.Errorf("%s: found the only characteristic in it, want one that stays; choose another first", place)
	}
	return t.saying(fmt.Sprintf("%s %q: %s, not %s", place, heading, part, was)), nil
}

// columns are the columns that are stated by their headings.
func (t *Stated) columns() []*string {
	r := &t.Reading
	return []*string{&r.LotColumn, &r.PartColumn, &r.OrderColumn, &r.GroupColumn, &r.PairColumn}
}

// taken are the characteristics as they are taken now, without that of a heading.
func (x Sheet) taken(without string) []qa.Characteristic {
	var out []qa.Characteristic
	all := x.Stated.Taken
	if len(all) == 0 {
		for col := 1; col <= x.wide; col++ {
			if x.parts.Columns[col] == importers.PlaysCharacteristic {
				all = append(all, x.characteristicOf(x.parts.Headings[col]))
			}
		}
	}
	for _, c := range all {
		if h := c.Heading(); h != without && !sameHeading(without, h) {
			out = append(out, c)
		}
	}
	return out
}

// characteristicOf is the characteristic of a heading, called as it was found.
func (x Sheet) characteristicOf(heading string) qa.Characteristic {
	for _, f := range x.found.Characteristics {
		if f.Name == heading || sameHeading(heading, f.Name) {
			return qa.Characteristic{Name: f.Name}
		}
	}
	return qa.Characteristic{Name: heading}
}

// repeating states that the columns of a characteristic hold repeat readings of it.
func (x Sheet) repeating(t *Stated, place, heading string) error {
	base := importers.RepeatOf(heading)
	if base == "" {
		return fmt.Errorf("%s: found the heading %q, want one that ends in a number, as Bore 1 and Bore 2 do; rename the columns in the file", place, heading)
	}
	if t.Reading.PartColumn == "" {
		for col, p := range x.parts.Columns {
			if p == importers.PlaysPart {
				t.Reading.PartColumn = x.parts.Headings[col]
			}
		}
	}
	if t.Reading.PartColumn == "" {
		return fmt.Errorf("%s: found no column of the parts' ids, want one, for the repeats of a part are averaged; choose that one first", place)
	}
	t.Taken = slices.DeleteFunc(t.Taken, func(c qa.Characteristic) bool { return importers.RepeatOf(c.Heading()) == base })
	t.Taken = append(t.Taken, qa.Characteristic{Name: base})
	return nil
}

// RowPlaying is what is stated where a row plays another part.
func (x Sheet) RowPlaying(row int, part string) (Stated, error) {
	place, was := fmt.Sprintf("row %d", row), x.rowPlays(row)
	if was == "" {
		was = RowReading
	}
	_, reading := x.parts.Lots[row]
	t := x.Stated
	t.Rows = maps.Clone(t.Rows)
	if t.Rows == nil {
		t.Rows = map[int]string{}
	}
	switch {
	case part == was:
		return t, nil
	case part == importers.RowHeading:
		t.Reading.HeaderRow, t.Rows = row, nil
	case !x.parts.Stand:
		return t, fmt.Errorf("%s: found lots or parts side by side, want a row a part; choose another layout first", place)
	case part == RowReading && x.Stated.Rows[row] == "":
		return t, fmt.Errorf("%s: found %s, as its first cells say, want a row of a lot; correct the file, for a plan cannot say that it is one", place, was)
	case part == RowReading:
		delete(t.Rows, row)
	case row <= x.found.HeaderRow:
		return t, fmt.Errorf("%s: found it above the readings, want a row below the headings in row %d; choose the row of headings first", place, x.found.HeaderRow)
	case !reading && part != importers.RowUnit && part != importers.RowLower && part != importers.RowTarget && part != importers.RowUpper:
		return t, fmt.Errorf("%s: found no reading of a lot in it, so that nothing of it is taken; it may stay as it is", place)
	default:
		t.Rows[row] = part
	}
	return t.saying(fmt.Sprintf("%s: %s, not %s", place, part, was)), nil
}
