package app

import (
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
)

// draftLine is one line of the criterion: what it shows of the plan and what typing in it does to the plan.
type draftLine struct {
	*line
	name string
	show func(p qa.Plan, at int) string
	set  func(p *qa.Plan, at int, text string) error

	number bool // a number is typed

	typed func(text string)
	left  func()
}

// draftLines are the lines of the criterion by their names.
type draftLines map[string]*draftLine

func (w *window) newDraftLines() draftLines {
	out := draftLines{}
	add := func(name string, show func(qa.Plan, int) string, set func(*qa.Plan, int, string) error) {
		d := &draftLine{name: name, show: show, set: set}
		d.typed, d.left = func(text string) { w.typedDraft(d, text) }, func() { w.leftDraft(d) }
		out[name] = d
	}
	words := func(name string, of func(*qa.Plan) *string) {
		add(name, func(p qa.Plan, _ int) string { return *of(&p) }, func(p *qa.Plan, _ int, text string) error {
			*of(p) = strings.TrimSpace(text)
			return nil
		})
	}
	words("reference lot", func(p *qa.Plan) *string { return &p.Reference.Lot })
	words("reference source", func(p *qa.Plan) *string { return &p.Reference.Source })
	words("candidate lot", func(p *qa.Plan) *string { return &p.Candidate.Lot })
	words("candidate source", func(p *qa.Plan) *string { return &p.Candidate.Source })
	value := func(name string, times float64, get func(qa.Plan, int) *float64, put func(*qa.Plan, int, *float64)) {
		add(name, func(p qa.Plan, at int) string { return w.decimal.NumberText(get(p, at), times) }, func(p *qa.Plan, at int, text string) error {
			v, err := w.decimal.Number(text)
			if err != nil {
				return err
			}
			if v != nil {
				*v /= times
			}
			put(p, at, v)
			return nil
		})
		out[name].number = true
	}
	margin := func(name string, times float64, of func(*qa.Margin) **float64) {
		value(name, times, func(p qa.Plan, _ int) *float64 {
			if p.Criterion.Margin == nil {
				return nil
			}
			return *of(p.Criterion.Margin)
		}, func(p *qa.Plan, _ int, v *float64) {
			*p = desk.Unsettled(*p)
			m := qa.Margin{}
			if old := p.Criterion.Margin; old != nil {
				m = *old
			}
			*of(&m) = v
			p.Criterion.Margin = &m
		})
	}
	margin("part", 100, func(m *qa.Margin) **float64 { return &m.ToleranceFraction })
	margin("margin", 1, func(m *qa.Margin) **float64 { return &m.Absolute })
	margin("from", 1, func(m *qa.Margin) **float64 { return &m.Lower })
	margin("to", 1, func(m *qa.Margin) **float64 { return &m.Upper })
	margin("ratio from", 1, func(m *qa.Margin) **float64 { return &m.RatioLower })
	margin("ratio to", 1, func(m *qa.Margin) **float64 { return &m.RatioUpper })
	margin("ratio within", 100, func(m *qa.Margin) **float64 { return &m.ReferenceFraction })
	margin("Ppk", 1, func(m *qa.Margin) **float64 { return &m.KeepPpk })
	margin("times the SD", 1, func(m *qa.Margin) **float64 { return &m.SDMultiple })
	value("alpha", 1, func(p qa.Plan, _ int) *float64 { return p.Criterion.Alpha }, func(p *qa.Plan, _ int, v *float64) { p.Criterion.Alpha = v })
	value("spread ratio at most", 1, func(p qa.Plan, _ int) *float64 { return p.Criterion.SpreadRatio }, func(p *qa.Plan, _ int, v *float64) { p.Criterion.SpreadRatio = v })
	value("power", 1, func(p qa.Plan, _ int) *float64 { return p.Criterion.Power }, func(p *qa.Plan, _ int, v *float64) { p.Criterion.Power = v })
	value("standard deviation", 1, func(p qa.Plan, at int) *float64 {
		if at < 0 || at >= len(p.Characteristics) {
			return nil
		}
		return p.Characteristics[at].SD
	}, func(p *qa.Plan, at int, v *float64) {
		if at < 0 || at >= len(p.Characteristics) {
			return
		}
		*p = desk.Unsettled(*p)
		p.Characteristics[at].SD = v
	})
	shift := &draftLine{name: "true difference"}
	shift.show = func(qa.Plan, int) string { return w.decimal.NumberText(&w.shift, 1) }
	shift.typed, shift.left = func(text string) {
		v, err := w.decimal.Number(text)
		w.shift = 0
		if err == nil && v != nil {
			w.shift = *v
		}
		w.show()
	}, func() {}
	out[shift.name] = shift
	return out
}

// laid makes the lines to type in when the first criterion is written: each takes the toolkit a font of its own, and the window
// opens sooner without them.
func (w *window) laid(all draftLines) {
	for _, d := range all {
		if d.line == nil {
			d.line = w.newLine(d.typed, d.left)
		}
	}
}

// typedDraft shows at once what was typed comes to. It is no act yet.
func (w *window) typedDraft(d *draftLine, text string) {
	p := w.state.Record.Plan
	d.fault = ""
	if err := d.set(&p, w.state.Selected, text); err != nil {
		d.fault = d.name + ": " + err.Error()
		w.show()
		return
	}
	w.apply(func(s desk.State) desk.State { return s.Typed(p) })
}

// leftDraft keeps what was typed, where it changed anything.
func (w *window) leftDraft(d *draftLine) {
	switch {
	case d.fault != "" && d.focused: // return was pressed: what is wrong stays said beside what was typed
		return
	case !w.state.Drafting || d.fault != "":
		fault := d.fault
		d.fault = ""
		w.show()
		if fault != "" {
			w.say(fault + "; nothing was changed.")
		}
		return
	}
	text := d.Text
	if v, err := w.decimal.Number(text); d.number && err == nil {
		text = desk.Point.NumberText(v, 1) // the trail is the record's
	}
	w.keepDraft(d.name + " " + text)
}

// keepDraft keeps the draft of the plan, where something was typed that it did not say before.
func (w *window) keepDraft(what string) {
	before := w.state.Typing
	if before == nil {
		return
	}
	p := desk.Settled(w.state.Record.Plan)
	if same(p, *before) {
		w.apply(func(s desk.State) desk.State {
			s.Typing = nil
			return s
		})
		return
	}
	w.change("Writing the criterion", func(s desk.State) (desk.State, error) { return s.Stated(p, what, person(), now()) })
}

// offer opens a menu below a word of the claim.
func (w *window) offer(under fyne.CanvasObject, items ...*fyne.MenuItem) {
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(under).Add(fyne.NewPos(0, under.Size().Height))
	showMenu(fyne.NewMenu("", items...), w.win.Canvas(), at)
}

// choose changes the draft of the plan by a choice, which is an act at once.
func (w *window) choose(what string, change func(*qa.Plan)) func() {
	return func() {
		p := w.state.Record.Plan
		change(&p)
		w.apply(func(s desk.State) desk.State { return s.Typed(p) })
		w.keepDraft(what)
	}
}
