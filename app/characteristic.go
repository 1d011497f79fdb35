package app

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"

	"lotpair/app/desk"
	"lotpair/qa"
)

// numeric refuses what is no number; empty is allowed.
func numeric(text string) error {
	_, err := number(text)
	return err
}

// askCharacteristic asks for a characteristic: a new one where at is past the last.
func (w *window) askCharacteristic(at int) {
	if w.state.Sealed() || w.state.Job.Name != "" || w.dialog != nil || !w.state.Drafting {
		return
	}
	p := w.state.Record.Plan
	c, title := qa.Characteristic{}, "Add a characteristic"
	if at >= 0 && at < len(p.Characteristics) {
		c, title = p.Characteristics[at], "Change a characteristic"
	}
	name, unit := w.newField(c.Name), w.newField(c.Unit)
	name.Validator = filled("a name, as the file's heading has it")
	numbers := map[string]*field{}
	for key, v := range map[string]*float64{"lower": c.Lower, "target": c.Target, "upper": c.Upper, "sd": c.SD} {
		numbers[key] = w.newField(shownNumber(v, 1))
		numbers[key].Validator = numeric
	}
	own := w.newField("")
	if c.Margin != nil && c.Margin.Absolute != nil {
		own.SetText(shownNumber(c.Margin.Absolute, 1))
	}
	own.Validator = numeric
	own.SetPlaceHolder("only where it is not that of all")
	objective := widget.NewSelect([]string{"as all", "equivalent to", "not lower than", "not higher than"}, nil)
	objective.SetSelected("as all")
	if c.Objective != "" {
		objective.SetSelected(desk.ObjectiveText(c.Objective))
	}
	items := []*widget.FormItem{
		widget.NewFormItem("Name", name), widget.NewFormItem("Unit", unit),
		widget.NewFormItem("Lower limit", numbers["lower"]), widget.NewFormItem("Target", numbers["target"]), widget.NewFormItem("Upper limit", numbers["upper"]),
		widget.NewFormItem("Planned sd", numbers["sd"]), widget.NewFormItem("Objective", objective), widget.NewFormItem("Margin in the unit", own),
	}
	d := dialog.NewForm(title, "Keep", "Cancel", items, func(ok bool) {
		if !ok {
			return
		}
		c.Name, c.Unit = strings.TrimSpace(name.Text), strings.TrimSpace(unit.Text)
		for key, to := range map[string]**float64{"lower": &c.Lower, "target": &c.Target, "upper": &c.Upper, "sd": &c.SD} {
			*to, _ = number(numbers[key].Text) // the form refuses what is no number
		}
		c.Objective = map[string]qa.Objective{"equivalent to": qa.Equivalence, "not lower than": qa.NotLower, "not higher than": qa.NotHigher}[objective.Selected]
		if c.Margin != nil && c.Margin.Absolute != nil {
			c.Margin = nil
		}
		if v, _ := number(own.Text); v != nil {
			c.Margin = &qa.Margin{Absolute: v}
		}
		w.keepCharacteristic(at, c)
	}, w.win)
	w.presentForm(d, name, unit, numbers["lower"], numbers["target"], numbers["upper"], numbers["sd"], own)
}

// keepCharacteristic puts a characteristic into the draft of the plan.
func (w *window) keepCharacteristic(at int, c qa.Characteristic) {
	all := append([]qa.Characteristic{}, w.state.Record.Plan.Characteristics...)
	if at >= 0 && at < len(all) {
		all[at] = c
	} else {
		all = append(all, c)
	}
	w.choose("characteristic "+c.Name, func(p *qa.Plan) { p.Characteristics = all })()
}

// askParticulars asks for what a record must state before it is signed, and what else is known of the comparison.
func (w *window) askParticulars() {
	if w.state.Job.Name != "" || w.dialog != nil || !w.state.Drafting {
		return
	}
	p := w.state.Record.Plan
	type item struct {
		label string
		of    func(*qa.Plan) *string
	}
	all := []item{
		{"Title", func(p *qa.Plan) *string { return &p.Title }},
		{"Supports", func(p *qa.Plan) *string { return &p.Supports }},
		{"Part", func(p *qa.Plan) *string { return &p.Record.Part }},
		{"Revision", func(p *qa.Plan) *string { return &p.Record.Revision }},
		{"Sampling", func(p *qa.Plan) *string { return &p.Record.Sampling }},
		{"Gauge, reference", func(p *qa.Plan) *string { return &p.Record.GaugeReference }},
		{"Gauge, candidate", func(p *qa.Plan) *string { return &p.Record.GaugeCandidate }},
	}
	var items []*widget.FormItem
	var fields []*field
	for _, x := range all {
		f := w.newField(*x.of(&p))
		fields, items = append(fields, f), append(items, widget.NewFormItem(x.label, f))
	}
	d := dialog.NewForm("Particulars of the comparison", "Keep", "Cancel", items, func(ok bool) {
		if !ok {
			return
		}
		w.choose("particulars", func(p *qa.Plan) {
			for i, x := range all {
				*x.of(p) = strings.TrimSpace(fields[i].Text)
			}
		})()
	}, w.win)
	w.presentForm(d, fields...)
}

