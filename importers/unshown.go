package importers

import (
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// warnLimitsAbove tells of a row above the headings that names limits and holds numbers: it is not read, and may be meant.
func (t *table) warnLimitsAbove(r cells.Row) {
	for i, c := range r.Cells {
		if filledText(c) == "" {
			continue
		}
		w := word(c.Text)
		if (isLimit(labelWords[w]) || characteristicWords[w] == requirementHeading) && slices.ContainsFunc(r.Cells[i+1:], func(c cells.Cell) bool { return strings.ContainsAny(c.Text, "0123456789") }) {
			t.warn("limits-above", "row %d says %s above the headings and is not read; if it states limits, state lower, target and upper of each characteristic in the plan, or put the row right below the headings.", r.Number, quoted(joined(c.Text)))
		}
		return
	}
}

// warnSheets tells of visible sheets that are not shown and hold more numbers than those that are.
func (in *Inspection) warnSheets(b Book, shown []*table) {
	most := 0
	for _, t := range shown {
		most = max(most, numbersOf(t.sheet))
	}
	var more []string
	for _, s := range b.Sheets {
		if !s.Hidden && numbersOf(s) > most && !slices.ContainsFunc(shown, func(t *table) bool { return t.sheet.Name == s.Name }) {
			more = append(more, s.Name)
		}
	}
	if len(more) > 0 {
		in.Warnings = append(in.Warnings, qa.Warning{Code: "other-sheets", Text: b.File.Name + ": the sheet " + quoted(shown[0].sheet.Name) + " is shown; more numbers stand in " + list(more) + ": name the sheet to see it."})
	}
}

func numbersOf(s cells.Sheet) int {
	n := 0
	for _, r := range s.Rows {
		for _, c := range r.Cells {
			if c.Kind == cells.Number {
				n++
			}
		}
	}
	return n
}
