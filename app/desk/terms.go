package desk

import (
	"fmt"
	"strings"

	"lotpair/qa"
)

// Terms are a criterion as a person types it: words and numbers as text, empty where nothing is stated.
type Terms struct {
	Objective, Claim, Method          string // words of Objectives, Claims, Methods
	Margin                            string // word of Margins
	First, Second                     string // the margin's number, or its two ends
	Of                                string // word of Widths
	Mean, SD                          string // known beforehand, for a margin that keeps a Ppk or is a multiple
	Reason, ApprovedBy                string
	Alpha, Spread, Guard, Power, Look string
	Decimal                           Decimal // of its numbers
}

// The words of the choices, in the order in which they are offered.
var (
	Objectives = []string{"equivalent to", "not lower than", "not higher than", "different from", "lower than", "higher than"}
	Claims     = []string{"these two lots", "their sources", "these two lots, their groups as a sample"}
	Methods    = []string{"Welch", "pooled", "paired", "log"}
	Margins    = []string{"part of the tolerance", "± in the unit", "from … to … in the unit", "ratio of means", "ratio of geometric means", "keeps a Ppk", "multiple of a known SD", "none"}
	Widths     = []string{"full width", "half width"}
	Looks      = []string{"one sample", "one enlargement allowed"}
)

var (
	objectives = []qa.Objective{qa.Equivalence, qa.NotLower, qa.NotHigher, qa.Difference, qa.Lower, qa.Higher}
	methods    = []string{"welch", "pooled", "paired", "log"}
)

// Places of the ways to state a margin in Margins.
const (
	asPart = iota
	asAbsolute
	asBounds
	asRatio
	asRatioBounds
	asPpk
	asMultiple
	asNone
)

func wordOf[T comparable](words []string, values []T, v T) string {
	for i, x := range values {
		if x == v {
			return words[i]
		}
	}
	return words[0]
}

func valueOf[T comparable](words []string, values []T, word string) T {
	for i, x := range words {
		if x == word {
			return values[i]
		}
	}
	return values[0]
}

// marginKind is the place of a margin's way of being stated.
func marginKind(m *qa.Margin) int {
	switch {
	case m == nil:
		return asNone
	case m.ToleranceFraction != nil:
		return asPart
	case m.Lower != nil || m.Upper != nil:
		return asBounds
	case m.ReferenceFraction != nil:
		return asRatio
	case m.RatioLower != nil || m.RatioUpper != nil:
		return asRatioBounds
	case m.KeepPpk != nil:
		return asPpk
	case m.SDMultiple != nil:
		return asMultiple
	case m.Absolute != nil:
		return asAbsolute
	}
	return asNone
}

// marginTerms writes a margin as it is typed.
func (t *Terms) marginTerms(m *qa.Margin) {
	kind := marginKind(m)
	t.Margin, t.Of = Margins[kind], Widths[0]
	if m == nil {
		return
	}
	first, second, times := m.Absolute, (*float64)(nil), 1.0
	switch kind {
	case asPart:
		first, times = m.ToleranceFraction, 100
	case asBounds:
		first, second = m.Lower, m.Upper
	case asRatio:
		first, times = m.ReferenceFraction, 100
	case asRatioBounds:
		first, second = m.RatioLower, m.RatioUpper
	case asPpk:
		first = m.KeepPpk
	case asMultiple:
		first = m.SDMultiple
	}
	t.First, t.Second = t.Decimal.NumberText(first, times), t.Decimal.NumberText(second, 1)
	t.Mean, t.SD = t.Decimal.NumberText(m.Mean, 1), t.Decimal.NumberText(m.SD, 1)
	if m.Of == "half" {
		t.Of = Widths[1]
	}
	t.Reason, t.ApprovedBy = m.Reason, m.ApprovedBy
}

