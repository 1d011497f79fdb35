package importers

import (
	"fmt"
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// Read takes both lots' readings from the files that the plan names. open gives the bytes of a file by the name the plan has
// for it; a file that both lots share is opened once. The error is a *PlanError where the plan must say more or something
// else, and a *FileError where a file cannot be opened or understood.
func Read(plan qa.Plan, open func(file string) ([]byte, error)) (qa.Readings, error) {
	return Watched{}.Read(plan, open)
}

// Read reads as the function of the name does, under the watch.
func (w Watched) Read(plan qa.Plan, open func(file string) ([]byte, error)) (qa.Readings, error) {
	r := &reader{plan: plan, books: map[string]Book{}, watch: w}
	for _, step := range []func() error{
		func() error { return r.openBooks(open) }, r.chooseTables, r.chooseLots, r.chooseCharacteristics, r.settleMarks, r.settleNominals, r.resolveExclusions,
		r.takeReadings, r.checkExclusions, r.checkDoubled, r.checkNames, r.averageRepeats, r.checkRepeats,
	} {
		if err := step(); err != nil {
			return qa.Readings{}, err
		}
	}
	r.warnMix()
	r.finish()
	return r.out, nil
}

// reader is the way from a plan to its readings, kept while it is gone.
type reader struct {
	plan       qa.Plan
	watch      Watched
	books      map[string]Book // by the file's name in the plan
	tables     []*table        // one or two
	sides      [2]lotSide
	exclusions []exclusion
	out        qa.Readings
}

// lotSide is one of the two lots while it is read.
type lotSide struct {
	side  qa.Side
	plan  qa.LotPlan
	table *table
	rows  []row
	cols  []int  // of each characteristic
	marks []mark // of each characteristic

	conversions []*conversion // of each characteristic; nil where the numbers stand as they are
	lot         *qa.Lot
}

func (r *reader) openBooks(open func(string) ([]byte, error)) error {
	r.sides = [2]lotSide{{side: qa.Reference, plan: r.plan.Reference, lot: &r.out.Reference}, {side: qa.Candidate, plan: r.plan.Candidate, lot: &r.out.Candidate}}
	for _, s := range r.sides {
		if _, ok := r.books[s.plan.File]; ok {
			continue
		}
		data, err := open(s.plan.File)
		if err != nil {
			e := fileError(s.plan.File, "found no readable file (%s), want the readings of the %s lot; correct %s.file in the plan", err, s.side, s.side)
			e.Err = err
			return e
		}
		b, err := r.watch.Open(s.plan.File, data, r.plan.Reading.Encoding)
		if err != nil {
			return err
		}
		r.books[s.plan.File] = b
		r.out.Said = append(r.out.Said, b.Said...)
	}
	return nil
}

// chooseTables finds the sheet of each lot and reads its layout; a sheet that both lots share is read once.
func (r *reader) chooseTables() error {
	var sheets [2]cells.Sheet
	for i, s := range r.sides {
		sheet, said, err := chooseSheet(r.books[s.plan.File], s, r.plan)
		if err != nil {
			return err
		}
		sheets[i] = sheet
		if said != "" {
			r.out.Said = append(r.out.Said, said)
		}
	}
	shared := r.sides[0].plan.File == r.sides[1].plan.File && sheets[0].Name == sheets[1].Name
	for i := range r.sides {
		s := &r.sides[i]
		if i == 1 && shared {
			s.table = r.sides[0].table
			continue
		}
		h := hints{reading: r.plan.Reading, characteristics: r.plan.Characteristics, whole: !shared && r.plan.Reading.LotColumn == "", watch: r.watch}
		for _, other := range r.sides {
			if (shared || other.side == s.side) && other.plan.Lot != "" {
				h.lots = append(h.lots, other.plan.Lot)
			}
		}
		t, err := newTable(r.books[s.plan.File], sheets[i], h)
		if err != nil && shared && torn(err) {
			return r.chooseTorn(sheets[i], h)
		}
		if err != nil {
			return faultsError(err)
		}
		s.table = t
		r.tables = append(r.tables, t)
	}
	return nil
}

// chooseSheet finds the sheet of one lot: the one the plan names, else the only one that holds the lot's name.
func chooseSheet(b Book, s lotSide, plan qa.Plan) (cells.Sheet, string, error) {
	key, name := string(s.side)+".sheet", s.plan.Sheet
	if name == "" {
		key, name = "reading.sheet", plan.Reading.Sheet
	}
	if name != "" && b.IsText {
		return cells.Sheet{}, "", planError(b.File.Name, "%s: found %s, want no sheet for a text file; take it out of the plan", key, quoted(name))
	}
	if name != "" {
		sheet, ok := b.sheet(name)
		if !ok {
			return cells.Sheet{}, "", planError(b.File.Name, "%s: found the sheets %s, want %s; correct the name in the plan", key, list(sheetNames(b.Sheets)), quoted(name))
		}
		return sheet, "", nil
	}
	var filled, visible, holding []cells.Sheet
	for _, sheet := range b.Sheets {
		if !slices.ContainsFunc(sheet.Rows, func(r cells.Row) bool { return slices.ContainsFunc(r.Cells, stored) }) {
			continue
		}
		filled = append(filled, sheet)
		if sheet.Hidden {
			continue
		}
		visible = append(visible, sheet)
		if sameName(sheet.Name, s.plan.Lot) || slices.ContainsFunc(sheet.Rows, func(r cells.Row) bool {
			return slices.ContainsFunc(r.Cells, func(c cells.Cell) bool { return s.plan.Lot != "" && sameName(c.Text, s.plan.Lot) })
		}) {
			holding = append(holding, sheet)
		}
	}
	for _, choice := range []struct {
		sheets []cells.Sheet
		why    string
	}{{filled, ""}, {holding, "the only one that has or holds the lot's name"}, {visible, "the only visible one"}} {
		if len(choice.sheets) > 1 && choice.why != "" {
			break
		}
		if len(choice.sheets) != 1 {
			continue
		}
		sheet := choice.sheets[0]
		if choice.why == "" {
			return sheet, "", nil
		}
		return sheet, fmt.Sprintf("%s: the %s lot is read from the sheet %s: %s.", b.File.Name, s.side, quoted(sheet.Name), choice.why), nil
	}
	if len(filled) == 0 {
		return cells.Sheet{}, "", fileError(b.File.Name, "found no sheet that holds anything, want readings; copy the file again from where it came")
	}
	return cells.Sheet{}, "", planError(b.File.Name, "%s: found the sheets %s, want the one that holds the lot %s; name it in the plan", key, list(sheetNames(filled)), quoted(s.plan.Lot))
}

func sheetNames(sheets []cells.Sheet) []string {
	out := make([]string, 0, len(sheets))
	for _, s := range sheets {
		out = append(out, s.Name)
	}
	return out
}

// chooseLots finds the rows of each lot.
func (r *reader) chooseLots() error {
	var faults []Fault
	for i := range r.sides {
		s := &r.sides[i]
		name, rows, err := s.table.lotRows(s.side, s.plan)
		if err != nil {
			faults = append(faults, faultsOf(err)...)
			continue
		}
		s.rows = s.table.ordered(rows)
		*s.lot = qa.Lot{Name: name, Source: s.plan.Source, Files: []qa.File{s.table.book.File}, Rows: len(rows)}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	a, b := r.sides[0], r.sides[1]
	if a.table == b.table && (a.table.lot == 0 || sameName(a.lot.Name, b.lot.Name)) {
		return a.table.refuse("candidate.lot: found %s for both lots, want two lots; name the candidate lot", quoted(a.lot.Name))
	}
	for _, t := range r.tables {
		var used []string
		for _, s := range r.sides {
			if s.table == t {
				used = append(used, s.lot.Name)
			}
		}
		t.sayOthers(used)
		if err := t.beyondHeadings(); err != nil {
			return err
		}
	}
	return nil
}

// beyondHeadings refuses a text file whose rows have more fields than headings: a decimal comma that split a number in two
// looks like this.
func (t *table) beyondHeadings() error {
	if !t.book.IsText || len(t.columns) == 0 || t.turned {
		return nil
	}
	last := t.columns[len(t.columns)-1].col
	for _, r := range t.wanted() {
		stored := t.sheet.Rows[r.at].Cells
		if n := len(stored); n > 0 && stored[n-1].Col > last && filledText(stored[n-1]) != "" {
			return fileError(t.cellPlace(stored[n-1]), "found %s beyond the last heading (column %s), want as many fields as headings; "+
				"a decimal comma between commas splits numbers: write the file with semicolons", quoted(stored[n-1].Text), cells.Letters(last))
		}
	}
	return nil
}

// chooseCharacteristics settles the list of characteristics, their columns in both lots, units and limits.
func (r *reader) chooseCharacteristics() error {
	list := slices.Clone(r.plan.Characteristics)
	ref := r.sides[0].table
	if len(list) == 0 {
		seen := map[string]bool{}
		for _, col := range ref.measured {
			c := ref.column(col)
			if seen[c.heading] {
				return ref.refuse("found the heading %s twice among the measurements, want each once; give each column its own heading in the file", quoted(c.heading))
			}
			seen[c.heading] = true
			name := c.name
			if len(ref.named(name)) != 1 {
				name = c.heading
			}
			list = append(list, qa.Characteristic{Name: name})
		}
		if can := r.sides[1].table; can != ref {
			for _, col := range can.measured {
				if c := can.column(col); !slices.ContainsFunc(list, func(l qa.Characteristic) bool { return slices.Contains(can.named(l.Name), col) }) {
					can.say("%s is not in the reference's sheet and takes no part.", can.columnText(c.col))
				}
			}
		}
	}
	var faults []Fault
	for i := range list {
		for j := range r.sides {
			s := &r.sides[j]
			col, err := s.table.only("characteristic "+quoted(list[i].Name), list[i].Heading())
			if err != nil {
				faults = append(faults, faultsOf(err)...)
				continue
			}
			s.cols = append(s.cols, col)
			if list[i].Kind == kindAttribute {
				s.conversions = append(s.conversions, nil)
				continue
			}
			v, err := s.table.mergeUnit(&list[i], s.table.columnOf(col, s.lot.Name), s.plan, s.side)
			if err != nil {
				faults = append(faults, faultsOf(err)...)
			}
			s.conversions = append(s.conversions, v)
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	r.out.Characteristics = list
	return nil
}

// settleMarks settles the decimal mark of each column and reads the limits that the sheets state.
func (r *reader) settleMarks() error {
	var faults []Fault
	for i := range r.out.Characteristics {
		c := &r.out.Characteristics[i]
		if c.Kind == kindAttribute { // words have no decimal mark and no limits
			for j := range r.sides {
				r.sides[j].marks = append(r.sides[j].marks, mark{})
			}
			continue
		}
		for _, t := range r.tables {
			var col int
			for _, s := range r.sides {
				if s.table == t {
					col = s.cols[i]
				}
			}
			m, err := t.settleConverted(c, r.planned(i), col, r.conversionOf(t, i))
			if err != nil {
				faults = append(faults, faultsOf(err)...)
			}
			for j := range r.sides {
				if r.sides[j].table == t {
					r.sides[j].marks = append(r.sides[j].marks, m)
				}
			}
		}
		if c.Lower != nil && c.Upper != nil && !(*c.Lower < *c.Upper) {
			faults = append(faults, Fault{Place: "characteristic " + quoted(c.Name), Text: fmt.Sprintf(
				"found the lower limit %v and the upper limit %v, want lower below upper; correct the sheet or the plan", *c.Lower, *c.Upper)})
		}
	}
	if faults = append(faults, r.mixedMarks()...); len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// mixedMarks finds points that may be thousands marks: columns of nothing but such points in a sheet where the texts of
// another column settle that it has the decimal comma.
func (r *reader) mixedMarks() []Fault {
	var faults []Fault
	seen := map[string]bool{}
	for _, s := range r.sides {
		if !slices.ContainsFunc(s.marks, func(m mark) bool { return m.decimal == ',' }) {
			continue
		}
		for _, m := range s.marks {
			if m.grouping == nil {
				continue
			}
			place := s.table.cellPlace(*m.grouping)
			if seen[place] {
				continue
			}
			seen[place] = true
			faults = append(faults, Fault{Place: place, Text: fmt.Sprintf("found %s beside a column with the decimal comma, want a number whose decimal mark is known; "+
				"state decimal under [reading]", quoted(m.grouping.Text))})
		}
	}
	return faults
}

// settleColumn settles the decimal mark of one column and merges its limits into the characteristic.
func (t *table) settleColumn(c *qa.Characteristic, plan qa.Characteristic, col int) (mark, error) {
	return t.settleConverted(c, plan, col, nil)
}

// settleConverted does so for a column whose readings are converted.
func (t *table) settleConverted(c *qa.Characteristic, plan qa.Characteristic, col int, v *conversion) (mark, error) {
	texts := func(yield func(cells.Cell) bool) {
		if !t.holdsText(col) {
			return
		}
		for _, r := range t.wanted() {
			if cell := t.cell(r, col); cell.Kind == cells.Text && !yield(cell) {
				return
			}
		}
	}
	lower, upper := c.Lower, c.Upper
	quiet := *t // a first look: what it says is said later
	if file, err := quiet.limitsIn(col, c, v, 0); err == nil {
		if lower == nil {
			lower = file.Lower
		}
		if upper == nil {
			upper = file.Upper
		}
	}
	if v != nil { // the limits are in another unit than the texts
		lower, upper = nil, nil
	}
	m := settleDecimal(texts, t.reading.Decimal, lower, upper)
	if n := len(m.unclear); n > 0 {
		first := m.unclear[0]
		more := ""
		if n > 1 {
			more = fmt.Sprintf(" and %d more such cells", n-1)
		}
		return m, planError(t.cellPlace(first), "found %s%s, want a number whose decimal mark is known; state decimal = \",\" or decimal = \".\" under [reading]", quoted(first.Text), more)
	}
	if m.said != "" {
		mark := "decimal comma"
		if m.decimal == '.' {
			mark = "decimal point"
		}
		t.say("%s is read with a %s: %s.", t.columnText(col), mark, m.said)
	}
	t.warnGrouping(m, plan, col)
	file, err := t.limitsIn(col, c, v, m.decimal)
	switch {
	case err != nil && (plan.Lower != nil || plan.Target != nil || plan.Upper != nil):
		t.warn("limits-unread", "%s; the plan's limits are taken.", err)
		return m, nil
	case err != nil:
		return m, err
	}
	return m, t.mergeLimits(c, plan, file)
}
