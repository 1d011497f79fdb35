package importers

import (
	"fmt"
	"slices"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// found is one lot of a table.
type found struct {
	name  string
	rows  int
	first cells.Cell
}

// sameName compares lots' names after joining white space; nothing else is forgiven.
func sameName(a, b string) bool { return joined(a) == joined(b) }

// foundLots are the lots of the table in the order of their first rows.
func (t *table) foundLots() []found {
	var all []found
	index := map[string]int{}
	for k, r := range t.rows {
		if k > 0 && r.lot == t.rows[k-1].lot {
			all[index[r.lot]].rows++
			continue
		}
		i, ok := index[r.lot]
		if !ok {
			i = len(all)
			index[r.lot] = i
			all = append(all, found{name: r.lot, first: t.cell(r, max(1, t.lot))})
		}
		all[i].rows++
	}
	return all
}

// datedLots says what to do where lots are named by dates: a spreadsheet keeps those as day numbers.
func datedLots(all []found) string {
	if !slices.ContainsFunc(all, func(f found) bool { return f.first.Kind == cells.Date }) {
		return ""
	}
	return "; the cells hold dates, which a spreadsheet keeps as these day numbers: name the number as the lot, or write the lots as text in the file"
}

// lotRows are the rows of one side's lot and its name. A lot that the plan names and the table lacks is a *PlanError that
// lists the lots found.
func (t *table) lotRows(side qa.Side, plan qa.LotPlan) (string, []row, error) {
	if t.lot == 0 {
		name := plan.Lot
		if name == "" {
			if name = t.sheet.Name; t.book.IsText || len(t.book.Sheets) == 1 {
				name = t.book.File.Name
			}
			t.say("the %s lot has no name in the plan and is called %s after its file or sheet.", side, quoted(name))
		}
		return name, t.rows, nil
	}
	all := t.foundLots()
	want := plan.Lot
	if want == "" {
		if len(all) != 1 {
			return "", nil, t.refuse("%s.lot: found none in the plan and the lots %s in the file, want the one that is meant; name it", side, list(names(all)))
		}
		want = all[0].name
		t.say("the %s lot is the only one of the sheet, %s.", side, quoted(want))
	}
	rows := someRows(t.rows, func(lot string) bool { return sameName(lot, want) })
	if len(rows) == 0 {
		near := ""
		for _, l := range all {
			if spelling(l.name) == spelling(want) || swapped(l.name, want) {
				near = fmt.Sprintf("; %s is a near spelling (%s)", quoted(l.name), t.cellPlace(l.first))
			}
		}
		return "", nil, t.refuse("%s.lot: found the lots %s%s, want %s; correct the lot's name in the plan%s", side, list(names(all)), near, quoted(want), datedLots(all))
	}
	return rows[0].lot, rows, nil
}

func names(all []found) []string {
	out := make([]string, 0, len(all))
	for _, l := range all {
		out = append(out, l.name)
	}
	return out
}

// sayOthers says which lots take no part, and warns of those whose name is a near spelling of one that does.
func (t *table) sayOthers(used []string) {
	if t.lot == 0 {
		return
	}
	others := slices.DeleteFunc(t.foundLots(), func(l found) bool {
		return slices.ContainsFunc(used, func(u string) bool { return sameName(u, l.name) })
	})
	if len(others) > 20 {
		t.say("%d other lots take no part: %s.", len(others), list(names(others)))
		others = nil
	}
	for _, l := range others {
		t.say("the lot %s (%s) takes no part.", quoted(l.name), qa.Count(l.rows, "row", "rows"))
	}
	t.nearSpellings(func(name string) bool {
		return slices.ContainsFunc(used, func(u string) bool { return sameName(u, name) })
	})
}

// nearSpellings warns of lots whose names are near spellings of one that counts.
func (t *table) nearSpellings(counts func(string) bool) {
	all := t.foundLots()
	bySpelling := map[string][]found{}
	var main []found
	for _, l := range all {
		bySpelling[spelling(l.name)] = append(bySpelling[spelling(l.name)], l)
		if counts(l.name) {
			main = append(main, l)
		}
	}
	if len(main) > 50 { // ids rather than lots; a comparison of all with all would never end
		main = main[:50]
	}
	var pairs []string
	told := map[[2]string]bool{}
	for _, a := range main {
		near := slices.Clone(bySpelling[spelling(a.name)])
		for _, b := range all {
			if swapped(a.name, b.name) {
				near = append(near, b)
			}
		}
		for _, b := range near {
			if b.name != a.name && !told[[2]string{b.name, a.name}] {
				told[[2]string{a.name, b.name}] = true
				pairs = append(pairs, fmt.Sprintf("%s beside %s (%s from %s)", quoted(b.name), quoted(a.name), qa.Count(b.rows, "row", "rows"), b.first.Name()))
			}
		}
	}
	if len(pairs) > 0 {
		t.warn("lot-spellings", "lots in several spellings, not joined: %s. If they are one lot, write the name alike in the file.", join2(pairs))
	}
}
