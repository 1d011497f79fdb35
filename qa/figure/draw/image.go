package draw

import (
	"bytes"
	"fmt"
	"image"
	"image/color"
	imagedraw "image/draw"
	"image/png"
	"math"

	"golang.org/x/image/font"
	"golang.org/x/image/math/fixed"
	"golang.org/x/image/vector"

	"lotpair/qa/figure"
)

// mostPixels bounds a picture: 64 million pixels are 256 MB.
const mostPixels = 64 << 20

// Image paints a figure at scale pixels a point; its size is the figure's times the scale, rounded up.
func Image(f figure.Figure, scale float64, p Palette) (*image.NRGBA, error) {
	painter, err := NewPainter(p)
	if err != nil {
		return nil, err
	}
	return painter.Paint(f, scale)
}

// Painter paints one figure after another in the same room.
type Painter struct{ canvas }

// NewPainter makes a painter with the colours of a palette.
func NewPainter(p Palette) (*Painter, error) {
	fonts, err := newFaces()
	if err != nil {
		return nil, err
	}
	return &Painter{canvas{palette: p, fonts: fonts}}, nil
}

// Paint is Image; the picture is good until the next one is painted.
func (p *Painter) Paint(f figure.Figure, scale float64) (*image.NRGBA, error) {
	w, h := math.Ceil(f.Width*scale), math.Ceil(f.Height*scale)
	if !(w >= 1 && h >= 1) || w*h > mostPixels {
		return nil, fmt.Errorf("picture: found %v by %v pixels, want at least 1 by 1 and at most %d altogether; choose another size", w, h, mostPixels)
	}
	if n := 4 * int(w) * int(h); p.img == nil || cap(p.img.Pix) < n {
		p.img = image.NewNRGBA(image.Rect(0, 0, int(w), int(h)))
	} else {
		p.img = &image.NRGBA{Pix: p.img.Pix[:n], Stride: 4 * int(w), Rect: image.Rect(0, 0, int(w), int(h))}
	}
	p.scale = scale
	ground(p.img, p.palette.Paper)
	for _, m := range f.Marks {
		if err := p.mark(m); err != nil {
			return nil, err
		}
	}
	return p.img, nil
}

// ground lays paper under a picture; image/draw takes a slow path to images of this kind, a colour at a time.
func ground(img *image.NRGBA, paper color.NRGBA) {
	line := img.Pix[:4*img.Rect.Dx()]
	for i := 0; i < len(line); i += 4 {
		line[i], line[i+1], line[i+2], line[i+3] = paper.R, paper.G, paper.B, paper.A
	}
	for at := len(line); at < len(img.Pix); at += len(line) {
		copy(img.Pix[at:], line)
	}
}

// PNG is a figure as a PNG file at scale pixels a point.
func PNG(f figure.Figure, scale float64, p Palette) ([]byte, error) {
	img, err := Image(f, scale, p)
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := (&png.Encoder{CompressionLevel: png.BestCompression}).Encode(&b, img); err != nil {
		return nil, fmt.Errorf("picture: %w", err)
	}
	return b.Bytes(), nil
}

// canvas is an image being painted.
type canvas struct {
	img     *image.NRGBA
	scale   float64
	palette Palette
	fonts   *faces
	raster  vector.Rasterizer
	mask    []uint8
}

// mark paints one mark; a mark with a number that is not finite is left out.
func (c *canvas) mark(m figure.Mark) error {
	for _, v := range []float64{m.X, m.Y, m.X2, m.Y2, m.Size} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return nil
		}
	}
	s, col := c.scale, c.palette.Of(m)
	x, y, x2, y2, size := m.X*s, m.Y*s, m.X2*s, m.Y2*s, m.Size*s
	switch m.Kind {
	case figure.Line:
		c.line(x, y, x2, y2, size, m.Dashed, col)
	case figure.Box:
		box := polygon{{x, y}, {x2, y}, {x2, y2}, {x, y2}}
		c.shape(box, m.Open, 1.2*s, col)
	case figure.Dot:
		c.shape(circle(x, y, size), m.Open, 1.2*s, col)
	case figure.Diamond:
		c.shape(polygon{{x, y - size}, {x + size, y}, {x, y + size}, {x - size, y}}, m.Open, 1.5*s, col)
	case figure.Label:
		return c.label(m, x, y, size, col)
	}
	return nil
}

