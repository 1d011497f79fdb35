package desk

import (
	"fmt"
	"math"

	"lotpair/qa"
)

// Sizing is a study that is planned, as a person types it.
type Sizing struct {
	Objective, Design, Method       string // words of Objectives, Designs, StudyMethods
	Margin, MarginLower             string // ± in the unit, or its two ends
	MarginUpper                     string
	SD, SDCandidate, Shift          string
	FractionReference               string // the true fractions that fail
	FractionCandidate               string
	Alpha, Power, Ratio             string
	SpreadRatio, Characteristics, N string
	Decimal                         Decimal // of its numbers
}

// The words of a planned study.
var (
	Designs      = []string{"two lots", "pairs", "parts that pass or fail"}
	StudyMethods = []string{"pooled", "Welch"}
)

// SizingOf begins with what is usual, or with what the plan says of the characteristic looked at; d is its decimal mark.
func (s State) SizingOf(d Decimal) Sizing {
	z := Sizing{Objective: Objectives[0], Design: Designs[0], Method: StudyMethods[0], Shift: "0", Alpha: d.own("0.05"), Power: d.own("0.9"), Ratio: "1", Characteristics: "1", Decimal: d}
	p := Settled(s.Record.Plan)
	if !s.Open || s.Selected < 0 || s.Selected >= len(p.Characteristics) {
		return z
	}
	one := planned(p, p.Characteristics[s.Selected])
	z.Objective = ObjectiveText(p.Criterion.Objective)
	if o := one.Characteristic.Objective; o != "" {
		z.Objective = ObjectiveText(o)
	}
	z.MarginLower, z.MarginUpper = d.NumberText(one.Lower, 1), d.NumberText(one.Upper, 1)
	if one.Lower != nil && one.Upper != nil && *one.Lower == -*one.Upper {
		z.Margin, z.MarginLower, z.MarginUpper = z.MarginUpper, "", ""
	}
	if one.SD > 0 {
		z.SD = d.NumberText(&one.SD, 1)
	}
	method := p.Criterion.Method
	if m := p.Characteristics[s.Selected].Method; m != "" {
		method = m
	}
	switch method {
	case "", "welch":
		z.Method = StudyMethods[1]
	case "paired": // its standard deviation is that of the differences, which the plan does not state
		z.Design, z.SD = Designs[1], ""
	}
	if p.Criterion.Alpha != nil {
		z.Alpha = d.NumberText(p.Criterion.Alpha, 1)
	}
	z.SpreadRatio = d.NumberText(p.Criterion.SpreadRatio, 1)
	return z
}

// study is the study that is typed.
func (z Sizing) study() (qa.Study, error) {
	st := qa.Study{Objective: valueOf(Objectives, objectives, z.Objective), Method: qa.StudyPooled, Characteristics: 1}
	if z.Method == StudyMethods[1] {
		st.Method = qa.StudyWelch
	}
	var sd, candidate, low, high, fr, fc, k, n *float64
	for _, x := range []struct {
		name, text string
		to         **float64
		usual      float64 // NaN: none
		plain      *float64
	}{
		{"standard deviation", z.SD, &sd, math.NaN(), nil},
		{"standard deviation, candidate", z.SDCandidate, &candidate, math.NaN(), nil},
		{"margin", z.Margin, &high, math.NaN(), nil},
		{"lower end of the margin", z.MarginLower, &low, math.NaN(), nil},
		{"true difference", z.Shift, nil, 0, &st.Shift},
		{"alpha", z.Alpha, nil, qa.DefaultAlpha, &st.Alpha},
		{"power", z.Power, nil, qa.DefaultPower, &st.Power},
		{"ratio", z.Ratio, nil, 1, &st.Ratio},
		{"spread ratio", z.SpreadRatio, nil, 0, &st.SpreadRatio},
		{"fraction, reference", z.FractionReference, &fr, math.NaN(), nil},
		{"fraction, candidate", z.FractionCandidate, &fc, math.NaN(), nil},
		{"characteristics", z.Characteristics, &k, math.NaN(), nil},
		{"parts", z.N, &n, math.NaN(), nil},
	} {
		v, err := z.Decimal.Number(x.text)
		switch {
		case err != nil:
			return st, fmt.Errorf("%s: %w", x.name, err)
		case x.to != nil:
			*x.to = v
		case v != nil:
			*x.plain = *v
		default:
			*x.plain = x.usual
		}
	}
	if high != nil {
		if low != nil || z.MarginUpper != "" {
			return st, fmt.Errorf("margin: found one beside its ends, want either; leave one out")
		}
		v := -*high
		low = &v
	} else {
		v, err := z.Decimal.Number(z.MarginUpper)
		if err != nil {
			return st, fmt.Errorf("upper end of the margin: %w", err)
		}
		high = v
	}
	if st.Objective.AgainstMargin() {
		if st.Objective != qa.NotHigher {
			st.MarginLower = low
		}
		if st.Objective != qa.NotLower {
			st.MarginUpper = high
		}
	}
	for _, x := range []struct {
		name string
		v    *float64
		to   *int
	}{{"characteristics", k, &st.Characteristics}, {"parts", n, &st.N}} {
		if x.v == nil {
			continue
		}
		if *x.v != math.Trunc(*x.v) || math.Abs(*x.v) > 1e8 {
			return st, fmt.Errorf("%s: found %v, want a whole number", x.name, *x.v)
		}
		*x.to = int(*x.v)
	}
	return z.truth(st, sd, candidate, fr, fc)
}

