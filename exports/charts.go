package exports

import (
	"lotpair/qa"
	"lotpair/qa/figure"
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
		row: row, col: spineColumn, width: width - 2, height: spineRowHeight*float64(spineRows(r)) - 1,
		about: "The decision interval of each characteristic on the scale of its own margin",
		paint: func(p *painter) ([]byte, error) { return p.spines(r, width) },
	}
}

// spineRows are the rows that the picture covers: the lines and the headings between them.
func spineRows(r qa.Result) int {
	n := len(r.Characteristics)
	return n + headsAgain(n-1, n)
}

func (p *painter) spines(r qa.Result, width float64) ([]byte, error) {
	const scale = 1.25 // some 200 pixels an inch
	pitch := spineRowHeight / width * figure.SpineWidth
	all := figure.Figure{Width: figure.SpineWidth, Height: pitch * float64(spineRows(r))}
	for i, c := range r.Characteristics {
		appendBelow(&all, figure.Spine(c), pitch*float64(i+headsAgain(i, len(r.Characteristics)))+(pitch-figure.SpineHeight)/2)
	}
	full, err := p.full(all, scale)
	if err != nil {
		return nil, err
	}
	img := p.blank(full.Rect.Dx(), full.Rect.Dy())
	p.colours.take(img.Pix, full)
	for i, c := range img.Pix { // the table's lines show through
		if c == whiteIndex {
			img.Pix[i] = clearIndex
		}
	}
	return p.encode(img)
}

// appendBelow puts the marks of a figure into another, so far down.
func appendBelow(to *figure.Figure, from figure.Figure, down float64) {
	for _, m := range from.Marks {
		m.Y += down
		m.Y2 += down
		to.Marks = append(to.Marks, m)
	}
}
