package qa

import (
	"fmt"
	"math"

	"lotpair/qa/stats/dist"
)

// Margin is the largest difference that does not matter in use: exactly one kind, and why (contract: plan, "Margins").
type Margin struct {
	Absolute          *float64 `json:"absolute,omitempty" toml:"absolute"`
	Lower             *float64 `json:"lower,omitempty" toml:"lower"`
	Upper             *float64 `json:"upper,omitempty" toml:"upper"`
	ToleranceFraction *float64 `json:"tolerance_fraction,omitempty" toml:"tolerance_fraction"`
	Of                string   `json:"of,omitempty" toml:"of"` // full (default) or half
	ReferenceFraction *float64 `json:"reference_fraction,omitempty" toml:"reference_fraction"`
	RatioLower        *float64 `json:"ratio_lower,omitempty" toml:"ratio_lower"`
	RatioUpper        *float64 `json:"ratio_upper,omitempty" toml:"ratio_upper"`
	SDMultiple        *float64 `json:"sd_multiple,omitempty" toml:"sd_multiple"`
	KeepPpk           *float64 `json:"keep_ppk,omitempty" toml:"keep_ppk"`
	Mean              *float64 `json:"mean,omitempty" toml:"mean"`
	SD                *float64 `json:"sd,omitempty" toml:"sd"`
	Reason            string   `json:"reason,omitempty" toml:"reason"`
	ApprovedBy        string   `json:"approved_by,omitempty" toml:"approved_by"`
}

// Kinds names the kinds of margin that are set; a sound margin has exactly one.
func (m Margin) Kinds() []string {
	var k []string
	add := func(name string, set bool) {
		if set {
			k = append(k, name)
		}
	}
	add("absolute", m.Absolute != nil)
	add("bounds", m.Lower != nil || m.Upper != nil)
	add("tolerance_fraction", m.ToleranceFraction != nil)
	add("reference_fraction", m.ReferenceFraction != nil)
	add("ratio_bounds", m.RatioLower != nil || m.RatioUpper != nil)
	add("sd_multiple", m.SDMultiple != nil)
	add("keep_ppk", m.KeepPpk != nil)
	return k
}

// tested is a margin in the unit, after the guard; an end that is not asked is nil.
type tested struct {
	stated       MarginResult
	lower, upper *float64
}

// resolve turns a margin into the bounds that are tested for the objective, the guard taken off both ends (JCGM 106, 8.3.2:
// a guard band shrinks the region of acceptance). The error says what is wrong with the plan.
func (m Margin) resolve(c Characteristic, objective Objective, guard float64) (tested, error) {
	kinds := m.Kinds()
	if len(kinds) != 1 {
		return tested{}, fmt.Errorf("margin of %q: found %s, want exactly one kind; state one of absolute, lower and upper, tolerance_fraction", c.Name, orNone(kinds))
	}
	var t tested
	t.stated.Kind = kinds[0]
	t.stated.Guard = guard
	var lower, upper float64
	haveLower, haveUpper := true, true
	switch kinds[0] {
	case "absolute":
		if !(*m.Absolute > 0) || math.IsInf(*m.Absolute, 0) {
			return tested{}, fmt.Errorf("margin of %q: found absolute = %v, want a number above 0 in the unit; correct the plan", c.Name, *m.Absolute)
		}
		t.stated.Stated = m.Absolute
		lower, upper = -*m.Absolute, *m.Absolute
	case "bounds":
		haveLower, haveUpper = m.Lower != nil, m.Upper != nil
		t.stated.StatedLower, t.stated.StatedUpper = m.Lower, m.Upper
		if haveLower {
			lower = *m.Lower
		}
		if haveUpper {
			upper = *m.Upper
		}
		if haveLower && haveUpper && !(lower < upper) {
			return tested{}, fmt.Errorf("margin of %q: found lower = %v and upper = %v, want lower below upper; correct the plan", c.Name, lower, upper)
		}
	case "tolerance_fraction":
		f := *m.ToleranceFraction
		if !(f > 0) || math.IsInf(f, 0) {
			return tested{}, fmt.Errorf("margin of %q: found tolerance_fraction = %v, want a number above 0; correct the plan", c.Name, f)
		}
		width, ok := c.Tolerance()
		if !ok || !(width > 0) {
			return tested{}, fmt.Errorf("margin of %q: found tolerance_fraction without both specification limits, want lower and upper; state the limits or an absolute margin", c.Name)
		}
		full, half := f*width, f*width/2
		t.stated.Stated, t.stated.Full, t.stated.Half, t.stated.Of = &f, &full, &half, "full"
		upper = full
		if m.Of == "half" {
			t.stated.Of = "half"
			upper = half
		}
		lower = -upper
	default:
		return tested{}, fmt.Errorf("margin of %q: found %s, which this version does not offer, want absolute, lower and upper, or tolerance_fraction; change the plan", c.Name, kinds[0])
	}
	if objective == Equivalence && (!haveLower || !haveUpper) {
		return tested{}, fmt.Errorf("margin of %q: found one bound, want lower and upper for the objective equivalence; state both", c.Name)
	}
	needLower, needUpper := objective != NotHigher && objective != Higher, objective != NotLower && objective != Lower
	if objective == NotLower && !haveLower || objective == NotHigher && !haveUpper {
		return tested{}, fmt.Errorf("margin of %q: the bound that %s asks for is missing; state lower for not-lower, upper for not-higher", c.Name, objective)
	}
	lower, upper = lower+guard, upper-guard
	if guard > 0 && haveLower && haveUpper && !(lower < upper) ||
		guard > 0 && (kinds[0] == "absolute" || kinds[0] == "tolerance_fraction") && !(upper > 0) {
		return tested{}, fmt.Errorf("guard of %q: found %v, want less than the margin; lower the guard or state a wider margin", c.Name, guard)
	}
	if needLower && haveLower {
		t.lower = &lower
	}
	if needUpper && haveUpper {
		t.upper = &upper
	}
	return t, nil
}

func orNone(kinds []string) string {
	if len(kinds) == 0 {
		return "none"
	}
	return fmt.Sprint(kinds)
}

// permits says what a shift to the worse end of the margin would leave: Ppk and the fraction outside the limits at the given
// mean and standard deviation (normal model; Ppk as ISO 22514-2, from memory). It is nil without limits or without spread.
func permits(c Characteristic, t tested, mean, sd float64) *Permits {
	if sd <= 0 || c.Lower == nil && c.Upper == nil {
		return nil
	}
	var worst *Permits
	for _, end := range []*float64{t.lower, t.upper} {
		if end == nil {
			continue
		}
		p := Permits{Ppk: math.Inf(1)}
		if c.Lower != nil {
			z := (mean + *end - *c.Lower) / sd
			p.Ppk = math.Min(p.Ppk, z/3)
			p.Outside += dist.NormalUpper(z)
		}
		if c.Upper != nil {
			z := (*c.Upper - mean - *end) / sd
			p.Ppk = math.Min(p.Ppk, z/3)
			p.Outside += dist.NormalUpper(z)
		}
		if worst == nil || p.Ppk < worst.Ppk {
			worst = &p
		}
	}
	return worst
}
