package app

import (
	"errors"
	"os"
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/qa"
)

// proposed is where a workbook would go: beside the plan, under its name; the worked example's goes to the user's home.
func (w *window) proposed() string {
	if w.state.Workbook.Path != "" {
		return w.state.Workbook.Path
	}
	name := w.state.Path
	if name == "" {
		home, err := os.UserHomeDir()
		if err != nil {
			home = "."
		}
		return filepath.Join(home, fileName(w.view.header.Title)+".xlsx")
	}
	if strings.HasPrefix(name, "example/") {
		home, err := os.UserHomeDir()
		if err != nil {
			home = "."
		}
		return filepath.Join(home, "worked-example.xlsx")
	}
	return strings.TrimSuffix(name, filepath.Ext(name)) + ".xlsx"
}

// askExport asks where the workbook goes and writes it. The name is typed: no existing file is ever written over.
func (w *window) askExport() {
	if w.act.export.label == "" || w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	w.askFile("Export workbook", "Export", w.proposed(), "a file name that ends in .xlsx", w.export)
}

// filled refuses an empty field.
func filled(want string) fyne.StringValidator {
	return func(s string) error {
		if strings.TrimSpace(s) == "" {
			return errors.New("want " + want)
		}
		return nil
	}
}

func (w *window) export(to string) {
	place, rec := "Exporting to "+filepath.Base(to), w.state.Record
	to = absolute(withExtension(to))
	w.work(place, func(watch qa.Watch) change {
		data, err := exports.Under(watch).Workbook(rec)
		if err == nil {
			err = w.jobs.writes(watch)
		}
		if err == nil {
			err = saved(exports.Save(to, data, false))
		}
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.Exported(to) }
	})
}

func withExtension(name string) string {
	if strings.EqualFold(filepath.Ext(name), ".xlsx") {
		return name
	}
	return name + ".xlsx"
}

// saved says a refusal in words that fit a window.
func saved(err error) error {
	var exists *exports.ExistsError
	if errors.As(err, &exists) {
		return errors.New(exists.Path + ": found an existing file, want another name; nothing was written")
	}
	return err
}
