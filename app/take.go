package app

import (
	"errors"
	"fmt"
	"path/filepath"
	"strings"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// readBy is the plan by whose mapping the files before were read; nil where there is none.
func (w *window) readBy() *qa.Plan {
	p := w.state.Record.Plan
	if !w.state.Drafting || p.Reading.Layout == "" {
		return nil
	}
	return &p
}

// lookInto opens a file of readings over the window. Where no comparison is being prepared one is begun. Until the criterion is
// sealed every reading is masked.
func (w *window) lookInto(watch qa.Watch, name string, data []byte, side qa.Side, masked bool, by *qa.Plan) change {
	place := "Opening " + filepath.Base(name)
	var x desk.Sheet
	var err error
	if by != nil {
		x, err = desk.LookedIntoBy(watch, *by, filepath.Base(name), data, masked)
	} else {
		x, err = desk.LookedInto(watch, filepath.Base(name), data, desk.Stated{}, masked)
	}
	if err != nil {
		return failed(place, err)
	}
	x.Side = side
	if _, err := w.keepFile(data); err != nil {
		return failed(place, err)
	}
	return func(s desk.State) desk.State {
		if !s.Drafting {
			s = s.Begun(person(), now())
		}
		w.looked, w.sheetFrom, w.sheetCursor = data, 0, 0
		return s.WithSheet(&x)
	}
}

// remember keeps the bytes of the file that is taken, for as long as the window is open.
func (w *window) remember() {
	w.bytes[w.state.Sheet.File.SHA256] = w.looked
}

// takeHeadings takes names, units and limits, and no reading.
func (w *window) takeHeadings() {
	if w.state.Sheet == nil {
		return
	}
	w.remember()
	w.change("Taking headings", func(s desk.State) (desk.State, error) { return s.TookHeadings(person(), now()) })
}

// fileOf gives the bytes of a file that was brought in.
func (w *window) fileOf(files []qa.File, name string) ([]byte, error) {
	for _, f := range files {
		if f.Name != name {
			continue
		}
		if data, ok := w.bytes[f.SHA256]; ok {
			return data, nil
		}
		if w.register != nil {
			return w.register.File(f.SHA256)
		}
	}
	return nil, fmt.Errorf("%s: found no bytes, want those that were brought in; drop the file again", name)
}

// takeReadings takes the readings of the file that is looked at. With both lots at hand the comparison is made; else the other
// lot is still to come.
func (w *window) takeReadings() {
	if w.state.Sheet == nil {
		return
	}
	const place = "Taking the readings"
	w.remember()
	next, err := w.state.Taking(person(), now())
	if err != nil {
		w.apply(failed(place, err))
		return
	}
	if next.Missing() != "" {
		w.apply(func(desk.State) desk.State { return next.Placed(person(), now()) })
		return
	}
	w.compareDraft(place, next)
}

// takeKept takes the readings of the files whose headings were taken before.
func (w *window) takeKept() { w.compareDraft("Taking the readings", w.state) }

// compareDraft reads the files by the draft of the plan and compares.
func (w *window) compareDraft(place string, s desk.State) {
	w.work(place, func(watch qa.Watch) change {
		plan := desk.Settled(s.Record.Plan)
		if faults := plan.Validate(); len(faults) > 0 {
			var lines []string
			for _, f := range faults {
				lines = append(lines, f.Error())
			}
			return failed(place, errors.New(strings.Join(lines, "\n")))
		}
		readings, err := importers.Under(watch).Read(plan, func(name string) ([]byte, error) { return w.fileOf(s.Files, name) })
		if err != nil {
			return failed(place, err)
		}
		attempts, err := w.attempts(plan, s.Record.Supersedes)
		if err != nil {
			return failed(place, err)
		}
		seal := s.Record.Result.Seal
		if seal.Time == "" {
			seal = qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}
		}
		result, err := qa.Compare(plan, readings, qa.Run{Software: w.build.software(), Seal: seal, Attempts: attempts, Watch: watch})
		if err != nil {
			return failed(place, err)
		}
		s.Record.Plan = plan
		return func(now0 desk.State) desk.State {
			s.Acts, s.Job = now0.Acts, now0.Job
			return s.Took(readings, result, person(), now())
		}
	})
}
