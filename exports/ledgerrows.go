package exports

import "lotpair/qa"

// ledgerSheet lists every cell that was not taken as a plain number and every reading left out, then how the cells of the
// files add up.
func ledgerSheet(rec qa.Record) sheet {
	s := sheet{name: SheetLedger, widths: []float64{24, 14, 25, 16, 20, 12, 22, 46}, landscape: true}
	s.add(text("Ledger", titleLook))
	s.addTall(30, wide("Every cell that was not taken as a plain number, and every reading left out, with the reason. Nothing is dropped in silence.", wrapLook, 8))
	s.add(heads("File", "Cell", "Found", "Taken as", "Value", "Side", "Characteristic", "Reason, or what to do")...)
	s.frozen, s.heads = len(s.rows), len(s.rows)
	for _, e := range rec.Readings.Ledger {
		why := e.Reason
		if e.Problem() {
			why = "wanted " + e.Want + "; " + e.Do
		}
		s.addTall(max(lines(why, 50), lines(e.Source.Text, 20))*13.5+1, text(e.Source.File, ruledLook), text(e.Source.Place(), ruledLook), text(e.Source.Text, ruledWrapLook),
			text(string(e.TakenAs), ruledLook), number(e.Value, ruledNumberLook), text(string(e.Side), ruledLook),
			text(e.Characteristic, ruledLook), text(why, ruledWrapLook))
	}
	if len(rec.Readings.Ledger) == 0 {
		s.add(wide("Every cell of the lots was a plain number.", plainLook, 8))
	}
	s.gap()
	s.add(wide("What each cell was", groupLook, 4))
	s.add(heads("File", "Sheet", "Taken as", "Cells")...)
	total := 0
	for _, a := range rec.Readings.Account {
		s.add(text(a.File, plainLook), text(a.Sheet, plainLook), text(a.As, plainLook), whole(a.Cells, numberLook))
		total += a.Cells
	}
	s.add(text("All cells", strongLook), text("", strongLook), text("", strongLook), whole(total, numberLook))
	s.gap()
	s.add(wide("Detected, or done by default", groupLook, 8))
	for _, t := range rec.Readings.Said {
		s.addTall(lines(t, 150)*13.5, wide(t, wrapLook, 8))
	}
	for _, w := range rec.Readings.Warnings {
		s.addTall(lines(w.Text, 150)*13.5, wide(w.Text, wrapLook, 8))
	}
	return s
}
