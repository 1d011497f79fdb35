package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// exclusion is one cell that an entry of reading.exclude means. An entry may name all the cells of a reading that is the mean of
// several, as the ledger and the record write them: "Data!C16, C26".
type exclusion struct {
	qa.Exclusion
	entry    int    // of reading.exclude, from 1
	several  bool   // the entry names more cells than this one
	key      string // "reading.exclude 2"
	table    *table
	col, row int
	used     bool
}

// resolveExclusions finds the sheet and cells that each entry of reading.exclude means.
func (r *reader) resolveExclusions() error {
	var faults []Fault
	for i, e := range r.plan.Reading.Exclude {
		key := fmt.Sprintf("reading.exclude %d", i+1)
		found, text := r.excludedCells(e)
		if text != "" {
			faults = append(faults, Fault{Place: key, Text: text})
		}
		for _, x := range found {
			x.Exclusion, x.key, x.entry, x.several = e, key, i+1, len(found) > 1
			for _, other := range r.exclusions {
				if other.table == x.table && other.col == x.col && other.row == x.row {
					faults = append(faults, Fault{Place: key, Text: fmt.Sprintf("found %s a second time, want each cell once; take one out", quoted(cells.Name(x.col, x.row)))})
				}
			}
			r.exclusions = append(r.exclusions, x)
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// excludedCells are the cells of one entry, or what is wrong with it.
func (r *reader) excludedCells(e qa.Exclusion) (found []exclusion, fault string) {
	sheet, names, hasSheet := cutSheet(e.Cell)
	for _, name := range strings.Split(names, ",") {
		var x exclusion
		var ok bool
		if x.col, x.row, ok = cells.Parse(strings.TrimSpace(name)); !ok {
			return nil, fmt.Sprintf("found the cell %s, want one such as Data!D17, or D17 for a text file, or Data!D17, D29 for a mean of both; correct the plan", quoted(e.Cell))
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
			return nil, fmt.Sprintf("found the file %s, want a file that the plan names; correct the plan", quoted(e.File))
		case len(fits) == 0:
			return nil, fmt.Sprintf("found the sheet %s, want a sheet that readings come from; correct the plan", quoted(sheet))
		case len(fits) > 1:
			return nil, fmt.Sprintf("found %s, which may be in %s or %s, want one cell; state its file and sheet", quoted(e.Cell), fits[0].place(), fits[1].place())
		}
		x.table = fits[0]
		found = append(found, x)
	}
	return found, ""
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

// entryOf is the entry of reading.exclude that leaves the cell and others out; 0 where it names the one cell or none does.
func (r *reader) entryOf(t *table, at qa.Source) int {
	col, row, _ := cells.Parse(at.Cell)
	for _, x := range r.exclusions {
		if x.several && x.table == t && x.col == col && x.row == row {
			return x.entry
		}
	}
	return 0
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
