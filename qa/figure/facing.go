package figure

import (
	"fmt"
	"math"

	"lotpair/qa"
)

// The usual size of the facing plot, in points, and the smallest at which its labels still have room.
const (
	FacingWidth, FacingHeight       = 560, 260
	FacingMinWidth, FacingMinHeight = 360, 160
)

// Layout of the facing plot, in points.
const (
	foot    = 24.0 // below the plot: names of the lots
	head    = 18.0 // above the plot: what is not in the picture
	edge    = 6.0  // left of the plot
	gap     = 14.0 // between the axis and the first dot
	leading = 13.0 // between the baselines of two labels
)

// Facing is the facing plot at its usual size.
func Facing(c qa.Comparison, r qa.Readings) Figure {
	return FacingAt(c, r, FacingWidth, FacingHeight)
}

// FacingAt sets the readings of both lots back to back about one axis of values, the reference to the left: a mark a
// reading, stacked outward where readings are alike, or bars of counts where a mark each has no room. Limits run across
// both sides, the margin is a band about the reference's mean, each mean is a line. Sizes below the smallest are raised.
func FacingAt(c qa.Comparison, r qa.Readings, width, height float64) Figure {
	ref, cand := points(r.Reference.Of(c.Name)), points(r.Candidate.Of(c.Name))
	byValue(ref)
	byValue(cand)
	f := newFacing(c, ref, cand, width, height, foot)
	f.Title = fmt.Sprintf("%s: readings of both lots back to back, %d reference, %d candidate", c.Name, c.Reference.N, c.Candidate.N)
	reach := f.stacks(ref, cand)
	f.mean(qa.Reference, c.Reference.Mean, reach[0])
	f.mean(qa.Candidate, c.Candidate.Mean, reach[1])
	f.sayMargin(reach[1])
	f.place()
	f.names(r)
	return f.Figure
}

// newFacing is the plot with its scale, its margin and its limits, before any reading is in it. below is kept free under it.
func newFacing(c qa.Comparison, ref, cand []point, width, height, below float64) *facing {
	f := &facing{c: c, Figure: Figure{Width: math.Max(width, FacingMinWidth), Height: math.Max(height, FacingMinHeight)}}
	f.bottom = f.Height - below
	f.low, f.high = f.span(ref, cand)
	f.tickAt, f.tickText = f.ticks()
	f.right = f.Width - 8 - length(f.tickText, 10.5)
	f.axis = math.Round((edge + f.right) / 2)
	f.words = length([]string{f.limitText("lower", c.Limits.Lower), f.limitText("upper", c.Limits.Upper), f.meanText(c.Reference.Mean), f.meanText(c.Candidate.Mean)}, 11.5) + 14 // and what stands between line and label
	f.band()
	f.limit("lower", c.Limits.Lower)
	f.limit("upper", c.Limits.Upper)
	f.scale()
	return f
}

// facing is the plot being drawn.
type facing struct {
	Figure
	c                   qa.Comparison
	low, high           float64 // values at the bottom and at the top
	axis, right, bottom float64
	words               float64 // kept free on either side, inside the plot, for the labels of limits and means
	tickAt              []float64
	tickText            []string
	left                []Mark // labels that wait for their place, left of the axis
	rights              []Mark // and right of it
	note                string // what is not in the picture
}

// y is where a value stands; it may lie outside the plot.
func (f *facing) y(value float64) float64 {
	// Quarters, because the span of the largest numbers is larger than any number.
	return f.bottom - (value/4-f.low/4)/(f.high/4-f.low/4)*(f.bottom-head)
}

// inside says whether a value is in the picture.
func (f *facing) inside(value float64) bool { return value >= f.low && value <= f.high }

// far is how many times the span of the readings the picture may grow to take in a limit or the margin. Beyond that the
// readings would be squeezed into a line; the limit is then named at the edge.
const far = 5

