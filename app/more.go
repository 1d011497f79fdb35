package app

import (
	"errors"
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/importers"
	"lotpair/qa"
)

// busy says that no other act can begin: work runs, or a dialog is open.
func (w *window) busy() bool { return w.state.Job.Name != "" || w.dialog != nil }

// offerMore offers what has no place of its own in the window.
func (w *window) offerMore() {
	if w.busy() {
		return
	}
	var items []*fyne.MenuItem
	add := func(label string, able bool, do func()) {
		if able {
			items = append(items, fyne.NewMenuItem(label, do))
		}
	}
	apart := func() {
		if n := len(items); n > 0 && !items[n-1].IsSeparator {
			items = append(items, fyne.NewMenuItemSeparator())
		}
	}
	s := w.state
	open := s.Open && s.Sheet == nil
	add("New comparison from this plan", open, w.beginFromThis)
	add("Save as plan…", open, w.askSavePlan)
	add("Save the result as JSON…", open && s.Compared, w.askSaveResult)
	add("Save the seal…", open && s.Sealed() && !s.Closed(), w.askSaveSeal)
	add("Particulars…", open && !s.Closed(), w.askParticulars)
	add("Supersede an earlier record…", open && !s.Closed(), w.askSupersede)
	add("What was done…", open, w.showTrail)
	add("Signatures and checks…", open && s.Workbook.State != "", w.showSignatures)
	apart()
	add("Paste readings", s.Sheet == nil, w.paste)
	add("How many parts?…", true, w.askSize)
	add("Certificates trusted here…", true, w.showTrusted)
	add("Make an identity…", true, w.askNewIdentity)
	add("Show an identity…", true, w.askShowIdentity)
	add("Check this installation…", true, w.askQualify)
	apart()
	add("Words and what they mean…", true, w.showWords)
	add("Cautions…", true, func() { w.showText("Cautions", w.allShown(qa.Cautions())) })
	add("Keys…", true, w.showKeys)
	add("About Lotpair…", true, w.showAbout)
	w.offer(w.act.more, items...)
}

// beginFromThis begins a comparison of the next lot by the plan of the record on the desk.
func (w *window) beginFromThis() {
	if w.busy() {
		return
	}
	w.shift = 0
	w.change("New comparison", func(s desk.State) (desk.State, error) { return s.BegunFrom(person(), now()) })
}

// askSavePlan asks where the plan goes and writes it.
func (w *window) askSavePlan() {
	if w.busy() || !w.state.Open {
		return
	}
	w.askFile("Save as plan", "Save", w.besides(".toml"), "a file name that ends in .toml", w.savePlan)
}

// askSaveResult asks where the result goes as other programs read it (contract: result).
func (w *window) askSaveResult() {
	if w.busy() || !w.state.Compared {
		return
	}
	res := w.state.Record.Result
	w.askFile("Save the result as JSON", "Save", w.besides(".json"), "a file name that ends in .json", func(to string) {
		w.saveBytes("Result", to, func() ([]byte, error) { return exports.ResultJSON(res) })
	})
}

// paste brings in readings that were copied from a spreadsheet, on the page that the keys are on.
func (w *window) paste() {
	if w.busy() || w.state.Sheet != nil {
		return
	}
	text := w.app.Clipboard().Content()
	if strings.TrimSpace(text) == "" {
		w.apply(failed("Pasting", errors.New("clipboard: found nothing in it, want cells copied from a spreadsheet, with their headings; copy them first")))
		return
	}
	w.bring("clipboard-"+now().Format("150405")+".txt", w.sideOfKeys(), func(string) ([]byte, error) { return []byte(text), nil })
}

// askSaveStart asks where a plan to start from goes, as the file that is looked at gives it.
func (w *window) askSaveStart() {
	x := w.state.Sheet
	if w.busy() || x == nil {
		return
	}
	name := strings.TrimSuffix(x.File.Name, filepath.Ext(x.File.Name)) + ".toml"
	w.askFile("Save a plan to start from", "Save", w.home(name), "a file name that ends in .toml", func(to string) {
		w.saveBytes("Plan", to, func() ([]byte, error) { return []byte(x.Plan()), nil })
	})
}

// besides is a free name beside the record, with another ending.
func (w *window) besides(ending string) string {
	name := w.proposed()
	return strings.TrimSuffix(name, filepath.Ext(name)) + ending
}

// askFile asks for the name of a file to write.
func (w *window) askFile(title, confirm, proposed, want string, do func(string)) {
	f := w.newForm()
	to := f.text("File", proposed, want+"; no existing file is written over")
	f.ask(title, confirm, func() error {
		if err := filled(want)(to.Text); err != nil {
			return err
		}
		do(to.Text)
		return nil
	})
}

// savePlan writes the plan of the record on the desk.
func (w *window) savePlan(to string) {
	to = absolute(to)
	place, plan := "Saving "+filepath.Base(to), desk.Settled(w.state.Record.Plan)
	w.work(place, func(watch qa.Watch) change {
		err := w.jobs.writes(watch)
		if err == nil {
			err = saved(exports.Save(to, []byte(importers.PlanText(plan)), false))
		}
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.SavedPlan(to) }
	})
}

// saveBytes writes what is no part of the record.
func (w *window) saveBytes(what, to string, make func() ([]byte, error)) {
	to = absolute(to)
	place := "Saving " + filepath.Base(to)
	w.work(place, func(watch qa.Watch) change {
		data, err := make()
		if err == nil {
			err = w.jobs.writes(watch)
		}
		if err == nil {
			err = saved(exports.Save(to, data, false))
		}
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.SavedFile(what, to) }
	})
}
