package app

import (
	"image/color"

	"fyne.io/fyne/v2"

	"lotpair/app/chart"
	"lotpair/qa"
	"lotpair/qa/figure"
)

// colour is short for what every text and rule takes.
type colour = color.Color

// mark is the sign of a lot: a filled circle for the reference, an open diamond for the candidate.
func (w *window) mark(of qa.Side) fyne.CanvasObject {
	return chart.New(func(width, height float64) figure.Figure {
		m := figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: width / 2, Y: height / 2, Size: 4.2}
		if of == qa.Candidate {
			m = figure.Mark{Kind: figure.Diamond, Role: figure.Candidate, X: width / 2, Y: height / 2, Size: 5.2, Open: true}
		}
		return figure.Figure{Width: width, Height: height, Marks: []figure.Mark{m}}
	}, w.palette())
}

// benchPicture is the picture of the characteristic looked at, nil where there is none.
func (w *window) benchPicture() chart.Picture {
	s := w.state
	if s.Drafting {
		if f := w.powerPicture(); f != nil {
			return w.pictureShown(f)
		}
		return nil
	}
	if _, ok := s.Characteristic(); !ok {
		return nil
	}
	return w.pictureShown(func(width, height float64) figure.Figure {
		f, _ := s.Picture(width, height)
		return f
	})
}

// line is the interval of a characteristic on the spine.
func (w *window) line(at int) *chart.Drawing {
	d, ok := w.lines[at]
	if !ok {
		c := w.state.Record.Result.Characteristics[at]
		d = chart.New(func(width, _ float64) figure.Figure { return figure.SpineAt(c, width) }, w.palette())
		w.lines[at] = d
	}
	d.SetPalette(w.palette())
	return d
}
