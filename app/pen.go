package app

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"lotpair/qa/figure/draw"
)

// pen places canvas objects where a drawing says they stand: texts by their baseline, as the drawings of the window do.
type pen struct {
	draw.Palette
	objects []fyne.CanvasObject
}

// put places an object.
func (p *pen) put(o fyne.CanvasObject, x, y, w, h float32) {
	o.Move(fyne.NewPos(x, y))
	o.Resize(fyne.NewSize(max(w, 0), max(h, 0)))
	p.objects = append(p.objects, o)
}

// text sets a line from x to the right, its baseline at y, and returns where it ends.
func (p *pen) text(s string, x, y float32, f font, c color.Color) float32 {
	if s == "" {
		return x
	}
	t := canvas.NewText(s, c)
	t.TextSize, t.TextStyle = f.size, f.style()
	size := t.MinSize()
	p.put(t, x, y-f.rise(), size.Width, size.Height)
	return x + size.Width
}

// ending sets a line that ends at x and returns where it begins.
func (p *pen) ending(s string, x, y float32, f font, c color.Color) float32 {
	w := f.width(s)
	p.text(s, x-w, y, f, c)
	return x - w
}

// centred sets a line about x.
func (p *pen) centred(s string, x, y float32, f font, c color.Color) {
	p.text(s, x-f.width(s)/2, y, f, c)
}

// lines sets lines below each other, the first baseline at y, and returns the baseline after the last.
func (p *pen) lines(all []string, x, y, leading float32, f font, c color.Color) float32 {
	for _, s := range all {
		p.text(s, x, y, f, c)
		y += leading
	}
	return y
}

// box fills a rectangle.
func (p *pen) box(x, y, w, h float32, c color.Color) *canvas.Rectangle {
	r := canvas.NewRectangle(c)
	p.put(r, x, y, w, h)
	return r
}

// frame draws the outline of a rectangle.
func (p *pen) frame(x, y, w, h, width float32, c color.Color) {
	r := canvas.NewRectangle(color.Transparent)
	r.StrokeColor, r.StrokeWidth, r.CornerRadius = c, width, 3
	p.put(r, x, y, w, h)
}

// across draws a level line.
func (p *pen) across(x, x2, y, width float32, c color.Color) { p.box(x, y-width/2, x2-x, width, c) }

// down draws an upright line.
func (p *pen) down(x, y, y2, width float32, c color.Color) { p.box(x-width/2, y, width, y2-y, c) }

// spaced sets capitals with space between them and returns how wide they are.
func (p *pen) spaced(s string, x, y float32, f font, c color.Color) float32 {
	const space = 1.6
	at := x
	for _, r := range s {
		at = p.text(string(r), at, y, f, c) + space
	}
	return at - space - x
}

// spacedWidth is how wide spaced would set s.
func spacedWidth(s string, f font) float32 {
	w := float32(0)
	for _, r := range s {
		w += f.width(string(r)) + 1.6
	}
	return w - 1.6
}
