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
	s := spine{Figure: Figure{Width: math.Max(width, SpineMinWidth), Height: SpineHeight, Title: c.Name + ": " + string(c.Verdict)}}
	low, high, estimate := decision(c)
	s.unit = scale(c, low, high)
	if e := c.Equivalence; e != nil {
		s.margin(c, e)
	}
	s.add(Mark{Kind: Line, Name: "zero", Role: Muted, X: s.x(0), Y: 0, X2: s.x(0), Y2: SpineHeight, Size: 0.7, Dashed: true})
	s.interval(low, high)
	if estimate != nil && math.Abs(*estimate/s.unit) <= Reach {
		s.add(Mark{Kind: Diamond, Name: "estimate", Role: Candidate, X: s.x(*estimate), Y: SpineHeight / 2, Size: 4.8, Open: true})
	}
	if low == nil || high == nil {
		s.add(Mark{Kind: Label, Name: "no interval", Role: Muted, X: s.Width / 2, Y: SpineHeight/2 + 16, Size: 10.5, Anchor: Middle, Text: "no interval"})
	}
	return s.Figure
}

// spine is a line of the spine being drawn.
type spine struct {
	Figure
	unit float64 // how much of the characteristic's unit is 1 on the scale
}

// decision is the interval the verdict rests on, and its centre.
func decision(c qa.Comparison) (low, high, estimate *float64) {
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		return e.Lower, e.Upper, e.Estimate
	}
	return c.Difference.Lower, c.Difference.Upper, c.Difference.Estimate
}

// scale is the larger bound of the margin; without a margin the interval fills two thirds of the line.
func scale(c qa.Comparison, low, high *float64) float64 {
	unit := 0.0
	if e := c.Equivalence; e != nil {
		unit = larger(e.MarginLower, e.MarginUpper)
	}
	if unit == 0 {
		unit = larger(low, high) / Reach * 1.5
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

func (s *spine) margin(c qa.Comparison, e *qa.EquivalenceResult) {
	left, right := 0.0, s.Width
	if e.MarginLower != nil {
		left = s.x(*e.MarginLower)
	}
	if e.MarginUpper != nil {
		right = s.x(*e.MarginUpper)
	}
	if e.MarginLower == nil && e.MarginUpper == nil {
		return
	}
	s.add(Mark{Kind: Box, Name: "margin", Role: Margin, X: left, Y: 0, X2: right, Y2: SpineHeight})
	post := func(name string, bound *float64) {
		if bound == nil {
			return
		}
		s.add(Mark{Kind: Line, Name: name, Role: Muted, X: s.x(*bound), Y: 0, X2: s.x(*bound), Y2: SpineHeight, Size: 1, Dashed: !c.Objective.AgainstMargin()})
	}
	post("lower post", e.MarginLower)
	post("upper post", e.MarginUpper)
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
	middle := float64(SpineHeight) / 2
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
