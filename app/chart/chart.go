// Package chart is the one widget that shows a picture of package figure. It paints with the same painter as the workbook and
// saved pictures, at the pixels of the screen, so that a picture is as sharp at any scale as the text beside it.
package chart

import (
	"image"
	"image/color"
	"math"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// Picture makes a figure of about the given size, in points.
type Picture func(width, height float64) figure.Figure

// Drawing shows a figure at the size it is given.
type Drawing struct {
	widget.BaseWidget
	picture Picture
	palette draw.Palette

	// OnPointed is told which reading the pointer is on, and that it has left it; OnChosen which one was clicked.
	OnPointed func(m figure.Mark, at fyne.Position, on bool)
	OnChosen  func(m figure.Mark)

	readings []figure.Mark // of the picture as it was painted last
	scale    float64       // points of the drawing a point of the picture
	on       bool
}

// New is a drawing of a picture.
func New(p Picture, palette draw.Palette) *Drawing {
	d := &Drawing{picture: p, palette: palette}
	d.ExtendBaseWidget(d)
	return d
}

// SetPicture shows another picture.
func (d *Drawing) SetPicture(p Picture, palette draw.Palette) {
	d.picture, d.palette = p, palette
	d.Refresh()
}

// SetPalette shows the same picture in other colours.
func (d *Drawing) SetPalette(palette draw.Palette) {
	if palette != d.palette {
		d.palette = palette
		d.Refresh()
	}
}

// Figure is what is shown now.
func (d *Drawing) Figure() figure.Figure {
	if d.picture == nil {
		return figure.Figure{}
	}
	return d.picture(float64(d.Size().Width), float64(d.Size().Height))
}

// CreateRenderer makes the drawing's one canvas object: an image painted anew at every size.
func (d *Drawing) CreateRenderer() fyne.WidgetRenderer {
	r := &renderer{drawing: d}
	r.raster = canvas.NewRaster(d.paint)
	return r
}

// paint draws the figure on w by h pixels. A figure larger than the drawing is made smaller as a whole.
func (d *Drawing) paint(w, h int) image.Image {
	f := d.Figure()
	d.remember(f)
	if f.Width > 0 && f.Height > 0 && w > 0 && h > 0 {
		if img := brush.painted(f, math.Min(float64(w)/f.Width, float64(h)/f.Height), w, h, d.palette); img != nil {
			return img
		}
	}
	return onPaper(&image.NRGBA{}, max(w, 1), max(h, 1), d.palette.Paper) // the size has no picture: the paper stays empty
}

// brush is the painter of all drawings: its fonts are read once, not for every line of the spine.
var brush sharedPainter

type sharedPainter struct {
	sync.Mutex
	palette draw.Palette
	painter *draw.Painter
}

// painted is a picture on paper of w by h; nil where the size has none.
func (s *sharedPainter) painted(f figure.Figure, scale float64, w, h int, palette draw.Palette) image.Image {
	s.Lock()
	defer s.Unlock()
	if s.painter == nil || s.palette != palette {
		painter, err := draw.NewPainter(palette)
		if err != nil {
			return nil
		}
		s.painter, s.palette = painter, palette
	}
	img, err := s.painter.Paint(f, scale)
	if err != nil {
		return nil
	}
	return onPaper(img, w, h, palette.Paper)
}

// onPaper is a copy of a picture on paper of w by h. The painter covers all of its picture: colours that let nothing through are
// the same bytes in either of the two ways of keeping them, and the toolkit takes the one way as it is.
func onPaper(img *image.NRGBA, w, h int, paper color.NRGBA) *image.RGBA {
	out := image.NewRGBA(image.Rect(0, 0, w, h))
	for i := 0; i < len(out.Pix); i += 4 {
		out.Pix[i], out.Pix[i+1], out.Pix[i+2], out.Pix[i+3] = paper.R, paper.G, paper.B, 0xFF
	}
	wide := 4 * min(w, img.Rect.Dx())
	for y := range min(h, img.Rect.Dy()) {
		copy(out.Pix[y*out.Stride:][:wide], img.Pix[y*img.Stride:][:wide])
	}
	return out
}

// remember keeps where the readings of a picture stand.
func (d *Drawing) remember(f figure.Figure) {
	d.readings, d.scale = nil, 1
	if d.OnPointed == nil && d.OnChosen == nil || f.Width <= 0 || f.Height <= 0 {
		return
	}
	d.scale = math.Min(float64(d.Size().Width)/f.Width, float64(d.Size().Height)/f.Height)
	for _, m := range f.Marks {
		if m.Reading != nil {
			d.readings = append(d.readings, m)
		}
	}
}

// Nearest is the reading at a place of the drawing: the nearest within a few points.
func (d *Drawing) Nearest(at fyne.Position) (figure.Mark, bool) {
	const reach = 7
	best, found := figure.Mark{}, false
	least := math.Inf(1)
	for _, m := range d.readings {
		far := math.Hypot(m.X*d.scale-float64(at.X), m.Y*d.scale-float64(at.Y))
		if far <= math.Max(reach, m.Size*d.scale) && far < least {
			best, least, found = m, far, true
		}
	}
	return best, found
}

// MouseIn implements desktop.Hoverable.
func (d *Drawing) MouseIn(e *desktop.MouseEvent) { d.MouseMoved(e) }

// MouseMoved implements desktop.Hoverable.
func (d *Drawing) MouseMoved(e *desktop.MouseEvent) {
	if d.OnPointed == nil {
		return
	}
	m, ok := d.Nearest(e.Position)
	if ok || d.on {
		d.OnPointed(m, fyne.NewPos(float32(m.X*d.scale), float32(m.Y*d.scale)), ok)
	}
	d.on = ok
}

// MouseOut implements desktop.Hoverable.
func (d *Drawing) MouseOut() {
	if d.on && d.OnPointed != nil {
		d.OnPointed(figure.Mark{}, fyne.Position{}, false)
	}
	d.on = false
}

// Tapped implements fyne.Tappable.
func (d *Drawing) Tapped(e *fyne.PointEvent) {
	if m, ok := d.Nearest(e.Position); ok && d.OnChosen != nil {
		d.OnChosen(m)
	}
}

type renderer struct {
	drawing *Drawing
	raster  *canvas.Raster
}

func (r *renderer) Layout(size fyne.Size) { r.raster.Resize(size) }

func (r *renderer) MinSize() fyne.Size { return fyne.NewSize(1, 1) }

func (r *renderer) Refresh() { canvas.Refresh(r.raster) }

func (r *renderer) Objects() []fyne.CanvasObject { return []fyne.CanvasObject{r.raster} }

func (r *renderer) Destroy() {}
