package desk

import (
	"strings"

	"lotpair/qa"
)

// DraftView is what is said while the criterion is written.
type DraftView struct {
	Reference, Candidate string // the lots, as they are called
	Objective, Claim, Of string // Of: what is compared, the mean
	Kind                 MarginKind
	Rows                 []DraftRow
	Together             string // how likely all pass
	Name                 string // of the characteristic looked at
	Headline             string
	Paragraphs           []string
	Lacks                string // what stands in the way of the seal; empty where nothing does
	Sealed               bool
	Looked               Planned // the characteristic looked at
}

// DraftRow is what the criterion comes to for one characteristic.
type DraftRow struct {
	Name, Lower, Upper, Margin, SD, Permits, Parts string
	Selected                                       bool
}

// MarginKind is a way of stating the margin.
type MarginKind int

// The ways of stating the margin, in their order on the screen.
const (
	PartOfTolerance MarginKind = iota
	InTheUnit
	RatioOfMeans
	KeepsPpk
	MultipleOfSD
)

// MarginKinds are the words for the ways of stating the margin.
var MarginKinds = []string{"part of the tolerance", "in the unit", "ratio of means", "keeps a Ppk", "multiple of a known SD"}

// MarginKindsShort are shorter words for the same, for a narrow window.
var MarginKindsShort = []string{"of the tolerance", "in the unit", "ratio", "keeps a Ppk", "times an SD"}

// KindOf is the way in which the plan states its margin.
func KindOf(p qa.Plan) MarginKind {
	switch marginKind(p.Criterion.Margin) {
	case asRatio, asRatioBounds:
		return RatioOfMeans
	case asPpk:
		return KeepsPpk
	case asMultiple:
		return MultipleOfSD
	case asAbsolute, asBounds:
		return InTheUnit
	}
	return PartOfTolerance
}

// Ways are the two ways of stating a margin of a kind, and which one the plan takes; nil where a kind has one way.
func Ways(p qa.Plan) (words []string, second bool) {
	switch marginKind(p.Criterion.Margin) {
	case asPart, asNone:
		m := p.Criterion.Margin
		return Widths, m != nil && m.Of == "half"
	case asAbsolute, asBounds:
		return []string{"either way", "from … to …"}, marginKind(p.Criterion.Margin) == asBounds
	case asRatio, asRatioBounds:
		return []string{"of means, ±", "geometric, from … to …"}, marginKind(p.Criterion.Margin) == asRatioBounds
	}
	return nil, false
}

// Draft says what the criterion comes to; shift is the true difference that is thought of.
func (s State) Draft(shift float64, m *Planner) DraftView {
	p := Settled(s.Record.Plan)
	v := DraftView{Reference: p.Reference.Lot, Candidate: p.Candidate.Lot, Objective: ObjectiveText(p.Criterion.Objective), Claim: claimText(p.Criterion), Kind: KindOf(p), Sealed: s.Sealed()}
	v.Of = map[string]string{"log": "geometric mean", "paired": "mean of the pairs"}[p.Criterion.Method]
	if v.Of == "" {
		v.Of = "mean"
	}
	if v.Reference == "" {
		v.Reference = "the reference"
	}
	if v.Candidate == "" {
		v.Candidate = "The candidate"
	}
	var all []Planned
	for i, c := range p.Characteristics {
		one := m.planned(p, c)
		all = append(all, one)
		v.Rows = append(v.Rows, rowOfDraft(one, i == s.Selected))
		if i == s.Selected {
			v.Looked, v.Name = one, c.Name
			v.Headline, v.Paragraphs = one.sentences(p, shift)
		}
	}
	v.Together = together(all, m)
	if len(p.Characteristics) == 0 {
		v.Headline = "What is measured?"
		v.Paragraphs = []string{"Bring a file in on either side and take its headings and limits: no reading is seen. Or add the characteristics by hand."}
	}
	if faults := s.faults(m); len(faults) > 0 {
		v.Lacks = strings.ReplaceAll(faults[0], "\n", " ")
	}
	return v
}

func rowOfDraft(p Planned, selected bool) DraftRow {
	c := p.Characteristic
	r := DraftRow{Name: c.Name, Margin: p.Margin, Selected: selected}
	number := func(v *float64) string {
		if v == nil {
			return ""
		}
		return qa.Plain(*v)
	}
	r.Lower, r.Upper, r.SD = number(c.Lower), number(c.Upper), number(c.SD)
	if p.Fault != "" {
		r.Margin = "not settled"
	}
	if p.Permits != nil {
		r.Permits = qa.Fixed(p.Permits.Ppk, 2)
	}
	if p.N > 0 {
		r.Parts = qa.Plain(float64(p.N))
	}
	return r
}
