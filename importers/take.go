package importers

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// takeReadings takes every cell of every characteristic of both lots.
func (r *reader) takeReadings() error {
	for i := range r.sides {
		s := &r.sides[i]
		for k, c := range r.out.Characteristics {
			if err := s.table.unmerged(s.rows, s.cols[k]); err != nil {
				return err
			}
			if err := r.watch.told(taking, c.Name, int64(i*len(r.out.Characteristics)+k), int64(2*len(r.out.Characteristics))); err != nil {
				return err
			}
			series := qa.Series{Characteristic: c.Name, Rows: len(s.rows), Readings: make([]qa.Reading, 0, len(s.rows))}
			var thousands []string
			var seen looks
			for n, row := range s.rows {
				if err := r.watch.stop(taking, c.Name, n); err != nil {
					return err
				}
				cell := s.table.cell(row, s.cols[k])
				if got := r.take(s, &series, c, row, cell, k); got.thousands {
					thousands = append(thousands, cell.Name())
				}
				seen.see(cell)
			}
			if len(thousands) > 0 {
				s.table.warn("thousands-mark", "%s: a mark between groups of three digits is taken for a thousands mark in %s (%s).", c.Name, qa.Count(len(thousands), "cell", "cells"), join2(thousands))
			}
			s.lot.Series = append(s.lot.Series, series)
			if c.Kind != kindAttribute {
				seen.say(s.table, c.Name)
			}
		}
	}
	for _, t := range r.tables {
		r.takeSummaries(t)
	}
	r.sayConversions()
	r.sayAttributes()
	r.sayMixed()
	r.sayOdd()
	return r.checkScales()
}

// take puts one cell where it belongs: a reading, or an entry of the ledger, or both.
func (r *reader) take(s *lotSide, series *qa.Series, c qa.Characteristic, row row, cell cells.Cell, k int) taken {
	t := s.table
	got := taken{}
	if absent(cell) && t.tidy != nil {
		series.Rows--
		return got
	}
	if c.Kind == kindAttribute {
		got = takeAttribute(cell, c.Failed)
	} else {
		got = s.conversions[k].apply(takeCell(cell, t.book.IsText, s.unitIn(k, c), s.marks[k].decimal))
	}
	entry := qa.Entry{Source: t.book.source(t.sheet.Name, cell), Side: s.side, Characteristic: c.Name}
	out := r.excluded(t, cell, got)
	as := roleUsed
	switch {
	case got.isMissing:
		series.Missing++
		entry.TakenAs, as = qa.TakenMissing, roleMissing
	case out != "" && !got.isValue:
		series.ExcludedUnread++
		entry.TakenAs, entry.Reason, as = qa.TakenExcluded, out, roleLeftOut
	case got.isBelow:
		r.takeNonDetect(series, &entry, got, t, row)
		as = roleNonDetect
	case got.problem != nil:
		series.Unread++
		entry.TakenAs, entry.Reason, entry.Want, entry.Do = qa.TakenNotANumber, got.problem.Code, got.problem.Want, got.problem.Do
		as = roleUnread
	default:
		reading := t.ofRow(row, qa.Reading{Value: got.value, Source: entry.Source, Decimals: got.decimals, LeftOut: out})
		series.Readings = append(series.Readings, reading)
		value := got.value
		switch {
		case out != "":
			entry.TakenAs, entry.Reason, entry.Value, as = qa.TakenExcluded, out, &value, roleLeftOut
		case got.converted != "":
			entry.TakenAs, entry.Reason, entry.Value = qa.TakenNumber, got.converted, &value
		}
	}
	t.give(cell, as)
	if entry.TakenAs != "" {
		r.out.Ledger = append(r.out.Ledger, entry)
	}
	return got
}

// give gives one cell its role; a cell that is not stored has none. A cell that holds several readings keeps the role that
// says most: the last of them.
func (t *table) give(c cells.Cell, as role) {
	at, found := t.sheet.IndexOf(c.Row)
	if !found {
		return
	}
	j, found := t.sheet.Rows[at].IndexOf(c.Col)
	if !found || !stored(t.sheet.Rows[at].Cells[j]) {
		return
	}
	if had := t.roles[at][j]; had < roleUsed || as > had {
		t.roles[at][j] = as
	}
}

