package app

import (
	"fmt"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/qa"
)

// unstated says what must be known before a record is signed.
const unstated = "Before a record is signed it states what it supports, the part and the part's revision."

// askParticulars asks for what a record must state before it is signed, and what else is known of the comparison.
func (w *window) askParticulars() {
	if w.busy() || !w.state.Open || w.state.Closed() {
		return
	}
	p := w.state.Record.Plan
	f := w.newForm()
	type asked struct {
		of   desk.Particular
		text func() string
	}
	var all []asked
	for _, x := range desk.Particulars(w.decimal) {
		if x.Early && !w.state.Drafting || x.Sealed && w.state.Sealed() {
			continue
		}
		if x.Words != nil {
			c := f.choice(x.Label, x.Get(p), x.Words, x.Hint)
			all = append(all, asked{x, func() string { return c.Selected }})
			continue
		}
		e := f.text(x.Label, x.Get(p), x.Hint)
		all = append(all, asked{x, func() string { return e.Text }})
	}
	if len(exports.Unstated(p)) > 0 {
		f.live = func() []string { return []string{unstated} }
	}
	f.ask("Particulars of the comparison", "Keep", func() error {
		next := p
		for _, x := range all {
			if err := x.of.Set(&next, x.text()); err != nil {
				return fmt.Errorf("%s: %w", x.of.Label, err)
			}
		}
		w.keepParticulars(next)
		return nil
	})
}

// keepParticulars keeps what was stated. Where the comparison was made, its result is computed again, which names them.
func (w *window) keepParticulars(p qa.Plan) {
	if w.state.Drafting {
		w.choose("particulars", func(to *qa.Plan) { *to = p })()
		return
	}
	if same(p, w.state.Record.Plan) {
		return
	}
	const place = "Stating the particulars"
	rec := w.state.Record
	rec.Plan = p
	w.work(place, func(watch qa.Watch) change {
		res, err := rec.Recompute()
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State {
			next, err := s.WithParticulars(p, res, person(), now())
			if err != nil {
				return s.Failed(place, err)
			}
			return next
		}
	})
}