// span is the range of values in the picture: the readings in use, then margin and limits as far as they are near.
func (f *facing) span(ref, cand []point) (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, s := range [][]point{ref, cand} {
		for _, p := range s {
			if !p.leftOut() {
				low, high = math.Min(low, p.Value), math.Max(high, p.Value)
			}
		}
	}
	if low > high {
		low, high = f.withoutReadings()
	}
	if !(high > low) {
		pad := math.Max(math.Abs(low)*1e-6, 1e-9)
		if e := f.c.Equivalence; e != nil {
			pad = math.Max(pad, larger(e.MarginLower, e.MarginUpper))
		}
		low, high = math.Max(low-pad, -math.MaxFloat64), math.Min(high+pad, math.MaxFloat64)
	}
	most := (high - low) * far
	take := func(v float64) {
		if l, h := math.Min(low, v), math.Max(high, v); h-l <= most {
			low, high = l, h
		}
	}
	if e, m := f.c.Equivalence, f.c.Reference.Mean; e != nil && m != nil {
		for _, b := range []*float64{e.MarginLower, e.MarginUpper} {
			if b != nil {
				take(*m + *b)
			}
		}
	}
	for _, l := range []*float64{f.c.Limits.Lower, f.c.Limits.Upper} {
		if l != nil {
			take(*l)
		}
	}
	if pad := (high - low) * 0.07; !math.IsInf(low-pad, 0) && !math.IsInf(high+pad, 0) {
		return low - pad, high + pad
	}
	return low, high
}

// withoutReadings is the range of a plot that has no readings: its limits, or 0 to 1.
func (f *facing) withoutReadings() (low, high float64) {
	l, u := f.c.Limits.Lower, f.c.Limits.Upper
	switch {
	case l != nil && u != nil && *l < *u:
		return *l, *u
	case l != nil:
		return *l, *l
	case u != nil:
		return *u, *u
	}
	return 0, 1
}

// band is the margin about the reference's mean; a side that is not asked is permitted to the edge of the picture.
func (f *facing) band() {
	e, m := f.c.Equivalence, f.c.Reference.Mean
	if e == nil || m == nil || e.MarginLower == nil && e.MarginUpper == nil {
		return
	}
	top, bottom := head, f.bottom
	if e.MarginUpper != nil {
		top = f.clamp(f.y(*m + *e.MarginUpper))
	}
	if e.MarginLower != nil {
		bottom = f.clamp(f.y(*m + *e.MarginLower))
	}
	f.add(Mark{Kind: Box, Name: "margin", Role: Margin, X: edge, Y: top, X2: f.right, Y2: bottom})
}

// sayMargin names the band outside its upper edge, in full where no reading and no mean stands there.
func (f *facing) sayMargin(reach float64) {
	const long, length = "margin about the reference mean", 176
	b, ok := f.Find("margin")
	if !ok {
		return
	}
	l := Mark{Kind: Label, Name: "margin label", Role: Muted, X: f.right - 3, Y: b.Y - 4, Size: 11, Anchor: End, Text: long}
	if f.c.Equivalence.MarginUpper == nil {
		l.Y = b.Y2 + 12
	}
	m, ok := f.Find("candidate mean")
	if f.axis+gap+reach > l.X-length || ok && math.Abs(m.Y-l.Y+4) < 12 {
		l.Text = "margin"
	}
	f.rights = append(f.rights, l)
}

func (f *facing) clamp(y float64) float64 { return math.Max(head, math.Min(f.bottom, y)) }

// limit draws a specification limit across both sides, or names it at the edge beyond which it lies.
func (f *facing) limit(name string, at *float64) {
	if at == nil {
		return
	}
	text, y := f.limitText(name, at), f.y(*at)
	if !f.inside(*at) {
		f.note = joined(f.note, text+" lies outside the picture")
		return
	}
	f.add(Mark{Kind: Line, Name: name + " limit", Role: Text, X: edge, Y: y, X2: f.right, Y2: y, Size: 1.2})
	f.left = append(f.left, Mark{Kind: Label, Name: name + " limit label", Role: Text, X: edge, Y: y - 4, Size: 11.5, Text: text})
}

