package exports

import (
	"fmt"

	"lotpair/qa"
)

// trailSheet lists who did what when, in order, each entry with the digest of the one before it (21 CFR 11.10(e)), and how
// often the plan is known to have been run.
func trailSheet(rec qa.Record) sheet {
	s := sheet{name: SheetTrail, widths: []float64{27, 18, 20, 26, 74, 20}, landscape: true}
	s.add(text("Trail", titleLook))
	s.addTall(30, wide("Who did what when, in order. Each entry holds the digest (SHA-256) of the one before it: none can be changed, left out or put in between without a trace. "+
		"Signatures given later stand in the signatures of this file.", wrapLook, 6))
	s.add(heads("Time", "Who", "What", "On", "Why", "Digest of the entry before")...)
	s.frozen, s.heads = len(s.rows), len(s.rows)
	for _, a := range rec.Trail {
		before := a.Before
		if len(before) > 16 {
			before = before[:16] + "…"
		}
		s.addTall(max(2, lines(a.Why, 68), lines(a.On, 27), lines(a.What, 21), lines(a.Who, 19))*13.5+1, text(bothTimes(a.Time), ruledWrapLook), text(a.Who, ruledWrapLook), text(a.What, ruledWrapLook),
			text(a.On, ruledWrapLook), text(a.Why, ruledWrapLook), text(before, ruledLook))
	}
	s.gap()
	n := rec.Result.Attempts
	t := qa.Count(n.Known, "attempt", "attempts") + " on this plan known; kept by: " + n.KeptBy + "."
	s.add(wide("Attempts", groupLook, 6))
	s.addTall(lines(t, 140)*13.5, wide(t, wrapLook, 6))
	for i, e := range rec.Supersedes {
		t := fmt.Sprintf("Earlier record %d%s: %s", i+1, prefixed(", compared ", localTime(e.Compared)), earlierText(e))
		s.addTall(lines(t, 140)*13.5, wide(t, wrapLook, 6))
	}
	return s
}
