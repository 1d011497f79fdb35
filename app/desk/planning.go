package desk

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/stats"
)

// Planned is what the criterion comes to for one characteristic before its readings are known.
type Planned struct {
	Characteristic qa.Characteristic
	Fault          string // why nothing can be said
	Margin         string // in the unit
	Lower, Upper   *float64
	Permits        *qa.Permits
	SD             float64 // 0 where none is planned
	N              int     // parts a lot for the wanted power; 0 where it is not known
	Power          float64 // reached with N

	design stats.Design
	ready  bool   // whether design can be asked
	pairs  int    // the most that are needed of them; 0 where it is not known
	asked  string // what is asked in a way that is not planned for here; empty for what is
}

// planned says what the plan comes to for one characteristic. The margin in the unit and what it permits are taken from the
// comparison itself, run on two readings a lot that have the target as their mean and the planned standard deviation.
func planned(p qa.Plan, c qa.Characteristic) Planned { return plannedWith(p, c, true) }

// plannedWith is the same; without sizes it is not said how many parts are needed, which takes longest.
func plannedWith(p qa.Plan, c qa.Characteristic, sizes bool) Planned {
	out := Planned{Characteristic: c}
	centre, step := centreOf(c), 1.0
	if c.SD != nil && *c.SD > 0 {
		out.SD, step = *c.SD, *c.SD
	}
	alone := p
	alone.Characteristics = []qa.Characteristic{c}
	for _, f := range alone.Validate() {
		if lacksMargin(f) {
			out.Fault = noMargin
			return out
		}
		if strings.HasPrefix(f.Key, "criterion.margin") || strings.Contains(f.Key, "("+c.Name+")") {
			out.Fault = f.Error()
			return out
		}
	}
	p, c, out.asked = plainly(p, c)
	if out.asked == "log" { // its readings are above 0
		if centre <= 0 {
			centre = 1
		}
		step = math.Min(step, centre/10)
	}
	if c.Kind == "attribute" {
		return out.fractions(p, c)
	}
	at := func(mean float64) qa.Lot {
		s := qa.Series{Characteristic: c.Name, Rows: 2}
		for _, v := range []float64{mean - step/math.Sqrt2, mean + step/math.Sqrt2} {
			s.Readings = append(s.Readings, qa.Reading{Value: v})
		}
		return qa.Lot{Series: []qa.Series{s}}
	}
	// The candidate stands far off: a verdict that is left undecided would be asked how large a new study must be.
	far := 1000 * (step + math.Abs(centre))
	if w, ok := c.Tolerance(); ok {
		far += 1000 * w
	}
	r := qa.Readings{Characteristics: []qa.Characteristic{c}, Reference: at(centre), Candidate: at(centre + far)}
	p.Characteristics, p.Sensitivity = []qa.Characteristic{c}, nil
	res, err := qa.Compare(p, r, qa.Run{})
	if err != nil {
		out.Fault = err.Error()
		return out
	}
	x := res.Characteristics[0]
	e := x.Equivalence
	if e == nil || e.MarginLower == nil && e.MarginUpper == nil {
		out.Margin = "no margin"
		return out
	}
	out.Margin, out.Lower, out.Upper = qa.MarginText(x), e.MarginLower, e.MarginUpper
	if e.Scale == "ratio" {
		out.Lower, out.Upper = inUnit(e.MarginLower, centre), inUnit(e.MarginUpper, centre)
		if centre == 0 {
			return out
		}
	}
	if out.SD > 0 {
		if c.Target != nil || c.Lower != nil && c.Upper != nil { // else it is not known where the reference sits
			out.Permits = e.Permits
		}
		if sizes {
			out.size(p, x)
		}
	}
	return out
}

// plainly is the plan with the question asked of two plain lots, and what is asked otherwise: the margin in the unit is the
// same, the number of parts is not.
func plainly(p qa.Plan, c qa.Characteristic) (qa.Plan, qa.Characteristic, string) {
	asked := ""
	if p.Criterion.Groups == "random" || p.Criterion.Claim == "sources" {
		asked, p.Criterion.Groups, p.Criterion.Claim = "groups", "", ""
	}
	method, objective := p.Criterion.Method, p.Criterion.Objective
	if c.Method != "" {
		method = c.Method
	}
	if c.Objective != "" {
		objective = c.Objective
	}
	switch {
	case method == "paired":
		asked, c.Method = method, "welch"
	case method == "log":
		asked = method
	case objective != "" && !objective.AgainstMargin():
		asked = "difference"
	}
	return p, c, asked
}

// fractions says the margin of parts that pass or fail.
func (p Planned) fractions(plan qa.Plan, c qa.Characteristic) Planned {
	m := c.Margin
	if m == nil {
		m = plan.Criterion.Margin
	}
	p.asked, p.Margin = "attribute", "no margin"
	if m == nil {
		return p
	}
	p.Lower, p.Upper = m.Lower, m.Upper
	if m.Absolute != nil {
		down := -*m.Absolute
		p.Lower, p.Upper = &down, m.Absolute
		p.Margin = "±" + qa.Fixed(100**m.Absolute, 2) + " % of the parts"
		return p
	}
	var ends []string
	for _, e := range []*float64{m.Lower, m.Upper} {
		if e != nil {
			ends = append(ends, qa.Fixed(100**e, 2))
		}
	}
	p.Margin = strings.Join(ends, " to ") + " % of the parts"
	return p
}

