package qa

import "strings"

// Characteristic is what is measured on a part, and what its drawing and criterion say of it. The fields that a plan may
// leave out are pointers or empty.
type Characteristic struct {
	Name      string    `json:"name" toml:"name"`
	Column    string    `json:"column,omitempty" toml:"column"` // the file's heading where it differs
	Kind      string    `json:"kind,omitempty" toml:"kind"`     // numeric (default) or attribute
	Failed    []string  `json:"failed,omitempty" toml:"failed"`
	Unit      string    `json:"unit,omitempty" toml:"unit"`
	Lower     *float64  `json:"lower,omitempty" toml:"lower"` // specification limits, in the unit
	Target    *float64  `json:"target,omitempty" toml:"target"`
	Upper     *float64  `json:"upper,omitempty" toml:"upper"`
	SD        *float64  `json:"sd,omitempty" toml:"sd"` // known beforehand, for planning
	Decimals  *int      `json:"decimals,omitempty" toml:"decimals"`
	Objective Objective `json:"objective,omitempty" toml:"objective"` // these override the plan's criterion
	Alpha     *float64  `json:"alpha,omitempty" toml:"alpha"`
	Method    string    `json:"method,omitempty" toml:"method"`
	Margin    *Margin   `json:"margin,omitempty" toml:"margin"`
	Guard     *float64  `json:"guard,omitempty" toml:"guard"`

	SpreadRatio *float64     `json:"spread_ratio,omitempty" toml:"spread_ratio"`
	Uncertainty *Uncertainty `json:"uncertainty,omitempty" toml:"uncertainty"`
}

// Uncertainty holds the standard uncertainties of the measuring systems' bias, in the unit.
type Uncertainty struct {
	Reference float64 `json:"reference" toml:"reference"`
	Candidate float64 `json:"candidate" toml:"candidate"`
}

// Heading is the heading under which the characteristic stands in the file.
func (c Characteristic) Heading() string {
	if c.Column != "" {
		return c.Column
	}
	return c.Name
}

// Tolerance is the upper minus the lower specification limit; false where one of them is missing.
func (c Characteristic) Tolerance() (float64, bool) {
	if c.Lower == nil || c.Upper == nil {
		return 0, false
	}
	return *c.Upper - *c.Lower, true
}

// JoinSpace trims s and joins every run of white space, line breaks included, into one space: how names are compared.
func JoinSpace(s string) string {
	return strings.Join(strings.FieldsFunc(s, func(r rune) bool {
		return r == ' ' || r == '\t' || r == '\n' || r == '\r' || r == '\u00a0' || r == '\u202f' || r == '\u2009'
	}), " ")
}
