package app

import (
	"errors"
	"fmt"
	"image"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/theme"

	"lotpair/app/desk"
)

// Shot says what a picture of the window shows.
type Shot struct {
	File          string  // a plan or a workbook; "" for the start, "example" for the worked example
	Width, Height int     // of the window, in points
	Scale         float64 // pixels a point
	Dark          bool
	Register      string // the folder of a register; "" for none
	Decimal       desk.Decimal
}

// Picture renders the window with the toolkit's software painter: no display, no C. It fails where the file cannot be
// opened, with the error that the window shows.
func Picture(s Shot, b Build) (image.Image, error) {
	switch {
	case s.Width < int(leastWindow.Width) || s.Height < int(leastWindow.Height) || s.Width > 8000 || s.Height > 8000:
		return nil, fmt.Errorf("size: found %dx%d, want %gx%g to 8000x8000", s.Width, s.Height, leastWindow.Width, leastWindow.Height)
	case !(s.Scale >= 0.5 && s.Scale <= 4):
		return nil, fmt.Errorf("scale: found %v, want 0.5 to 4", s.Scale)
	}
	light := theme.VariantLight
	l := look{forced: &light} // whatever the system says: the same picture everywhere
	if s.Dark {
		l = wanted(true)
	}
	r, said, err := openRegister(s.Register)
	if err != nil {
		return nil, err
	}
	w := newWindow(test.NewApp(), b, l, r)
	defer w.win.Close()
	defer w.end()
	w.jobs.atOnce, w.decimal = true, s.Decimal
	w.win.Canvas().(test.WindowlessCanvas).SetScale(float32(s.Scale))
	w.win.Resize(fyne.NewSize(float32(s.Width), float32(s.Height)))
	switch s.File {
	case "":
	case "example":
		w.openSample()
	default:
		w.open(absolute(s.File), readFile)
	}
	if said != "" {
		return nil, errors.New(said)
	}
	if t := w.state.Problem; t.Text != "" {
		return nil, errors.New(t.Place + ": " + t.Text)
	}
	return w.win.Canvas().Capture(), nil
}
