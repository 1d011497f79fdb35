package qa

import "fmt"

// SealFaults lists what keeps a plan from being sealed: margins that rest on specification limits which the plan itself does
// not state. A limit read from the file later would be no part of the seal (contract: plan, "The seal").
func (p Plan) SealFaults() []PlanFault {
	v := &validator{}
	list := p.Characteristics
	if len(list) == 0 {
		list = []Characteristic{{}}
	}
	for i, c := range list {
		key := "criterion"
		if len(p.Characteristics) > 0 {
			key = fmt.Sprintf("characteristic %d (%s)", i+1, c.Name)
		}
		a := p.askedOf(c)
		if a.margin == nil {
			continue
		}
		_, both := c.Tolerance()
		kind, wanted := "", ""
		switch {
		case a.margin.ToleranceFraction != nil && !both:
			kind, wanted = "tolerance_fraction", "lower and upper"
		case a.margin.KeepPpk != nil && c.Lower == nil && c.Upper == nil:
			kind, wanted = "keep_ppk", "lower or upper"
		default:
			continue
		}
		v.fault(key+".margin", kind+" without specification limits in the plan", wanted+" stated under [[characteristic]] before the plan is sealed", "state them, or an absolute margin")
	}
	return v.faults
}
