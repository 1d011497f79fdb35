package app

import (
	"errors"
	"path/filepath"
	"strings"
	"unicode"

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
	proposed := filepath.Join(filepath.Dir(absolute(w.proposed())), name+".svg")
	w.askFile("Save the picture", "Save", proposed, "a file name that ends in .svg or .png", w.savePicture)
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
	place, picture := "Saving "+filepath.Base(to), w.benchPicture()
	to = absolute(to)
	w.work(place, func(watch qa.Watch) change {
		if picture == nil {
			return desk.State.Read
		}
		f := picture(figure.FacingWidth, figure.FacingHeight)
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