// unplanned says why it is not said how many parts are needed.
var unplanned = map[string]string{
	"groups":     "With groups as a sample it is the number of groups that counts, not that of parts: how many are needed is not planned for here.",
	"paired":     "For pairs it is the standard deviation of the differences that counts: “How many parts?” under More plans for pairs.",
	"log":        "For a ratio of geometric means it is the spread of the logarithms that counts: how many parts are needed is not planned for here.",
	"difference": "To show a difference, the true difference that is to be found must be stated: “How many parts?” under More plans for it.",
	"attribute":  "For parts that pass or fail the two fractions must be stated: “How many parts?” under More plans for them.",
}

// inUnit is a ratio's end as a difference from the mean it is a ratio of.
func inUnit(ratio *float64, mean float64) *float64 {
	if ratio == nil {
		return nil
	}
	d := (*ratio - 1) * mean
	return &d
}

// centreOf is where a characteristic is expected: its target, the middle of its limits, or the one limit it has.
func centreOf(c qa.Characteristic) float64 {
	switch {
	case c.Target != nil:
		return *c.Target
	case c.Lower != nil && c.Upper != nil:
		return *c.Lower + (*c.Upper-*c.Lower)/2
	case c.Lower != nil:
		return *c.Lower
	case c.Upper != nil:
		return *c.Upper
	}
	return 0
}

// mostParts is the largest study that is thought of.
const mostParts = 100_000

// size finds how many parts a lot the wanted power needs.
func (p *Planned) size(plan qa.Plan, x qa.Comparison) {
	aims := map[qa.Objective]stats.Aim{qa.Equivalence: stats.AimWithin, qa.NotLower: stats.AimNotLower, qa.NotHigher: stats.AimNotHigher}
	aim, ok := aims[x.Objective]
	pairs := p.asked == "paired" && x.Equivalence.Scale == "difference"
	if !ok || p.asked != "" && !pairs {
		return
	}
	p.design = stats.Design{Aim: aim, Welch: x.Method == "welch", SDRef: p.SD, SDCand: p.SD, Alpha: x.Alpha, Lower: math.Inf(-1), Upper: math.Inf(1)}
	p.design.Paired = x.Equivalence.Scale == "shift" // one lot's mean against a stated one
	if pairs {                                       // the most that differences vary where a part's readings go together at all
		p.design.SDRef *= math.Sqrt2
	}
	if u := p.Characteristic.Uncertainty; u != nil {
		p.design.Bias = qa.DifferenceUncertainty(u.Reference, u.Candidate)
		if p.design.Paired {
			p.design.Bias = u.Candidate
		}
	}
	p.design.Paired = p.design.Paired || pairs
	if p.Lower != nil {
		p.design.Lower = *p.Lower
	}
	if p.Upper != nil {
		p.design.Upper = *p.Upper
	}
	power := wantedPower(plan)
	n, _, reached, err := stats.Size(p.design, 1, power)
	if err != nil || n > mostParts {
		return
	}
	if pairs {
		p.pairs, p.Power = n, reached
		return
	}
	p.N, p.Power, p.ready = n, reached, true
}

func wantedPower(p qa.Plan) float64 {
	if p.Criterion.Power != nil {
		return *p.Criterion.Power
	}
	return 0.9
}

// at is the power with n parts a lot at a true difference.
func (p Planned) at(n int, shift float64) (float64, error) {
	if !p.ready {
		return 0, errors.New("power: found no planned standard deviation, want one; type it below")
	}
	d := p.design
	d.NRef, d.NCand, d.Shift = n, n, shift
	return d.Power()
}

// Curves are the power curves: of the parts needed, of half as many and of a good half more.
func (p Planned) Curves() (figure.PowerCurves, bool) {
	out := figure.PowerCurves{Name: p.Characteristic.Name, Unit: p.Characteristic.Unit, Lower: p.Lower, Upper: p.Upper}
	if !p.ready {
		return out, false
	}
	reach := 1.3 * math.Max(absolute(p.Lower), absolute(p.Upper))
	out.Low, out.High = -reach, reach
	const steps = 60
	for _, k := range []figure.Curve{{N: p.N * 7 / 4}, {N: p.N, Main: true}, {N: p.N / 2, Fewer: true}} {
		if k.N < 2 || k.N == p.N && !k.Main {
			continue
		}
		for i := range steps + 1 {
			power, err := p.at(k.N, -reach+2*reach*float64(i)/steps)
			if err != nil {
				return out, false
			}
			k.Powers = append(k.Powers, power)
		}
		out.Curves = append(out.Curves, k)
	}
	return out, true
}

func absolute(v *float64) float64 {
	if v == nil {
		return 0
	}
	return math.Abs(*v)
}

