package qa

import (
	"fmt"
	"math"
	"slices"

	"lotpair/qa/stats"
)

// farReadingP is the p-value of Grubbs' test below which the farthest reading is called far. It removes nothing.
// Common practice, no source.
const farReadingP = 0.01

// checkSamples looks at the readings for what a reader of the verdict must know.
func (c *comparison) checkSamples(ref, cand Series, x, y []float64, sx, sy stats.Summary) {
	c.Checks.Reference = c.checkOne(Reference, ref, x, sx)
	c.Checks.Candidate = c.checkOne(Candidate, cand, y, sy)
	for _, s := range []struct {
		side Side
		SampleChecks
	}{{Reference, c.Checks.Reference}, {Candidate, c.Checks.Candidate}} {
		smaller := math.Min(sx.SD, sy.SD)
		if s.Resolution != nil && sx.N > 1 && sy.N > 1 && *s.Resolution > smaller {
			c.warn(WarnCoarse, s.side, "checks."+string(s.side)+".resolution",
				fmt.Sprintf("The readings step by %s, more than the smaller standard deviation: the gauge resolves too little to see the spread.", Plain(*s.Resolution)))
		}
	}
	if len(x) == len(y) && len(x) > 2 {
		a, b := slices.Clone(x), slices.Clone(y)
		slices.Sort(a)
		slices.Sort(b)
		if slices.Equal(a, b) {
			c.warn(WarnIdentical, "", "difference", "Both lots hold the same readings: a copy is likelier than chance. Check the file.")
		}
	}
}

func (c *comparison) checkOne(side Side, s Series, x []float64, sum stats.Summary) SampleChecks {
	var out SampleChecks
	switch {
	case sum.N >= 2 && sum.Constant():
		c.warn(WarnNoVariation, side, string(side)+".sd", fmt.Sprintf("All %d readings of the %s lot are equal.", sum.N, side))
	case sum.N >= 2 && sum.N < 5:
		// Common practice, no source: below five readings neither spread nor shape can be judged.
		c.warn(WarnFew, side, string(side)+".n", fmt.Sprintf("Only %d readings in the %s lot: the verdict rests on the assumption of a normal distribution, which so few cannot show.", sum.N, side))
	}
	places := 0
	used := s.used()
	for _, r := range used {
		places = max(places, r.Decimals)
	}
	if step := stats.Resolution(x, places); step > 0 {
		out.Resolution = &step
	}
	if g, err := stats.GrubbsTest(x); err == nil && finite(g.G, g.P) {
		r := used[g.Index]
		out.Grubbs = &GrubbsResult{G: g.G, P: g.P, Cell: r.Source.Place()}
		if g.P < farReadingP {
			c.warn(WarnFarReading, side, "checks."+string(side)+".grubbs",
				fmt.Sprintf("One far reading: %s in %s (Grubbs p %s). It is used; no reading is left out because of its size alone.", r.Source.Text, r.Source.Place(), FormatP(g.P)))
		}
	}
	return out
}

// checkMarginWidth warns of a margin that reaches beyond the whole tolerance: it could never refute anything that matters.
func (c *comparison) checkMarginWidth(ch Characteristic) {
	width, ok := ch.Tolerance()
	if !ok {
		return
	}
	for _, end := range []*float64{c.margin.lower, c.margin.upper} {
		if end != nil && math.Abs(*end) > width {
			c.warn(WarnMarginTolerance, "", "equivalence.margin_upper", "The margin is wider than the whole tolerance.")
			return
		}
	}
}

// checkUncertainty warns where the stated uncertainty of the measuring systems' bias comes near the margin: margin below
// twice the standard uncertainty of the difference (contract: result).
func (c *comparison) checkUncertainty(ch Characteristic) {
	u := ch.Uncertainty
	if u == nil {
		return
	}
	combined := math.Hypot(u.Reference, u.Candidate)
	for _, end := range []*float64{c.margin.lower, c.margin.upper} {
		if end != nil && math.Abs(*end) < 2*combined {
			c.warn(WarnUncertainty, "", "equivalence.margin_upper",
				fmt.Sprintf("The margin is less than twice the standard uncertainty of the difference (%s): the gauges themselves may make or hide a difference of this size.", Plain(combined)))
			return
		}
	}
}

func (c *comparison) spread(ref, cand stats.Summary) {
	s := &SpreadResult{Verdict: "not asked"}
	level := 1 - 2*c.Alpha
	v, err := stats.FRatio(ref, cand, level)
	if err != nil || !finite(v.SDRatio, v.F, v.P, v.Interval.Lower, v.Interval.Upper) {
		// The reason stands in the warnings of the samples: too few readings, or no variation.
		c.warn(WarnNotComputable, "", "spread", "The ratio of standard deviations needs two readings and some variation in each lot.")
		c.Spread = s
		return
	}
	s.SDRatio, s.Level, s.Lower, s.Upper = &v.SDRatio, &level, &v.Interval.Lower, &v.Interval.Upper
	s.F = &FResult{Statistic: v.F, DF1: v.DF1, DF2: v.DF2, P: max(v.P, smallestP)}
	if v.P < smallestP {
		c.warn(WarnPBelowRange, "", "spread.f.p", "The p-value is below 1e-300 and is given as 1e-300.")
	}
	c.Spread = s
}

func (c *comparison) performance(ch Characteristic, x, y []float64, sx, sy stats.Summary) {
	if ch.Lower == nil && ch.Upper == nil || sx.N == 0 || sy.N == 0 {
		return
	}
	c.Performance = &PerformanceResult{Reference: c.lotPerformance(ch, x, sx), Candidate: c.lotPerformance(ch, y, sy)}
}

func (c *comparison) lotPerformance(ch Characteristic, x []float64, sum stats.Summary) LotPerformance {
	p := stats.Performance(x, sum, ch.Lower, ch.Upper)
	out := LotPerformance{OutsideCounted: p.OutsideCounted}
	if p.HasPp && finite(p.Pp) {
		out.Pp = &p.Pp
	}
	if p.HasPpk && finite(p.Ppk, p.OutsideEstimated) {
		out.Ppk, out.OutsideEstimated = &p.Ppk, &p.OutsideEstimated
	}
	return out
}

// Decimals is how many decimals to show: what the plan says, else what the readings show, 10 at most.
func Decimals(ch Characteristic, ref, cand Series) int {
	if ch.Decimals != nil {
		return *ch.Decimals
	}
	d := 0
	for _, s := range []Series{ref, cand} {
		for _, r := range s.Readings {
			d = max(d, r.Decimals)
		}
	}
	return min(d, 10)
}