// margin is the margin that is typed; was is what it was before, of which what was not touched stays to the last digit.
func (t Terms) margin(before Terms, was *qa.Margin) (*qa.Margin, error) {
	same := t
	same.Objective, same.Claim, same.Method, same.Alpha, same.Spread, same.Guard, same.Power, same.Look = before.Objective, before.Claim, before.Method, before.Alpha, before.Spread, before.Guard, before.Power, before.Look
	if same == before {
		return was, nil
	}
	m := qa.Margin{Reason: strings.TrimSpace(t.Reason), ApprovedBy: strings.TrimSpace(t.ApprovedBy)}
	kind := asNone
	for i, w := range Margins {
		if w == t.Margin {
			kind = i
		}
	}
	first, err := t.Decimal.Number(t.First)
	if err != nil {
		return nil, fmt.Errorf("margin: %w", err)
	}
	second, err := t.Decimal.Number(t.Second)
	if err != nil {
		return nil, fmt.Errorf("margin, upper end: %w", err)
	}
	if first == nil && second == nil && kind != asNone {
		return nil, fmt.Errorf("margin: found no number for “%s”, want one; type it", t.Margin)
	}
	share := func() *float64 {
		if first == nil {
			return nil
		}
		v := *first / 100
		return &v
	}
	switch kind {
	case asNone:
		return nil, nil
	case asPart:
		m.ToleranceFraction = share()
		if t.Of == Widths[1] {
			m.Of = "half"
		} else if was != nil {
			m.Of = strings.TrimSuffix(was.Of, "half")
		}
	case asAbsolute:
		m.Absolute = first
	case asBounds:
		m.Lower, m.Upper = first, second
	case asRatio:
		m.ReferenceFraction = share()
	case asRatioBounds:
		m.RatioLower, m.RatioUpper = first, second
	case asPpk, asMultiple:
		if m.Mean, err = t.Decimal.Number(t.Mean); err != nil {
			return nil, fmt.Errorf("mean: %w", err)
		}
		if m.SD, err = t.Decimal.Number(t.SD); err != nil {
			return nil, fmt.Errorf("standard deviation: %w", err)
		}
		if m.KeepPpk = first; kind == asMultiple {
			m.KeepPpk, m.SDMultiple, m.Mean = nil, first, nil
		}
	}
	return &m, nil
}

// TermsOf are the terms of a plan's criterion, with the decimal mark d.
func TermsOf(p qa.Plan, d Decimal) Terms {
	c := p.Criterion
	t := Terms{
		Objective: ObjectiveText(c.Objective), Claim: claimText(c), Method: MethodText(c.Method), Look: Looks[0], Decimal: d,
		Alpha: d.NumberText(c.Alpha, 1), Spread: d.NumberText(c.SpreadRatio, 1), Guard: d.NumberText(c.Guard, 1), Power: d.NumberText(c.Power, 1),
	}
	if c.SecondSample == "one" {
		t.Look = Looks[1]
	}
	t.marginTerms(c.Margin)
	return t
}

func claimText(c qa.Criterion) string {
	switch {
	case c.Claim == "sources":
		return Claims[1]
	case c.Groups == "random":
		return Claims[2]
	}
	return Claims[0]
}

// Into is the plan with its criterion as it is typed. What was not touched stays to the last digit.
func (t Terms) Into(p qa.Plan) (qa.Plan, error) {
	was := TermsOf(p, t.Decimal)
	c := p.Criterion
	var err error
	if t.Objective != was.Objective {
		c.Objective = valueOf(Objectives, objectives, t.Objective)
	}
	if t.Method != was.Method {
		c.Method = valueOf(Methods, methods, t.Method)
	}
	if t.Claim != was.Claim {
		c.Claim, c.Groups = "lots", ""
		switch t.Claim {
		case Claims[1]:
			c.Claim = "sources"
		case Claims[2]:
			c.Groups = "random"
		}
	}
	if t.Look != was.Look {
		c.SecondSample = map[string]string{Looks[0]: "none", Looks[1]: "one"}[t.Look]
	}
	if c.Margin, err = t.margin(was, c.Margin); err != nil {
		return p, err
	}
	for _, n := range []struct {
		name, typed, before string
		to                  **float64
	}{
		{"alpha", t.Alpha, was.Alpha, &c.Alpha},
		{"spread ratio", t.Spread, was.Spread, &c.SpreadRatio},
		{"guard", t.Guard, was.Guard, &c.Guard},
		{"power", t.Power, was.Power, &c.Power},
	} {
		if n.typed == n.before {
			continue
		}
		if *n.to, err = t.Decimal.Number(n.typed); err != nil {
			return p, fmt.Errorf("%s: %w", n.name, err)
		}
	}
	p.Criterion = c
	return p, nil
}

// MethodText is a method as a person reads it.
func MethodText(m string) string {
	if m == "" {
		m = "welch"
	}
	return wordOf(Methods, methods, m)
}

// ObjectiveText is the objective as the claim says it.
func ObjectiveText(o qa.Objective) string { return wordOf(Objectives, objectives, o) }
