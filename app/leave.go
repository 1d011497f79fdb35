package app

import (
	"strings"

	"lotpair/app/desk"
	"lotpair/qa"
)

// onReading asks what is to become of a reading: left out with a typed reason, or put back. In a closed record, or where the
// cell is no reading, it says all that is known of the cell.
func (w *window) onReading(of qa.Side, i int) {
	all := w.view.pages[of].Readings
	if i < 0 || i >= all.Len() || w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	r := w.readingShown(all.At(i))
	w.cursor[of] = i
	e, unread := w.state.Unread(r.Source)
	switch {
	case unread && !w.state.Closed() && e.TakenAs == qa.TakenExcluded:
		w.askPutBackUnread(r)
	case unread && !w.state.Closed():
		w.askLeaveOutUnread(r, e)
	case w.state.Closed() || !r.Used && !r.LeftOut:
		text := r.Source.String() + ": " + r.Value
		if r.Note != "" {
			text += "\n" + r.Note
		}
		w.showText("Reading", strings.Split(text, "\n"))
	case r.LeftOut:
		f := w.newForm()
		f.add("", wrapped(r.Value+" was left out: "+r.Note), "")
		f.ask("Put back "+r.Source.Place(), "Put back", func() error {
			w.change("Putting back", func(s desk.State) (desk.State, error) { return s.PutBack(r.Source, person(), now()) })
			return nil
		})
	default:
		f := w.newForm()
		reason := f.text("Reason", "", "the cause that is known, never its size alone; it stands in the record")
		f.ask("Leave out "+r.Value+" in "+r.Source.Place(), "Leave out", func() error {
			if err := filled("a reason")(reason.Text); err != nil {
				return err
			}
			w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(r.Source, reason.Text, person(), now()) })
			return nil
		})
	}
}

// change does an act that may be refused.
func (w *window) change(place string, act func(desk.State) (desk.State, error)) {
	if w.state.Job.Name != "" {
		return
	}
	w.apply(func(s desk.State) desk.State {
		next, err := act(s)
		if err != nil {
			return s.Failed(place, err)
		}
		return next
	})
}

// compare runs the comparison again.
func (w *window) compare() {
	s := w.state
	w.work("Comparing", func(watch qa.Watch) change {
		next, err := s.Compare(watch)
		if err != nil {
			return failed("Comparing", err)
		}
		return func(s desk.State) desk.State { return s.ComparedAgain(next.Record.Result, person(), now()) }
	})
}
