package importers

import (
	"fmt"

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

// inspectOdd tells of them where no plan is there yet, lot by lot. The values are those of
// the column, by lot.
func (t *table) inspectOdd(name, unit string, col int, decimal byte, values map[string][]float64) {
	odd := map[string][]oddReading{}
	var lots []string
	for i, row := range t.rows {
		if i > 0 && row.lot == t.rows[i-1].lot {
			continue
		}
		if _, ok := odd[row.lot]; !ok {
			odd[row.lot] = oddReadings(values[row.lot])
			lots = append(lots, row.lot)
		}
	}
	for _, l := range lots {
		if len(odd[l]) == 0 {
			continue
		}
		var at []qa.Source
		for _, row := range t.rows {
			if cell := t.cell(row, col); row.lot == l && takeValue(cell, t.book.IsText, unit, decimal).isValue {
				at = append(at, t.book.source(t.sheet.Name, cell))
			}
		}
		t.warnOdd(name, values[l], at)
	}
}
