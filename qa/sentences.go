package qa

import (
	"fmt"
	"math"
)

// Sentences say what was found for one characteristic, the verdict first, then what it rests on.
func Sentences(c Comparison) []string {
	s := []string{upperFirst(string(c.Verdict)) + "."}
	if t := differenceSentence(c); t != "" {
		s = append(s, t)
	}
	if t := detectableSentence(c); t != "" {
		s = append(s, t)
	}
	if t := spreadSentence(c); t != "" {
		s = append(s, t)
	}
	if t := performanceSentence(c); t != "" {
		s = append(s, t)
	}
	return s
}

// shown is a difference in the unit with two decimals more than the readings have, enough for any reader of the drawing.
func shown(c Comparison, x float64) string { return Fixed(x, c.Decimals+1) }

func differenceSentence(c Comparison) string {
	d := c.Difference
	if d.Estimate == nil {
		return "There are no readings to compare."
	}
	where := "equals the reference's"
	if *d.Estimate > 0 {
		where = "is " + unit(shown(c, *d.Estimate), c.Unit) + " above the reference's"
	} else if *d.Estimate < 0 {
		where = "is " + unit(shown(c, -*d.Estimate), c.Unit) + " below the reference's"
	}
	s := "The candidate's mean " + where
	level, low, high := d.Level, d.Lower, d.Upper
	if e := c.Equivalence; e != nil {
		level, low, high = e.Level, e.Lower, e.Upper
	}
	if low == nil || high == nil {
		return s + "; there is no interval."
	}
	s += fmt.Sprintf(" (%s interval of the difference %s).", Percent(*level, 2), unit(shown(c, *low)+" to "+shown(c, *high), c.Unit))
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		s += " " + marginSentence(c, e)
	}
	return s
}

func marginSentence(c Comparison, e *EquivalenceResult) string {
	if of := againstMargin(c.Objective, *e.Lower, *e.Upper, e.MarginLower, e.MarginUpper); c.Verdict == Undecided && of != Undecided {
		return "No verdict is given; see the findings."
	} else if of != e.Verdict {
		return "The verdict rests on the bounds of the non-detects; see the findings."
	}
	if c.Objective != Equivalence {
		side, bound := "below", MarginText(c)
		if c.Objective == NotLower {
			side = "above"
		}
		switch c.Verdict {
		case Demonstrated:
			return fmt.Sprintf("The whole interval lies %s the bound of %s.", side, bound)
		case Contradicted:
			return fmt.Sprintf("The whole interval lies beyond the bound of %s.", bound)
		}
		return fmt.Sprintf("The interval crosses the bound of %s.", bound)
	}
	switch c.Verdict {
	case Equivalent:
		return fmt.Sprintf("The whole interval lies inside the margin of %s.", MarginText(c))
	case NotEquivalent:
		return fmt.Sprintf("The whole interval lies outside the margin of %s.", MarginText(c))
	}
	return fmt.Sprintf("The interval crosses an end of the margin of %s.", MarginText(c))
}

func detectableSentence(c Comparison) string {
	d := c.Difference
	if d.PTwoSided == nil || d.DF == nil {
		return ""
	}
	word := "is detectable"
	if !c.Detectable {
		word = "is not detectable"
	}
	p := FormatP(*d.PTwoSided)
	if p[0] != '<' && p[0] != '>' {
		p = "= " + p
	}
	s := fmt.Sprintf("A difference %s: two-sided p %s, %s, %s degrees of freedom.", word, p, methodName(c.Method), Fixed(*d.DF, 1))
	if d.PHolm != nil {
		s += fmt.Sprintf(" Adjusted for the number of characteristics (Holm): p %s; the intervals are not adjusted.", FormatP(*d.PHolm))
	}
	return s
}

func spreadSentence(c Comparison) string {
	s := c.Spread
	if s == nil || s.SDRatio == nil {
		return ""
	}
	return fmt.Sprintf("It spreads %s times as wide (%s interval %s to %s).", Fixed(*s.SDRatio, 2), Percent(*s.Level, 2), Fixed(*s.Lower, 2), Fixed(*s.Upper, 2))
}

func performanceSentence(c Comparison) string {
	p := c.Performance
	if p == nil || p.Reference.Ppk == nil || p.Candidate.Ppk == nil {
		return ""
	}
	verb := "stays at"
	a, b := *p.Reference.Ppk, *p.Candidate.Ppk
	ra, rb := Fixed(a, 2), Fixed(b, 2)
	switch {
	case ra != rb && b < a:
		verb = "falls from " + ra + " to"
	case ra != rb:
		verb = "rises from " + ra + " to"
	}
	s := fmt.Sprintf("Ppk %s %s", verb, rb)
	if p.Reference.OutsideEstimated != nil && p.Candidate.OutsideEstimated != nil {
		s += fmt.Sprintf("; expected outside the limits: %s (reference %s)", ShareText(*p.Candidate.OutsideEstimated), ShareText(*p.Reference.OutsideEstimated))
	}
	return s + "."
}

// ShareText writes a fraction outside the limits as a per cent, with enough decimals to see a small one.
func ShareText(x float64) string {
	switch {
	case x < 0.000001:
		return "below 0.0001 %"
	case x < 0.0001:
		return Percent(x, 4)
	case x < 0.01:
		return Percent(x, 3)
	}
	return Percent(math.Min(x, 1), 1)
}

// Findings are what a reader must look at on one side of one characteristic: its warnings, then what is quietly well.
func Findings(c Comparison, side Side) []string {
	var out []string
	for _, w := range c.Warnings {
		if w.Side == side {
			out = append(out, w.Text)
		}
	}
	s := c.Reference
	if side == Candidate {
		s = c.Candidate
	}
	if s.Excluded > 0 {
		out = append(out, Count(s.Excluded, "reading", "readings")+" left out with a reason.")
	}
	if s.Missing > 0 {
		out = append(out, Count(s.Missing, "reading", "readings")+" missing.")
	}
	if s.Unread > 0 {
		out = append(out, Count(s.Unread, "cell", "cells")+" could not be read.")
	}
	if s.Repeats > 0 {
		out = append(out, Count(s.Repeats, "repeat reading", "repeat readings")+" averaged into the reading of its part.")
	}
	return out
}

// PartsText says how many parts a lot has and how many of its readings were left out.
func PartsText(r Readings, side Side) string {
	l := r.Reference
	if side == Candidate {
		l = r.Candidate
	}
	s := Count(l.Rows, "part", "parts")
	left := 0
	for _, x := range l.Series {
		left += x.Excluded()
	}
	if left > 0 {
		s += ", " + Count(left, "reading", "readings") + " left out"
	}
	return s
}
