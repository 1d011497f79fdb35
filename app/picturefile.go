package app

import (
	"errors"
	"path/filepath"
	"strings"
	"unicode"

	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// pictureScale is pixels a point of a saved picture: enough for print at its usual size.
const pictureScale = 4

// askPicture asks where the picture of the bench goes, and as what: the name's ending says it.
func (w *window) askPicture() {
	c, ok := w.state.Characteristic()
	if !ok || w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	name := fileName(c.Name + "-" + w.state.Shown().String())
	to := w.newField(filepath.Join(filepath.Dir(absolute(w.proposed())), name+".svg"))
	to.Validator = filled("a file name that ends in .svg or .png")
	d := dialog.NewForm("Save the picture", "Save", "Cancel", []*widget.FormItem{widget.NewFormItem("File (.svg or .png)", to)}, func(ok bool) {
		if ok {
			w.savePicture(to.Text)
		}
	}, w.win)
	w.presentForm(d, to)
}

// fileName is words as the name of a file.
func fileName(words string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return unicode.ToLower(r)
		}
		return '-'
	}, words)
}

// savePicture writes the picture of the bench, as ink on paper.
func (w *window) savePicture(to string) {
	s, place := w.state, "Saving "+filepath.Base(to)
	to = absolute(to)
	w.work(place, func(watch qa.Watch) change {
		f, ok := s.Picture(figure.FacingWidth, figure.FacingHeight)
		if !ok {
			return desk.State.Read
		}
		var data []byte
		var err error
		switch strings.ToLower(filepath.Ext(to)) {
		case ".svg":
			data = draw.SVG(f)
		case ".png":
			data, err = draw.PNG(f, pictureScale, draw.Light())
		default:
			err = errors.New(to + ": found another ending, want .svg or .png; nothing was written")
		}
		if err == nil {
			err = w.jobs.writes(watch)
		}
		if err == nil {
			err = saved(exports.Save(to, data, false))
		}
		if err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State { return s.SavedPicture(to) }
	})
}
