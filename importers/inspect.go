package importers

import (
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// InspectFormat names the format of an Inspection.
const InspectFormat = "lotpair.inspect/1"

// Inspection is how one file would be read without a plan (contract: console, "inspect --json").
type Inspection struct {
	Format          string                    `json:"format"`
	File            qa.File                   `json:"file"`
	Sheets          []InspectedSheet          `json:"sheets"`
	Layout          string                    `json:"layout"`
	Reasons         []string                  `json:"reasons"`
	Sheet           string                    `json:"sheet"`
	HeaderRow       int                       `json:"header_row"`
	Encoding        string                    `json:"encoding"`
	Delimiter       string                    `json:"delimiter"`
	Decimal         string                    `json:"decimal"` // empty where it is not settled
	Lots            []InspectedLot            `json:"lots"`
	Characteristics []InspectedCharacteristic `json:"characteristics"`
	Unread          []qa.UnreadResult         `json:"unread"`
	Warnings        []qa.Warning              `json:"warnings"`

	lotColumn, partColumn string // headings, for Plan
}

// InspectedSheet is one sheet of the file.
type InspectedSheet struct {
	Name   string `json:"name"`
	Rows   int    `json:"rows"` // that hold something
	Hidden bool   `json:"hidden"`
}

// InspectedLot is one lot of the sheet.
type InspectedLot struct {
	Lot  string `json:"lot"`
	Rows int    `json:"rows"`
}

// InspectedCharacteristic is one column of measurements.
type InspectedCharacteristic struct {
	Name   string             `json:"name"`
	Unit   string             `json:"unit"`
	Kind   string             `json:"kind"`
	Limits qa.Limits          `json:"limits"`
	Lots   []InspectedReading `json:"lots"`
}

// InspectedReading is what one lot holds of a characteristic.
type InspectedReading struct {
	Lot  string   `json:"lot"`
	N    int      `json:"n"`
	Mean *float64 `json:"mean"` // null without readings
}

// Inspect says how a file would be read without a plan. The sheet and the layout are found where they are empty.
func Inspect(name string, data []byte, sheet, layout string) (Inspection, error) {
	if layout != "" && layout != "row-per-part" {
		return Inspection{}, planError(name, "found the layout %s, which this version does not offer, want row-per-part; bring the readings into rows", quoted(layout))
	}
	b, err := Open(name, data, "")
	if err != nil {
		return Inspection{}, err
	}
	in := Inspection{
		Format: InspectFormat, File: b.File, Layout: "row-per-part", Encoding: b.Encoding, Delimiter: b.Delimiter,
		Sheets: []InspectedSheet{}, Lots: []InspectedLot{}, Characteristics: []InspectedCharacteristic{}, Unread: []qa.UnreadResult{}, Warnings: []qa.Warning{},
	}
	for _, s := range b.Sheets {
		rows := 0
		for _, r := range s.Rows {
			if slices.ContainsFunc(r.Cells, stored) {
				rows++
			}
		}
		in.Sheets = append(in.Sheets, InspectedSheet{Name: s.Name, Rows: rows, Hidden: s.Hidden})
		if s.Hidden {
			in.Warnings = append(in.Warnings, qa.Warning{Code: "hidden-sheets", Text: b.File.Name + ": the sheet " + quoted(s.Name) + " is hidden."})
		}
	}
	t, err := inspectTable(b, sheet)
	if err != nil {
		return Inspection{}, err
	}
	if err := t.beyondHeadings(); err != nil {
		return Inspection{}, err
	}
	in.Sheet, in.HeaderRow = t.sheet.Name, t.heading
	in.lotColumn, in.partColumn = t.column(t.lot).heading, t.column(t.part).heading
	lots := t.foundLots()
	if t.lot == 0 {
		name := t.sheet.Name
		if name == "" {
			name = b.File.Name
		}
		lots = []found{{name: name, rows: len(t.rows)}}
	}
	for _, l := range lots {
		in.Lots = append(in.Lots, InspectedLot{Lot: l.name, Rows: l.rows})
	}
	t.nearSpellings(func(string) bool { return true })
	in.characteristics(t, lots)
	in.Reasons = append(b.Said, t.said...)
	in.Warnings = append(in.Warnings, t.warnings...)
	return in, nil
}

// inspectTable reads the sheet that is named, else the first visible one that can be read.
func inspectTable(b Book, name string) (*table, error) {
	if name != "" {
		s, ok := b.sheet(name)
		if !ok {
			return nil, planError(b.File.Name, "found the sheets %s, want %s; name one of these", list(sheetNames(b.Sheets)), quoted(name))
		}
		return newTable(b, s, hints{whole: true})
	}
	var first error
	for _, hidden := range []bool{false, true} {
		for _, s := range b.Sheets {
			if s.Hidden != hidden {
				continue
			}
			t, err := newTable(b, s, hints{whole: true})
			if err == nil {
				return t, nil
			}
			if first == nil {
				first = err
			}
		}
	}
	if first == nil {
		first = fileError(b.File.Name, "found no sheet, want readings; copy the file again from where it came")
	}
	return nil, first
}

// characteristics reads every column of measurements in every lot.
func (in *Inspection) characteristics(t *table, lots []found) {
	marks := map[byte]bool{}
	for _, col := range t.measured {
		c := t.column(col)
		ch := qa.Characteristic{Name: c.heading, Unit: c.unit}
		if len(t.named(c.name)) == 1 {
			ch.Name = c.name
		}
		m, err := t.settleColumn(&ch, qa.Characteristic{}, col)
		if err != nil {
			for _, f := range faultsOf(err) {
				t.warnings = append(t.warnings, qa.Warning{Code: DecimalAmbiguous, Text: f.Place + ": " + f.Text})
			}
		}
		marks[m.decimal] = true
		out := InspectedCharacteristic{
			Name: ch.Name, Unit: ch.Unit, Kind: "numeric", Limits: qa.Limits{Lower: ch.Lower, Target: ch.Target, Upper: ch.Upper}, Lots: []InspectedReading{},
		}
		values := map[string][]float64{}
		for _, row := range t.rows {
			got := takeCell(t.cell(row, col), t.book.IsText, ch.Unit, m.decimal)
			if got.isValue {
				values[row.lot] = append(values[row.lot], got.value)
			}
			in.unread(t, row, col, got)
		}
		for _, l := range lots {
			r := InspectedReading{Lot: l.name}
			v := values[l.name]
			if t.lot == 0 {
				v = values[""]
			}
			if r.N = len(v); r.N > 0 {
				mean := meanOf(v)
				r.Mean = &mean
			}
			out.Lots = append(out.Lots, r)
		}
		t.sayFormats(t.rows, col, ch.Name)
		for _, at := range t.summary {
			if cell := t.sheet.Rows[at].At(col); stored(cell) {
				in.list(t, cell, qa.TakenSummary, nil)
			}
		}
		in.Characteristics = append(in.Characteristics, out)
	}
	switch {
	case marks[0]:
	case marks[',']:
		in.Decimal = ","
	default:
		in.Decimal = "."
	}
}

// unread lists a cell that is not a plain number.
func (in *Inspection) unread(t *table, row row, col int, got taken) {
	cell := t.cell(row, col)
	switch {
	case got.isMissing:
		in.list(t, cell, qa.TakenMissing, nil)
	case got.isBelow:
		in.list(t, cell, qa.TakenNonDetect, nil)
	case got.problem != nil:
		in.list(t, cell, qa.TakenNotANumber, nil)
	case got.converted != "":
		in.list(t, cell, qa.TakenNumber, &got.value)
	}
}

func (in *Inspection) list(t *table, c cells.Cell, as qa.TakenAs, value *float64) {
	s := t.book.source(t.sheet.Name, c)
	in.Unread = append(in.Unread, qa.UnreadResult{File: s.File, Cell: s.Place(), Found: s.Text, TakenAs: as, Value: value})
}

// meanOf is the arithmetic mean by a compensated sum (Neumaier 1974): as good as the readings' own digits.
func meanOf(values []float64) float64 {
	sum, lost := 0.0, 0.0
	for _, v := range values {
		s := sum + v
		if abs(sum) >= abs(v) {
			lost += (sum - s) + v
		} else {
			lost += (v - s) + sum
		}
		sum = s
	}
	return (sum + lost) / float64(len(values))
}

func abs(x float64) float64 { return max(x, -x) }
