package importers

import (
	"fmt"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// warnOdd warns of readings of one lot that may be marks for "no value" or slips of the decimal mark, with their places.
func (t *table) warnOdd(name string, values []float64, at []qa.Source) {
	var sentinels, factors []string
	for _, o := range oddReadings(values) {
		found := fmt.Sprintf("%s in %s", at[o.at].Text, at[o.at].Place())
		if o.text == "" {
			sentinels = append(sentinels, found)
		} else {
			factors = append(factors, found+" is "+o.text)
		}
	}
	if len(sentinels) > 0 {
		t.warn("sentinel", "%s: far from the others and written for \"no value\" in many files: %s. It is used; if it is no reading, name the cell under exclude with a reason.", name, join2(sentinels))
	}
	if len(factors) > 0 {
		t.warn("factor", "%s: the decimal mark may have slipped, or the unit is another: %s. It is used; correct the cell, or name it under exclude with a reason.", name, join2(factors))
	}
}

// inspectOdd tells of them where no plan is there yet, lot by lot, and of cells that state only a bound. The values are those of
// the column, by lot.
func (t *table) inspectOdd(name, unit string, col int, decimal byte, values map[string][]float64) {
	odd := map[string][]oddReading{}
	var lots []string
	var bounds []string
	for _, row := range t.rows {
		if _, ok := odd[row.lot]; !ok {
			odd[row.lot] = oddReadings(values[row.lot])
			lots = append(lots, row.lot)
		}
		if cell := t.cell(row, col); cell.Kind == cells.Text && nonDetect(cell.Text) {
			bounds = append(bounds, cell.Name())
		}
	}
	for _, l := range lots {
		if len(odd[l]) == 0 {
			continue
		}
		var at []qa.Source
		for _, row := range t.rows {
			if cell := t.cell(row, col); row.lot == l && takeCell(cell, t.book.IsText, unit, decimal).isValue {
				at = append(at, t.book.source(t.sheet.Name, cell))
			}
		}
		t.warnOdd(name, values[l], at)
	}
	if len(bounds) > 0 {
		t.warn(qa.WarnNonDetects, "%s: %s only that the value is below or above a limit (%s). A verdict is given only where it does not matter what they are; else state non_detect under [reading] before the readings are compared.",
			name, qa.Count(len(bounds), "cell states", "cells state"), join2(bounds))
	}
}
