package qa

import (
	"fmt"

	"lotpair/qa/stats"
)

// fewestForBonett is the number of readings a lot from which Bonett's interval decides (contract: result, "Spread asked").
const fewestForBonett = 5

// spread compares the standard deviations: the F interval (of pairs: Pitman and Morgan's), Bonett's, and the verdict where a
// ratio was asked. For the method log it is on the logarithms.
func (c *comparison) spread() {
	s := &SpreadResult{Verdict: SpreadNotAsked}
	c.Spread = s
	if r := c.asked.spreadRatio; r != nil {
		s.Asked, s.Verdict = copied(r), SpreadUndecided
	}
	x, y, a, b := c.ref.sorted, c.cand.sorted, c.ref.summary, c.cand.summary
	switch c.Method {
	case "paired":
		x, y = c.ref.values, c.cand.values // in the order of the pairs
	case "log":
		var ok1, ok2 bool
		x, ok1 = logarithms(x)
		y, ok2 = logarithms(y)
		if !ok1 || !ok2 {
			return
		}
		a, b = stats.SummarizeSorted(x), stats.SummarizeSorted(y)
	}
	level := 1 - 2*c.Alpha
	var in stats.Interval
	if c.Method == "paired" {
		v, err := stats.PitmanMorgan(x, y, level)
		if err != nil || !finite(v.SDRatio, v.T, v.P, v.Interval.Lower, v.Interval.Upper) {
			c.noSpread()
			return
		}
		s.SDRatio, in = &v.SDRatio, v.Interval
		s.PitmanMorgan = &PitmanMorganResult{T: v.T, DF: v.DF, P: *c.pValue(v.P, "spread.pitman_morgan.p")}
	} else {
		v, err := stats.FRatio(a, b, level)
		if err != nil || !finite(v.SDRatio, v.F, v.P, v.Interval.Lower, v.Interval.Upper) {
			c.noSpread()
			return
		}
		s.SDRatio, in = &v.SDRatio, v.Interval
		s.F = &FResult{Statistic: v.F, DF1: v.DF1, DF2: v.DF2, P: *c.pValue(v.P, "spread.f.p")}
	}
	s.Level, s.Lower, s.Upper = &level, &in.Lower, &in.Upper
	c.bonett(x, y, level)
	c.judgeSpread(in)
}

// noSpread says that there is no ratio; the reason stands in the warnings of the lots: too few readings, or no variation.
func (c *comparison) noSpread() {
	c.warn(WarnNotComputable, "", "spread", "The ratio of standard deviations needs two readings and some variation in each lot.")
}

func (c *comparison) bonett(x, y []float64, level float64) {
	if c.Method == "paired" || len(x) < fewestForBonett || len(y) < fewestForBonett {
		return
	}
	b, err := stats.BonettRatio(x, y, level)
	if err != nil || !finite(b.Lower, b.Upper) {
		return
	}
	c.Spread.Bonett = &IntervalResult{Level: level, Lower: b.Lower, Upper: b.Upper}
}

// judgeSpread gives the verdict on the spread where one was asked: Bonett's interval decides, and below five readings a lot
// the one that assumes normal readings, which is said.
func (c *comparison) judgeSpread(in stats.Interval) {
	s := c.Spread
	if s.Asked == nil {
		return
	}
	lower, upper := in.Lower, in.Upper
	switch {
	case s.Bonett != nil:
		lower, upper = s.Bonett.Lower, s.Bonett.Upper
	case c.Method != "paired":
		c.warn(WarnSpreadNormal, "", "spread.verdict", "With fewer than five readings in a lot the verdict on the spread assumes normal readings.")
	}
	switch {
	case upper < *s.Asked:
		s.Verdict = SpreadAcceptable
	case lower > *s.Asked:
		s.Verdict = SpreadNotAcceptable
	}
}

// withSpread joins the verdict on the mean with that on the spread, where one was asked: refuted where either is, else
// undecided where either is, else shown.
func (c *comparison) withSpread(mean Verdict) Verdict {
	if c.Spread == nil || c.Spread.Asked == nil || mean.Refuted() {
		return mean
	}
	if c.margin.fromSample || c.asked.grouped && c.Difference.P == nil {
		return Undecided // whatever the readings: for planning only, or one group
	}
	switch {
	case c.Spread.Verdict == SpreadNotAcceptable && c.Objective == Equivalence:
		return NotEquivalent
	case c.Spread.Verdict == SpreadNotAcceptable:
		return Contradicted
	case c.Spread.Verdict == SpreadUndecided:
		return Undecided
	}
	return mean
}

// spreadAskedText says the ratio that was asked, for sentences.
func spreadAskedText(s *SpreadResult) string {
	if s == nil || s.Asked == nil {
		return ""
	}
	switch s.Verdict {
	case SpreadAcceptable:
		return fmt.Sprintf("below %s, as asked", Fixed(*s.Asked, 2))
	case SpreadNotAcceptable:
		return fmt.Sprintf("not below %s, as asked", Fixed(*s.Asked, 2))
	}
	return fmt.Sprintf("below %s not shown", Fixed(*s.Asked, 2))
}
