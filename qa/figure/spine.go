package figure

import (
	"fmt"
	"math"

	"lotpair/qa"
)

// Reach is how far the spine's scale goes on either side, in margins. What lies beyond is drawn as an arrow at the edge.
const Reach = 3.7

// The size of one line of the spine, in points.
const (
	SpineWidth  = 368
	SpineHeight = 44
)

// Spine is the decision interval of one characteristic on the scale of its own margin: the posts stand at −1 and +1 (at the
// bounds over the larger of them where the bounds are unlike), zero in the middle. A one-sided objective has one post, and
// the whole permitted side is in the band. The interval is the one the verdict rests on.
func Spine(c qa.Comparison) Figure { return SpineAt(c, SpineWidth) }

// SpineMinWidth is the narrowest line of the spine that can still be read.
const SpineMinWidth = 120

// SpineAt is Spine at another width; less than the smallest is raised to it.
func SpineAt(c qa.Comparison, width float64) Figure {
	return newSpine(c, math.Max(width, SpineMinWidth), SpineHeight).Figure
}

// newSpine draws one line of the spine.
func newSpine(c qa.Comparison, width, height float64) spine {
	s := spine{Figure: Figure{Width: width, Height: height, Title: c.Name + ": " + string(c.Verdict)}}
	d := decision(c)
	s.unit = d.unit()
	s.margin(c, d)
	s.add(Mark{Kind: Line, Name: "zero", Role: Muted, X: s.x(0), Y: 0, X2: s.x(0), Y2: height, Size: 0.7, Dashed: true})
	s.interval(d.low, d.high)
	if d.estimate != nil && math.Abs(*d.estimate/s.unit) <= Reach {
		s.add(Mark{Kind: Diamond, Name: "estimate", Role: Candidate, X: s.x(*d.estimate), Y: height / 2, Size: 4.8, Open: true})
	}
	if d.low == nil || d.high == nil {
		s.add(Mark{Kind: Label, Name: "no interval", Role: Muted, X: width / 2, Y: height/2 + math.Min(16, height/2-2), Size: 10.5, Anchor: Middle, Text: "no interval"})
	}
	return s
}

// spine is a line of the spine being drawn.
type spine struct {
	Figure
	unit float64 // how much of the characteristic's unit is 1 on the scale
}

// decided is the interval the verdict rests on, its centre and the margin, all on a scale whose zero says "alike".
type decided struct{ low, high, estimate, marginLower, marginUpper *float64 }

// decision is what a characteristic's line shows. Ratios are shown as what they are more or less than 1, and those of
// geometric means as their logarithms, so that the margin is as wide on either side as it was meant.
func decision(c qa.Comparison) decided {
	e := c.Equivalence
	if e == nil {
		return decided{c.Difference.Lower, c.Difference.Upper, c.Difference.Estimate, nil, nil}
	}
	if !c.Objective.AgainstMargin() {
		d := decided{low: c.Difference.Lower, high: c.Difference.Upper, estimate: c.Difference.Estimate}
		if e.Scale != "ratio" { // else the margin lies on another scale than the difference asked for
			d.marginLower, d.marginUpper = e.MarginLower, e.MarginUpper
		}
		return d
	}
	on := func(v *float64) *float64 { return v }
	switch {
	case e.Scale == "ratio" && c.Method == "log":
		on = func(v *float64) *float64 {
			if v == nil || !(*v > 0) {
				return nil
			}
			l := math.Log(*v)
			return &l
		}
	case e.Scale == "ratio":
		on = func(v *float64) *float64 {
			if v == nil {
				return nil
			}
			l := *v - 1
			return &l
		}
	}
	return decided{on(e.Lower), on(e.Upper), on(e.Estimate), on(e.MarginLower), on(e.MarginUpper)}
}

// unit is the larger bound of the margin; without a margin the interval fills two thirds of the line.
func (d decided) unit() float64 {
	unit := larger(d.marginLower, d.marginUpper)
	if unit == 0 {
		unit = larger(d.low, d.high) / Reach * 1.5
	}
	if !(unit > 0) || math.IsInf(unit, 0) {
		return 1
	}
	return unit
}

// larger is the larger distance from zero of two ends of which either may be missing.
func larger(a, b *float64) float64 {
	m := 0.0
	for _, p := range []*float64{a, b} {
		if p != nil {
			m = math.Max(m, math.Abs(*p))
		}
	}
	return m
}

// x is where a difference stands, held inside the line.
func (s spine) x(difference float64) float64 {
	t := math.Max(-Reach, math.Min(Reach, difference/s.unit))
	return s.Width / 2 * (1 + t/Reach)
}

func (s *spine) margin(c qa.Comparison, d decided) {
	left, right := 0.0, s.Width
	if d.marginLower != nil {
		left = s.x(*d.marginLower)
	}
	if d.marginUpper != nil {
		right = s.x(*d.marginUpper)
	}
	if d.marginLower == nil && d.marginUpper == nil {
		return
	}
	s.add(Mark{Kind: Box, Name: "margin", Role: Margin, X: left, Y: 0, X2: right, Y2: s.Height})
	post := func(name string, bound *float64) {
		if bound == nil {
			return
		}
		s.add(Mark{Kind: Line, Name: name, Role: Muted, X: s.x(*bound), Y: 0, X2: s.x(*bound), Y2: s.Height, Size: 1, Dashed: !c.Objective.AgainstMargin()})
	}
	post("lower post", d.marginLower)
	post("upper post", d.marginUpper)
}

// interval draws the interval with a cap at each end, or an arrow where an end lies beyond the scale.
func (s *spine) interval(low, high *float64) {
	if low == nil || high == nil {
		return
	}
	const (
		width, tall, arrow = 2.2, 6.0, 5.0
		stub               = 26.0 // what is drawn of an interval that lies beyond the scale altogether
	)
	middle := s.Height / 2
	a, b := s.x(*low), s.x(*high)
	beyondLeft, beyondRight := *low/s.unit < -Reach, *high/s.unit > Reach
	switch {
	case *high/s.unit < -Reach:
		b = stub
	case *low/s.unit > Reach:
		a = s.Width - stub
	}
	s.add(Mark{Kind: Line, Name: "interval", Role: Text, X: a, Y: middle, X2: b, Y2: middle, Size: width})
	end := func(name string, x, inward float64, beyond bool, shown bool) {
		switch {
		case beyond:
			s.add(Mark{Kind: Line, Name: name + " beyond", Role: Text, X: x, Y: middle, X2: x + inward*arrow, Y2: middle - arrow, Size: width},
				Mark{Kind: Line, Name: name + " beyond", Role: Text, X: x, Y: middle, X2: x + inward*arrow, Y2: middle + arrow, Size: width})
		case shown:
			s.add(Mark{Kind: Line, Name: name + " end", Role: Text, X: x, Y: middle - tall, X2: x, Y2: middle + tall, Size: width})
		}
	}
	end("lower", a, 1, beyondLeft, *low/s.unit <= Reach)
	end("upper", b, -1, beyondRight, *high/s.unit >= -Reach)
	s.Title += fmt.Sprintf("; interval %s to %s margins", qa.Fixed(*low/s.unit, 2), qa.Fixed(*high/s.unit, 2))
}
