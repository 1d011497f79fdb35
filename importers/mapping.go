package importers

import (
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// Mapping is how a file is proposed to be read: the layout, the part that sheets, rows and columns play, and why. A person
// may correct Reading and propose again: what Reading states is taken, the rest is found.
type Mapping struct {
	Reading    qa.ReadingPlan
	Confidence Confidence
	Reasons    []string // of the layout
	Lots       []MappedLot

	tables []*table // one, or one a lot
}

// MappedLot is one lot of the mapping and where it stands.
type MappedLot struct {
	Name  string
	Sheet string
	Rows  int

	table *table
}

// Propose finds how a file would be read; stated is what is known, as in a plan's [reading]. The error is a *PlanError.
func Propose(b Book, stated qa.ReadingPlan) (Mapping, error) { return Watched{}.Propose(b, stated) }

// Propose proposes as the function of the name does, under the watch.
func (w Watched) Propose(b Book, stated qa.ReadingPlan) (Mapping, error) {
	return w.propose(b, stated, nil)
}

func (w Watched) propose(b Book, stated qa.ReadingPlan, all []qa.Characteristic) (Mapping, error) {
	if !slices.Contains(Layouts, stated.Layout) && stated.Layout != "" {
		return Mapping{}, planError(b.File.Name, "found the layout %s, want %s; state one of these", quoted(stated.Layout), list(Layouts))
	}
	h := hints{reading: stated, characteristics: all, whole: true, show: true, watch: w}
	t, err := proposeTable(b, h)
	if err != nil {
		return Mapping{}, err
	}
	m := Mapping{Reading: stated, Confidence: t.confidence, Reasons: t.reasons, tables: []*table{t}}
	m.Reading.Layout, m.Reading.Sheet, m.Reading.HeaderRow = t.layout, t.sheet.Name, t.heading
	switch {
	case t.tidy != nil:
		m.Reading.LotColumn = t.tidy.lotColumn
	case !t.turned:
		m.Reading.LotColumn = t.column(t.lot).heading
	}
	if t.lot > 0 {
		for _, l := range t.foundLots() {
			m.Lots = append(m.Lots, MappedLot{Name: l.name, Sheet: t.sheet.Name, Rows: l.rows, table: t})
		}
		return m, nil
	}
	name := t.sheet.Name
	if name == "" {
		name = b.File.Name
	}
	m.Lots = []MappedLot{{Name: name, Sheet: t.sheet.Name, Rows: len(t.rows), table: t}}
	if stated.Sheet == "" {
		if err := m.alike(b, h); err != nil {
			return Mapping{}, err
		}
	}
	return m, nil
}

// proposeTable reads the sheet that is stated, else the first visible one that can be read.
func proposeTable(b Book, h hints) (*table, error) {
	if name := h.reading.Sheet; name != "" {
		s, ok := b.sheet(name)
		if !ok {
			return nil, planError(b.File.Name, "found the sheets %s, want %s; name one of these", list(sheetNames(b.Sheets)), quoted(name))
		}
		t, err := newTable(b, s, h)
		return t, faultsError(err)
	}
	var first error
	for _, hidden := range []bool{false, true} {
		for _, s := range b.Sheets {
			if s.Hidden != hidden {
				continue
			}
			t, err := newTable(b, s, h)
			if err == nil || stopped(err) {
				return t, err
			}
			if first == nil {
				first = faultsError(err)
			}
		}
	}
	if first == nil {
		first = fileError(b.File.Name, "found no sheet, want readings; copy the file again from where it came")
	}
	return nil, first
}

// alike finds further visible sheets with the same headings and no column of lots: then each sheet is a lot.
func (m *Mapping) alike(b Book, h hints) error {
	first := m.tables[0]
	for _, s := range b.Sheets {
		if s.Hidden || s.Name == first.sheet.Name || !slices.ContainsFunc(s.Rows, func(r cells.Row) bool { return slices.ContainsFunc(r.Cells, stored) }) {
			continue
		}
		t, err := newTable(b, s, h)
		if stopped(err) {
			return err
		}
		if err != nil || t.lot > 0 || t.layout != first.layout || !sameHeadings(t, first) {
			continue
		}
		m.tables = append(m.tables, t)
		m.Lots = append(m.Lots, MappedLot{Name: s.Name, Sheet: s.Name, Rows: len(t.rows), table: t})
	}
	if len(m.tables) < 2 {
		return nil
	}
	m.Reading.Sheet = ""
	if first.layout == RowPerPart {
		m.Reading.Layout = SheetPerLot
	}
	if m.Confidence != Stated {
		m.Confidence = Clear
	}
	m.Reasons = append([]string{qa.Count(len(m.tables), "sheet has", "sheets have") + " the same headings and no column of lots: each is a lot."}, m.Reasons...)
	return nil
}

// sameHeadings says whether two tables have the same measurements by name.
func sameHeadings(a, b *table) bool {
	names := func(t *table) []string {
		var out []string
		for _, col := range t.measured {
			out = append(out, t.column(col).name)
		}
		slices.Sort(out)
		return out
	}
	return slices.Equal(names(a), names(b))
}
