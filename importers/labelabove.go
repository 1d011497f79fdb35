package importers

import (
	"slices"
	"strconv"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// labelAlone says whether a row holds nothing but names of summaries, beside its lot's name.
func (t *table) labelAlone(r cells.Row) bool {
	found := false
	for _, c := range r.Cells {
		text := filledText(c)
		switch {
		case text == "" && c.Kind != cells.FormulaNoValue:
		case c.Col == t.lot && t.isLot(text):
		case c.Kind != cells.Text || numeric(c):
			return false
		default:
			w := word(strings.TrimLeft(text, "^↑↓→ "))
			if labelWords[w] != summaryLabel && !summaryPhrase(w) {
				return false
			}
			found = true
		}
	}
	return found
}

// belowLabel are the rows of numbers, by index, that the row of a summary's name above them speaks of: up to the next blank row,
// name or lot. A row with a part's id is a reading whatever stands above it.
func (t *table) belowLabel(i int, lot string) []int {
	label := t.sheet.Rows[i]
	if !t.labelAlone(label) {
		return nil
	}
	if named := filledText(label.At(max(1, t.lot))); t.lot > 0 && t.isLot(named) {
		lot = named
	}
	var at []int
	for j := i + 1; j < len(t.sheet.Rows); j++ {
		r := t.sheet.Rows[j]
		numbers := 0
		for _, c := range r.Cells {
			text := filledText(c)
			means := headingMeans(t.column(c.Col).heading)
			switch {
			case text == "":
			case c.Col == t.lot && text == lot:
			case c.Col == t.lot, c.Col == t.part, means == partHeading, !numeric(c) && !missing(text):
				return at
			default:
				numbers++
			}
		}
		if numbers == 0 || r.Number != label.Number+1+len(at) {
			return at
		}
		at = append(at, j)
	}
	return at
}

// takeBelowLabel takes one row of numbers under the name of a summary out, and asks where there are more: they may be readings.
func (t *table) takeBelowLabel(i int, below []int) error {
	first, last := t.sheet.Rows[below[0]].Number, t.sheet.Rows[below[len(below)-1]].Number
	label := t.sheet.Rows[i]
	name := ""
	for _, c := range label.Cells {
		if text := filledText(c); text != "" && !(c.Col == t.lot && t.isLot(text)) {
			name = text
			break
		}
	}
	if len(below) > 1 && !t.show {
		return t.refuse("row %d: found %s alone above the numbers of rows %d to %d, want to know whether they are readings; write the name of the summary beside each row of summaries, or take row %d out where they are readings",
			label.Number, quoted(name), first, last, label.Number)
	}
	t.warn("label-above", "row %d says %s and nothing else; %s under it (%s) not taken as readings.", label.Number, quoted(name),
		qa.Count(len(below), "row of numbers is", "rows of numbers are"), strings.Join(slices.Compact([]string{strconv.Itoa(first), strconv.Itoa(last)}), " to "))
	t.summary = append(append(t.summary, i), below...)
	return nil
}
