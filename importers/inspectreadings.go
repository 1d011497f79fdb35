package importers

import (
	"lotpair/importers/cells"
	"lotpair/qa"
)

// characteristics reads every characteristic in every lot.
func (in *Inspection) characteristics(m Mapping, w Watched) error {
	marks := map[byte]bool{}
	first := m.tables[0]
	for i, col := range first.measured {
		c := first.column(col)
		if err := w.told(taking, c.heading, int64(i), int64(len(first.measured))); err != nil {
			return err
		}
		ch := qa.Characteristic{Name: c.heading, Unit: c.unit}
		if len(first.named(c.name)) == 1 {
			ch.Name = c.name
		}
		values := map[*table]map[string][]float64{}
		for _, t := range m.tables {
			if at := t.named(ch.Name); len(at) == 1 {
				values[t] = in.readColumn(t, &ch, at[0], marks)
			}
		}
		out := InspectedCharacteristic{
			Name: ch.Name, Unit: ch.Unit, Kind: "numeric", Limits: qa.Limits{Lower: ch.Lower, Target: ch.Target, Upper: ch.Upper}, Lots: []InspectedReading{},
		}
		for _, l := range m.Lots {
			r := InspectedReading{Lot: l.Name}
			v := values[l.table][l.Name]
			if l.table.lot == 0 {
				v = values[l.table][""]
			}
			if r.N = len(v); r.N > 0 {
				mean := meanOf(v)
				r.Mean = &mean
			}
			out.Lots = append(out.Lots, r)
		}
		in.warnUnits(m, ch)
		in.Characteristics = append(in.Characteristics, out)
	}
	switch {
	case marks[0]:
	case marks[',']:
		in.Decimal = ","
	default:
		in.Decimal = "."
	}
	return nil
}

// readColumn reads one characteristic of one table: the values of each lot, and what is not a plain number.
func (in *Inspection) readColumn(t *table, ch *qa.Characteristic, col int, marks map[byte]bool) map[string][]float64 {
	m, err := t.settleColumn(ch, qa.Characteristic{}, col)
	if err != nil {
		code := "limits-unread"
		if len(m.unclear) > 0 {
			code = DecimalAmbiguous
		}
		for _, f := range faultsOf(err) {
			t.warnings = append(t.warnings, qa.Warning{Code: code, Text: f.Place + ": " + f.Text})
		}
	}
	marks[m.decimal] = true
	values := map[string][]float64{}
	var seen looks
	var problems unreadCells
	var bounds []string
	lot, list := "", []float64(nil) // of the rows before
	if len(t.rows) > 0 {
		lot = t.rows[0].lot
	}
	for _, row := range t.rows {
		cell := t.cell(row, col)
		seen.see(cell)
		if t.tidy != nil && absent(cell) {
			continue
		}
		got := takeValue(cell, t.book.IsText, ch.Unit, m.decimal)
		if row.lot != lot {
			values[lot] = list
			lot, list = row.lot, values[row.lot]
		}
		if got.isValue {
			list = append(list, got.value)
		} else if cell.Kind == cells.Text && nonDetect(cell.Text) {
			bounds = append(bounds, cell.Name())
		}
		in.unread(t, cell, got)
		if got.problem != nil {
			problems.add(cell, got.problem)
		}
	}
	values[lot] = list
	if len(m.unclear) == 0 { // one word of the plan settles them all
		problems.warn(t, ch.Name)
	}
	seen.say(t, ch.Name)
	t.inspectOdd(ch.Name, ch.Unit, col, m.decimal, values)
	if len(bounds) > 0 {
		t.warn(qa.WarnNonDetects, "%s: %s only that the value is below or above a limit (%s). A verdict is given only where it does not matter what they are; else state non_detect under [reading] before the readings are compared.",
			ch.Name, qa.Count(len(bounds), "cell states", "cells state"), join2(bounds))
	}
	for _, at := range t.summary {
		if cell := t.sheet.Rows[at].At(col); stored(cell) {
			in.list(t, cell, qa.TakenSummary, nil)
		}
	}
	for _, f := range t.feet {
		if f.col == col {
			in.list(t, f.cell, qa.TakenSummary, nil)
		}
	}
	return values
}

// warnUnits tells of lots whose units differ.
func (in *Inspection) warnUnits(m Mapping, ch qa.Characteristic) {
	first, unit := "", ""
	for _, l := range m.Lots {
		at := l.table.named(ch.Name)
		if len(at) != 1 {
			continue
		}
		u := l.table.columnOf(at[0], l.Name).unit
		switch {
		case u == "":
		case unit == "":
			first, unit = l.Name, u
		case unitKey(u) != unitKey(unit):
			in.Warnings = append(in.Warnings, qa.Warning{Code: "units-differ", Text: l.table.place() + ": " + ch.Name + " is in " + unit + " in the lot " + quoted(first) + " and in " + u + " in the lot " + quoted(l.Name) + "."})
			return
		}
	}
}
