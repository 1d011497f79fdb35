package desk

import (
	"fmt"
	"math"
	"strings"

	"lotpair/qa"
	"lotpair/qa/figure"
)

// Look is a way of looking at the characteristic on the bench.
type Look int

// The ways of looking, in the order of their keys.
const (
	Spread Look = iota
	Order
	Shape
	Sensitivity
	Limits
)

// looks are the names of all ways of looking.
var looks = [...]string{"Spread", "Order", "Shape", "Sensitivity", "Limits"}

// String names the way of looking.
func (l Look) String() string {
	if l < 0 || int(l) >= len(looks) {
		return ""
	}
	return looks[l]
}

// LookView is one way of looking as the bench offers it.
type LookView struct {
	Look   Look
	Name   string
	Chosen bool
}

// offers says whether there is something to look at in this way.
func offers(l Look, c qa.Comparison) bool {
	switch l {
	case Spread:
		return true
	case Order, Shape:
		return c.Kind != "attribute"
	case Sensitivity:
		return len(c.Sensitivity) > 0
	}
	return c.Performance != nil
}

// WithLook looks at the characteristic in another way. One that is not offered changes nothing.
func (s State) WithLook(l Look) State {
	c, ok := s.Characteristic()
	if !ok || !offers(l, c) || l == s.Looking {
		return s
	}
	s.Looking = l
	return s.did("looked at " + l.String())
}

// Shown is the way of looking that is shown: the one chosen last, or the first where a characteristic does not offer it.
func (s State) Shown() Look {
	if c, ok := s.Characteristic(); ok && offers(s.Looking, c) {
		return s.Looking
	}
	return Spread
}

// Picture is the picture of the bench in the way it is looked at; false where there is nothing to see.
func (s State) Picture(width, height float64) (figure.Figure, bool) {
	c, ok := s.Characteristic()
	if !ok {
		return figure.Figure{}, false
	}
	r := s.Record.Readings
	switch s.Shown() {
	case Order:
		return figure.OrderAt(c, r, width, height), true
	case Shape:
		return figure.ShapeAt(c, r, width, height), true
	case Sensitivity:
		return figure.SensitivityAt(c, width, height), true
	case Limits:
		return figure.LimitsAt(c, r, width, height), true
	}
	return figure.FacingAt(c, r, width, height), true
}

// lots are both sides of a characteristic, for sentences that say the same of each.
func (s State) lots(c qa.Comparison) []aLot {
	r := s.Record.Readings
	out := []aLot{
		{qa.Reference, r.Reference.Name, r.Reference.Of(c.Name), c.Reference, c.Checks.Reference, qa.LotPerformance{}},
		{qa.Candidate, r.Candidate.Name, r.Candidate.Of(c.Name), c.Candidate, c.Checks.Candidate, qa.LotPerformance{}},
	}
	for i := range out {
		if out[i].name == "" {
			out[i].name = "The " + string(out[i].side)
		}
		if p := c.Performance; p != nil {
			out[i].performance = p.Reference
			if out[i].side == qa.Candidate {
				out[i].performance = p.Candidate
			}
		}
	}
	return out
}

type aLot struct {
	side        qa.Side
	name        string
	series      qa.Series
	sample      qa.SampleResult
	checks      qa.SampleChecks
	performance qa.LotPerformance
}

// orderSentences say how readings follow each other.
func (s State) orderSentences(c qa.Comparison) []string {
	var out []string
	for _, l := range s.lots(c) {
		if l.checks.Lag1 == nil {
			out = append(out, l.name+": too few readings, or all of them equal, to see how they follow each other.")
			continue
		}
		lag := *l.checks.Lag1
		// Chance alone leaves it within about two of its standard errors, 1/sqrt(n) (Bartlett 1946, from memory).
		chance := 2 / math.Sqrt(float64(l.sample.N))
		text := fmt.Sprintf("%s: the correlation of each reading with the next is %s; chance alone leaves it within about ±%s for %s.",
			l.name, qa.Fixed(lag, 2), qa.Fixed(chance, 2), qa.Count(l.sample.N, "reading", "readings"))
		switch {
		case lag > chance:
			text += " It is more: look for a drift, a change of tool or readings taken in groups."
		case lag < -chance:
			text += " It is less: a high reading is followed by a low one, as where a process is corrected after every part."
		}
		if r := l.checks.Runs; r != nil {
			text += fmt.Sprintf(" %s about the median: p %s.", qa.Count(r.Runs, "run", "runs"), pText(r.P))
		}
		out = append(out, text)
	}
	return append(out, "The readings stand from left to right as they stand in the file. Whether that is the order in which they were made, only you know.")
}

