package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"

	"lotpair/qa/figure/draw"
)

// region is a part of the window that is drawn anew, whole, whenever its size or the state changes: what it shows is a
// function of both and of nothing else.
type region struct {
	widget.BaseWidget
	palette func() draw.Palette
	paint   func(p *pen, size fyne.Size)
}

func newRegion(palette func() draw.Palette, paint func(*pen, fyne.Size)) *region {
	r := &region{palette: palette, paint: paint}
	r.ExtendBaseWidget(r)
	return r
}

// CreateRenderer implements fyne.Widget.
func (r *region) CreateRenderer() fyne.WidgetRenderer {
	return &painter{of: r, draw: func(p *pen, size fyne.Size) { r.paint(p, size) }, palette: r.palette}
}

// painter keeps the objects of the last drawing.
type painter struct {
	of      fyne.Widget
	palette func() draw.Palette
	draw    func(p *pen, size fyne.Size)
	least   func() fyne.Size
	objects []fyne.CanvasObject
}

func (r *painter) Layout(size fyne.Size) {
	p := &pen{Palette: r.palette()}
	if size.Width > 0 && size.Height > 0 {
		r.draw(p, size)
	}
	r.objects = p.objects
}

func (r *painter) MinSize() fyne.Size {
	if r.least == nil {
		return fyne.Size{}
	}
	return r.least()
}

func (r *painter) Refresh() {
	r.Layout(r.of.Size())
	canvas.Refresh(r.of)
}

func (r *painter) Objects() []fyne.CanvasObject { return r.objects }

func (r *painter) Destroy() {}
