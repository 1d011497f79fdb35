package importers

import (
	"slices"
	"strconv"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// characteristicSheet is a sheet with a row a characteristic while it is read.
type characteristicSheet struct {
	*table
	at, partsAt, below  int // the headings, those of the parts and those below a merged one, indices: one row or two
	name, number, unit  int // columns; 0 where there is none
	requirement, result int
	limits              map[string][]int // columns of nominal values, limits and tolerances
	split               map[int]bool     // columns whose heading stands in two rows
	other               []string         // columns that are none of these
	parts               []cells.Cell     // the headings of the parts
	lotOf               map[int]cells.Cell
	lines               []line
}

// line is one characteristic: a row of the sheet.
type line struct {
	at     int
	values []cells.Cell // by part; several of them may stand in one cell
}

// characteristicHeading is the number of the row whose headings name a characteristic, what is asked of it, and parts; 0 where
// no row does. A heading of the plan or of a lot in it speaks against it.
func (t *table) characteristicHeading() int {
	for _, i := range t.lookRows() {
		if t.reading.HeaderRow > 0 && t.sheet.Rows[i].Number != t.reading.HeaderRow {
			continue
		}
		if !t.mayNameCharacteristics(i) {
			continue
		}
		s := t.characteristicColumns(i)
		asked := len(s.limits)
		if s.requirement > 0 {
			asked++
		}
		named := s.name > 0 || s.number > 0
		results := len(s.parts) > 1 || len(s.parts) == 1 && partNumbered.MatchString(filledText(s.parts[0])) || s.result > 0
		if named && results && (asked > 0 || s.name > 0 && len(s.parts) > 1) && t.numbersUnder(s) && s.differ() {
			return t.sheet.Rows[i].Number
		}
	}
	return 0
}

// mayNameCharacteristics says whether a row has a heading for characteristics or their numbers and none of the plan's.
func (t *table) mayNameCharacteristics(i int) bool {
	named := false
	for _, c := range t.sheet.Rows[i].Cells {
		text := filledText(c)
		if c.Kind != cells.Text || text == "" || len(text) > 60 || text[0] >= '0' && text[0] <= '9' && text[len(text)-1] <= '9' {
			continue
		}
		if slices.ContainsFunc(t.characteristics, func(ch qa.Characteristic) bool {
			want := joined(ch.Heading())
			name, _ := splitUnit(text)
			return want == text || want == name
		}) {
			return false
		}
		means := rowColumnMeans(text)
		named = named || means == nameHeading || means == numberHeading
	}
	return named
}

// differ says whether the rows are characteristics and not parts: their names differ, or without a name their limits do.
func (s *characteristicSheet) differ() bool {
	col := s.name
	if col == 0 {
		col = s.requirement
		for _, cols := range s.limits {
			col = cols[0]
		}
	}
	seen, n := map[string]bool{}, 0
	for j := s.at + 1; j < len(s.sheet.Rows); j++ {
		if text := filledText(s.sheet.Rows[j].At(col)); text != "" {
			seen[text] = true
			n++
		}
	}
	return n < 2 || 2*len(seen) > n
}

// numbersUnder says whether a number stands under a heading of a part or result.
func (t *table) numbersUnder(s *characteristicSheet) bool {
	for _, p := range s.parts {
		if t.numbersBelow(s.partsAt, p.Col) {
			return true
		}
	}
	if s.result == 0 {
		return false
	}
	for j := s.at + 1; j < len(t.sheet.Rows) && j <= s.at+lookBelow; j++ {
		if len(pieces(t.sheet.Rows[j].At(s.result))) > 0 {
			return true
		}
	}
	return false
}

// characteristicColumns says which part each column plays with the headings in a row.
func (t *table) characteristicColumns(at int) *characteristicSheet {
	s := &characteristicSheet{table: t, at: at, partsAt: at, below: at, limits: map[string][]int{}, split: map[int]bool{}}
	first := func(into *int, col int) {
		if *into == 0 {
			*into = col
		}
	}
	var unknown, summaries []cells.Cell
	for _, c := range s.splitHeadings() {
		text := filledText(c)
		if text == "" {
			continue
		}
		switch means := rowColumnMeans(text); {
		case means == nameHeading:
			first(&s.name, c.Col)
		case means == numberHeading:
			first(&s.number, c.Col)
		case means == unitLabel:
			first(&s.unit, c.Col)
		case means == requirementHeading:
			first(&s.requirement, c.Col)
		case means == resultHeading:
			first(&s.result, c.Col)
		case means == summaryLabel:
			summaries = append(summaries, c)
		case means != "":
			s.limits[means] = append(s.limits[means], c.Col)
		case summaryNumbered(text):
			s.other = append(s.other, text)
		case partNumbered.MatchString(text) && c.Kind != cells.Date:
			s.parts = append(s.parts, c)
		default:
			unknown = append(unknown, c)
		}
	}
	last := max(s.name, s.number, s.requirement, s.unit)
	for _, cols := range s.limits {
		last = max(last, slices.Max(cols))
	}
	s.parts = slices.DeleteFunc(s.parts, func(c cells.Cell) bool { return c.Col < max(s.name, s.number) })
	if s.partsBelow() { // the lots' names stand beside the headings, the parts' below
		unknown = slices.DeleteFunc(unknown, func(c cells.Cell) bool { return c.Col >= s.parts[0].Col })
	}
	if len(s.parts) == 0 && s.result == 0 {
		for _, c := range unknown { // parts under their serial numbers
			if c.Col > last && t.numbersBelow(at, c.Col) {
				s.parts = append(s.parts, c)
			}
		}
		unknown = slices.DeleteFunc(unknown, func(c cells.Cell) bool { return slices.Contains(s.parts, c) })
	}
	for _, c := range summaries { // Min and Max are limits before the readings, and summaries behind them
		means := ""
		switch word(c.Text) {
		case "min", "minimum":
			means = lowerLabel
		case "max", "maximum":
			means = upperLabel
		}
		if before := len(s.parts) > 0 && c.Col < s.parts[0].Col || len(s.parts) == 0 && c.Col < s.result; means != "" && before {
			s.limits[means] = append(s.limits[means], c.Col)
			continue
		}
		s.other = append(s.other, filledText(c))
	}
	for _, c := range unknown {
		s.other = append(s.other, filledText(c))
	}
	return s
}

// partsBelow takes the parts from the row below the headings, where it holds their numbers and nothing else and more of them.
func (s *characteristicSheet) partsBelow() bool {
	if s.at+1 >= len(s.sheet.Rows) {
		return false
	}
	var parts []cells.Cell
	for _, c := range s.sheet.Rows[s.at+1].Cells {
		text := filledText(c)
		if text == "" || s.split[c.Col] || summaryNumbered(text) {
			continue
		}
		if c.Col <= max(s.name, s.number) || !partNumbered.MatchString(text) {
			return false
		}
		parts = append(parts, c)
	}
	if len(parts) < max(2, len(s.parts)+1) || !s.numbersBelow(s.at+1, parts[0].Col) {
		return false
	}
	s.parts, s.partsAt = parts, s.at+1
	return true
}

// readCharacteristicRows turns a sheet with a row a characteristic into rows of parts.
func (t *table) readCharacteristicRows() error {
	at := t.firstHeading()
	if t.reading.HeaderRow == 0 {
		number := t.characteristicHeading()
		at = slices.IndexFunc(t.sheet.Rows, func(r cells.Row) bool { return number > 0 && r.Number == number })
	}
	if at < 0 {
		if t.tidyHeading() {
			return t.refuse("reading.layout: found headings of a row a reading, want a row a characteristic with a column a part; state the layout row-per-part: it reads a row a reading too")
		}
		return t.refuse("reading.layout: found no row of headings for a characteristic, its limits and a column a part, want one such as No, Characteristic, Nominal, Upper tol, Lower tol, 1, 2, 3; correct header_row or layout under [reading]")
	}
	s := t.characteristicColumns(at)
	if s.name == 0 {
		s.name = s.number
	}
	switch {
	case s.name == 0:
		return t.refuse("row %d: found no heading for the characteristic's name, want one such as Characteristic; correct the heading or header_row", t.sheet.Rows[at].Number)
	case len(s.parts) == 0 && s.result == 0:
		return t.refuse("row %d: found no column for a part, want headings such as 1, 2, 3 above the readings; correct the headings or header_row", t.sheet.Rows[at].Number)
	}
	if s.severalRows() {
		return t.refuse("reading.layout: found the same characteristics below each other again and again in column %s, want each in one row; state the layout row-per-part: it reads a row a reading too", cells.Letters(s.name))
	}
	t.heading, t.headingTop = t.sheet.Rows[at].Number, t.sheet.Rows[at].Number
	for _, step := range []func() error{s.findLots, s.findLines, s.splitResults, s.toleranceSigns} {
		if err := step(); err != nil {
			return err
		}
	}
	s.turn()
	s.sayColumns()
	return nil
}

// findLines finds the rows that are a characteristic; what stands above the headings and between the rows gets its role.
func (s *characteristicSheet) findLines() error {
	above := 0
	for i, r := range s.sheet.Rows {
		switch {
		case s.comment(r):
			s.mark(i, roleComment)
			continue
		case i == s.at || i == s.partsAt || i == s.below:
			s.mark(i, roleHeading)
			continue
		case i < s.at:
			s.mark(i, roleAbove)
			if slices.ContainsFunc(r.Cells, stored) {
				above++
			}
			continue
		case !slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return filledText(c) != "" || c.Kind == cells.FormulaNoValue }):
			continue
		}
		numbers := slices.ContainsFunc(s.parts, func(p cells.Cell) bool { return numeric(r.At(p.Col)) })
		numbers = numbers || s.result > 0 && len(s.parts) == 0 && len(pieces(r.At(s.result))) > 0
		name := filledText(r.At(s.name))
		switch {
		case name != "" && name == filledText(s.sheet.Rows[s.at].At(s.name)):
			for _, p := range s.parts {
				if again := r.At(p.Col); filledText(again) != filledText(p) {
					return s.refuse("row %d: found the headings again with other parts (%s in %s, want %s), want all parts of a characteristic in its row; bring them into one table", r.Number, quoted(again.Text), again.Name(), quoted(p.Text))
				}
			}
			s.mark(i, roleHeading)
			s.warn("second-table", "row %d repeats the headings; the rows below it are read as the same table.", r.Number)
		case name == "" && !numbers:
			s.mark(i, roleNote)
			s.notes = append(s.notes, strconv.Itoa(r.Number))
		case name == "" && s.allFormulas(r) && len(s.lines) > 0:
			s.mark(i, roleSummary)
			s.say("row %d of formulas without a name is not taken as a characteristic.", r.Number)
		case name == "":
			return s.refuse("row %d: found readings without a characteristic's name in %s, want the name in each row; write it there, or delete what is no reading", r.Number, cells.Name(s.name, r.Number))
		case s.alone(r, s.name), labelWords[word(name)] == summaryLabel && s.allFormulas(r):
			s.mark(i, roleNote)
			s.notes = append(s.notes, strconv.Itoa(r.Number))
		default:
			s.lines = append(s.lines, line{at: i})
		}
	}
	if above > 0 {
		s.say("%s above the headings not read but for the lots' names.", qa.Count(above, "row", "rows"))
	}
	if len(s.notes) > 0 {
		s.say("%s no characteristic: %s.", qa.Count(len(s.notes), "row is", "rows are"), join2(s.notes))
	}
	if len(s.lines) == 0 {
		return s.refuse("found no row below the headings in row %d, want a row a characteristic; correct header_row", s.heading)
	}
	return nil
}

// allFormulas says whether what stands under the parts was computed.
func (s *characteristicSheet) allFormulas(r cells.Row) bool {
	some := false
	for _, p := range s.parts {
		if c := r.At(p.Col); filledText(c) != "" || c.Kind == cells.FormulaNoValue {
			if some = c.Formula; !some {
				return false
			}
		}
	}
	return some
}

// sayColumns says which columns are taken for what, and which are not read.
func (s *characteristicSheet) sayColumns() {
	s.say("the headings stand in row %d; the characteristics are named in column %s, a row each.", s.heading, cells.Letters(s.name))
	if n := len(s.parts); n > 0 {
		s.say("%s: %s to %s.", qa.Count(n, "column of a part", "columns of parts"), cells.Letters(s.parts[0].Col), cells.Letters(s.parts[n-1].Col))
	}
	var none []string
	for _, p := range s.parts {
		if _, ok := s.lotOf[p.Col]; s.lot > 0 && !ok {
			none = append(none, p.Name())
		}
	}
	if len(none) > 0 {
		s.warn("column-without-heading", "the columns of %s stand under no lot and are not read.", join2(none))
	}
	if len(s.other) > 0 {
		s.say("columns not read: %s.", list(s.other))
	}
}