// offerObjective offers what may be claimed.
func (w *window) offerObjective() {
	var items []*fyne.MenuItem
	for _, o := range []qa.Objective{qa.Equivalence, qa.NotLower, qa.NotHigher} {
		items = append(items, fyne.NewMenuItem(desk.ObjectiveText(o), w.choose("objective "+string(o), func(p *qa.Plan) { p.Criterion.Objective = o })))
	}
	w.offer(w.act.objective, items...)
}

func (w *window) offerMethod() {
	var items []*fyne.MenuItem
	for _, m := range []string{"welch", "pooled"} {
		items = append(items, fyne.NewMenuItem(methodText(m), w.choose("method "+m, func(p *qa.Plan) { p.Criterion.Method = m })))
	}
	w.offer(w.act.method, items...)
}

func methodText(m string) string {
	if m == "" || m == "welch" {
		return "Welch"
	}
	return m
}

func (w *window) offerOf() {
	var items []*fyne.MenuItem
	for _, of := range []string{"full", "half"} {
		items = append(items, fyne.NewMenuItem(of+" width", w.choose("of the "+of+" width", func(p *qa.Plan) {
			m := qa.Margin{}
			if p.Criterion.Margin != nil {
				m = *p.Criterion.Margin
			}
			m.Of = of
			p.Criterion.Margin = &m
		})))
	}
	w.offer(w.act.of, items...)
}

// chooseKind states the margin in another way; the number is asked anew, because it means another thing.
func (w *window) chooseKind(k desk.MarginKind) {
	if k == desk.KindOf(w.state.Record.Plan) && w.state.Record.Plan.Criterion.Margin != nil {
		return
	}
	usual := func(v float64) *float64 { return &v }
	m := map[desk.MarginKind]qa.Margin{
		desk.PartOfTolerance: {ToleranceFraction: usual(0.1), Of: "full"},
		desk.InTheUnit:       {Absolute: usual(0)},
		desk.RatioOfMeans:    {ReferenceFraction: usual(0.05)},
		desk.KeepsPpk:        {KeepPpk: usual(1.33)},
		desk.MultipleOfSD:    {SDMultiple: usual(1)},
	}[k]
	w.choose("margin: "+desk.MarginKinds[k], func(p *qa.Plan) {
		p.Criterion.Margin = &m
		all := append([]qa.Characteristic{}, p.Characteristics...)
		for i, c := range all { // what was settled from the margin of all is settled anew
			if own := c.Margin; own != nil && (own.KeepPpk != nil || own.SDMultiple != nil) {
				all[i].Margin = nil
			}
		}
		p.Characteristics = all
	})()
}

// askAmend asks for a change of the sealed criterion: the reason first.
func (w *window) askAmend() {
	if w.state.Job.Name != "" || w.dialog != nil || !w.state.Sealed() {
		return
	}
	p := w.state.Record.Plan
	reason := w.newField("")
	reason.Validator = filled("why the criterion is changed")
	items, fields := []*widget.FormItem{widget.NewFormItem("Reason", reason)}, []*field{reason}
	kind := map[desk.MarginKind]string{desk.PartOfTolerance: "part", desk.InTheUnit: "margin", desk.RatioOfMeans: "ratio within", desk.KeepsPpk: "Ppk", desk.MultipleOfSD: "times the SD"}
	names := []string{kind[desk.KindOf(p)], "alpha", "spread ratio at most"}
	for _, name := range names {
		f := w.newField(w.draft[name].show(p, 0))
		f.Validator = numeric
		label := map[string]string{"part": "Part of the tolerance, %", "ratio within": "Ratio within, %"}[name]
		if label == "" {
			label = upperFirst(name)
		}
		items, fields = append(items, widget.NewFormItem(label, f)), append(fields, f)
	}
	d := dialog.NewForm("Amend the criterion", "Amend", "Cancel", items, func(ok bool) {
		if !ok {
			return
		}
		for i, name := range names {
			_ = w.draft[name].set(&p, 0, fields[i+1].Text) // the form refuses what is no number
		}
		w.change("Amending", func(s desk.State) (desk.State, error) {
			return s.Amended(desk.Settled(p), reason.Text, person(), now())
		})
	}, w.win)
	w.presentForm(d, fields...)
}

func upperFirst(s string) string { return strings.ToUpper(s[:1]) + s[1:] }

// sealDraft fixes the criterion.
func (w *window) sealDraft() {
	w.change("Sealing", func(s desk.State) (desk.State, error) {
		s.Record.Plan = desk.Settled(s.Record.Plan)
		return s.Seal(person(), now())
	})
}
