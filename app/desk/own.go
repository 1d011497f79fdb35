package desk

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/qa"
)

// Own is a characteristic as a person types it: what it is, what its drawing says, and where it is asked otherwise than all.
type Own struct {
	Name, Column, Unit, Kind        string // Kind: a word of Kinds
	Failed                          string // the words of a failed part, with commas
	Lower, Target, Upper, PlannedSD string
	Decimals                        string
	UncertaintyReference            string
	UncertaintyCandidate            string
	Terms                           // "" or AsAll where it is asked as all are; Claim, Power and Look hold for all
}

// AsAll is the word for what a characteristic does not state for itself.
const AsAll = "as all"

// Kinds are the kinds of characteristics.
var Kinds = []string{"measured", "passed or failed"}

// OwnOf is a characteristic as it is typed, with the decimal mark d.
func OwnOf(c qa.Characteristic, d Decimal) Own {
	o := Own{
		Name: c.Name, Column: c.Column, Unit: c.Unit, Kind: Kinds[0], Failed: strings.Join(c.Failed, ", "),
		Lower: d.NumberText(c.Lower, 1), Target: d.NumberText(c.Target, 1), Upper: d.NumberText(c.Upper, 1), PlannedSD: d.NumberText(c.SD, 1),
		Terms: Terms{Decimal: d, Objective: AsAll, Method: AsAll, Alpha: d.NumberText(c.Alpha, 1), Spread: d.NumberText(c.SpreadRatio, 1), Guard: d.NumberText(c.Guard, 1)},
	}
	if c.Kind == "attribute" {
		o.Kind = Kinds[1]
	}
	if c.Decimals != nil {
		o.Decimals = fmt.Sprint(*c.Decimals)
	}
	if u := c.Uncertainty; u != nil {
		o.UncertaintyReference, o.UncertaintyCandidate = d.NumberText(&u.Reference, 1), d.NumberText(&u.Candidate, 1)
	}
	if c.Objective != "" {
		o.Objective = ObjectiveText(c.Objective)
	}
	if c.Method != "" {
		o.Method = MethodText(c.Method)
	}
	o.marginTerms(c.Margin)
	if c.Margin == nil {
		o.Margin = AsAll
	}
	return o
}

// Into is the characteristic as it is typed. What was not touched stays to the last digit.
func (o Own) Into(c qa.Characteristic) (qa.Characteristic, error) {
	was := OwnOf(c, o.Decimal)
	var err error
	c.Name, c.Column, c.Unit = strings.TrimSpace(o.Name), strings.TrimSpace(o.Column), strings.TrimSpace(o.Unit)
	if c.Name == "" {
		return c, fmt.Errorf("name: found none, want one, as the file's heading has it; type it")
	}
	if o.Kind != was.Kind {
		c.Kind = map[string]string{Kinds[0]: "numeric", Kinds[1]: "attribute"}[o.Kind]
	}
	if o.Failed != was.Failed {
		c.Failed = nil
		for _, w := range strings.Split(o.Failed, ",") {
			if w = strings.TrimSpace(w); w != "" && !slices.Contains(c.Failed, w) {
				c.Failed = append(c.Failed, w)
			}
		}
	}
	for _, n := range []struct {
		name, typed, before string
		to                  **float64
	}{
		{"lower limit", o.Lower, was.Lower, &c.Lower},
		{"target", o.Target, was.Target, &c.Target},
		{"upper limit", o.Upper, was.Upper, &c.Upper},
		{"planned sd", o.PlannedSD, was.PlannedSD, &c.SD},
		{"alpha", o.Alpha, was.Alpha, &c.Alpha},
		{"spread ratio", o.Spread, was.Spread, &c.SpreadRatio},
		{"guard", o.Guard, was.Guard, &c.Guard},
	} {
		if n.typed == n.before {
			continue
		}
		if *n.to, err = o.Decimal.Number(n.typed); err != nil {
			return c, fmt.Errorf("%s: %w", n.name, err)
		}
	}
	if c, err = o.precision(c, was); err != nil {
		return c, err
	}
	if o.Objective != was.Objective {
		c.Objective = ""
		if o.Objective != AsAll {
			c.Objective = valueOf(Objectives, objectives, o.Objective)
		}
	}
	if o.Method != was.Method {
		c.Method = ""
		if o.Method != AsAll {
			c.Method = valueOf(Methods, methods, o.Method)
		}
	}
	if o.Margin == AsAll {
		c.Margin = nil
		return c, nil
	}
	c.Margin, err = o.Terms.margin(was.Terms, c.Margin)
	return c, err
}

// precision takes the decimals and the uncertainties of the measuring systems.
func (o Own) precision(c qa.Characteristic, was Own) (qa.Characteristic, error) {
	if o.Decimals != was.Decimals {
		v, err := o.Decimal.Number(o.Decimals)
		switch {
		case err != nil || v != nil && (*v != float64(int(*v)) || *v < 0):
			return c, fmt.Errorf("decimals: found %q, want a whole number from 0 to 12", o.Decimals)
		case v == nil:
			c.Decimals = nil
		default:
			d := int(*v)
			c.Decimals = &d
		}
	}
	if o.UncertaintyReference == was.UncertaintyReference && o.UncertaintyCandidate == was.UncertaintyCandidate {
		return c, nil
	}
	var u qa.Uncertainty
	stated := 0
	for _, n := range []struct {
		name, typed string
		to          *float64
	}{{"uncertainty, reference", o.UncertaintyReference, &u.Reference}, {"uncertainty, candidate", o.UncertaintyCandidate, &u.Candidate}} {
		v, err := o.Decimal.Number(n.typed)
		if err != nil {
			return c, fmt.Errorf("%s: %w", n.name, err)
		}
		if v != nil {
			*n.to, stated = *v, stated+1
		}
	}
	switch stated {
	case 0:
		c.Uncertainty = nil
	case 1:
		return c, fmt.Errorf("uncertainty: found one of the two measuring systems, want both, 0 where one has none; type the other")
	default:
		c.Uncertainty = &u
	}
	return c, nil
}
