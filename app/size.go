package app

import "lotpair/app/desk"

// askSize plans a study: how many parts, or what so many parts would show.
func (w *window) askSize() {
	if w.busy() {
		return
	}
	z := w.state.SizingOf(w.decimal)
	f := w.newForm()
	objective := f.choice("To be shown", z.Objective, desk.Objectives, "")
	design := f.choice("Readings", z.Design, desk.Designs, "")
	sd := f.text("Standard deviation", z.SD, "of one reading; of the differences for pairs")
	margin := f.text("Margin ±", z.Margin, "in the unit; in fractions for parts that pass or fail")
	lower := f.text("or from", z.MarginLower, "")
	upper := f.text("to", z.MarginUpper, "")
	shift := f.text("True difference", z.Shift, "candidate minus reference")
	n := f.text("Parts a lot", "", "empty asks how many; a number asks what they show")
	power := f.text("Power", z.Power, "")
	alpha := f.text("alpha", z.Alpha, "")
	method := f.choice("Method", z.Method, desk.StudyMethods, "")
	candidate := f.text("SD of the candidate", z.SDCandidate, "where it is expected to differ")
	ratio := f.text("Candidate over reference parts", z.Ratio, "")
	spread := f.text("Spread ratio at most", z.SpreadRatio, "")
	fr := f.text("Fraction failed, reference", z.FractionReference, "")
	fc := f.text("Fraction failed, candidate", z.FractionCandidate, "")
	k := f.text("Characteristics", z.Characteristics, "so many independent ones must all pass")
	typed := func() desk.Sizing {
		return desk.Sizing{
			Objective: objective.Selected, Design: design.Selected, Method: method.Selected, Margin: margin.Text, MarginLower: lower.Text, MarginUpper: upper.Text,
			SD: sd.Text, SDCandidate: candidate.Text, Shift: shift.Text, FractionReference: fr.Text, FractionCandidate: fc.Text, Alpha: alpha.Text, Power: power.Text,
			Decimal: w.decimal, Ratio: ratio.Text, SpreadRatio: spread.Text, Characteristics: k.Text, N: n.Text,
		}
	}
	f.first = sd
	f.live = func() []string { return typed().Answer() }
	f.ask("How many parts?", "Copy the answer", func() error {
		w.app.Clipboard().SetContent(w.shown(joinLines(typed().Answer())))
		return nil
	})
}
