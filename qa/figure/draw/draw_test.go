package draw_test

import (
	"bytes"
	"flag"
	"fmt"
	"image/color"
	"math"
	"os"
	"path/filepath"
	"testing"

	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

var update = flag.Bool("update", false, "write the golden files anew")

func ptr(v float64) *float64 { return &v }

func example(t testing.TB) (qa.Comparison, qa.Readings) {
	t.Helper()
	lot := func(name string, n int, centre float64) qa.Lot {
		s := qa.Series{Characteristic: "Wall thickness", Rows: n}
		for i := range n {
			_, u := math.Modf(float64(i+1) * 0.6180339887498949)
			v := math.Round((centre+0.04*(2*u-1)*math.Abs(2*u-1))*1000) / 1000
			r := qa.Reading{Value: v, Decimals: 3, Source: qa.Source{File: "wall.csv", Cell: fmt.Sprintf("D%d", i+2)}}
			if i == 6 && name == "R-118" {
				r.LeftOut = "dropped part, NCR-77"
			}
			s.Readings = append(s.Readings, r)
		}
		return qa.Lot{Name: name, Rows: n, Series: []qa.Series{s}}
	}
	ch := qa.Characteristic{Name: "Wall thickness", Unit: "mm", Lower: ptr(3.9), Upper: ptr(4.1), Margin: &qa.Margin{ToleranceFraction: ptr(0.1)}}
	r := qa.Readings{Reference: lot("R-118", 40, 4.004), Candidate: lot("C-022", 38, 3.942), Characteristics: []qa.Characteristic{ch}}
	res, err := qa.Compare(qa.Plan{}, r, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return res.Characteristics[0], r
}

func TestSVG(t *testing.T) {
	c, r := example(t)
	oneSided := qa.Comparison{
		Name: "Run-out <max>", Objective: qa.NotHigher, Verdict: qa.Undecided,
		Equivalence: &qa.EquivalenceResult{MarginUpper: ptr(0.008), Lower: ptr(0.003), Upper: ptr(0.5), Estimate: ptr(0.02)},
	}
	for name, f := range map[string]figure.Figure{"facing": figure.Facing(c, r), "order": figure.Order(c, r), "shape": figure.Shape(c, r), "limits": figure.Limits(c, r), "sensitivity": figure.Sensitivity(c), "spine": figure.Spine(c), "one-sided": figure.Spine(oneSided)} {
		got, path := draw.SVG(f), filepath.Join("testdata", name+".svg")
		if *update {
			if err := os.WriteFile(path, got, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, want) {
			t.Errorf("%s: got another picture than %s; look at it, then run with -update", name, path)
		}
	}
}

// TestMinusIsSeen draws a minus sign: it must leave a stroke at its height, not the box of a letter the font lacks.
func TestMinusIsSeen(t *testing.T) {
	at := probe(t, figure.Mark{Kind: figure.Label, X: 10, Y: 30, Size: 20, Text: "−"})
	inked := func(x, y float64) bool { return at(x, y) != draw.Light().Paper }
	high, low := false, false
	for y := 10.0; y < 32; y += 0.25 {
		for x := 8.0; x < 30; x += 0.25 {
			if inked(x, y) {
				high, low = high || y < 19, low || y > 28
			}
		}
	}
	if high || low {
		t.Error("minus: got a letter as high as a capital, want one stroke")
	}
}

// probe is a picture of one mark on paper at four pixels a point.
func probe(t *testing.T, m figure.Mark) func(x, y float64) color.NRGBA {
	t.Helper()
	img, err := draw.Image(figure.Figure{Width: 40, Height: 40, Marks: []figure.Mark{m}}, 4, draw.Light())
	if err != nil {
		t.Fatal(err)
	}
	return func(x, y float64) color.NRGBA { return img.NRGBAAt(int(x*4), int(y*4)) }
}

func TestPixels(t *testing.T) {
	p := draw.Light()
	for _, c := range []struct {
		name string
		mark figure.Mark
		x, y float64
		want color.NRGBA
	}{
		{"line on", figure.Mark{Kind: figure.Line, Role: figure.Text, X: 5, Y: 20, X2: 35, Y2: 20, Size: 2}, 20, 20.2, p.Text},
		{"line beside", figure.Mark{Kind: figure.Line, Role: figure.Text, X: 5, Y: 20, X2: 35, Y2: 20, Size: 2}, 20, 22, p.Paper},
		{"line past its end", figure.Mark{Kind: figure.Line, Role: figure.Text, X: 5, Y: 20, X2: 35, Y2: 20, Size: 2}, 36, 20, p.Paper},
		{"box in", figure.Mark{Kind: figure.Box, Role: figure.Margin, X: 10, Y: 10, X2: 30, Y2: 30}, 11, 29, p.Margin},
		{"box out", figure.Mark{Kind: figure.Box, Role: figure.Margin, X: 10, Y: 10, X2: 30, Y2: 30}, 9, 20, p.Paper},
		{"dot in", figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: 20, Y: 20, Size: 8}, 20, 27, p.Reference},
		{"dot corner", figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: 20, Y: 20, Size: 8}, 27, 27, p.Paper},
		{"open diamond centre", figure.Mark{Kind: figure.Diamond, Role: figure.Candidate, X: 20, Y: 20, Size: 10, Open: true}, 20, 20, p.Paper},
		{"open diamond edge", figure.Mark{Kind: figure.Diamond, Role: figure.Candidate, X: 20, Y: 20, Size: 10, Open: true}, 25, 25, p.Candidate},
		{"open dot edge", figure.Mark{Kind: figure.Dot, Role: figure.Muted, X: 20, Y: 20, Size: 10, Open: true}, 30, 20, p.Muted},
		{"dash", figure.Mark{Kind: figure.Line, Role: figure.Text, X: 0, Y: 20, X2: 40, Y2: 20, Size: 2, Dashed: true}, 1, 20, p.Text},
		{"between dashes", figure.Mark{Kind: figure.Line, Role: figure.Text, X: 0, Y: 20, X2: 40, Y2: 20, Size: 2, Dashed: true}, 3.5, 20, p.Paper},
		{"partly outside", figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: 0, Y: 0, Size: 8}, 2, 2, p.Reference},
		{"not finite", figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: math.NaN(), Y: 20, Size: 8}, 20, 20, p.Paper},
		{"far outside", figure.Mark{Kind: figure.Dot, Role: figure.Reference, X: 1e300, Y: 20, Size: 8}, 20, 20, p.Paper},
	} {
		if got := probe(t, c.mark)(c.x, c.y); got != c.want {
			t.Errorf("%s: got %v at %v, %v, want %v", c.name, got, c.x, c.y, c.want)
		}
	}
}

