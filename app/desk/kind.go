package desk

import (
	"math"
	"reflect"

	"lotpair/qa"
)

// WithKind is the plan with its margin stated in another way, by a usual number that is there to be changed.
func WithKind(p qa.Plan, k MarginKind) qa.Plan {
	m := map[MarginKind]qa.Margin{
		PartOfTolerance: {ToleranceFraction: pointer(0.1), Of: "full"},
		InTheUnit:       {Absolute: pointer(0)},
		RatioOfMeans:    {ReferenceFraction: pointer(0.05)},
		KeepsPpk:        {KeepPpk: pointer(1.33)},
		MultipleOfSD:    {SDMultiple: pointer(1)},
	}[k]
	return withMargin(p, m)
}

// WithWay is the plan with its margin stated in the first or the second way of its kind.
func WithWay(p qa.Plan, second bool) qa.Plan {
	m := qa.Margin{}
	if old := p.Criterion.Margin; old != nil {
		m = *old
	}
	why, by := m.Reason, m.ApprovedBy
	switch kind := marginKind(p.Criterion.Margin); {
	case kind == asNone:
		return p
	case kind == asPart && second:
		m.Of = "half"
	case kind == asPart:
		m.Of = "full"
	case kind == asAbsolute && second:
		m = qa.Margin{Lower: pointer(-*m.Absolute), Upper: m.Absolute}
	case kind == asBounds && !second && m.Upper != nil:
		m = qa.Margin{Absolute: m.Upper}
	case kind == asBounds && !second:
		m = qa.Margin{Absolute: pointer(-*m.Lower)}
	case kind == asRatio && second:
		m = qa.Margin{RatioLower: pointer(1 - *m.ReferenceFraction), RatioUpper: pointer(1 / (1 - *m.ReferenceFraction))}
	case kind == asRatioBounds && !second && m.RatioLower != nil && *m.RatioLower < 1:
		m = qa.Margin{ReferenceFraction: pointer(rounded(1 - *m.RatioLower))}
	case kind == asRatioBounds && !second:
		m = qa.Margin{ReferenceFraction: pointer(0.05)}
	}
	m.Reason, m.ApprovedBy = why, by
	return withMargin(p, m)
}

// WithMethod is the plan with another method. The log method asks for bounds of a ratio, and they for it: where one is chosen
// the other follows.
func WithMethod(p qa.Plan, word string) qa.Plan {
	p.Criterion.Method = valueOf(Methods, methods, word)
	ratio := marginKind(p.Criterion.Margin) == asRatioBounds
	switch log := p.Criterion.Method == "log"; {
	case log && !ratio:
		p = withMargin(p, qa.Margin{RatioLower: pointer(0.9), RatioUpper: pointer(rounded(1 / 0.9))})
	case !log && ratio:
		method := p.Criterion.Method
		p = WithWay(p, false)
		p.Criterion.Method = method
	}
	return p
}

// withMargin is the plan with another margin. What was settled from the margin of all is settled anew.
func withMargin(p qa.Plan, m qa.Margin) qa.Plan {
	p = Unsettled(p)
	if m.RatioLower != nil {
		m.RatioLower, m.RatioUpper = pointer(rounded(*m.RatioLower)), pointer(rounded(*m.RatioUpper))
		p.Criterion.Method = "log"
	} else if p.Criterion.Method == "log" {
		p.Criterion.Method = "welch"
	}
	p.Criterion.Margin = &m
	return p
}

// Unsettled is the plan without the margins that were settled for each characteristic from that of all: before that margin, a
// target or a planned standard deviation is changed.
func Unsettled(p qa.Plan) qa.Plan {
	all := append([]qa.Characteristic{}, p.Characteristics...)
	for i, c := range all {
		if c.Margin != nil && reflect.DeepEqual(c.Margin, settled(p.Criterion.Margin, c)) {
			all[i].Margin = nil
		}
	}
	p.Characteristics = all
	return p
}

// Settled is the plan with the margins that each characteristic has to state for itself: what keeps a Ppk and what is a
// multiple of a standard deviation rests on the characteristic's own target and planned standard deviation, where the margin
// of all states none.
func Settled(p qa.Plan) qa.Plan {
	all := append([]qa.Characteristic{}, p.Characteristics...)
	for i, c := range all {
		if c.Margin == nil {
			all[i].Margin = settled(p.Criterion.Margin, c)
		}
	}
	p.Characteristics = all
	return p
}

// settled is the margin of all as it rests on one characteristic; nil where it is the same for all, or has nothing to rest on.
func settled(m *qa.Margin, c qa.Characteristic) *qa.Margin {
	if m == nil || m.KeepPpk == nil && m.SDMultiple == nil || m.SD != nil && (m.KeepPpk == nil || m.Mean != nil) || m.SD == nil && c.SD == nil {
		return nil
	}
	out := *m
	if out.SD == nil {
		out.SD = c.SD
	}
	if out.KeepPpk != nil && out.Mean == nil {
		centre := centreOf(c)
		out.Mean = &centre
	}
	return &out
}

func pointer(v float64) *float64 { return &v }

// rounded is a ratio with six decimals: what is proposed is there to be read and changed.
func rounded(v float64) float64 { return math.Round(v*1e6) / 1e6 }
