package importers

import (
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The parts that cells can play beside the roles.
const (
	asBlank   = "missing: blank cells of the table"
	asNotRead = "sheet not read"
)

// finish accounts for every cell, puts the ledger in the order of the file and gathers what was said.
func (r *reader) finish() {
	for _, t := range r.tables {
		t.warnHidden(func(c cells.Cell) bool {
			return slices.ContainsFunc(r.exclusions, func(x exclusion) bool { return x.table == t && x.col == c.Col && x.row == c.Row })
		})
		used := map[int]bool{}
		for _, s := range r.sides {
			if s.table == t {
				for _, row := range s.rows {
					used[row.at] = true
				}
			}
		}
		if t.turned {
			r.giveRestTurned(t)
		} else {
			t.giveRest(used)
		}
		r.out.Account = append(r.out.Account, t.account(r.blanks(t))...)
		for _, s := range t.said {
			if !slices.Contains(r.out.Said, s) {
				r.out.Said = append(r.out.Said, s)
			}
		}
		r.out.Warnings = append(r.out.Warnings, t.warnings...)
	}
	done := map[string]bool{}
	for _, s := range r.sides {
		b := s.table.book
		if done[b.File.Name] {
			continue
		}
		done[b.File.Name] = true
		var hidden []cells.Sheet
		var visible []string
		for _, sheet := range b.Sheets {
			if slices.ContainsFunc(r.tables, func(t *table) bool { return t.book.File.Name == b.File.Name && t.sheet.Name == sheet.Name }) {
				continue
			}
			if sheet.Hidden {
				hidden = append(hidden, sheet)
			}
			if !sheet.Hidden {
				visible = append(visible, sheet.Name)
			}
			if n := cellCount(sheet); n > 0 {
				r.out.Account = append(r.out.Account, qa.Account{File: b.File.Name, Sheet: sheet.Name, As: asNotRead, Cells: n})
			}
		}
		if n := len(visible); n > 0 {
			r.out.Said = append(r.out.Said, b.File.Name+": "+qa.Count(n, "other sheet", "other sheets")+" not read: "+list(visible)+".")
		}
		if len(hidden) > 0 {
			r.out.Warnings = append(r.out.Warnings, qa.Warning{Code: "hidden-sheets", Text: b.File.Name + ": " +
				qa.Count(len(hidden), "hidden sheet", "hidden sheets") + " not read: " + sheetsHeld(hidden) + "; sheet under [reading] picks one."})
		}
	}
	r.sortLedger()
}

// giveRest gives a role to every stored cell that has none yet.
func (t *table) giveRest(used map[int]bool) {
	inLot := map[int]bool{}
	for _, r := range t.rows {
		inLot[r.at] = true
		if !used[r.at] {
			t.mark(r.at, roleOtherLot)
		}
	}
	headed := map[int]bool{}
	for _, c := range t.columns {
		headed[c.col] = true
	}
	for i, r := range t.sheet.Rows {
		for j, c := range r.Cells {
			if t.roles[i][j] != roleNone || !stored(c) {
				continue
			}
			as := roleOutside
			switch {
			case c.Col == t.lot:
				as = roleLot
			case !inLot[i]:
			case c.Col == t.part:
				as = rolePart
			case c.Col == t.order:
				as = roleOrder
			case c.Col == t.group:
				as = roleGroup
			case c.Col == t.pair:
				as = rolePair
			case headed[c.Col]:
				as = roleOtherColumn
			default:
				as = roleNoHeading
			}
			t.roles[i][j] = as
		}
	}
	t.warnNoHeading(used)
}

// warnNoHeading warns of numbers beside the readings that stand under no heading.
func (t *table) warnNoHeading(used map[int]bool) {
	columns := map[int]int{}
	for i, r := range t.sheet.Rows {
		for j, c := range r.Cells {
			if used[i] && t.roles[i][j] == roleNoHeading && numeric(c) {
				columns[c.Col]++
			}
		}
	}
	t.warnNumbers(columns)
}

// warnNumbers does so, given how many numbers stand in each column.
func (t *table) warnNumbers(columns map[int]int) {
	var texts []string
	for _, col := range t.contentColumns() {
		if n := columns[col]; n > 0 {
			texts = append(texts, "column "+cells.Letters(col)+" ("+qa.Count(n, "number", "numbers")+")")
		}
	}
	if len(texts) > 0 {
		t.warn("column-without-heading", "numbers without a heading are not read: %s.", join2(texts))
	}
}

// account counts the cells of the table's sheet by role.
func (t *table) account(blanks int) []qa.Account {
	var counts [roles]int
	for i, row := range t.sheet.Rows {
		for j, c := range row.Cells {
			if stored(c) {
				counts[t.roles[i][j]]++
			}
		}
	}
	counts[roleOutside] += t.cut
	var out []qa.Account
	for as, n := range counts {
		if n > 0 {
			out = append(out, qa.Account{File: t.book.File.Name, Sheet: t.sheet.Name, As: roleNames[as], Cells: n})
		}
	}
	if blanks > 0 {
		out = append(out, qa.Account{File: t.book.File.Name, Sheet: t.sheet.Name, As: asBlank, Cells: blanks})
	}
	return out
}

// blanks counts the blank cells of the table that count as missing.
func (r *reader) blanks(t *table) int {
	n := 0
	for _, s := range r.sides {
		if s.table != t {
			continue
		}
		for _, row := range s.rows {
			for _, col := range s.cols {
				if c := t.cell(row, col); !stored(c) && !(t.tidy != nil && absent(c)) {
					n++
				}
			}
		}
	}
	return n
}

// sortLedger puts the entries in the order of files, sheets, rows and columns.
func (r *reader) sortLedger() {
	rank := func(e qa.Entry) (int, int, int) {
		col, row, _ := cells.Parse(e.Source.Cell)
		for i, t := range r.tables {
			if t.book.File.Name == e.Source.File && t.sheet.Name == e.Source.Sheet {
				return i, row, col
			}
		}
		return len(r.tables), row, col
	}
	slices.SortStableFunc(r.out.Ledger, func(a, b qa.Entry) int {
		at, ar, ac := rank(a)
		bt, br, bc := rank(b)
		if at != bt {
			return at - bt
		}
		if ar != br {
			return ar - br
		}
		return ac - bc
	})
}
