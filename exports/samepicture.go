package exports

import (
	"bytes"
	"encoding/binary"
	"image"
	"image/color"
	"image/png"
)

// samePicture says whether two pictures show the same. They are painted anew when a record is verified, and another processor
// may round the edge of a line otherwise: a pixel may differ by the step of a palette, the size may not. The pictures of a record
// hold nothing but pixels, so nothing can hide beside them.
func samePicture(want, got []byte) bool {
	if bytes.Equal(want, got) {
		return true
	}
	if !onlyPixels(got) {
		return false
	}
	a, err := png.Decode(bytes.NewReader(want))
	if err != nil {
		return false
	}
	b, err := png.Decode(bytes.NewReader(got))
	if err != nil || a.Bounds() != b.Bounds() {
		return false
	}
	for y := a.Bounds().Min.Y; y < a.Bounds().Max.Y; y++ {
		for x := a.Bounds().Min.X; x < a.Bounds().Max.X; x++ {
			if !near(a, b, x, y) {
				return false
			}
		}
	}
	return true
}

func near(a, b image.Image, x, y int) bool {
	const step = 22                                         // of 255; the blends of a palette are twelve steps apart (paletteOf)
	p := color.NRGBAModel.Convert(a.At(x, y)).(color.NRGBA) // what the model converts to
	q := color.NRGBAModel.Convert(b.At(x, y)).(color.NRGBA)
	for _, c := range [][2]uint8{{p.R, q.R}, {p.G, q.G}, {p.B, q.B}, {p.A, q.A}} {
		if d := int(c[0]) - int(c[1]); d < -step || d > step {
			return false
		}
	}
	return true
}

// onlyPixels says whether a PNG file holds the chunks that the pixels need and no other (ISO/IEC 15948, 5.3), and nothing after.
func onlyPixels(b []byte) bool {
	const head, around = 8, 12 // the mark of the format; length, type and check sum of a chunk
	kinds := map[string]bool{"IHDR": true, "PLTE": true, "tRNS": true, "IDAT": true, "IEND": true}
	for at := head; at+around <= len(b); {
		size, kind := int(binary.BigEndian.Uint32(b[at:])), string(b[at+4:at+8])
		if !kinds[kind] {
			return false
		}
		at += around + size
		if kind == "IEND" {
			return at == len(b)
		}
	}
	return false
}
