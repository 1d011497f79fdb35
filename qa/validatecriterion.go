package qa

import (
	"fmt"
	"math"
)

// asked checks what holds after a characteristic's own settings are merged with the criterion.
func (v *validator) asked(key string, p Plan, c Characteristic) {
	a := p.askedOf(c)
	v.oneOf(key+".objective", string(a.objective), string(Equivalence), string(NotLower), string(NotHigher), string(Difference), string(Lower), string(Higher))
	if !(a.alpha > 0 && a.alpha < 0.5) {
		v.fault(key+".alpha", fmt.Sprint(a.alpha), "a number above 0 and below 0.5", "correct the plan")
	}
	v.oneOf(key+".method", a.method, "welch", "pooled", "paired", "log")
	if !(a.guard >= 0) || math.IsInf(a.guard, 0) {
		v.fault(key+".guard", fmt.Sprint(a.guard), "a number from 0 in the unit", "correct the plan")
	}
	if a.margin == nil && a.objective.AgainstMargin() {
		v.fault(key+".margin", "none", fmt.Sprintf("a margin for the objective %s", a.objective), "state one of "+marginKinds)
	}
	if a.method == "paired" && p.Reading.PairColumn == "" {
		v.fault("reading.pair_column", "none", "the column that names the pairs, for the method paired", "name it")
	}
	if a.grouped {
		if p.Reading.GroupColumn == "" {
			v.fault("reading.group_column", "none", "the column that names the groups, for random groups", "name it")
		}
		if a.method == "paired" || a.method == "log" {
			v.fault(key+".method", fmt.Sprintf("%q beside random groups", a.method), "welch or pooled", "change one")
		}
	}
	if c.Kind == "attribute" {
		v.attribute(key, a)
		return
	}
	v.together(key, a)
}

// attribute checks what a comparison of fractions may ask: a margin in fractions, and nothing that needs measured values.
func (v *validator) attribute(key string, a asked) {
	if a.margin != nil {
		if k := a.margin.Kinds(); len(k) == 1 && k[0] != "absolute" && k[0] != "bounds" {
			v.fault(key+".margin", k[0]+" for an attribute", "absolute, or lower and upper, in fractions", "state it in the characteristic")
		}
	}
	if m := a.margin; m != nil {
		for _, b := range []*float64{m.Absolute, m.Lower, m.Upper} {
			if b != nil && !(math.Abs(*b) < 1) {
				v.fault(key+".margin", fmt.Sprint(*b)+" for an attribute", "fractions between -1 and 1, such as 0.05 for 5 %", "correct the plan")
			}
		}
	}
	if a.grouped {
		v.fault(key+".kind", "attribute beside random groups", "numeric", "leave one out")
	}
}

// together checks what margin, method, objective and guard allow each other.
func (v *validator) together(key string, a asked) {
	ratio := a.margin != nil && (a.margin.RatioLower != nil || a.margin.RatioUpper != nil)
	if a.method == "log" && !ratio {
		v.fault(key+".margin", "no ratio bounds beside the method log", "ratio_lower and ratio_upper", "state them or change the method")
	}
	if ratio && a.method != "log" {
		v.fault(key+".method", fmt.Sprintf("%q beside ratio bounds", a.method), "log", "change the method or the margin")
	}
	if a.margin == nil {
		return
	}
	if a.guard > 0 && (ratio || a.margin.ReferenceFraction != nil) {
		v.fault(key+".guard", fmt.Sprint(a.guard), "none beside a margin that is a ratio", "remove one")
	}
	if a.margin.KeepPpk == nil {
		return
	}
	if a.method == "paired" || a.method == "log" {
		v.fault(key+".method", fmt.Sprintf("%q beside keep_ppk", a.method), "welch or pooled", "change one")
	}
	if a.grouped {
		v.fault(key+".margin", "keep_ppk beside random groups", "another margin", "change one")
	}
}

// family checks that the characteristics asked for a difference, which are judged as one family, have one alpha.
func (v *validator) family(p Plan) {
	first, seen := 0.0, false
	for i, c := range p.Characteristics {
		a := p.askedOf(c)
		if a.objective.AgainstMargin() {
			continue
		}
		if seen && a.alpha != first {
			v.fault(fmt.Sprintf("characteristic %d (%s).alpha", i+1, c.Name), fmt.Sprint(a.alpha), fmt.Sprintf("%v, as of the others asked for a difference: they are judged together", first), "use one alpha")
		}
		first, seen = a.alpha, true
	}
}

func (v *validator) margin(key string, m Margin) {
	kinds := m.Kinds()
	if len(kinds) != 1 {
		v.fault(key, orNone(kinds), "exactly one kind of margin", "state one of "+marginKinds)
		return
	}
	v.finite(key+".lower", m.Lower)
	v.finite(key+".upper", m.Upper)
	v.finite(key+".mean", m.Mean)
	v.positive(key+".absolute", m.Absolute)
	v.positive(key+".tolerance_fraction", m.ToleranceFraction)
	v.positive(key+".ratio_lower", m.RatioLower)
	v.positive(key+".ratio_upper", m.RatioUpper)
	v.positive(key+".sd_multiple", m.SDMultiple)
	v.positive(key+".keep_ppk", m.KeepPpk)
	v.positive(key+".sd", m.SD)
	if f := m.ReferenceFraction; f != nil && !(*f > 0 && *f < 1) {
		v.fault(key+".reference_fraction", fmt.Sprint(*f), "a number above 0 and below 1", "correct the plan")
	}
	for _, b := range [][2]*float64{{m.Lower, m.Upper}, {m.RatioLower, m.RatioUpper}} {
		if b[0] != nil && b[1] != nil && !(*b[0] < *b[1]) {
			v.fault(key, fmt.Sprintf("%v to %v", *b[0], *b[1]), "the lower bound below the upper", "correct the plan")
		}
	}
	v.oneOf(key+".of", m.Of, "full", "half")
	if m.Of != "" && m.ToleranceFraction == nil {
		v.fault(key+".of", fmt.Sprintf("%q", m.Of), "it only beside tolerance_fraction", "remove it")
	}
	if m.Mean != nil && m.KeepPpk == nil || m.SD != nil && m.KeepPpk == nil && m.SDMultiple == nil {
		v.fault(key, "mean or sd", "them only beside keep_ppk or sd_multiple", "remove them")
	}
}