// ticks are the round values of the axis and their labels, the unit beside the highest.
func (f *facing) ticks() (at []float64, text []string) {
	at, decimals := ticks(f.low, f.high, max(3, int((f.bottom-head)/44)))
	for _, v := range at {
		text = append(text, qa.Fixed(v, decimals))
	}
	if n := len(text); n > 0 && f.c.Unit != "" {
		text[n-1] += " " + f.c.Unit
	}
	return at, text
}

func (f *facing) limitText(name string, at *float64) string {
	if at == nil {
		return ""
	}
	return name + " " + qa.Fixed(*at, f.c.Decimals)
}

func (f *facing) meanText(mean *float64) string {
	if mean == nil {
		return ""
	}
	return "mean " + qa.Fixed(*mean, f.c.Decimals+1)
}

// length is room enough for the longest of the texts at the height of font, between 48 and 140 points: figures are a little
// wider than half their height in the painter's font.
func length(texts []string, size float64) float64 {
	most := 0
	for _, t := range texts {
		most = max(most, len([]rune(t)))
	}
	return math.Max(48, math.Min(140, 0.58*size*float64(most)+6))
}

func joined(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// scale draws the axis and its ticks, labelled in the gutter so that no reading is covered.
func (f *facing) scale() {
	f.add(Mark{Kind: Line, Name: "axis", Role: Text, X: f.axis, Y: head, X2: f.axis, Y2: f.bottom, Size: 1})
	for i, v := range f.tickAt {
		y, text := f.y(v), f.tickText[i]
		f.add(Mark{Kind: Line, Name: "tick", Role: Text, X: f.axis - 3, Y: y, X2: f.axis + 3, Y2: y, Size: 1},
			Mark{Kind: Line, Name: "tick", Role: Rule, X: f.right, Y: y, X2: f.right + 4, Y2: y, Size: 1},
			Mark{Kind: Label, Name: "tick label", Role: Muted, X: f.right + 8, Y: y + 4, Size: 10.5, Text: text})
	}
}

// mean draws a lot's mean from the axis outward past its readings.
func (f *facing) mean(side qa.Side, mean *float64, reach float64) {
	if mean == nil || !f.inside(*mean) {
		return
	}
	y := f.y(*mean)
	out := gap + math.Max(reach+8, math.Min(110, f.axis-edge-f.words-gap))
	text := f.meanText(mean)
	m := Mark{Kind: Line, Name: string(side) + " mean", Y: y, Y2: y, Size: 2}
	l := Mark{Kind: Label, Name: string(side) + " mean label", Y: y + 4, Size: 11.5, Text: text}
	if side == qa.Reference {
		m.Role, m.X, m.X2 = Reference, f.axis-out, f.axis-6
		l.Role, l.X, l.Anchor = Reference, f.axis-out-5, End
		f.left = append(f.left, l)
	} else {
		m.Role, m.X, m.X2 = Candidate, f.axis+6, f.axis+out
		l.Role, l.X, l.Anchor = Candidate, f.axis+out+5, Start
		f.rights = append(f.rights, l)
	}
	f.add(m)
}

// names sets the lots' names below the plot, and what the picture leaves out.
func (f *facing) names(r qa.Readings) {
	y := f.Height - 6
	f.add(Mark{Kind: Label, Name: "reference name", Role: Reference, X: f.axis - 12, Y: y, Size: 12, Anchor: End, Bold: true, Text: short(r.Reference.Name, "reference")},
		Mark{Kind: Label, Name: "candidate name", Role: Candidate, X: f.axis + 12, Y: y, Size: 12, Bold: true, Text: short(r.Candidate.Name, "candidate")})
	if f.note != "" {
		f.add(Mark{Kind: Label, Name: "note", Role: Muted, X: f.axis, Y: head - 8, Size: 10, Anchor: Middle, Text: f.note})
	}
}

// short cuts a name to what has room below the plot.
func short(name, otherwise string) string {
	if name == "" {
		return otherwise
	}
	const most = 24
	if r := []rune(name); len(r) > most {
		return string(r[:most-1]) + "…"
	}
	return name
}
