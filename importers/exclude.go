package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// exclusion is one entry of reading.exclude with the cell it means.
type exclusion struct {
	qa.Exclusion
	key      string // "reading.exclude 2"
	table    *table
	col, row int
	used     bool
}

// resolveExclusions finds the sheet and cell that each entry of reading.exclude means.
func (r *reader) resolveExclusions() error {
	var faults []Fault
	for i, e := range r.plan.Reading.Exclude {
		x := exclusion{Exclusion: e, key: fmt.Sprintf("reading.exclude %d", i+1)}
		bad := func(format string, args ...any) {
			faults = append(faults, Fault{Place: x.key, Text: fmt.Sprintf(format, args...)})
		}
		sheet, cell, hasSheet := cutSheet(e.Cell)
		var ok bool
		if x.col, x.row, ok = cells.Parse(cell); !ok {
			bad("found the cell %s, want one such as Data!D17, or D17 for a text file; correct the plan", quoted(e.Cell))
			continue
		}
		var files, fits []*table
		for _, t := range r.tables {
			if e.File != "" && e.File != t.book.File.Name {
				continue
			}
			files = append(files, t)
			if beside := t.keep.LastCol > 0 && (x.col < t.keep.FirstCol || x.col > t.keep.LastCol); !beside && (!hasSheet || sheet == t.sheet.Name) {
				fits = append(fits, t)
			}
		}
		switch {
		case len(files) == 0:
			bad("found the file %s, want a file that the plan names; correct the plan", quoted(e.File))
			continue
		case len(fits) == 0:
			bad("found the sheet %s, want a sheet that readings come from; correct the plan", quoted(sheet))
			continue
		case len(fits) > 1:
			bad("found %s, which may be in %s or %s, want one cell; state its file and sheet", quoted(e.Cell), fits[0].place(), fits[1].place())
			continue
		}
		x.table = fits[0]
		for _, other := range r.exclusions {
			if other.table == x.table && other.col == x.col && other.row == x.row {
				bad("found %s a second time, want each cell once; take one out", quoted(e.Cell))
			}
		}
		r.exclusions = append(r.exclusions, x)
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// cutSheet splits "Data!D17" and "'My data'!D17".
func cutSheet(address string) (sheet, cell string, hasSheet bool) {
	i := strings.LastIndexByte(address, '!')
	if i < 0 {
		return "", strings.TrimSpace(address), false
	}
	sheet = strings.TrimSpace(address[:i])
	if len(sheet) >= 2 && sheet[0] == '\'' && sheet[len(sheet)-1] == '\'' {
		sheet = strings.ReplaceAll(sheet[1:len(sheet)-1], "''", "'")
	}
	return sheet, strings.TrimSpace(address[i+1:]), true
}

// excluded is the reason why the plan leaves a cell out; empty where it does not. A missing value cannot be left out.
func (r *reader) excluded(t *table, c cells.Cell, got taken) string {
	for i := range r.exclusions {
		x := &r.exclusions[i]
		if x.table == t && x.col == c.Col && x.row == c.Row && !got.isMissing {
			x.used = true
			return x.Reason
		}
	}
	return ""
}

// checkExclusions refuses entries that name no reading.
func (r *reader) checkExclusions() error {
	var faults []Fault
	for _, x := range r.exclusions {
		if x.used {
			continue
		}
		cell := x.table.sheet.At(x.col, x.row)
		faults = append(faults, Fault{Place: x.key, Text: fmt.Sprintf("found %s in %s, which is no reading of either lot, want a cell that holds one; correct the address",
			quoted(cell.Text), x.table.cellPlace(cell))})
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}
