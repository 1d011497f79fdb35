// Package chart is the one widget that shows a picture of package figure. It paints with the same painter as the workbook and
// saved pictures, at the pixels of the screen, so that a picture is as sharp at any scale as the text beside it.
package chart

import (
	"image"
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
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
	out := image.NewNRGBA(image.Rect(0, 0, max(w, 1), max(h, 1)))
	for i := 0; i < len(out.Pix); i += 4 {
		out.Pix[i], out.Pix[i+1], out.Pix[i+2], out.Pix[i+3] = d.palette.Paper.R, d.palette.Paper.G, d.palette.Paper.B, 0xFF
	}
	f := d.Figure()
	if f.Width <= 0 || f.Height <= 0 || w <= 0 || h <= 0 {
		return out
	}
	img, err := draw.Image(f, math.Min(float64(w)/f.Width, float64(h)/f.Height), d.palette)
	if err != nil {
		return out // the size has no picture: the paper stays empty
	}
	for y := range min(h, img.Bounds().Dy()) {
		copy(out.Pix[y*out.Stride:(y+1)*out.Stride], img.Pix[y*img.Stride:(y+1)*img.Stride])
	}
	return out
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
