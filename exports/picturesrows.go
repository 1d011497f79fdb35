package exports

import (
	"fmt"
	"image"
	"math"

	"lotpair/qa"
	"lotpair/qa/figure"
)

// The sheet Pictures: blocks of a heading and a plot, three to a page. Many plots go into one image, because every part of the
// package has to be signed and outside verifiers refuse packages of many parts.
const (
	plotWidth, plotHeight = 560, 232 // points of the figure
	plotSize              = 0.9      // points on the sheet a point of the figure
	plotHead              = 30.0     // points
	plotFoot              = 8.0
	plotRows              = 14 // rows that a plot lies over
	plotsPage             = 3
	plotsImage            = 12 // plots in one image
	mostPlots             = 48
	plotScale             = 1.5 // pixels a point of the figure
)

// picturesSheet shows the readings of each characteristic, both lots back to back about one axis.
func picturesSheet(rec qa.Record) sheet {
	s := sheet{name: SheetPictures, widths: []float64{16, 16, 16, 16, 16, 16, 16}}
	s.add(text("Pictures", titleLook))
	cs := rec.Result.Characteristics
	note := "The readings in use of both lots back to back, the reference to the left: dots are readings, the band is the margin about the reference's mean, lines are means and limits."
	if len(cs) > mostPlots {
		note += fmt.Sprintf(" The first %d of %d characteristics; the sheet Readings holds all.", mostPlots, len(cs))
		cs = cs[:mostPlots]
	}
	s.addTall(30, wide(note, wrapLook, 7))
	s.frozen = len(s.rows)
	for i, c := range cs {
		if i > 0 && i%plotsPage == 0 {
			s.breaks = append(s.breaks, len(s.rows)+1)
		}
		if i%plotsImage == 0 {
			some := cs[i:min(i+plotsImage, len(cs))]
			s.pictures = append(s.pictures, picture{
				row: len(s.rows) + 1, col: 1, width: plotWidth * plotSize, height: blockHeight * float64(len(some)),
				about: "Facing plots: readings of both lots back to back", paint: func(p *painter) ([]byte, error) { return p.plots(some, rec.Readings) },
			})
		}
		head := nameWithUnit(c) + ": " + string(c.Verdict)
		if c.Kind == "attribute" {
			head += " (1: a part that failed, 0: one that did not)"
		}
		s.addTall(plotHead, wide(head, groupLook, 7))
		for range plotRows {
			s.addTall(plotRow)
		}
		s.addTall(plotFoot)
	}
	return s
}

const (
	plotRow     = plotHeight * plotSize / plotRows
	blockHeight = plotHead + plotHeight*plotSize + plotFoot
)

// plots paints plots below each other as they lie over the rows, with nothing over their headings.
func (p *painter) plots(cs []qa.Comparison, r qa.Readings) ([]byte, error) {
	const (
		block, head = blockHeight / plotSize * plotScale, plotHead / plotSize * plotScale // pixels
		width       = plotWidth * plotScale
	)
	var img *image.Paletted
	for i, c := range cs {
		plot, err := p.full(figure.FacingAt(onUnit(c), r, plotWidth, plotHeight), plotScale)
		if err != nil {
			return nil, err
		}
		if i == 0 {
			img = p.blank(width, int(math.Ceil(block*float64(len(cs)))))
		}
		at := int(math.Round(block*float64(i)+head)) * img.Stride
		p.colours.take(img.Pix[at:at+plot.Rect.Dx()*plot.Rect.Dy()], plot)
		clear(img.Pix[at : at+2*img.Stride]) // the rule under the heading shows; a plot has more room than that at its top
	}
	return p.encode(img)
}
