package exports

import "lotpair/qa"

// readingsSheet lists every reading with its origin: with it a reviewer computes the result again without Lotpair.
func readingsSheet(rec qa.Record) sheet {
	s := sheet{name: SheetReadings, widths: []float64{11, 14, 24, 22, 8, 16, 22, 13, 32}, landscape: true}
	s.add(text("Readings", titleLook))
	s.addTall(30, wide("Every reading at full precision, with the text and the place it was read from. What is left out stays here and is not used.", wrapLook, 9))
	s.add(heads("Side", "Lot", "Characteristic", "Value", "Unit", "Text found", "File", "Cell", "State")...)
	s.frozen = len(s.rows)
	units := map[string]string{}
	for _, c := range rec.Readings.Characteristics {
		units[c.Name] = c.Unit
	}
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		lot := rec.Readings.Reference
		if side == qa.Candidate {
			lot = rec.Readings.Candidate
		}
		for _, series := range lot.Series {
			for _, r := range series.Readings {
				state := "used"
				if !r.Used() {
					state = "left out: " + r.LeftOut
				}
				v := r.Value
				s.add(text(string(side), ruledLook), text(lot.Name, ruledLook), text(series.Characteristic, ruledLook),
					number(&v, ruledNumberLook), text(units[series.Characteristic], ruledLook), text(r.Source.Text, ruledLook),
					text(r.Source.File, ruledLook), text(r.Source.Place(), ruledLook), text(state, ruledLook))
			}
		}
	}
	return s
}

// heads is the heading row of a table; the names of columns of numbers stand over their right edge.
func heads(names ...string) []cell {
	out := make([]cell, len(names))
	for i, n := range names {
		out[i] = text(n, headLook)
		if n == "Value" || n == "Cells" {
			out[i].look = headRightLook
		}
	}
	return out
}

// ledgerSheet lists every cell that was not taken as a plain number and every reading left out, then how the cells of the
// files add up.
func ledgerSheet(rec qa.Record) sheet {
	s := sheet{name: SheetLedger, widths: []float64{24, 14, 25, 16, 20, 12, 22, 46}, landscape: true}
	s.add(text("Ledger", titleLook))
	s.addTall(30, wide("Every cell that was not taken as a plain number, and every reading left out, with the reason. Nothing is dropped in silence.", wrapLook, 8))
	s.add(heads("File", "Cell", "Found", "Taken as", "Value", "Side", "Characteristic", "Reason, or what to do")...)
	s.frozen = len(s.rows)
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
	s.add(text("What each cell was", groupLook))
	s.add(heads("File", "Sheet", "Taken as", "Cells")...)
	total := 0
	for _, a := range rec.Readings.Account {
		s.add(text(a.File, plainLook), text(a.Sheet, plainLook), text(a.As, plainLook), whole(a.Cells, numberLook))
		total += a.Cells
	}
	s.add(text("All cells", strongLook), text("", strongLook), text("", strongLook), whole(total, numberLook))
	s.gap()
	s.add(text("Detected, or done by default", groupLook))
	for _, t := range rec.Readings.Said {
		s.addTall(lines(t, 150)*13.5, wide(t, wrapLook, 8))
	}
	for _, w := range rec.Readings.Warnings {
		s.addTall(lines(w.Text, 150)*13.5, wide(w.Text, wrapLook, 8))
	}
	s.gap()
	s.add(text("Trail", groupLook))
	s.add(heads("Time", "Who", "What", "On", "Why")...)
	for _, a := range rec.Trail {
		s.add(text(localTime(a.Time), plainLook), text(a.Who, plainLook), text(a.What, plainLook), text(a.On, plainLook), text(a.Why, plainLook))
	}
	return s
}
