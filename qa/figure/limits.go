package figure

import (
	"fmt"
	"math"

	"lotpair/qa"
)

// Limits is both lots between the specification limits at the usual size.
func Limits(c qa.Comparison, r qa.Readings) Figure {
	return LimitsAt(c, r, FacingWidth, FacingHeight)
}

// mostOutside bounds the readings outside the limits that are drawn one by one.
const mostOutside = 200

// LimitsAt sets each lot on one line of the characteristic's scale: its mean, the width of three standard deviations on either
// side, which is what Ppk holds against the limits, its lowest and highest reading, and every reading outside the limits. Above
// the line stand the figures. Without limits there is no such picture: the lines are drawn, the posts are not.
func LimitsAt(c qa.Comparison, r qa.Readings, width, height float64) Figure {
	l := limits{c: c, Figure: Figure{Width: math.Max(width, FacingMinWidth), Height: math.Max(height, FacingMinHeight)}}
	l.Title = c.Name + ": both lots between the specification limits, three standard deviations on either side of the mean"
	l.bottom = l.Height - foot
	l.low, l.high = l.span()
	l.sayLimits()
	l.scale()
	row := (l.bottom - head - 6) / 2
	var ref, cand qa.LotPerformance
	if p := c.Performance; p != nil {
		ref, cand = p.Reference, p.Candidate
	}
	l.lot(qa.Reference, short(r.Reference.Name, "reference"), c.Reference, ref, r.Reference.Of(c.Name).Readings, head+6, row)
	l.lot(qa.Candidate, short(r.Candidate.Name, "candidate"), c.Candidate, cand, r.Candidate.Of(c.Name).Readings, head+6+row, row)
	return l.Figure
}

// limits is the picture being drawn.
type limits struct {
	Figure
	c         qa.Comparison
	low, high float64 // values at the left and at the right
	bottom    float64
}

// x is where a value stands, held inside the picture.
func (l *limits) x(v float64) float64 {
	t := (v/4 - l.low/4) / (l.high/4 - l.low/4)
	return edge + math.Max(0, math.Min(1, t))*(l.Width-2*edge)
}

// span takes in the limits, every reading in use and three standard deviations of either lot.
func (l *limits) span() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	take := func(p *float64, by float64) {
		if p != nil && !math.IsInf(*p+by, 0) {
			low, high = math.Min(low, *p+by), math.Max(high, *p+by)
		}
	}
	for _, p := range []*float64{l.c.Limits.Lower, l.c.Limits.Upper, l.c.Limits.Target} {
		take(p, 0)
	}
	for _, s := range []qa.SampleResult{l.c.Reference, l.c.Candidate} {
		take(s.Min, 0)
		take(s.Max, 0)
		if s.SD != nil {
			take(s.Mean, 3**s.SD)
			take(s.Mean, -3**s.SD)
		}
	}
	if low > high {
		low, high = 0, 1
	}
	pad := (high - low) * 0.05
	if !(pad > 0) {
		pad = math.Max(math.Abs(low)*1e-6, 1e-9)
	}
	if math.IsInf(low-pad, 0) || math.IsInf(high+pad, 0) {
		return low, high
	}
	return low - pad, high + pad
}

// sayLimits names the limits above the posts: between them where there is room, else beside them.
func (l *limits) sayLimits() {
	lower, upper, target := l.c.Limits.Lower, l.c.Limits.Upper, l.c.Limits.Target
	label := func(name string, at *float64, inward bool, anchor Anchor) Mark {
		text := name + " " + qa.Fixed(*at, l.c.Decimals)
		by := -5.0
		if anchor == Start {
			by = 5
		}
		m := Mark{Kind: Label, Name: name + " limit label", Role: Text, X: l.x(*at) + by, Y: head - 5, Size: 11.5, Text: text, Anchor: anchor}
		wide := length([]string{text}, m.Size)
		if anchor == End && m.X < wide { // no room before the edge
			m.X, m.Anchor = l.x(*at)+5, Start
		}
		if anchor == Start && m.X > l.Width-wide {
			m.X, m.Anchor = l.x(*at)-5, End
		}
		return m
	}
	between := math.Inf(1)
	if lower != nil && upper != nil {
		between = l.x(*upper) - l.x(*lower)
	}
	inside := between > 210
	if lower != nil {
		l.add(label("lower", lower, inside, map[bool]Anchor{true: Start, false: End}[inside]))
	}
	if upper != nil {
		l.add(label("upper", upper, inside, map[bool]Anchor{true: End, false: Start}[inside]))
	}
	if target != nil && lower != nil && upper != nil && between > 380 {
		l.add(Mark{Kind: Label, Name: "target label", Role: Muted, X: l.x(*target), Y: head - 5, Size: 11.5, Text: "target " + qa.Fixed(*target, l.c.Decimals), Anchor: Middle})
	}
}