// shapeSentences say what stands out of a normal distribution.
func (s State) shapeSentences(c qa.Comparison) []string {
	var out []string
	for _, l := range s.lots(c) {
		g := l.checks.Grubbs
		if g == nil || l.sample.Mean == nil || l.sample.SD == nil {
			out = append(out, l.name+": too few readings, or all of them equal, to see a shape.")
			continue
		}
		text := fmt.Sprintf("%s: the farthest reading stands in %s, %s standard deviations from the mean (Grubbs p %s).", l.name, g.Cell, qa.Fixed(g.G, 1), pText(g.P))
		if w := l.checks.ShapiroWilk; w != nil {
			text += fmt.Sprintf(" Shapiro–Wilk: W %s, p %s.", qa.Fixed(w.W, 3), pText(w.P))
		}
		if r := l.checks.Resolution; r != nil {
			text += " The smallest step of the readings is " + withUnit(qa.Plain(*r), c.Unit) + "."
		}
		out = append(out, text)
	}
	return append(out, "Readings near the straight line are near enough normal. A bend at an end is a long or a cut tail, steps are a gauge that resolves too little, two straight pieces are two kinds of parts.")
}

func pText(p float64) string {
	t := qa.FormatP(p)
	if t[0] == '<' || t[0] == '>' {
		return t
	}
	return "= " + t
}

func withUnit(s, unit string) string {
	if unit == "" {
		return s
	}
	return s + " " + unit
}

// sensitivitySentences say how much the verdict rests on the way it is computed.
func (s State) sensitivitySentences(c qa.Comparison) []string {
	var out []string
	for _, t := range qa.Sentences(c) {
		if strings.HasPrefix(t, "The verdict on the mean is the same") {
			out = append(out, t)
		}
	}
	for _, w := range c.Warnings {
		if w.Code == qa.WarnFlips {
			out = append(out, w.Text)
		}
	}
	return append(out, "None of these lines changes the verdict: the plan's own method decides. Where they part, look why before you sign.")
}

// limitsSentences say how the lots lie between the limits.
func (s State) limitsSentences(c qa.Comparison) []string {
	var out []string
	for _, l := range s.lots(c) {
		if l.sample.N == 0 {
			out = append(out, l.name+": no readings.")
			continue
		}
		text := l.name + ": "
		if p := l.performance.Pp; p != nil {
			text += "Pp " + qa.Fixed(*p, 2) + ", "
		}
		if p := l.performance.Ppk; p != nil {
			text += "Ppk " + qa.Fixed(*p, 2) + ", "
		}
		text += fmt.Sprintf("%.0f of %s outside the limits", l.performance.OutsideCounted*float64(l.sample.N), qa.Count(l.sample.N, "reading", "readings"))
		if p := l.performance.OutsideEstimated; p != nil {
			text += "; " + qa.ShareText(*p) + " expected of a normal distribution"
		}
		out = append(out, text+".")
	}
	if e := c.Equivalence; e != nil && e.Permits != nil {
		out = append(out, fmt.Sprintf("A mean at the worse end of the margin (%s) would leave Ppk %s and %s outside, at the reference's standard deviation.",
			qa.MarginText(c), qa.Fixed(e.Permits.Ppk, 2), qa.ShareText(e.Permits.Outside)))
	}
	return append(out, "Pp and Ppk describe the readings that were taken. They claim no stability: what the next parts do is another question.")
}
