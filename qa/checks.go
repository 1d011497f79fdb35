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

// fewestToJudge is the number of readings below which neither spread nor shape can be judged, nor a far one told from rounding.
// Common practice, no source.
const fewestToJudge = 5

// notNormalP is the p-value of Shapiro and Wilk's test below which a lot is said not to look normal (contract: result).
const notNormalP = 0.01

// driftP is the p-value of the runs test below which a lot is said to drift or jump. Common practice, no source.
const driftP = 0.01

// cutOffP is the p-value below which a lot is said to end sharply at a limit. Common practice, no source.
const cutOffP = 0.01

// mostForShapiro is the most readings Royston's approximation holds for (Royston 1995, AS R94).
const mostForShapiro = 5000

// checkSamples looks at the readings for what a reader of the verdict must know. It decides nothing.
func (c *comparison) checkSamples() {
	ref, cand := c.ref, c.cand
	c.Checks.Reference, c.Checks.Candidate = c.checkOne(ref), c.checkOne(cand)
	for _, s := range []struct {
		side Side
		SampleChecks
	}{{Reference, c.Checks.Reference}, {Candidate, c.Checks.Candidate}} {
		smaller := math.Min(ref.summary.SD, cand.summary.SD)
		if s.Resolution != nil && ref.summary.N > 1 && cand.summary.N > 1 && *s.Resolution > smaller*(1+1e-9) { // equal but for rounding is no coarser
			c.warn(WarnCoarse, s.side, "checks."+string(s.side)+".resolution",
				fmt.Sprintf("The readings step by %s, more than the smaller standard deviation: the gauge resolves too little to see the spread.", Plain(*s.Resolution)))
		}
	}
	if len(ref.values) > 2 && slices.Equal(ref.sorted, cand.sorted) {
		c.warn(WarnIdentical, "", "difference", "Both lots hold the same readings: a copy is likelier than chance. Check the file.")
	}
	if c.Method == "paired" {
		c.checkDifferences()
	}
}

func (c *comparison) checkOne(s sample) SampleChecks {
	var out SampleChecks
	n := s.summary.N
	if n >= 2 && s.summary.Constant() {
		c.warn(WarnNoVariation, s.side, string(s.side)+".sd", fmt.Sprintf("All %d readings of the %s lot are equal.", n, s.side))
	}
	if n > 0 && n < fewestToJudge { // without any, that alone is said
		c.warn(WarnFew, s.side, string(s.side)+".n", fmt.Sprintf("Only %s in the %s lot: the verdict rests on the assumption of a normal distribution, which so few cannot show.", Count(n, "reading", "readings"), s.side))
	}
	if d := written(s); d >= 0 {
		if step := stats.Resolution(s.values, d); step > 0 {
			out.Resolution = &step
		}
	}
	x, sorted := s.values, s.sorted
	if c.Method == "log" {
		var ok bool
		sorted, _ = logarithms(sorted)
		if x, ok = s.logarithms(); !ok {
			c.warn(WarnNotPositive, s.side, "equivalence", fmt.Sprintf("A reading of the %s lot is not above 0: it has no logarithm, and nothing is tested.", s.side))
			return out
		}
	}
	c.shape(s, x, sorted, &out)
	c.order(s, x, sorted, &out)
	c.cutOff(s)
	return out
}

// shape asks whether the readings look normal and which lie far from the others.
func (c *comparison) shape(s sample, x, sorted []float64, out *SampleChecks) {
	path := "checks." + string(s.side)
	if len(x) > mostForShapiro {
		c.warn(WarnNotComputable, s.side, path+".shapiro_wilk", fmt.Sprintf("Shapiro and Wilk's test holds for at most %d readings and is left out.", mostForShapiro))
	} else if w, err := stats.ShapiroWilk(sorted); err == nil && finite(w.W, w.P) {
		out.ShapiroWilk = &ShapiroWilkResult{W: w.W, P: w.P}
		if w.P < notNormalP {
			c.warn(WarnNotNormal, s.side, path+".shapiro_wilk", fmt.Sprintf("The readings of the %s lot do not look normal (Shapiro–Wilk p %s). The means are judged all the same; what lies outside the limits is estimated less surely. No method is switched because of it.", s.side, FormatP(w.P)))
		}
	}
	if g, err := stats.GrubbsTest(x); err == nil && finite(g.G, g.P) {
		r := s.used[g.Index]
		out.Grubbs = &GrubbsResult{G: g.G, P: g.P, Cell: r.Source.Place()}
		if g.P < farReadingP && len(x) >= fewestToJudge {
			c.warn(WarnFarReading, s.side, path+".grubbs",
				fmt.Sprintf("One far reading: %s in %s (Grubbs p %s). It is used; no reading is left out because of its size alone.", r.Source.Text, r.Source.Place(), FormatP(g.P)))
		}
	}
	out.ESDOutliers = []string{}
	if steps, found, err := stats.GeneralizedESD(x, stats.ESDSought(len(x)), esdAlpha); err == nil {
		for _, step := range steps[:found] {
			out.ESDOutliers = append(out.ESDOutliers, s.used[step.Index].Source.Place())
			out.outlying = append(out.outlying, step.Index)
		}
	}
}

