package app

import (
	"lotpair/app/desk"
	"lotpair/qa"
)

// askCharacteristic asks for a characteristic: a new one where at is past the last.
func (w *window) askCharacteristic(at int) {
	if w.state.Sealed() || w.busy() || !w.state.Drafting {
		return
	}
	p := desk.Unsettled(w.state.Record.Plan)
	c, title := qa.Characteristic{}, "Add a characteristic"
	if at >= 0 && at < len(p.Characteristics) {
		c, title = p.Characteristics[at], "Change a characteristic"
	}
	o := desk.OwnOf(c, w.decimal)
	f := w.newForm()
	name := f.text("Name", o.Name, "")
	column := f.text("Heading in the file", o.Column, "only where it is not the name")
	unit := f.text("Unit", o.Unit, "")
	kind := f.choice("Kind", o.Kind, desk.Kinds, "")
	failed := f.text("Words of a failed part", o.Failed, "for parts that pass or fail, with commas: NOK, 1")
	lower := f.text("Lower limit", o.Lower, "")
	target := f.text("Target", o.Target, "")
	upper := f.text("Upper limit", o.Upper, "")
	sd := f.text("Planned sd", o.PlannedSD, "known beforehand: it says how many parts are needed")
	decimals := f.text("Decimals shown", o.Decimals, "")
	ur := f.text("Uncertainty, reference", o.UncertaintyReference, "standard uncertainty of the measuring system's bias (JCGM 100), in the unit")
	uc := f.text("Uncertainty, candidate", o.UncertaintyCandidate, "")
	x := f.addTerms(o.Terms, true)
	typed := func() (qa.Characteristic, error) {
		return desk.Own{
			Name: name.Text, Column: column.Text, Unit: unit.Text, Kind: kind.Selected, Failed: failed.Text, Lower: lower.Text, Target: target.Text, Upper: upper.Text,
			PlannedSD: sd.Text, Decimals: decimals.Text, UncertaintyReference: ur.Text, UncertaintyCandidate: uc.Text, Terms: x.terms(),
		}.Into(c)
	}
	f.live = func() []string {
		c, err := typed()
		if err != nil {
			return []string{err.Error()}
		}
		alone := p
		alone.Characteristics = []qa.Characteristic{c}
		return desk.Consequences(alone, mostConsequences)
	}
	f.ask(title, "Keep", func() error {
		c, err := typed()
		if err != nil {
			return err
		}
		w.keepCharacteristic(at, c)
		return nil
	})
}

// keepCharacteristic puts a characteristic into the draft of the plan.
func (w *window) keepCharacteristic(at int, c qa.Characteristic) {
	all := desk.Unsettled(w.state.Record.Plan).Characteristics
	if at >= 0 && at < len(all) {
		all[at] = c
	} else {
		all = append(all, c)
	}
	w.choose("characteristic "+c.Name, func(p *qa.Plan) { p.Characteristics = all })()
}
