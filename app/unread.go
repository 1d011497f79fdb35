package app

import (
	"fmt"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// askLeaveOutUnread asks why a cell is left out that could not be read as a number: until then its characteristic is undecided.
func (w *window) askLeaveOutUnread(r desk.ReadingView, e qa.Entry) {
	f := w.newForm()
	said := fmt.Sprintf("Found %q, taken as: %s.", r.Value, r.Note)
	if e.Want != "" {
		said += " Wanted: " + e.Want + "."
	}
	f.add("", wrapped(said), "")
	reason := f.text("Reason", "", "why the cell is left out; else correct it in the file and open that")
	f.first = reason
	f.ask("Leave out "+r.Source.Place(), "Leave out", func() error {
		p, err := w.state.WithoutUnread(r.Source, reason.Text)
		if err != nil {
			return err
		}
		w.reread("Leaving out", p, "left out", r.Source, reason.Text)
		return nil
	})
}

// askPutBackUnread asks whether a cell is no longer left out that could not be read as a number.
func (w *window) askPutBackUnread(r desk.ReadingView) {
	f := w.newForm()
	f.add("", wrapped(fmt.Sprintf("%q was left out: %s", r.Value, r.Note)), "")
	f.ask("Put back "+r.Source.Place(), "Put back", func() error {
		p, err := w.state.WithUnread(r.Source)
		if err != nil {
			return err
		}
		w.reread("Putting back", p, "put back", r.Source, "")
		return nil
	})
}

// reread takes the readings again by a changed plan.
func (w *window) reread(place string, p qa.Plan, what string, at qa.Source, why string) {
	files := w.filesOf(w.state)
	w.work(place, func(watch qa.Watch) change {
		readings, err := importers.Under(watch).Read(p, files)
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.Reread(p, readings, what, at, why, person(), now()) }
	})
}

// filesOf gives the bytes of a record's files as they were read: those that are kept, else those beside the plan, which must be
// the same.
func (w *window) filesOf(s desk.State) func(name string) ([]byte, error) {
	var all []qa.File
	for _, l := range []qa.Lot{s.Record.Readings.Reference, s.Record.Readings.Candidate} {
		all = append(all, l.Files...)
	}
	path := s.Path
	return func(name string) ([]byte, error) {
		data, err := w.fileOf(all, name)
		if err == nil || path == "" {
			return data, err
		}
		read := readFile
		if len(path) > 8 && path[:8] == "example/" {
			read = sample.ReadFile
		}
		if data, err = read(beside(path, name)); err != nil {
			return nil, err
		}
		for _, f := range all {
			if f.Name == name && qa.FileOf(name, data).SHA256 != f.SHA256 {
				return nil, fmt.Errorf("%s: found other bytes than were read, want the same file; open the plan again", name)
			}
		}
		return data, nil
	}
}
