package qa

import (
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// coverage is how many standard uncertainties of the difference a margin must reach (contract: result, "Uncertainty given").
const coverage = 2

// bias is the standard uncertainty, on the scale on which the margin is tested, of what the measuring systems add to what is
// estimated: both of a difference, the candidate's own of a shift from a stated mean, in parts of the means of a ratio of logarithms,
// and of the contrast of a ratio of means that varies most. Those of the two systems are taken as independent.
func (c *comparison) bias() float64 {
	u := c.ch.Uncertainty
	if u == nil {
		return 0
	}
	ref, cand := c.ref.summary, c.cand.summary
	switch {
	case c.margin.scale == scaleShift:
		return u.Candidate
	case c.margin.scale == scaleRatio && c.Method == "log":
		return math.Hypot(u.Reference/ref.Mean, u.Candidate/cand.Mean)
	case c.margin.scale == scaleRatio:
		return DifferenceUncertainty(c.farthest()*u.Reference, u.Candidate)
	}
	return DifferenceUncertainty(u.Reference, u.Candidate)
}

// checkUncertainty warns where the stated uncertainty of the measuring systems' bias comes near the margin: margin below
// twice the standard uncertainty of the difference (contract: result).
func (c *comparison) checkUncertainty() {
	u := c.ch.Uncertainty
	if u == nil {
		return
	}
	combined := DifferenceUncertainty(u.Reference, u.Candidate)
	lower, upper := c.margin.ends(c.ref.summary.Mean)
	for _, end := range []*float64{lower, upper} {
		if end != nil && math.Abs(*end) < coverage*combined {
			c.warn(WarnUncertainty, "", "equivalence.margin_upper", nearUncertainty(combined))
			return
		}
	}
}

func nearUncertainty(combined float64) string {
	return fmt.Sprintf("The margin is less than twice the standard uncertainty of the difference (%s): the gauges themselves may make or hide a difference of this size.", Plain(combined))
}

// differentGauges restricts the claim where the lots were measured with different gauges, and names what has no stated uncertainty
// of their bias.
func differentGauges(p Particulars, cs []Characteristic) []Warning {
	if p.GaugeReference == "" || p.GaugeCandidate == "" || p.GaugeReference == p.GaugeCandidate {
		return nil
	}
	text := "The lots were measured with different gauges (" + p.GaugeReference + "; " + p.GaugeCandidate +
		"): a difference between the gauges is part of every difference shown, and each verdict is of the lots as these gauges measure them."
	var unstated []string
	for _, c := range cs {
		if c.Kind != "attribute" && c.Uncertainty == nil {
			unstated = append(unstated, c.Name)
		}
	}
	if len(unstated) > 0 {
		text += " No uncertainty of their bias is stated for " + list(unstated) + "."
	} else {
		text += " The way gauge-bias of computing each verdict counts the stated uncertainty of their bias."
	}
	return []Warning{{Code: WarnGauges, Text: text}}
}

// withBias adds the interval that counts the uncertainty of the measuring systems' bias beside that of the readings. The squares
// of both are added; the degrees of freedom are Welch and Satterthwaite's, with none lost for what is stated (JCGM 100, G.4.1,
// from memory). Of a ratio of means each contrast has its own standard error, in which the reference's bias counts as often as the
// reference does.
func (c *comparison) withBias() {
	e, u := c.Equivalence, c.bias()
	if u > 0 && e.Scale == scaleRatio && c.Method != "log" {
		if r, err := c.contrast(); err == nil {
			if in, err := r.IntervalWithBias(1-2*c.Alpha, c.ch.Uncertainty.Reference, c.ch.Uncertainty.Candidate); err == nil {
				c.interval("gauge-bias", r.Value(), in, nil)
			}
		}
		return
	}
	if u == 0 || e.SE == nil || e.DF == nil || e.Estimate == nil {
		return
	}
	value := *e.Estimate
	if e.Scale == scaleRatio {
		value = math.Log(value)
	}
	all := math.Hypot(*e.SE, u)
	share := *e.SE / all
	df := min(*e.DF/(share*share*share*share), 1e9) // beyond, t is the normal distribution
	in := stats.Estimate{Value: value, SE: all, DF: df}.Interval(1 - 2*c.Alpha)
	if e.Scale == scaleRatio {
		value, in.Lower, in.Upper = math.Exp(value), math.Exp(in.Lower), math.Exp(in.Upper)
	}
	c.interval("gauge-bias", value, in, nil)
}
