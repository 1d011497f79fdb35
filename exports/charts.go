package exports

import (
	"bytes"
	"fmt"
	"image"
	imagedraw "image/draw"
	"image/png"

	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// maxSpineLines is how many lines the summary's picture takes; with more the words of the table must do.
const maxSpineLines = 200

// pixelsOf is how many pixels at 96 an inch a column of so many characters takes (ECMA-376 Part 1, 18.3.1.13).
func pixelsOf(characters float64) float64 { return characters*7 + 5 }

const pixelPoints = 72.0 / 96 // points a pixel of the screen

// spinePicture lays the intervals, each on the scale of its own margin, over the two empty columns of the verdict table from
// the row on: one picture for all lines, because every part of the package has to be signed.
func spinePicture(r qa.Result, row int) picture {
	width := (pixelsOf(summaryWidths[spineColumn-1]) + pixelsOf(summaryWidths[spineColumn])) * pixelPoints
	return picture{
		row: row, col: spineColumn, width: width - 2, height: spineRowHeight*float64(len(r.Characteristics)) - 1,
		about: "The decision interval of each characteristic on the scale of its own margin",
		paint: func() ([]byte, error) { return spines(r, width) },
	}
}

func spines(r qa.Result, width float64) ([]byte, error) {
	const scale = 2.5
	pitch := int(spineRowHeight / width * figure.SpineWidth * scale)
	img := image.NewNRGBA(image.Rect(0, 0, figure.SpineWidth*scale, pitch*len(r.Characteristics)))
	palette := draw.Light()
	palette.Paper.A = 0 // the table's lines show through
	for i, c := range r.Characteristics {
		line, err := draw.Image(figure.Spine(c), scale, palette)
		if err != nil {
			return nil, fmt.Errorf("workbook, picture of %s: %w", c.Name, err)
		}
		at := image.Pt(0, i*pitch+(pitch-line.Bounds().Dy())/2)
		imagedraw.Draw(img, line.Bounds().Add(at), line, image.Point{}, imagedraw.Src)
	}
	var b bytes.Buffer
	if err := (&png.Encoder{CompressionLevel: png.BestSpeed}).Encode(&b, img); err != nil {
		return nil, fmt.Errorf("workbook, picture: %w", err)
	}
	return b.Bytes(), nil
}
