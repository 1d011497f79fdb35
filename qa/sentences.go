package qa

import (
	"fmt"
	"math"
	"strings"
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
	if t := newStudySentence(c); t != "" {
		s = append(s, t)
	}
	if t := performanceSentence(c); t != "" {
		s = append(s, t)
	}
	if t := sensitivitySentence(c); t != "" {
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
	if c.Kind == "attribute" {
		return fractionSentence(c)
	}
	where := "equals the reference's"
	if *d.Estimate > 0 {
		where = "is " + unit(shown(c, *d.Estimate), c.Unit) + " above the reference's"
	} else if *d.Estimate < 0 {
		where = "is " + unit(shown(c, -*d.Estimate), c.Unit) + " below the reference's"
	}
	s := "The candidate's mean " + where
	e := c.Equivalence
	if e != nil && e.Scale != scaleDifference {
		return s + ". " + otherScaleSentence(c, e)
	}
	level, low, high := d.Level, d.Lower, d.Upper
	if e != nil {
		level, low, high = e.Level, e.Lower, e.Upper
	}
	if low == nil || high == nil {
		return s + "; there is no interval."
	}
	s += fmt.Sprintf(" (%s interval of the difference %s).", Percent(*level, 2), unit(shown(c, *low)+" to "+shown(c, *high), c.Unit))
	if e != nil && c.Objective.AgainstMargin() {
		s += " " + marginSentence(c, e)
	}
	return s
}

// otherScaleSentence says what was held against a margin that is a ratio, or a shift from a stated mean.
func otherScaleSentence(c Comparison, e *EquivalenceResult) string {
	what := "The ratio of the means, candidate over reference,"
	show := func(x float64) string { return Fixed(x, 4) }
	switch {
	case e.Scale == scaleShift:
		what = "The candidate's mean less the stated mean"
		show = func(x float64) string { return unit(shown(c, x), c.Unit) }
	case c.Method == "log":
		what = "The ratio of the geometric means, candidate over reference,"
	}
	if e.Estimate == nil || e.Lower == nil || e.Upper == nil {
		return what + " has no interval."
	}
	return fmt.Sprintf("%s is %s (%s interval %s to %s). %s", what, show(*e.Estimate), Percent(*e.Level, 2), show(*e.Lower), show(*e.Upper), marginSentence(c, e))
}

// fractionSentence says the fractions of failed parts.
func fractionSentence(c Comparison) string {
	x, y := c.Reference, c.Candidate
	s := fmt.Sprintf("Of the candidate %d of %d parts failed, of the reference %d of %d", *y.Failed, y.N, *x.Failed, x.N)
	level, low, high := c.Difference.Level, c.Difference.Lower, c.Difference.Upper
	e := c.Equivalence
	if e != nil {
		level, low, high = e.Level, e.Lower, e.Upper
	}
	if low == nil || high == nil {
		return s + "; there is no interval."
	}
	s += fmt.Sprintf(" (%s interval of the difference %s to %s).", Percent(*level, 2), minus(Percent(*low, 2)), minus(Percent(*high, 2)))
	if e != nil && c.Objective.AgainstMargin() {
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
	if e.Verdict != c.Verdict {
		return "The mean alone is " + string(e.Verdict) + "; the verdict rests on the spread as well."
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
	if d.PTwoSided == nil || d.DF == nil && c.Kind != "attribute" {
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
	s := fmt.Sprintf("A difference %s: two-sided p %s, %s.", word, p, methodWords(c))
	if d.PHolm != nil {
		s += fmt.Sprintf(" Adjusted for the number of characteristics (Holm): p %s; the intervals are not adjusted.", FormatP(*d.PHolm))
	}
	return s
}

// methodWords names the method behind the difference and its degrees of freedom.
func methodWords(c Comparison) string {
	if c.Kind == "attribute" {
		return "score method of Miettinen and Nurminen"
	}
	name := methodName(c.Method)
	if c.Method == "log" {
		name = "Welch on the readings"
	}
	if c.Groups != nil {
		name += " on the means of the groups"
	}
	return name + ", " + Fixed(*c.Difference.DF, 1) + " degrees of freedom"
}

func spreadSentence(c Comparison) string {
	s := c.Spread
	if s == nil || s.SDRatio == nil {
		return ""
	}
	level, low, high := *s.Level, *s.Lower, *s.Upper
	if b := s.Bonett; b != nil && s.Asked != nil {
		level, low, high = b.Level, b.Lower, b.Upper
	}
	t := fmt.Sprintf("It spreads %s times as wide (%s interval %s to %s", Fixed(*s.SDRatio, 2), Percent(level, 2), Fixed(low, 2), Fixed(high, 2))
	if asked := spreadAskedText(s); asked != "" {
		t += "; " + asked
	}
	return t + ")."
}

// newStudySentence says what a new study would take, and that it is a new one.
func newStudySentence(c Comparison) string {
	n := c.NewStudy
	if n == nil || n.AtZero == nil && n.AtEstimate == nil {
		return ""
	}
	parts := func(p *StudyParts) string {
		switch {
		case p.GroupsReference != 0 && (p.Reference != p.Candidate || p.GroupsReference != p.GroupsCandidate):
			return fmt.Sprintf("%d reference groups (%d parts) and %d candidate groups (%d parts)", p.GroupsReference, p.Reference, p.GroupsCandidate, p.Candidate)
		case p.GroupsReference != 0:
			return fmt.Sprintf("%d groups a lot (%d parts)", p.GroupsReference, p.Reference)
		case p.Reference != p.Candidate:
			return fmt.Sprintf("%d reference and %d candidate parts", p.Reference, p.Candidate)
		case c.Method == "paired":
			return Count(p.Reference, "pair", "pairs")
		}
		return fmt.Sprintf("%d a lot", p.Reference)
	}
	none := "the difference is 0"
	if e := c.Equivalence; e != nil && e.Scale == scaleRatio {
		none = "the ratio is 1"
	}
	var of []string
	if n.AtZero != nil {
		of = append(of, "of "+parts(n.AtZero)+" would show it with probability "+Fixed(n.Power, 2)+" if "+none)
	}
	if n.AtEstimate != nil {
		also := ""
		if len(of) == 0 {
			also = " would show it with probability " + Fixed(n.Power, 2)
		}
		of = append(of, "of "+parts(n.AtEstimate)+also+" if it is as found here")
	} else {
		of = append(of, "of no size if it is as found here")
	}
	return "A new study " + strings.Join(of, ", one ") + "; these readings are not to be extended unless the plan allowed it."
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

// sensitivitySentence says whether the verdict on the mean is the same however it is computed.
func sensitivitySentence(c Comparison) string {
	if c.Equivalence == nil || len(c.Sensitivity) == 0 {
		return ""
	}
	same := 0
	for _, s := range c.Sensitivity {
		if s.Verdict == c.Equivalence.Verdict {
			same++
		}
	}
	if len(c.Sensitivity) == 1 && same == 1 {
		return "The verdict is the same in the one other way of computing it."
	}
	if same == len(c.Sensitivity) {
		return fmt.Sprintf("The verdict on the mean is the same in all %d other ways of computing it.", same)
	}
	return fmt.Sprintf("The verdict on the mean is the same in %d of %d other ways of computing it.", same, len(c.Sensitivity))
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
