package exports

import (
	"fmt"
	"strconv"

	"lotpair/importers/cells"
)

// bookDifferences lays the sheets that a record or a seal must give beside those of a file, cell by cell, and lists where they
// differ: a cell that shows something else, a cell too many, a cell gone, a sheet too many. Numbers must be the same doubles,
// because the sheets state the record's own; whether the recomputation agrees with them is asked elsewhere.
func bookDifferences(pkg []byte, wanted []sheet) []string {
	book, err := cells.Read(pkg)
	if err != nil {
		return []string{err.Error()}
	}
	var found []string
	say := func(format string, a ...any) {
		if len(found) < maxDifferences {
			found = append(found, fmt.Sprintf(format, a...))
		}
	}
	expected := map[string]bool{}
	for _, want := range wanted {
		expected[want.name] = true
		got, ok := book.Sheet(want.name)
		if !ok {
			say("sheet %s: found none, want the one that the record gives", want.name)
			continue
		}
		if got.Hidden {
			say("sheet %s: found it hidden, want it in sight", want.name)
		}
		var formulas map[string]string
		if want.hasFormulas() {
			if formulas, err = sheetFormulas(pkg, want.name); err != nil {
				say("%v", err)
			}
		}
		compareSheet(&want, got, formulas, say)
	}
	for _, s := range book.Sheets {
		if !expected[s.Name] {
			say("sheet %s: found one that the record does not give", s.Name)
		}
	}
	return found
}

func (s sheet) hasFormulas() bool {
	for _, r := range s.rows {
		for _, c := range r.cells {
			if c.formula != "" {
				return true
			}
		}
	}
	return false
}

func compareSheet(want *sheet, got cells.Sheet, formulas map[string]string, say func(string, ...any)) {
	if len(got.HiddenCols) > 0 {
		say("sheet %s: found hidden columns, want all in sight", want.name)
	}
	next := 0 // of got.Rows
	want.lines(func(number int, r row) bool {
		var have cells.Row
		if next < len(got.Rows) && got.Rows[next].Number == number {
			have = got.Rows[next]
			next++
		}
		if have.Hidden {
			say("sheet %s: row %d is hidden", want.name, number)
		}
		compareRow(want.name, number, r, have, formulas, say)
		return true
	})
	for ; next < len(got.Rows); next++ {
		for _, c := range got.Rows[next].Cells {
			if c.Kind != cells.Blank {
				say("%s!%s: found %q, want nothing", want.name, c.Name(), c.Text)
			}
		}
	}
}

// compareRow goes along both rows together: columns ascend in each.
func compareRow(name string, number int, want row, got cells.Row, formulas map[string]string, say func(string, ...any)) {
	next, col := 0, 1
	for i := range want.cells {
		w := &want.cells[i]
		for ; next < len(got.Cells) && got.Cells[next].Col < col; next++ {
			surplus(name, &got.Cells[next], say)
		}
		if next < len(got.Cells) && got.Cells[next].Col == col {
			compareCell(name, w, &got.Cells[next], formulas, say)
			next++
		} else if w.number != nil || w.text != "" {
			say("%s!%s: found nothing, want what the record gives", name, cells.Name(col, number))
		}
		col += max(w.span, 1)
	}
	for ; next < len(got.Cells); next++ {
		surplus(name, &got.Cells[next], say)
	}
}

// surplus is a cell where the record gives none.
func surplus(name string, g *cells.Cell, say func(string, ...any)) {
	if g.Formula {
		say("%s!%s: found a formula, want nothing", name, g.Name())
	} else if g.Kind != cells.Blank {
		say("%s!%s: found %q, want nothing", name, g.Name(), g.Text)
	}
}

func compareCell(name string, w *cell, g *cells.Cell, formulas map[string]string, say func(string, ...any)) {
	switch {
	case g.Formula && w.formula == "":
		say("%s!%s: found a formula, want a value", name, g.Name())
	case w.formula != "" && (!g.Formula || formulas[g.Name()] != w.formula):
		say("%s!%s: found the formula %q, want %q", name, g.Name(), formulas[g.Name()], w.formula)
	case g.Format != "": // no sheet of ours has one: it could show another number than the cell holds
		say("%s!%s: found the number format %q, want none", name, g.Name(), g.Format)
	case w.number != nil:
		if x, err := strconv.ParseFloat(g.Text, 64); err != nil || g.Kind != cells.Number || x != *w.number {
			say("%s!%s: found %q, want %s", name, g.Name(), g.Text, shortest(*w.number))
		}
	case w.text == "" && g.Kind != cells.Blank:
		say("%s!%s: found %q, want nothing", name, g.Name(), g.Text)
	case w.text != "" && (g.Kind != cells.Text || g.Text != w.text):
		say("%s!%s: found %q, want %q", name, g.Name(), g.Text, w.text)
	}
}
