package exports

import (
	"bytes"
	"fmt"
	"image"
	"image/png"

	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// painter paints the pictures of one workbook, one after the other in the same room.
type painter struct {
	marks   *draw.Painter
	colours *quantizer
	room    []uint8
	packer  *png.EncoderBuffer
}

// full paints a figure in full colours on white; it is good until the next one.
func (p *painter) full(f figure.Figure, scale float64) (*image.NRGBA, error) {
	if p.marks == nil {
		colours := draw.Light()
		colours.Paper = white
		marks, err := draw.NewPainter(colours)
		if err != nil {
			return nil, fmt.Errorf("workbook, picture: %w", err)
		}
		p.marks, p.colours = marks, newQuantizer(paletteOf(colours))
	}
	img, err := p.marks.Paint(f, scale)
	if err != nil {
		return nil, fmt.Errorf("workbook, picture: %w", err)
	}
	return img, nil
}

// blank is a clear picture of few colours; it is good until the next one.
func (p *painter) blank(w, h int) *image.Paletted {
	if cap(p.room) < w*h {
		p.room = make([]uint8, w*h)
	}
	p.room = p.room[:w*h]
	clear(p.room)
	return &image.Paletted{Pix: p.room, Stride: w, Rect: image.Rect(0, 0, w, h), Palette: p.colours.palette}
}

func (p *painter) encode(img image.Image) ([]byte, error) {
	var b bytes.Buffer
	if err := (&png.Encoder{CompressionLevel: png.BestSpeed, BufferPool: p}).Encode(&b, img); err != nil {
		return nil, fmt.Errorf("workbook, picture: %w", err)
	}
	return b.Bytes(), nil
}

// Get gives the encoder the room that it used for the picture before.
func (p *painter) Get() *png.EncoderBuffer { return p.packer }

// Put takes it back.
func (p *painter) Put(b *png.EncoderBuffer) { p.packer = b }
