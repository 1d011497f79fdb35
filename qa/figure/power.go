package figure

import (
	"math"

	"lotpair/qa"
)

// Curve is how likely a study of so many parts a lot shows what is asked, along the true difference.
type Curve struct {
	N      int
	Main   bool // drawn strongly and named in full
	Fewer  bool // of fewer parts than the main one: dashed
	Powers []float64
}

// PowerCurves are the curves of one characteristic and what they stand on. The powers of a curve lie at even steps from Low to
// High.
type PowerCurves struct {
	Name, Unit   string
	Low, High    float64  // true differences at the left and at the right
	Lower, Upper *float64 // the margin; nil where it has no such end
	Curves       []Curve
}

// Power is the power curves at the usual size.
func Power(c PowerCurves) Figure { return PowerAt(c, FacingWidth, FacingHeight) }

// PowerAt draws how likely the study shows what is asked, between 0 and 1, along the true difference of the means; the margin
// is a band.
func PowerAt(c PowerCurves, width, height float64) Figure {
	const left, right, top, bottom = 60, 24, 12, 46
	f := Figure{Width: math.Max(width, FacingMinWidth), Height: math.Max(height, FacingMinHeight), Title: c.Name + ": how likely the study shows it, along the true difference of the means"}
	x0, x1, y0, y1 := float64(left), f.Width-right, f.Height-bottom, float64(top)
	if !(c.High > c.Low) || math.IsInf(c.High-c.Low, 0) {
		return f
	}
	x := func(v float64) float64 {
		return x0 + math.Max(0, math.Min(1, (v-c.Low)/(c.High-c.Low)))*(x1-x0)
	}
	y := func(p float64) float64 { return y0 - math.Max(0, math.Min(1, p))*(y0-y1) }
	from, to := x0, x1
	if c.Lower != nil {
		from = x(*c.Lower)
	}
	if c.Upper != nil {
		to = x(*c.Upper)
	}
	f.add(Mark{Kind: Box, Name: "margin", Role: Margin, X: from, Y: y1, X2: to, Y2: y0})
	for _, p := range []float64{0, 0.25, 0.5, 0.75, 1} {
		f.add(Mark{Kind: Line, Name: "level", Role: Rule, X: x0, Y: y(p), X2: x1, Y2: y(p), Size: 0.7},
			Mark{Kind: Line, Name: "tick", Role: Text, X: x0 - 5, Y: y(p), X2: x0, Y2: y(p), Size: 1},
			Mark{Kind: Label, Name: "level label", Role: Muted, X: x0 - 9, Y: y(p) + 4, Size: 11.5, Anchor: End, Text: qa.Plain(p)})
	}
	f.add(Mark{Kind: Line, Name: "axis", Role: Text, X: x0, Y: y1, X2: x0, Y2: y0, Size: 1.2},
		Mark{Kind: Line, Name: "axis", Role: Text, X: x0, Y: y0, X2: x1, Y2: y0, Size: 1.2})
	label := func(v float64, name, text string) {
		f.add(Mark{Kind: Label, Name: name, Role: Muted, X: x(v), Y: y0 + 17, Size: 11.5, Anchor: Middle, Text: text})
	}
	for _, end := range []*float64{c.Lower, c.Upper} {
		if end != nil {
			f.add(Mark{Kind: Line, Name: "post", Role: Muted, X: x(*end), Y: y1, X2: x(*end), Y2: y0, Size: 1})
			text := qa.Plain(rounded(*end))
			if *end > 0 {
				text = "+" + text
				if c.Unit != "" {
					text += " " + c.Unit
				}
			}
			label(*end, "post label", text)
		}
	}
	if c.Low < 0 && c.High > 0 {
		label(0, "zero label", "0")
	}
	f.add(Mark{Kind: Label, Name: "title", Role: Text, X: (x0 + x1) / 2, Y: f.Height - 8, Size: 12, Anchor: Middle, Text: "true difference of the means"})
	for _, k := range c.Curves {
		f.curve(k, x0, x1, y)
	}
	f.curveLabels(c.Curves, x0, x1, y)
	return f
}

// rounded takes away what binary arithmetic adds to a decimal number.
func rounded(v float64) float64 {
	p := math.Pow(10, 11-math.Floor(math.Log10(math.Max(math.Abs(v), 1e-300))))
	if r := math.Round(v*p) / p; !math.IsNaN(r) && !math.IsInf(r, 0) {
		return r
	}
	return v
}

// curve draws one curve as short lines; one of fewer parts with gaps.
func (f *Figure) curve(k Curve, x0, x1 float64, y func(float64) float64) {
	n := len(k.Powers)
	if n < 2 {
		return
	}
	m := Mark{Kind: Line, Name: "curve", Role: Muted, Size: 1.2}
	if k.Main {
		m.Role, m.Size = Text, 2.2
	}
	at := func(i int) float64 { return x0 + (x1-x0)*float64(i)/float64(n-1) }
	for i := 1; i < n; i++ {
		if k.Fewer && i%3 == 0 {
			continue
		}
		m.X, m.Y, m.X2, m.Y2 = at(i-1), y(k.Powers[i-1]), at(i), y(k.Powers[i])
		f.add(m)
	}
}

// curveLabels names the curves at their highest point, below the curve where there is room, and apart from each other.
func (f *Figure) curveLabels(all []Curve, x0, x1 float64, y func(float64) float64) {
	var labels []Mark
	for _, k := range all {
		best := 0
		for i, p := range k.Powers {
			if p > k.Powers[best] {
				best = i
			}
		}
		if len(k.Powers) < 2 {
			continue
		}
		text := qa.Count(k.N, "a lot", "a lot")
		if !k.Main {
			text = qa.Plain(float64(k.N))
		}
		px := x0 + (x1-x0)*float64(best)/float64(len(k.Powers)-1)
		m := Mark{Kind: Label, Name: "curve label", Role: Text, X: px, Y: y(k.Powers[best]) + 17, Size: 12, Anchor: Middle, Bold: k.Main, Text: text}
		if !k.Main {
			m.Role = Muted
		}
		if !k.Main && !k.Fewer { // on the right shoulder, where the main curve lies below
			i := best
			for i < len(k.Powers)-1 && k.Powers[i] > 0.82*k.Powers[best] {
				i++
			}
			m.X, m.Y, m.Anchor = x0+(x1-x0)*float64(i)/float64(len(k.Powers)-1)+8, y(k.Powers[i])+2, Start
			f.add(m)
			continue
		}
		labels = append(labels, m)
	}
	f.add(apart(labels, 0, y(0)-4)...)
}
