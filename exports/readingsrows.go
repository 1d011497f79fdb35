package exports

import (
	"fmt"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// readingsFirst is the row of the first reading in its sheet, and readingsValue the column of the values in use.
const (
	readingsFirst = 4
	readingsValue = 4
)

// readingsSheet lists every reading with its origin: with it a reviewer computes the result again without Lotpair. Values in
// use and values left out stand in columns of their own, so that a range over the first never takes one of the others.
func readingsSheet(rec qa.Record) sheet {
	s := sheet{name: SheetReadings, widths: []float64{11, 14, 24, 20, 20, 8, 16, 22, 13, 32}, landscape: true}
	names := []string{"Side", "Lot", "Characteristic", "Value", "Value left out", "Unit", "Text found", "File", "Cell", "State"}
	extra := extraColumns(rec)
	for _, e := range extra {
		names, s.widths = append(names, e.name), append(s.widths, 14)
	}
	s.add(text("Readings", titleLook))
	s.addTall(30, wide("Every reading at full precision, with the text and the place it was read from. What is left out stays here, in a column of its own, and is not used.", wrapLook, 10))
	s.add(heads(names...)...)
	s.frozen, s.heads, s.filter = len(s.rows), len(s.rows), len(s.rows)
	s.filterTo = len(s.rows)
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		for _, series := range lotOf(rec, side).Series {
			s.filterTo += len(series.Readings)
		}
	}
	s.more = func(yield func(row) bool) { readingRows(rec, extra, yield) }
	return s
}

// readingRows makes the line of each reading, in one room for all.
func readingRows(rec qa.Record, extra []extraColumn, yield func(row) bool) {
	units := map[string]string{}
	for _, c := range rec.Readings.Characteristics {
		units[c.Name] = c.Unit
	}
	line := make([]cell, 10+len(extra))
	used := text("used", ruledLook)
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		lot := lotOf(rec, side)
		line[0], line[1] = text(string(side), ruledLook), text(lot.Name, ruledLook)
		for _, series := range lot.Series {
			line[2], line[5] = text(series.Characteristic, ruledLook), text(units[series.Characteristic], ruledLook)
			for i := range series.Readings {
				r := &series.Readings[i]
				line[3], line[4], line[9] = number(&r.Value, ruledNumberLook), cell{look: ruledNumberLook}, used
				if !r.Used() {
					line[3], line[4] = line[4], line[3]
					line[9] = text("left out: "+r.LeftOut, ruledLook)
				}
				line[6], line[7], line[8] = text(r.Source.Text, ruledLook), text(r.Source.File, ruledLook), text(r.Source.Place(), ruledLook)
				for k, e := range extra {
					line[10+k] = text(e.of(r), ruledLook)
				}
				if !yield(row{cells: line}) {
					return
				}
			}
		}
	}
}

// extraColumn is a column that stands there only where a reading has something for it.
type extraColumn struct {
	name string
	of   func(r *qa.Reading) string
}

func extraColumns(rec qa.Record) []extraColumn {
	all := []extraColumn{
		{"Part", func(r *qa.Reading) string { return r.Part }},
		{"Group", func(r *qa.Reading) string { return r.Group }},
		{"Order", func(r *qa.Reading) string { return r.Order }},
		{"Pair", func(r *qa.Reading) string { return r.Pair }},
	}
	var out []extraColumn
	for _, e := range all {
		if anyReading(rec, func(r *qa.Reading) bool { return e.of(r) != "" }) {
			out = append(out, e)
		}
	}
	return out
}

func anyReading(rec qa.Record, has func(r *qa.Reading) bool) bool {
	for _, lot := range []*qa.Lot{&rec.Readings.Reference, &rec.Readings.Candidate} {
		for i := range lot.Series {
			for j := range lot.Series[i].Readings {
				if has(&lot.Series[i].Readings[j]) {
					return true
				}
			}
		}
	}
	return false
}

// readingRanges gives, for a side and a characteristic, the cells of the sheet Readings that hold the values in use.
func readingRanges(rec qa.Record) map[string]string {
	out, row := map[string]string{}, readingsFirst
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		for _, series := range lotOf(rec, side).Series {
			if n := len(series.Readings); n > 0 {
				col := cells.Letters(readingsValue)
				out[string(side)+series.Characteristic] = fmt.Sprintf("%s!$%s$%d:$%s$%d", SheetReadings, col, row, col, row+n-1)
				row += n
			}
		}
	}
	return out
}

// heads is the heading row of a table; the names of columns of numbers stand over their right edge.
func heads(names ...string) []cell {
	out := make([]cell, len(names))
	for i, n := range names {
		out[i] = text(n, headLook)
		if n == "Value" || n == "Value left out" || n == "Cells" {
			out[i].look = headRightLook
		}
	}
	return out
}

func lotOf(rec qa.Record, side qa.Side) qa.Lot {
	if side == qa.Candidate {
		return rec.Readings.Candidate
	}
	return rec.Readings.Reference
}
