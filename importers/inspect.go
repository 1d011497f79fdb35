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

	mapping Mapping // for Plan
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
	return Watched{}.Inspect(name, data, sheet, layout)
}

// Inspect inspects as the function of the name does, under the watch.
func (w Watched) Inspect(name string, data []byte, sheet, layout string) (Inspection, error) {
	return w.InspectAs(name, data, qa.ReadingPlan{Layout: layout, Sheet: sheet}, nil)
}

// InspectAs inspects as the function of the name does, under the watch.
func (w Watched) InspectAs(name string, data []byte, stated qa.ReadingPlan, all []qa.Characteristic) (Inspection, error) {
	b, err := w.Open(name, data, stated.Encoding)
	if err != nil {
		return Inspection{}, err
	}
	in := Inspection{
		Format: InspectFormat, File: b.File, Encoding: b.Encoding, Delimiter: b.Delimiter,
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
			in.Warnings = append(in.Warnings, qa.Warning{Code: "hidden-sheets", Text: b.File.Name + ": the sheet " + quoted(s.Name) + " is hidden; it holds " + qa.Count(cellCount(s), "cell", "cells") + "."})
		}
	}
	m, err := w.propose(b, stated, all)
	if err != nil {
		return Inspection{}, err
	}
	if stated.Sheet == "" {
		in.warnSheets(b, m.tables)
	}
	in.mapping, in.Layout, in.Sheet, in.HeaderRow = m, m.Reading.Layout, m.tables[0].sheet.Name, m.tables[0].heading
	in.Reasons = append(slices.Clone(b.Said), "the layout "+in.Layout+" is "+string(m.Confidence)+": "+m.Reasons[0])
	in.Reasons = append(in.Reasons, m.Reasons[1:]...)
	for _, t := range m.tables {
		if err := t.beyondHeadings(); err != nil {
			return Inspection{}, err
		}
		t.nearSpellings(func(string) bool { return true })
		t.warnHidden(func(cells.Cell) bool { return false })
		if (!t.turned || t.tidy != nil) && t.part > 0 && t.repeats(t.part) {
			t.warn("repeated-parts", "ids in %s stand more than once in a lot; name it as part_column where they are repeat readings of a part, else correct them.", t.columnText(t.part))
		}
	}
	for _, l := range m.Lots {
		in.Lots = append(in.Lots, InspectedLot{Lot: l.Name, Rows: l.Rows})
	}
	if err := in.characteristics(m, w); err != nil {
		return Inspection{}, err
	}
	for _, t := range m.tables {
		in.Reasons = append(in.Reasons, t.said...)
		in.Warnings = append(in.Warnings, t.warnings...)
	}
	return in, nil
}

// unread lists a cell that is not a plain number.
func (in *Inspection) unread(t *table, cell cells.Cell, got taken) {
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
