package app

import (
	"errors"
	"path/filepath"
	"strings"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/qa"
)

// askSupersede asks for the signed workbook in whose place this record stands, and why.
func (w *window) askSupersede() {
	if w.busy() || w.state.Closed() {
		return
	}
	f := w.newForm()
	old := w.fileLine(f, "Earlier record", "the signed workbook (.xlsx) in whose place this record stands", ".xlsx")
	why := f.text("Reason", "", "it stands in this record and in its workbook")
	f.ask("Supersede an earlier record", "Supersede", func() error {
		switch {
		case strings.TrimSpace(old.Text) == "":
			return errors.New("found no earlier record, want the signed workbook; choose it")
		case strings.TrimSpace(why.Text) == "":
			return exports.ErrNoReason
		}
		w.supersede(old.Text, why.Text)
		return nil
	})
}

// supersede puts the record in the place of an earlier one.
func (w *window) supersede(old, why string) {
	place := "Superseding " + filepath.Base(old)
	w.work(place, func(watch qa.Watch) change {
		data, err := readFile(old)
		if err != nil {
			return failed(place, err)
		}
		earlier, err := exports.Supersede(filepath.Base(old), data, strings.TrimSpace(why))
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State {
			next, err := s.Superseding(earlier, person(), now())
			if err != nil {
				return s.Failed(place, err)
			}
			return next
		}
	})
}