// truth is the study with what is taken to be true of its readings.
func (z Sizing) truth(st qa.Study, sd, candidate, fr, fc *float64) (qa.Study, error) {
	needs := func(name string, v *float64) error {
		if v == nil {
			return fmt.Errorf("%s: found none, want what is expected; type it", name)
		}
		return nil
	}
	if z.Design == Designs[2] {
		st.Method, st.SpreadRatio = qa.StudyFractions, 0
		for _, x := range []struct {
			name string
			v    *float64
		}{{"fraction, reference", fr}, {"fraction, candidate", fc}} {
			if err := needs(x.name, x.v); err != nil {
				return st, err
			}
		}
		st.Fractions = [2]float64{*fr, *fc}
		return st, nil
	}
	if err := needs("standard deviation", sd); err != nil {
		return st, err
	}
	st.SD, st.SDCandidate = *sd, *sd
	if z.Design == Designs[1] {
		st.Method, st.Ratio, st.SpreadRatio = qa.StudyPaired, 1, 0
		return st, nil
	}
	if candidate != nil {
		st.SDCandidate = *candidate
	}
	return st, nil
}

// Answer says how many parts the study needs, or what it would show with so many.
func (z Sizing) Answer() []string {
	st, err := z.study()
	if err != nil {
		return []string{err.Error()}
	}
	size, err := st.Size()
	if err != nil {
		return []string{err.Error()}
	}
	what := fmt.Sprintf("%d reference and %d candidate parts", size.NReference, size.NCandidate)
	if st.Method == qa.StudyPaired {
		what = qa.Count(size.NReference, "pair", "pairs")
	}
	out := []string{fmt.Sprintf("%s show it with probability %s.", what, qa.Fixed(size.Power, 4))}
	if size.SmallestMargin != nil {
		out = append(out, fmt.Sprintf("The narrowest margin shown with probability %s is ±%s.", qa.Plain(st.Power), qa.Plain(rounded(*size.SmallestMargin))))
	}
	if st.Characteristics > 1 {
		out = append(out, fmt.Sprintf("That is the probability that %d independent characteristics all pass.", st.Characteristics))
	}
	out = append(out, methodWords[size.Method])
	if st.N == 0 {
		out = append(out, "For a new study, fixed before its readings are taken; not for adding readings until it passes.")
	}
	return out
}

// methodWords say how a power was computed.
var methodWords = map[string]string{
	qa.StudyPooled:    "Exact, for two lots tested with one common standard deviation. Welch plans for the test that a plan uses unless it says otherwise.",
	qa.StudyWelch:     "Exact, for the Welch test: integrated over both standard deviations.",
	qa.StudyPaired:    "Exact, for the differences of pairs.",
	qa.StudyFractions: "Exact, for the score test of two fractions (Miettinen and Nurminen): all counts gone through.",
	qa.StudySpread:    "Exact, for the F interval of the ratio of standard deviations.",
}
