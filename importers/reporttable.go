package importers

import (
	"math"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// readReport makes a turned table of a measuring report: a row a part, a column a feature.
func (t *table) readReport() error {
	rep := t.book.report
	if l := t.reading.Layout; l != "" && l != RowPerCharacteristic && l != SheetPerLot {
		return t.refuse("reading.layout: found a measuring report, one part after another, want no layout or row-per-characteristic; correct the plan")
	}
	t.layout, t.confidence = RowPerCharacteristic, Clear
	t.reasons = append(t.reasons, "the text is a measuring report: one part after another, each with a row a feature.")
	t.turned, t.heading = true, rep.first
	keys, err := t.reportKeys()
	if err != nil {
		return err
	}
	at := map[string]int{}
	for _, b := range rep.blocks {
		r := row{cells: make([]cells.Cell, turnedFixed)}
		for i, key := range keys {
			if key != "" {
				r.cells[i] = b.keys[key]
			}
		}
		r.lot = filledText(r.cells[turnedLot-1])
		if keys[turnedLot-1] != "" && r.lot == "" {
			return t.refuse("row %d: found a part without a lot, want a line %q above each; correct the report", t.sheet.Rows[b.lines[0]].Number, keys[turnedLot-1]+":")
		}
		if err := t.reportLines(b, &r, at); err != nil {
			return err
		}
		t.rows = append(t.rows, r)
	}
	t.mergePages()
	for i := range t.rows { // a part may lack the features that only others have
		for len(t.rows[i].cells) < turnedFixed+len(t.columns) {
			t.rows[i].cells = append(t.rows[i].cells, cells.Cell{})
		}
	}
	t.markReport()
	t.markTurned()
	for _, r := range t.rows {
		t.give(r.cells[turnedLot-1], roleLot)
	}
	t.checkDeviations()
	t.say("the headings stand in line %d; %s, each with a line for each feature.", t.heading, qa.Count(len(t.rows), "part", "parts"))
	return nil
}

// reportKeys are the keys of the lines above each part that name lot, part, order, group and pair.
func (t *table) reportKeys() ([turnedFixed]string, error) {
	var keys [turnedFixed]string
	var all []string
	values := map[string]map[string]bool{}
	for _, b := range t.book.report.blocks {
		for key, c := range b.keys {
			if values[key] == nil {
				values[key] = map[string]bool{}
				all = append(all, key)
			}
			values[key][filledText(c)] = true
		}
	}
	slices.Sort(all)
	for i, p := range []struct{ key, name, means string }{
		{"reading.lot_column", t.reading.LotColumn, lotHeading},
		{"reading.part_column", t.reading.PartColumn, partHeading},
		{"reading.order_column", t.reading.OrderColumn, ""},
		{"reading.group_column", t.reading.GroupColumn, ""},
		{"reading.pair_column", t.reading.PairColumn, ""},
	} {
		if p.name != "" && values[word(p.name)] == nil {
			return keys, t.refuse("%s: found the lines %s above the parts, want %s; correct the name in the plan", p.key, list(all), quoted(p.name))
		}
		if p.name != "" {
			keys[i] = word(p.name)
			continue
		}
		for _, key := range all {
			if p.means == "" || headingWords[key] != p.means || keys[i] != "" {
				continue
			}
			if p.means != partHeading || len(values[key]) > 1 || len(t.book.report.blocks) == 1 { // one number for all is the part's number, not its id
				keys[i] = key
			}
		}
	}
	if keys[turnedLot-1] == "" {
		for _, key := range all { // a line that names the lots looked for
			if len(t.hints.lots) > 0 && !slices.ContainsFunc(t.hints.lots, func(l string) bool { return !values[key][joined(l)] }) {
				keys[turnedLot-1] = key
			}
		}
	}
	t.lot, t.part, t.order, t.group, t.pair = 0, 0, 0, 0, 0
	for i, into := range []*int{&t.lot, &t.part, &t.order, &t.group, &t.pair} {
		if keys[i] != "" {
			*into = i + 1
		}
	}
	switch {
	case t.lot == 0 && !t.whole:
		return keys, t.refuse("reading.lot_column: found the lines %s above the parts and none that names the lots %s, want one; state lot_column under [reading], or give each lot its own file", list(all), list(t.hints.lots))
	case t.lot == 0:
		t.say("no line names the lots; every part of the report is taken as of the one lot.")
	default:
		t.say("the lots are named in the lines %s.", quoted(keys[turnedLot-1]+":"))
	}
	if t.part > 0 {
		t.say("the parts' ids stand in the lines %s.", quoted(keys[turnedPart-1]+":"))
	}
	return keys, nil
}

// reportLines puts the lines of one part into the columns of their features.
func (t *table) reportLines(b reportBlock, r *row, at map[string]int) error {
	rep := t.book.report
	for _, l := range b.lines {
		line := t.sheet.Rows[l]
		head := line.At(rep.columns[featureColumn])
		name := filledText(head)
		i, ok := at[name]
		if !ok {
			i = len(t.columns)
			at[name] = i
			c := column{col: turnedFixed + i + 1, heading: name, head: head}
			c.name, c.unit = splitUnit(name)
			if c.unit == "" {
				c.unit = rep.unitOf(b)
			}
			t.columns = append(t.columns, c)
		}
		for len(r.cells) <= turnedFixed+i {
			r.cells = append(r.cells, cells.Cell{})
		}
		if had := r.cells[turnedFixed+i]; had.Col > 0 {
			return t.refuse("row %d: found the feature %s a second time for one part (first in row %d), want it once; give each feature its own name, or each part its own lines above it", line.Number, quoted(name), had.Row)
		}
		r.cells[turnedFixed+i] = line.At(rep.columns[measuredColumn])
		t.give(head, roleHeading)
		for _, means := range []string{nominalLabel, upperLabel, lowerLabel, upperTol, lowerTol} {
			if col := rep.columns[means]; col > 0 && stored(line.At(col)) {
				t.limits[turnedFixed+i+1] = append(t.limits[turnedFixed+i+1], limit{means: means, cell: line.At(col)})
				t.give(line.At(col), roleLimit)
			}
		}
	}
	return nil
}

// unitOf is the unit that a line "Units: mm" above a part or the heading of the measured values states.
func (r *report) unitOf(b reportBlock) string {
	for key, c := range b.keys {
		if labelWords[key] == unitLabel {
			return unbracket(filledText(c))
		}
	}
	_, unit := splitUnit(r.headings[r.columns[measuredColumn]-1].text)
	return unit
}

// mergePages joins parts that follow each other under the same lines and share no feature: one part on two pages.
func (t *table) mergePages() {
	var out []row
	for _, r := range t.rows {
		n := len(out)
		if n == 0 || !sameFixed(out[n-1], r) || t.part == 0 && t.order == 0 || sharesFeature(out[n-1], r) {
			out = append(out, r)
			continue
		}
		for len(out[n-1].cells) < len(r.cells) {
			out[n-1].cells = append(out[n-1].cells, cells.Cell{})
		}
		for i := turnedFixed; i < len(r.cells); i++ {
			if r.cells[i].Col > 0 {
				out[n-1].cells[i] = r.cells[i]
			}
		}
	}
	t.rows = out
}

func sameFixed(a, b row) bool {
	for i := range turnedFixed {
		if filledText(a.cells[i]) != filledText(b.cells[i]) {
			return false
		}
	}
	return true
}

func sharesFeature(a, b row) bool {
	for i := turnedFixed; i < min(len(a.cells), len(b.cells)); i++ {
		if a.cells[i].Col > 0 && b.cells[i].Col > 0 {
			return true
		}
	}
	return false
}

// markReport gives the lines above the parts, the headings and the notes their role.
func (t *table) markReport() {
	values := map[int]bool{}
	for _, b := range t.book.report.blocks {
		for _, l := range b.lines {
			values[l] = true
		}
	}
	for i, r := range t.sheet.Rows {
		switch {
		case values[i]:
			for j, c := range r.Cells {
				if t.roles[i][j] == roleNone && stored(c) && c.Col != t.book.report.columns[measuredColumn] {
					t.roles[i][j] = roleOtherColumn
				}
			}
		case t.comment(r):
			t.mark(i, roleComment)
		case len(r.Cells) == len(t.book.report.headings) && filledText(r.Cells[0]) == t.book.report.headings[0].text:
			t.mark(i, roleHeading)
		default:
			t.mark(i, roleAbove)
		}
	}
}

// checkDeviations warns where the report's own deviation is not measured minus nominal value, by more than its last digit.
func (t *table) checkDeviations() {
	rep := t.book.report
	dev, nominal := rep.columns[deviationColumn], rep.columns[nominalLabel]
	if dev == 0 || nominal == 0 {
		return
	}
	var lines []string
	for _, b := range rep.blocks {
		for _, l := range b.lines {
			r := t.sheet.Rows[l]
			m, d1, err1 := ParseNumber(r.At(rep.columns[measuredColumn]).Text, t.decimalMark())
			n, d2, err2 := ParseNumber(r.At(nominal).Text, t.decimalMark())
			d, d3, err3 := ParseNumber(r.At(dev).Text, t.decimalMark())
			step := 1.5 * math.Pow(10, -float64(min(d1, d2, d3)))
			if err1 == nil && err2 == nil && err3 == nil && math.Abs(m-n-d) > step {
				lines = append(lines, r.At(dev).Name())
			}
		}
	}
	if len(lines) > 0 {
		t.warn("report-deviations", "the deviation is not the measured minus the nominal value in %s (%s); the measured values are used. Check the report.", qa.Count(len(lines), "line", "lines"), strings.TrimSpace(join2(lines)))
	}
}
