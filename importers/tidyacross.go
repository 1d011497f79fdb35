package importers

import (
	"slices"

	"lotpair/importers/cells"
)

// partsAcross are the columns of parts of a sheet with a row for each characteristic of each lot: two or more with numbers,
// counted under one word or none (1, 2, 3 or S1, S2, S3); nil where the sheet is none.
func (t *table) partsAcross(name int) []int {
	if t.lot == 0 || t.part > 0 || t.pair > 0 || t.reading.PartColumn != "" {
		return nil
	}
	head, _ := t.sheet.Row(t.heading)
	var parts []int
	var before string
	for _, c := range t.columns { // a part that few lots have is mostly blank
		p := head.At(c.col)
		if !t.tidyFree(c, name) || p.Kind == cells.Date || !partNumbered.MatchString(filledText(p)) || summaryNumbered(filledText(p)) {
			continue
		}
		if len(parts) > 0 && prefix(p) != before {
			return nil
		}
		before = prefix(p)
		parts = append(parts, c.col)
	}
	if len(parts) < 2 || !t.mostlyNumbers(parts[0]) {
		return nil
	}
	lot := ""
	once := map[[2]string]bool{}
	for _, r := range t.below() {
		name := filledText(r.At(name))
		if text := filledText(r.At(t.lot)); text != "" {
			lot = text
		}
		if k := [2]string{lot, name}; name != "" {
			if once[k] {
				return nil
			}
			once[k] = true
		}
	}
	return parts
}

// readingsAcross are the readings of such a sheet. Parts behind the last one of a lot are blanks of the form.
func (t *table) readingsAcross() (names []string, readings []tidyReading, err error) {
	s := t.tidy
	head, _ := t.sheet.Row(t.heading)
	last := map[string]int{}
	filled := func(c cells.Cell) bool { return filledText(c) != "" || c.Kind == cells.FormulaNoValue }
	for _, r := range t.rows {
		for k, col := range s.across {
			if filled(t.sheet.Rows[r.at].At(col)) {
				last[r.lot] = max(last[r.lot], k+1)
			}
		}
	}
	number := map[string]int{}
	var nameless []string
	for _, r := range t.rows {
		name := filledText(t.merged(r, s.name))
		if name == "" || missing(name) {
			if slices.ContainsFunc(s.across, func(col int) bool { return filled(t.sheet.Rows[r.at].At(col)) }) {
				nameless = append(nameless, cells.Name(s.name, t.sheet.Rows[r.at].Number))
			}
			continue
		}
		n, ok := number[name]
		if !ok {
			n = len(names)
			number[name] = n
			names = append(names, name)
		}
		for _, col := range s.across[:last[r.lot]] {
			readings = append(readings, tidyReading{at: r.at, lot: r.lot, name: n, part: head.At(col), value: t.sheet.Rows[r.at].At(col)})
		}
	}
	switch {
	case len(nameless) == 0:
	case t.show:
		t.warn("nameless-readings", "readings that do not say what was measured; write the characteristic's name in %s.", join2(nameless))
	default:
		return nil, nil, t.refuse("%s: found readings that do not say what was measured (%s), want the characteristic's name in each row; write it there, or delete what is no reading", t.columnText(s.name), join2(nameless))
	}
	return names, readings, nil
}