func TestLabelsAnchor(t *testing.T) {
	for anchor, want := range map[figure.Anchor][2]float64{figure.Start: {20, 40}, figure.Middle: {6, 34}, figure.End: {0, 20}} {
		at := probe(t, figure.Mark{Kind: figure.Label, Role: figure.Text, X: 20, Y: 30, Size: 12, Anchor: anchor, Text: "HHH"})
		for x := 0.0; x < 40; x += 0.25 {
			if at(x, 27) != draw.Light().Paper && (x < want[0]-1 || x > want[1]) {
				t.Errorf("%s: got ink at %v, want it within %v", anchor, x, want)
				break
			}
		}
	}
}

func TestEveryRoleIsSeenOnPaper(t *testing.T) {
	for name, p := range map[string]draw.Palette{"light": draw.Light(), "dark": draw.Dark()} {
		for _, c := range []struct {
			role   string
			on, of color.NRGBA
			want   float64
		}{
			{"text", p.Paper, p.Text, 7},
			{"muted", p.Paper, p.MutedText, 4.5},
			{"reference", p.Paper, p.ReferenceText, 4.5},
			{"candidate", p.Paper, p.CandidateText, 4.5},
			{"text on the margin", p.Margin, p.Text, 7},
			{"muted on the margin", p.Margin, p.MutedText, 4.5},
			{"reference on the margin", p.Margin, p.ReferenceText, 4.5},
			{"candidate on the margin", p.Margin, p.CandidateText, 4.5},
			{"reference mark", p.Margin, p.Reference, 3},
			{"candidate mark", p.Margin, p.Candidate, 3},
			{"post", p.Paper, p.Muted, 3},
		} {
			if got := contrast(c.on, c.of); got < c.want {
				t.Errorf("%s, %s: got contrast %.2f, want at least %v", name, c.role, got, c.want)
			}
		}
	}
}

// contrast is the contrast ratio of WCAG 2.1.
func contrast(a, b color.NRGBA) float64 {
	l := func(c color.NRGBA) float64 {
		f := func(v uint8) float64 {
			x := float64(v) / 255
			if x <= 0.03928 {
				return x / 12.92
			}
			return math.Pow((x+0.055)/1.055, 2.4)
		}
		return 0.2126*f(c.R) + 0.7152*f(c.G) + 0.0722*f(c.B)
	}
	x, y := l(a), l(b)
	return (math.Max(x, y) + 0.05) / (math.Min(x, y) + 0.05)
}

func TestTheSameFigureGivesTheSameBytes(t *testing.T) {
	c, r := example(t)
	a, err := draw.PNG(figure.Facing(c, r), 2, draw.Light())
	if err != nil {
		t.Fatal(err)
	}
	b, err := draw.PNG(figure.Facing(c, r), 2, draw.Light())
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(a, b) {
		t.Error("PNG: got two different files of one figure")
	}
}

func TestImageRefusesSizes(t *testing.T) {
	for _, f := range []figure.Figure{{}, {Width: -1, Height: 5}, {Width: 1e9, Height: 1e9}, {Width: math.NaN(), Height: 5}} {
		if _, err := draw.Image(f, 1, draw.Light()); err == nil {
			t.Errorf("%v by %v: got a picture, want an error", f.Width, f.Height)
		}
	}
}

func BenchmarkImage(b *testing.B) {
	c, r := example(b)
	f := figure.Facing(c, r)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := draw.Image(f, 1, draw.Light()); err != nil {
			b.Fatal(err)
		}
	}
}