// sentences say what the plan needs and what it lets through. shift is the true difference that is thought of.
func (p Planned) sentences(plan qa.Plan, shift float64) (headline string, out []string) {
	unit, power := p.Characteristic.Unit, wantedPower(plan)
	switch {
	case p.Fault != "":
		return "The margin is not settled.", []string{inWords.Replace(p.Fault)}
	case p.asked != "":
		out = []string{"The margin is " + p.Margin + "."}
		if m := p.Permits; m != nil {
			out = append(out, p.permitsText(m))
		}
		out = append(out, unplanned[p.asked])
		if p.pairs > 0 {
			out = append(out, fmt.Sprintf("At most it is %s, √2 times that of the readings, where the two readings of a part have nothing in common: %d pairs then show it with probability %s. The more they have in common, the fewer do.", withUnit(qa.ThreeDigits(p.design.SDRef), unit), p.pairs, qa.Fixed(p.Power, 2)))
		}
		return "How many parts are needed?", out
	case p.SD == 0:
		return "How many parts are needed?", []string{"The margin is " + p.Margin + ". Type the standard deviation that you expect: then it is said here how many parts of each lot are needed."}
	case !p.ready:
		return "No number of parts would do.", []string{fmt.Sprintf("The margin is %s; at a standard deviation of %s more than %d parts a lot would be needed, or none is enough.", p.Margin, withUnit(qa.Plain(p.SD), unit), mostParts)}
	}
	headline = fmt.Sprintf("%d parts a lot show it with probability %s", p.N, qa.Fixed(p.Power, 2))
	text := fmt.Sprintf("if the true means are equal and the standard deviation is %s in both lots, normal and independent.", withUnit(qa.Plain(p.SD), unit))
	if half := p.halfway(); half != 0 {
		d := p.design
		d.Shift = half
		if n, _, _, err := stats.Size(d, 1, power); err == nil && n <= mostParts {
			text += fmt.Sprintf(" If the candidate really sits half a margin off, %d are needed.", n)
		}
	}
	out = append(out, text)
	if b := p.design.Bias; b > 0 {
		out = append(out, fmt.Sprintf("This counts that the gauges' bias is not known to better than a standard uncertainty of %s in the difference; that does not shrink with more parts.", withUnit(qa.ThreeDigits(b), unit)))
	}
	if shift != 0 {
		d := p.design
		d.Shift = shift
		if n, _, reached, err := stats.Size(d, 1, power); err == nil && n <= mostParts {
			out = append(out, fmt.Sprintf("At a true difference of %s, %d parts a lot show it with probability %s.", withUnit(qa.Plain(shift), unit), n, qa.Fixed(reached, 2)))
		} else {
			out = append(out, fmt.Sprintf("At a true difference of %s no number of parts shows it: that is at or beyond the margin, or more than %d parts.", withUnit(qa.Plain(shift), unit), mostParts))
		}
	}
	if few := p.N / 2; few >= 2 {
		d := p.design
		d.NRef, d.NCand = few, few
		if m, err := stats.SmallestMargin(d, power); err == nil {
			out = append(out, fmt.Sprintf("With %d parts a lot the smallest margin that can be shown with probability %s is ±%s.", few, qa.Plain(power), withUnit(qa.ThreeDigits(m), unit)))
		}
	}
	if m := p.Permits; m != nil {
		out = append(out, p.permitsText(m))
	}
	if r := plan.Criterion.SpreadRatio; r != nil && *r > 1 {
		d := p.design
		d.SpreadRatio = *r
		if n, _, _, err := stats.SpreadSize(d, 1, power); err == nil && n <= mostParts {
			out = append(out, fmt.Sprintf("To show a spread ratio below %s needs %d a lot.", qa.Plain(*r), n))
		}
	}
	return headline, out
}

func (p Planned) permitsText(m *qa.Permits) string {
	return fmt.Sprintf("A mean at the margin would leave Ppk %s and %s outside the limits, for a reference that sits on %s.",
		qa.Fixed(m.Ppk, 2), qa.ShareText(m.Outside), withUnit(qa.Plain(centreOf(p.Characteristic)), p.Characteristic.Unit))
}

// halfway is half the margin, towards its nearer end.
func (p Planned) halfway() float64 {
	switch {
	case p.Upper != nil && (p.Lower == nil || *p.Upper <= -*p.Lower) && *p.Upper > 0:
		return *p.Upper / 2
	case p.Lower != nil && *p.Lower < 0:
		return *p.Lower / 2
	}
	return 0
}

// together says how likely all characteristics pass with as many parts as the one that needs most.
func together(all []Planned, m *Planner) string {
	most, chance := 0, 1.0
	for _, p := range all {
		if !p.ready {
			return ""
		}
		most = max(most, p.N)
	}
	if len(all) < 2 {
		return ""
	}
	for _, p := range all {
		power, err := m.power(p, most)
		if err != nil {
			return ""
		}
		chance *= power
	}
	return fmt.Sprintf("With %d parts a lot all %d pass with probability %s if there is no true difference and they are independent.", most, len(all), qa.Fixed(chance, 2))
}