// shape fills a convex outline; an open one is filled with paper and stroked inside and outside by half the width.
func (c *canvas) shape(p polygon, open bool, width float64, col color.NRGBA) {
	if !open {
		c.fill(col, p)
		return
	}
	c.fill(c.palette.Paper, p)
	c.fill(col, p.grown(width/2), p.grown(-width/2).reversed())
}

// line is a stroke with butt ends, or short strokes of two points with gaps of three.
func (c *canvas) line(x, y, x2, y2, width float64, dashed bool, col color.NRGBA) {
	length := math.Hypot(x2-x, y2-y)
	if length == 0 || width <= 0 {
		return
	}
	ux, uy := (x2-x)/length, (y2-y)/length
	nx, ny := -uy*width/2, ux*width/2
	on, step := length, length
	if dashed {
		on, step = 2*c.scale, 5*c.scale
	}
	for at := 0.0; at < length; at += step {
		end := math.Min(at+on, length)
		ax, ay, bx, by := x+ux*at, y+uy*at, x+ux*end, y+uy*end
		c.fill(col, polygon{{ax + nx, ay + ny}, {bx + nx, by + ny}, {bx - nx, by - ny}, {ax - nx, ay - ny}})
	}
}

// fill paints outlines with the winding rule. The rasteriser works on the outlines' bounding box alone: a picture has many
// small marks.
func (c *canvas) fill(col color.NRGBA, outlines ...polygon) {
	box := image.Rectangle{}
	for _, p := range outlines {
		box = box.Union(p.bounds())
	}
	box = box.Intersect(c.img.Bounds())
	if box.Empty() {
		return
	}
	r := &c.raster
	r.Reset(box.Dx(), box.Dy())
	ox, oy := float64(box.Min.X), float64(box.Min.Y)
	for _, p := range outlines {
		for i, q := range p {
			if i == 0 {
				r.MoveTo(float32(q.x-ox), float32(q.y-oy))
			} else {
				r.LineTo(float32(q.x-ox), float32(q.y-oy))
			}
		}
		r.ClosePath()
	}
	r.DrawOp = imagedraw.Src
	mask := c.maskOf(box.Dx(), box.Dy())
	r.Draw(mask, mask.Rect, image.Opaque, image.Point{})
	for y := range box.Dy() {
		cover := mask.Pix[y*mask.Stride:][:box.Dx()]
		line := c.img.Pix[c.img.PixOffset(box.Min.X, box.Min.Y+y):]
		for x, a := range cover {
			if a > 0 {
				over(line[4*x:4*x+4:4*x+4], col, uint32(a))
			}
		}
	}
}

// maskOf is room for the cover of a shape, used again for the next.
func (c *canvas) maskOf(w, h int) *image.Alpha {
	if cap(c.mask) < w*h {
		c.mask = make([]uint8, w*h)
	}
	return &image.Alpha{Pix: c.mask[:w*h], Stride: w, Rect: image.Rect(0, 0, w, h)}
}

// over lays a colour over a pixel as far as it is covered (Porter and Duff 1984, "over", colours not premultiplied). The
// library's own way to images of this kind makes two values on the heap for every pixel.
func over(p []uint8, col color.NRGBA, cover uint32) {
	const full = 255 * 255
	a := uint32(col.A) * cover // of full
	if a == full {
		p[0], p[1], p[2], p[3] = col.R, col.G, col.B, 255
		return
	}
	under := uint32(p[3]) * 255 * (full - a) / full
	sum := a + under
	if sum == 0 {
		return
	}
	mix := func(above, below uint8) uint8 { return uint8((uint32(above)*a + uint32(below)*under + sum/2) / sum) }
	p[0], p[1], p[2] = mix(col.R, p[0]), mix(col.G, p[1]), mix(col.B, p[2])
	p[3] = uint8((sum + 127) / 255)
}

func (c *canvas) label(m figure.Mark, x, y, size float64, col color.NRGBA) error {
	face, err := c.fonts.of(m.Bold, size)
	if err != nil {
		return err
	}
	d := font.Drawer{Dst: c.img, Src: image.NewUniform(col), Face: face}
	text := c.fonts.readable(m.Text)
	width := d.MeasureString(text)
	d.Dot = fixed.Point26_6{X: fixed.Int26_6(math.Round(x * 64)), Y: fixed.Int26_6(math.Round(y * 64))}
	switch m.Anchor {
	case figure.Middle:
		d.Dot.X -= width / 2
	case figure.End:
		d.Dot.X -= width
	}
	d.DrawString(text)
	return nil
}