// esdAlpha is the alpha of the generalized ESD test (contract: result, "Definitions").
const esdAlpha = 0.05

// order asks whether the readings drift: in the order column where there is one, else in the order of the file.
func (c *comparison) order(s sample, x, sorted []float64, out *SampleChecks) {
	path := "checks." + string(s.side)
	if r, err := stats.RunsAbout(x, stats.MedianOf(sorted)); err == nil && finite(r.P) {
		out.Runs = &RunsResult{Runs: r.Runs, P: r.P}
		if r.P < driftP {
			c.warn(WarnDrift, s.side, path+".runs", fmt.Sprintf("The readings of the %s lot are not in random order (runs about the median p %s): a drift or a jump makes the interval too narrow, and a claim about the process unsafe.", s.side, FormatP(r.P)))
		}
	}
	if l, err := stats.Lag1(x); err == nil && finite(l) {
		out.Lag1 = &l
		if n := float64(len(x)); len(x) >= 20 && math.Abs(l) > 3/math.Sqrt(n) { // three standard errors of a lag-1 correlation of independent readings
			c.warn(WarnLag, s.side, path+".lag1", fmt.Sprintf("Neighbouring readings of the %s lot are alike (correlation %s): as far as that goes they count as about %s readings, not %d.", s.side, Fixed(l, 2), Fixed(stats.EffectiveN(len(x), l), 0), len(x)))
		}
	}
}

// cutOff asks whether a lot ends sharply at a specification limit, as one does that was sorted.
func (c *comparison) cutOff(s sample) {
	for _, l := range []struct {
		limit *float64
		upper bool
		name  string
	}{{c.ch.Lower, false, "lower"}, {c.ch.Upper, true, "upper"}} {
		if l.limit == nil {
			continue
		}
		if k, err := stats.CutOffAt(s.values, s.summary, *l.limit, l.upper); err == nil && k.P < cutOffP {
			c.warn(WarnCutOff, s.side, string(s.side), fmt.Sprintf("The readings of the %s lot end sharply at the %s limit (%d just inside, %d just beyond): a lot that was sorted does not represent the process.", s.side, l.name, k.Inside, k.Beyond))
		}
	}
}

// checkDifferences holds the checks of the pairs' differences, which a paired test rests on.
func (c *comparison) checkDifferences() {
	d := c.pairDifferences()
	s := sample{values: d, used: c.cand.used, summary: stats.Summarize(d)}
	out := &SampleChecks{}
	if w, err := stats.ShapiroWilk(d); err == nil && finite(w.W, w.P) {
		out.ShapiroWilk = &ShapiroWilkResult{W: w.W, P: w.P}
	}
	if g, err := stats.GrubbsTest(d); err == nil && finite(g.G, g.P) {
		out.Grubbs = &GrubbsResult{G: g.G, P: g.P, Cell: s.used[g.Index].Source.Place()}
	}
	if r, err := stats.RunsTest(d); err == nil && finite(r.P) {
		out.Runs = &RunsResult{Runs: r.Runs, P: r.P}
	}
	if l, err := stats.Lag1(d); err == nil && finite(l) {
		out.Lag1 = &l
	}
	c.Checks.Difference = out
}

// checkMargin warns of a margin that reaches beyond the whole tolerance, that rests on the sample it judges, or that keeps a
// Ppk without asking for the spread.
func (c *comparison) checkMargin() {
	if c.margin.fromSample {
		c.warn(WarnMarginFromSample, "", "equivalence.margin_lower", "The margin rests on the reference sample itself: good for planning, no verdict is given. State the standard deviation (and for keep_ppk the mean) beforehand.")
	}
	if c.margin.stated.Kind == "keep_ppk" && c.asked.spreadRatio == nil {
		c.warn(WarnSpreadNotAsked, "", "spread.verdict", "The margin keeps a Ppk at the stated standard deviation; without spread_ratio a wider candidate is not noticed.")
	}
	width, ok := c.ch.Tolerance()
	if !ok {
		return
	}
	lower, upper := c.margin.ends(c.ref.summary.Mean)
	for _, end := range []*float64{lower, upper} {
		if end != nil && math.Abs(*end) > width {
			c.warn(WarnMarginTolerance, "", "equivalence.margin_upper", "The margin is wider than the whole tolerance.")
			return
		}
	}
}

// Decimals is how many decimals to show: what the plan says, else what the readings show, 10 at most.
func Decimals(ch Characteristic, ref, cand Series) int {
	if ch.Decimals != nil {
		return *ch.Decimals
	}
	if ch.Kind == "attribute" {
		return 3 // of fractions
	}
	d := 0
	for _, s := range []Series{ref, cand} {
		for _, r := range s.Readings {
			d = max(d, r.Decimals)
		}
	}
	return min(d, 10)
}
