package exports

import (
	"bytes"
	"fmt"
	"image"
	imagedraw "image/draw"
	"image/png"

	"github.com/xuri/excelize/v2"

	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// maxSpineLines is how many lines the summary's picture takes; with more the words of the table must do.
const maxSpineLines = 200

// spinePicture lays the intervals, each on the scale of its own margin, over the two empty columns of the verdict table: one
// picture for all lines, because every part of the package has to be signed.
func spinePicture(f *excelize.File, s sheet, r qa.Result) error {
	n := len(r.Characteristics)
	if n > maxSpineLines {
		return nil
	}
	top := 0
	for i, row := range s.rows {
		if row.height == spineRowHeight {
			top = i + 1
			break
		}
	}
	if top == 0 {
		return nil
	}
	// Pixels at 96 a inch: a column of so many characters is 7 pixels a character and 5 of padding (ECMA-376 Part 1, 18.3.1.13).
	width := (summaryWidths[spineColumn-1]+summaryWidths[spineColumn])*7 + 10
	const rowPixels = spineRowHeight * 96.0 / 72
	const scale = 2.5
	pitch := int(rowPixels / width * figure.SpineWidth * scale)
	img := image.NewNRGBA(image.Rect(0, 0, figure.SpineWidth*scale, pitch*n))
	palette := draw.Light()
	palette.Paper.A = 0 // the table's lines show through
	for i, c := range r.Characteristics {
		line, err := draw.Image(figure.Spine(c), scale, palette)
		if err != nil {
			return fmt.Errorf("workbook, picture of %s: %w", c.Name, err)
		}
		at := image.Pt(0, i*pitch+(pitch-line.Bounds().Dy())/2)
		imagedraw.Draw(img, line.Bounds().Add(at), line, image.Point{}, imagedraw.Src)
	}
	var b bytes.Buffer
	if err := (&png.Encoder{CompressionLevel: png.BestCompression}).Encode(&b, img); err != nil {
		return fmt.Errorf("workbook, picture: %w", err)
	}
	cell, err := excelize.CoordinatesToCellName(spineColumn, top)
	if err != nil {
		return fmt.Errorf("workbook, picture: %w", err)
	}
	return f.AddPictureFromBytes(SheetSummary, cell, &excelize.Picture{
		Extension: ".png", File: b.Bytes(), InsertType: excelize.PictureInsertTypePlaceOverCells,
		Format: &excelize.GraphicOptions{
			AltText: "The decision interval of each characteristic on the scale of its own margin",
			ScaleX:  (width - 4) / float64(img.Bounds().Dx()), ScaleY: (rowPixels*float64(n) - 2) / float64(img.Bounds().Dy()),
			OffsetX: 2, OffsetY: 1, Positioning: "oneCell",
		},
	})
}
