package chart_test

import (
	"image/color"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/chart"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// half is a picture whose right half is the margin's colour.
func half(width, height float64) figure.Figure {
	return figure.Figure{Width: width, Height: height, Marks: []figure.Mark{{Kind: figure.Box, Role: figure.Margin, X: width / 2, Y: 0, X2: width, Y2: height}}}
}

func TestDrawingIsSharpAtEveryScale(t *testing.T) {
	test.NewTempApp(t)
	p := draw.Light()
	for _, scale := range []float32{1, 1.5, 2} {
		d := chart.New(half, p)
		w := test.NewTempWindow(t, d)
		w.SetPadded(false)
		w.Canvas().(test.WindowlessCanvas).SetScale(scale)
		w.Resize(fyne.NewSize(100, 40))
		img := w.Canvas().Capture()
		if got, want := img.Bounds().Dx(), int(100*scale); got != want {
			t.Fatalf("scale %v: got %d pixels, want %d", scale, got, want)
		}
		edge := int(50 * scale)
		for x, want := range map[int]color.Color{edge - 1: p.Paper, edge: p.Margin} {
			if got := color.NRGBAModel.Convert(img.At(x, 10)); got != want {
				t.Errorf("scale %v, pixel %d: got %v, want %v", scale, x, got, want)
			}
		}
	}
}

func TestDrawingFollowsItsSize(t *testing.T) {
	test.NewTempApp(t)
	d := chart.New(half, draw.Light())
	d.Resize(fyne.NewSize(300, 80))
	if f := d.Figure(); f.Width != 300 || f.Height != 80 {
		t.Errorf("figure: got %v by %v, want 300 by 80", f.Width, f.Height)
	}
	d.SetPicture(nil, draw.Dark())
	if f := d.Figure(); len(f.Marks) != 0 {
		t.Errorf("no picture: got %d marks, want none", len(f.Marks))
	}
	// A figure that insists on a larger size is made smaller as a whole, and nothing fails.
	d.SetPicture(func(float64, float64) figure.Figure { return half(1000, 900) }, draw.Light())
	w := test.NewTempWindow(t, d)
	w.Resize(fyne.NewSize(50, 50))
	w.Canvas().Capture()
}