// takeSummaries lists what the summary rows hold under the characteristics.
func (r *reader) takeSummaries(t *table) {
	for _, f := range t.feet {
		t.give(f.cell, roleSummary)
		for k, c := range r.out.Characteristics {
			if slices.ContainsFunc(r.sides[:], func(s lotSide) bool { return s.table == t && s.cols[k] == f.col }) {
				r.out.Ledger = append(r.out.Ledger, qa.Entry{Source: t.book.source(t.sheet.Name, f.cell), Characteristic: c.Name, TakenAs: qa.TakenSummary})
			}
		}
	}
	if t.turned {
		return
	}
	for _, at := range t.summary {
		t.mark(at, roleSummary)
		for k, c := range r.out.Characteristics {
			var col int
			for _, s := range r.sides {
				if s.table == t {
					col = s.cols[k]
				}
			}
			cell := t.sheet.Rows[at].At(col)
			if !stored(cell) {
				continue
			}
			r.out.Ledger = append(r.out.Ledger, qa.Entry{Source: t.book.source(t.sheet.Name, cell), Characteristic: c.Name, TakenAs: qa.TakenSummary})
		}
	}
}

// unmerged refuses merged cells among the readings: one value cannot stand for several parts.
func (t *table) unmerged(rows []row, col int) error {
	if t.turned {
		return t.unmergedCells(rows, col)
	}
	for _, a := range t.sheet.Merged {
		if col < a.FirstCol || col > a.LastCol || a == (cells.Area{FirstCol: a.FirstCol, FirstRow: a.FirstRow, LastCol: a.FirstCol, LastRow: a.FirstRow}) {
			continue
		}
		for _, r := range rows {
			if n := t.sheet.Rows[r.at].Number; n >= a.FirstRow && n <= a.LastRow {
				return planError(t.place()+"!"+cells.Name(a.FirstCol, a.FirstRow), "found the merged cells %s:%s among the readings, want one cell a reading; split them in the file",
					cells.Name(a.FirstCol, a.FirstRow), cells.Name(a.LastCol, a.LastRow))
			}
		}
	}
	return nil
}

// checkRepeats refuses an id that stands twice in a lot: the part would count twice.
func (r *reader) checkRepeats() error {
	var faults []Fault
	for i := range r.sides {
		s := &r.sides[i]
		if s.table.part > 0 {
			if f, ok := r.repeatedIDs(s); ok {
				faults = append(faults, f)
			}
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// checkDoubled refuses a lot without ids whose second half repeats its first, and warns of one with other ids there.
func (r *reader) checkDoubled() error {
	var faults []Fault
	for i := range r.sides {
		s := &r.sides[i]
		ranges, ok := s.doubled(r.isAttribute)
		if !ok {
			continue
		}
		_, repeated := r.repeatedIDs(s)
		switch {
		case s.table.part == 0:
			faults = append(faults, Fault{Place: s.table.place(), Text: fmt.Sprintf(
				"found the readings of the lot %s twice (doubled block: %s), want each part once; delete the second block, or name its cells under exclude with a reason", quoted(s.lot.Name), ranges)})
		case !repeated || r.plan.Reading.PartColumn != "":
			ids := "under other ids"
			if repeated {
				ids = "under the same ids: they are averaged as repeat readings, but look like a copy"
			}
			s.table.warn("repeated-block", "the second half of the lot %s repeats the first exactly (%s), %s.", quoted(s.lot.Name), ranges, ids)
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// repeatsPart says whether an id stands twice among the readings used.
func repeatsPart(series qa.Series) bool {
	seen := map[[2]string]struct{}{}
	for _, x := range series.Readings {
		if id := partOf(x); x.Used() && x.Part != "" {
			if _, twice := seen[id]; twice {
				return true
			}
			seen[id] = struct{}{}
		}
	}
	return false
}

// repeatedIDs finds ids that stand twice among the readings used of one characteristic.
func (r *reader) repeatedIDs(s *lotSide) (Fault, bool) {
	places := map[[2]string][]string{}
	var repeated [][2]string
	for _, series := range s.lot.Series {
		if !repeatsPart(series) {
			continue
		}
		at := map[[2]string][]string{}
		for _, x := range series.Readings {
			if x.Used() && x.Part != "" {
				at[partOf(x)] = append(at[partOf(x)], x.Source.Place())
			}
		}
		for _, x := range series.Readings {
			if id := partOf(x); x.Used() && len(at[id]) > 1 && places[id] == nil {
				places[id] = at[id]
				repeated = append(repeated, id)
			}
		}
	}
	if len(repeated) == 0 {
		return Fault{}, false
	}
	var listed []string
	for _, id := range repeated {
		listed = append(listed, fmt.Sprintf("%s in %s", quoted(id[1]), strings.Join(places[id], " and ")))
	}
	do := "if they are repeat readings of one part, name part_column under [reading] and they are averaged; else correct the ids, or name the cells under exclude with a reason"
	return Fault{Place: s.table.place(), Text: fmt.Sprintf("found %s more than once in the lot %s (%s), want each part once; %s",
		qa.Count(len(repeated), "part id", "part ids"), quoted(s.lot.Name), join2(listed), do)}, true
}
