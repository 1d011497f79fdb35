package exports

import "lotpair/qa"

// findingsSheet lists what a reader of the verdict must know: the warnings of the comparison. None
// of them changes a verdict by itself unless it says so.
func findingsSheet(rec qa.Record) sheet {
	s := sheet{name: SheetFindings, widths: []float64{26, 12, 26, 24, 70}, landscape: true}
	s.add(text("Findings", titleLook))
	s.addTall(30, wide("What the checks of the readings came upon, and what qualifies a figure. No reading is left out because of a finding.", wrapLook, 5))
	s.add(heads("Characteristic", "Side", "Finding", "Figure", "In words")...)
	s.frozen, s.heads = len(s.rows), len(s.rows)
	found := 0
	say := func(name string, w qa.Warning) {
		found++
		s.addTall(max(lines(w.Text, 74), lines(w.Path, 24), lines(name, 26))*13.5+1, text(name, ruledWrapLook), text(string(w.Side), ruledLook),
			text(w.Code, ruledLook), text(w.Path, ruledWrapLook), text(w.Text, ruledWrapLook))
	}
	for _, w := range rec.Result.Warnings {
		say("all", w)
	}
	for _, c := range rec.Result.Characteristics {
		for _, w := range c.Warnings {
			say(c.Name, w)
		}
	}
	if found == 0 {
		s.add(wide("Nothing was found.", plainLook, 5))
	}
	s.gap()
	s.add(wide("The figures of every check stand in the sheet Results, in the columns whose names begin with checks.", mutedLook, 5))
	return s
}
