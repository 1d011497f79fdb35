package exports

import (
	"encoding/binary"
	"image"
	"image/color"

	"lotpair/qa/figure/draw"
)

// Places of the first two colours of a palette.
const (
	clearIndex = iota
	whiteIndex
)

var white = color.NRGBA{R: 0xFF, G: 0xFF, B: 0xFF, A: 0xFF}

// paletteOf is the colours of a picture and their blends with the grounds they stand on, the first one clear (and white, so that
// scaling leaves no dark seam): enough for edges, and a quarter of the bytes of a picture of full colours.
func paletteOf(p draw.Palette) color.Palette {
	out := color.Palette{color.NRGBA{R: 0xFF, G: 0xFF, B: 0xFF}, white, p.Margin}
	inks := []color.NRGBA{p.Text, p.Muted, p.Reference, p.Candidate, p.ReferenceText, p.CandidateText, p.MutedText, p.Rule}
	const steps = 12
	for _, ground := range []color.NRGBA{white, p.Margin} {
		for _, ink := range inks {
			for k := 1; k <= steps; k++ {
				out = append(out, blend(ground, ink, k, steps))
			}
		}
	}
	for k := 1; k < steps; k++ {
		out = append(out, blend(white, p.Margin, k, steps))
	}
	return out
}

func blend(a, b color.NRGBA, k, of int) color.NRGBA {
	mix := func(x, y uint8) uint8 { return uint8((int(x)*(of-k) + int(y)*k) / of) }
	return color.NRGBA{R: mix(a.R, b.R), G: mix(a.G, b.G), B: mix(a.B, b.B), A: 0xFF}
}

// quantizer finds the nearest colour of a palette, once for each colour of 15 bits.
type quantizer struct {
	palette color.Palette
	known   [1 << 15]uint8 // 0: not looked for yet; the clear colour is never looked for
}

func newQuantizer(p color.Palette) *quantizer {
	q := &quantizer{palette: p}
	for i := len(p) - 1; i > 0; i-- { // what is in the palette is found exactly, its grounds before its blends
		c := p[i].(color.NRGBA) // paletteOf makes no other
		q.known[keyOf([]byte{c.R, c.G, c.B})] = uint8(i)
	}
	return q
}

func keyOf(p []byte) int { return int(p[0]>>3)<<10 | int(p[1]>>3)<<5 | int(p[2]>>3) }

// take gives every pixel of an opaque picture its nearest colour. Neighbours mostly have the same.
func (q *quantizer) take(to []uint8, from *image.NRGBA) {
	last, index := binary.LittleEndian.Uint32(from.Pix), q.of(from.Pix)
	for i := range to { // both are of one size, without gaps between their lines
		p := from.Pix[4*i : 4*i+4 : 4*i+4]
		if v := binary.LittleEndian.Uint32(p); v != last {
			last, index = v, q.of(p)
		}
		to[i] = index
	}
}

func (q *quantizer) of(p []byte) uint8 {
	key := keyOf(p)
	if q.known[key] == 0 {
		q.known[key] = q.nearest(p)
	}
	return q.known[key]
}

func (q *quantizer) nearest(p []byte) uint8 {
	best, least := 1, 1<<30
	for i, c := range q.palette[1:] {
		n := c.(color.NRGBA) // paletteOf makes no other
		r, g, b := int(n.R)-int(p[0]), int(n.G)-int(p[1]), int(n.B)-int(p[2])
		if d := 3*r*r + 6*g*g + b*b; d < least {
			best, least = i+1, d
		}
	}
	return uint8(best)
}