// scale draws the axis below both lots.
func (l *limits) scale() {
	y := l.bottom
	l.add(Mark{Kind: Line, Name: "axis", Role: Text, X: edge, Y: y, X2: l.Width - edge, Y2: y, Size: 1})
	at, decimals := ticks(l.low, l.high, max(2, int(l.Width/110)))
	for i, v := range at {
		text := qa.Fixed(v, decimals)
		if i == len(at)-1 && l.c.Unit != "" {
			text += " " + l.c.Unit
		}
		m := Mark{Kind: Label, Name: "tick label", Role: Muted, X: l.x(v), Y: y + 15, Size: 10.5, Anchor: Middle, Text: text}
		if half := length([]string{text}, m.Size) / 2; m.X+half > l.Width {
			m.X, m.Anchor = l.Width-2, End
		} else if m.X < half {
			m.X, m.Anchor = 2, Start
		}
		l.add(Mark{Kind: Line, Name: "tick", Role: Text, X: l.x(v), Y: y, X2: l.x(v), Y2: y + 4, Size: 1}, m)
	}
}

// lot draws one lot in a row of the given height.
func (l *limits) lot(side qa.Side, name string, s qa.SampleResult, p qa.LotPerformance, all []qa.Reading, top, row float64) {
	words := math.Min(24, row*0.32)
	middle := top + words + (row-words)/2
	tall := math.Min(16, (row-words)/2-3)
	l.add(Mark{Kind: Label, Name: string(side) + " name", Role: roleOf(side), X: edge, Y: top + words - 6, Size: 12, Bold: true, Text: name})
	l.add(Mark{Kind: Label, Name: string(side) + " figures", Role: Text, X: edge + length([]string{name}, 12.8) + 8, Y: top + words - 6, Size: 11.5, Text: l.figures(s, p)})
	for _, post := range []struct {
		name string
		at   *float64
	}{{"lower", l.c.Limits.Lower}, {"upper", l.c.Limits.Upper}} {
		if post.at != nil {
			l.add(Mark{Kind: Line, Name: post.name + " limit", Role: Text, X: l.x(*post.at), Y: middle - tall, X2: l.x(*post.at), Y2: middle + tall, Size: 1.6})
		}
	}
	if t := l.c.Limits.Target; t != nil {
		l.add(Mark{Kind: Line, Name: "target", Role: Muted, X: l.x(*t), Y: middle - tall, X2: l.x(*t), Y2: middle + tall, Size: 0.9, Dashed: true})
	}
	if s.Mean == nil {
		l.add(Mark{Kind: Label, Name: string(side) + " none", Role: Muted, X: l.Width / 2, Y: middle + 4, Size: 11, Anchor: Middle, Text: "no readings"})
		return
	}
	if s.SD != nil && *s.SD > 0 {
		a, b := l.x(*s.Mean-3**s.SD), l.x(*s.Mean+3**s.SD)
		l.add(Mark{Kind: Line, Name: string(side) + " three deviations", Role: roleOf(side), X: a, Y: middle, X2: b, Y2: middle, Size: 2.2})
		for _, x := range []float64{a, b} {
			l.add(Mark{Kind: Line, Name: string(side) + " deviation end", Role: roleOf(side), X: x, Y: middle - 6, X2: x, Y2: middle + 6, Size: 2.2})
		}
	}
	for _, end := range []*float64{s.Min, s.Max} {
		if end != nil {
			l.add(Mark{Kind: Line, Name: string(side) + " extreme", Role: Muted, X: l.x(*end), Y: middle - 9, X2: l.x(*end), Y2: middle + 9, Size: 1})
		}
	}
	l.outside(side, all, middle)
	l.add(readingMark(side, &qa.Reading{}, l.x(*s.Mean), middle, 4.6))
	mean := &l.Marks[len(l.Marks)-1]
	mean.Name, mean.Reading = string(side)+" mean", nil
}

// outside draws the readings in use that lie outside the limits.
func (l *limits) outside(side qa.Side, all []qa.Reading, y float64) {
	n := 0
	for i := range all {
		r := &all[i]
		low, high := l.c.Limits.Lower, l.c.Limits.Upper
		if !r.Used() || (low == nil || r.Value >= *low) && (high == nil || r.Value <= *high) {
			continue
		}
		if n++; n > mostOutside {
			return
		}
		m := readingMark(side, r, l.x(r.Value), y, 2.4)
		m.Name = string(side) + " outside"
		l.add(m)
	}
}

// figures are the numbers of one lot in words.
func (l *limits) figures(s qa.SampleResult, p qa.LotPerformance) string {
	if s.N == 0 {
		return ""
	}
	text := ""
	if p.Pp != nil {
		text = "Pp " + qa.Fixed(*p.Pp, 2) + "  "
	}
	if p.Ppk != nil {
		text += "Ppk " + qa.Fixed(*p.Ppk, 2) + "  "
	}
	if l.c.Performance == nil {
		return text + "no limits"
	}
	text += fmt.Sprintf("outside: %.0f of %d counted", p.OutsideCounted*float64(s.N), s.N)
	if p.OutsideEstimated != nil {
		text += ", " + qa.ShareText(*p.OutsideEstimated) + " expected"
	}
	return text
}
