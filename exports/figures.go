package exports

import (
	"fmt"
	"strings"

	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// The figures that can be saved as files.
const (
	FigureFacing = "facing" // the readings of both lots back to back
	FigureSpine  = "spine"  // the interval on the scale of its margin
	FigureOrder  = "order"  // the readings in the order measured
	FigureShape  = "shape"  // against the quantiles of a normal distribution
	FigureLimits = "limits" // against the specification limits
)

// figures are the painters' functions by the names of the figures.
var figures = map[string]func(qa.Comparison, qa.Readings) figure.Figure{
	FigureFacing: func(c qa.Comparison, r qa.Readings) figure.Figure { return figure.Facing(onUnit(c), r) },
	FigureOrder:  figure.Order,
	FigureShape:  figure.Shape,
	FigureLimits: figure.Limits,
	FigureSpine:  func(c qa.Comparison, _ qa.Readings) figure.Figure { return figure.Spine(c) },
}

// FigureNames are the names of the figures in their order.
func FigureNames() []string {
	return []string{FigureFacing, FigureOrder, FigureShape, FigureLimits, FigureSpine}
}

// onUnit takes the margin away from a comparison whose margin is not in the unit of the readings (a ratio, a fraction): it cannot
// be drawn as a band among them.
func onUnit(c qa.Comparison) qa.Comparison {
	if e := c.Equivalence; e != nil && e.Scale != "difference" {
		c.Equivalence = nil
	}
	return c
}

// FigurePNG paints one figure of a characteristic as a PNG file, scale pixels a point.
func FigurePNG(rec qa.Record, characteristic, name string, scale float64) ([]byte, error) {
	f, err := figureOf(rec, characteristic, name)
	if err != nil {
		return nil, err
	}
	b, err := draw.PNG(f, scale, draw.Light())
	if err != nil {
		return nil, fmt.Errorf("figure %s of %s: %w", name, characteristic, err)
	}
	return b, nil
}

// FigureSVG writes one figure of a characteristic as an SVG file.
func FigureSVG(rec qa.Record, characteristic, name string) ([]byte, error) {
	f, err := figureOf(rec, characteristic, name)
	if err != nil {
		return nil, err
	}
	return draw.SVG(f), nil
}

func figureOf(rec qa.Record, characteristic, name string) (figure.Figure, error) {
	paint, ok := figures[name]
	if !ok {
		return figure.Figure{}, fmt.Errorf("figure: found %q, want %s; choose one", name, strings.Join(FigureNames(), ", "))
	}
	for _, c := range rec.Result.Characteristics {
		if c.Name == characteristic {
			return paint(c, rec.Readings), nil
		}
	}
	return figure.Figure{}, fmt.Errorf("figure: found no characteristic %q, want one of the record; check the name", characteristic)
}
