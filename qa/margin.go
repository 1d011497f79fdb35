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

func orNone(kinds []string) string {
	if len(kinds) == 0 {
		return "none"
	}
	return fmt.Sprint(kinds)
}

// permits says what a shift to the worse end of the margin would leave: Ppk and the fraction outside the limits, at the given
// mean and standard deviation (normal model; Ppk as ISO 22514-2, from memory). It is nil without limits or without spread.
func permits(c Characteristic, t tested, mean, sd float64) *Permits {
	if !(sd > 0) || c.Lower == nil && c.Upper == nil {
		return nil
	}
	if t.scale == scaleShift {
		mean = t.mean
	}
	lower, upper := t.ends(mean)
	var worst *Permits
	for _, end := range []*float64{lower, upper} {
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
		if finite(p.Ppk, p.Outside) && (worst == nil || p.Ppk < worst.Ppk) {
			worst = &p
		}
	}
	return worst
}
