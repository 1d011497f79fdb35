package qa

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"lotpair/qa/stats"
)

// Run is what Compare cannot know by itself: the program, the seal and the count of attempts. They come in as arguments
// because no clock and no environment is read here.
type Run struct {
	Software Software
	Seal     Seal
	Attempts Attempts
}

// Compare holds the readings of two lots against the plan's criterion, characteristic by characteristic, and gives the
// overall verdict. The plan must have passed Validate. An error is a fault of the plan in the light of the readings (a
// margin that needs limits which neither plan nor file gives); anything the readings do is a warning in the result.
func Compare(plan Plan, readings Readings, run Run) (Result, error) {
	r := Result{
		Format: ResultFormat, Title: plan.Title, Supports: plan.Supports, Claim: plan.Claim(),
		Software: run.Software, Seal: run.Seal, Attempts: run.Attempts,
		Reference: lotResult(readings.Reference), Candidate: lotResult(readings.Candidate),
		Unread: unread(readings.Ledger), Warnings: append([]Warning{}, readings.Warnings...),
		Characteristics: []Comparison{},
	}
	r.Software.Calculation = Calculation
	if len(readings.Characteristics) == 0 {
		return Result{}, errors.New("characteristics: found none, want at least one column of measurements; name them in the plan under [[characteristic]]")
	}
	for _, c := range readings.Characteristics {
		one, err := compareOne(plan, c, readings.Reference.Of(c.Name), readings.Candidate.Of(c.Name))
		if err != nil {
			return Result{}, err
		}
		r.Characteristics = append(r.Characteristics, one)
	}
	holm(r.Characteristics)
	if g := plan.Record; g.GaugeReference != "" && g.GaugeCandidate != "" && g.GaugeReference != g.GaugeCandidate {
		r.Warnings = append(r.Warnings, Warning{Code: WarnGauges, Text: "The lots were measured with different gauges (" + g.GaugeReference +
			"; " + g.GaugeCandidate + "): a difference between the gauges is part of every difference shown."})
	}
	r.Verdict = overall(r.Characteristics)
	r.Sentence = Sentence(r)
	return r, nil
}

func lotResult(l Lot) LotResult {
	return LotResult{Lot: l.Name, Source: l.Source, Files: append([]File{}, l.Files...)}
}

func unread(ledger []Entry) []UnreadResult {
	out := make([]UnreadResult, 0, len(ledger))
	for _, e := range ledger {
		out = append(out, UnreadResult{File: e.Source.File, Cell: e.Source.Place(), Found: e.Source.Text, TakenAs: e.TakenAs, Value: e.Value})
	}
	return out
}

// comparison gathers one characteristic's result and its warnings while it is made.
type comparison struct {
	Comparison
	margin tested
}

func (c *comparison) warn(code string, side Side, path, text string) {
	c.Warnings = append(c.Warnings, Warning{Code: code, Side: side, Path: path, Text: text})
}

func compareOne(plan Plan, ch Characteristic, ref, cand Series) (Comparison, error) {
	a := plan.askedOf(ch)
	c := &comparison{Comparison: Comparison{
		Name: ch.Name, Unit: ch.Unit, Kind: "numeric", Limits: Limits{Lower: ch.Lower, Target: ch.Target, Upper: ch.Upper},
		Objective: a.objective, Alpha: a.alpha, Method: a.method, Warnings: []Warning{},
	}}
	if a.margin != nil {
		t, err := a.margin.resolve(ch, a.objective, a.guard)
		if err != nil {
			return Comparison{}, err
		}
		c.margin = t
		c.margin.stated.Reason, c.margin.stated.ApprovedBy = a.margin.Reason, a.margin.ApprovedBy
		c.checkMarginWidth(ch)
	} else if a.objective.AgainstMargin() {
		return Comparison{}, fmt.Errorf("margin of %q: found none, want one for the objective %s; state it under [criterion] or in the characteristic", ch.Name, a.objective)
	}
	x, y := ref.Values(), cand.Values()
	sx, sy := stats.Summarize(x), stats.Summarize(y)
	c.Reference, c.Candidate = c.sample(Reference, ref, sx), c.sample(Candidate, cand, sy)
	c.Decimals = Decimals(ch, ref, cand)
	c.checkSamples(ref, cand, x, y, sx, sy)
	c.test(ch, sx, sy)
	c.spread(sx, sy)
	c.performance(ch, x, y, sx, sy)
	c.decide(ref, cand)
	c.checkUncertainty(ch)
	return c.Comparison, nil
}

// sample describes one lot's readings.
func (c *comparison) sample(side Side, s Series, sum stats.Summary) SampleResult {
	parts := map[[2]string]bool{} // a part's id counts within its group
	unnamed := 0
	for _, r := range s.used() {
		if r.Part == "" {
			unnamed++
			continue
		}
		parts[[2]string{r.Group, r.Part}] = true
	}
	out := SampleResult{
		Rows: s.Rows, Parts: len(parts) + unnamed, N: sum.N, Excluded: s.Excluded(),
		Missing: s.Missing, NonDetects: s.NonDetects, Unread: s.Unread, Repeats: s.Repeats,
	}
	if sum.N == 0 {
		return out
	}
	path := string(side) + "."
	out.Mean = c.number(sum.Mean, path+"mean")
	out.Min, out.Q1, out.Median = c.number(sum.Min, path+"min"), c.number(sum.Q1, path+"q1"), c.number(sum.Median, path+"median")
	out.Q3, out.Max = c.number(sum.Q3, path+"q3"), c.number(sum.Max, path+"max")
	if sum.N > 1 {
		out.SD = c.number(sum.SD, path+"sd")
	}
	return out
}

// number is v, or nil with a warning where v is not a finite number: nothing else leaves the package.
func (c *comparison) number(v float64, path string) *float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		c.warn(WarnNotComputable, "", path, "The value "+path+" lies outside the range of the arithmetic and is left empty.")
		return nil
	}
	return &v
}

// smallestP is the smallest p-value that is given; below it the double's own range is near.
const smallestP = 1e-300

func (c *comparison) pValue(p float64, path string) *float64 {
	if p < smallestP {
		c.warn(WarnPBelowRange, "", path, "The p-value is below 1e-300 and is given as 1e-300.")
		p = smallestP
	}
	return c.number(p, path)
}

// test fills difference and equivalence: Welch's estimate, its test and its intervals.
func (c *comparison) test(ch Characteristic, ref, cand stats.Summary) {
	d := &c.Difference
	d.Alternative = "two-sided"
	switch c.Objective {
	case Lower:
		d.Alternative = "lower"
	case Higher:
		d.Alternative = "higher"
	}
	if a := c.margin; a.stated.Kind != "" {
		e := &EquivalenceResult{Scale: "difference", Margin: a.stated, MarginLower: a.lower, MarginUpper: a.upper, Verdict: Undecided}
		if ref.N > 1 {
			e.Permits = permits(ch, a, ref.Mean, ref.SD)
		}
		c.Equivalence = e
	}
	if ref.N > 0 && cand.N > 0 {
		d.Estimate = c.number(cand.Mean-ref.Mean, "difference.estimate")
		if c.Equivalence != nil {
			c.Equivalence.Estimate = d.Estimate
		}
	}
	est, err := stats.Welch(ref, cand)
	if err != nil || !finite(est.Value, est.SE, est.DF) {
		switch {
		case errors.Is(err, stats.ErrTooFew):
			c.warn(WarnTooFew, "", "difference", "A test needs at least two readings in each lot.")
		case errors.Is(err, stats.ErrConstant):
			c.warn(WarnNoVariation, "", "difference", "The readings of both lots are constant to within rounding: there is no standard error, no test and no interval.")
		default:
			c.warn(WarnNotComputable, "", "difference", "The difference lies outside the range of the arithmetic; no test was made.")
		}
		return
	}
	c.difference(est)
	c.equivalence(est)
}

func finite(vs ...float64) bool {
	for _, v := range vs {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

func (c *comparison) difference(est stats.Estimate) {
	d := &c.Difference
	t, two := est.TwoSided(0)
	d.Estimate, d.SE, d.DF = &est.Value, &est.SE, &est.DF
	d.T = c.number(t, "difference.t")
	d.PTwoSided = c.pValue(two, "difference.p_two_sided")
	d.P = d.PTwoSided
	level := 1 - c.Alpha
	switch d.Alternative {
	case "lower":
		_, p := est.Below(0)
		d.P = c.pValue(p, "difference.p")
		level = 1 - 2*c.Alpha
	case "higher":
		_, p := est.Above(0)
		d.P = c.pValue(p, "difference.p")
		level = 1 - 2*c.Alpha
	}
	in := est.Interval(level)
	d.Level, d.Lower, d.Upper = &level, c.number(in.Lower, "difference.lower"), c.number(in.Upper, "difference.upper")
	c.Detectable = d.PTwoSided != nil && *d.PTwoSided < c.Alpha
}

func (c *comparison) equivalence(est stats.Estimate) {
	e := c.Equivalence
	if e == nil {
		return
	}
	low, high := math.Inf(-1), math.Inf(1)
	if e.MarginLower != nil {
		low = *e.MarginLower
	}
	if e.MarginUpper != nil {
		high = *e.MarginUpper
	}
	t := stats.TwoOneSided(est, low, high, c.Alpha)
	e.Estimate, e.SE, e.DF = &est.Value, &est.SE, &est.DF
	level := 1 - 2*c.Alpha
	e.Level = &level
	e.Lower, e.Upper = c.number(t.Interval.Lower, "equivalence.lower"), c.number(t.Interval.Upper, "equivalence.upper")
	if e.MarginLower != nil {
		e.TLower, e.PLower = c.number(t.TLower, "equivalence.t_lower"), c.pValue(t.PLower, "equivalence.p_lower")
		e.P = e.PLower
	}
	if e.MarginUpper != nil {
		e.TUpper, e.PUpper = c.number(t.TUpper, "equivalence.t_upper"), c.pValue(t.PUpper, "equivalence.p_upper")
		if e.P == nil || e.PUpper != nil && *e.PUpper > *e.P {
			e.P = e.PUpper
		}
	}
	if e.Lower == nil || e.Upper == nil {
		return
	}
	smallest := math.Max(math.Abs(*e.Lower), math.Abs(*e.Upper))
	switch c.Objective {
	case NotLower:
		smallest = math.Max(0, -*e.Lower)
	case NotHigher:
		smallest = math.Max(0, *e.Upper)
	}
	smallest += e.Margin.Guard
	e.SmallestMargin = &smallest
	if c.Objective.AgainstMargin() {
		e.Verdict = againstMargin(c.Objective, *e.Lower, *e.Upper, e.MarginLower, e.MarginUpper)
	} else {
		e.Verdict = againstMargin(Equivalence, *e.Lower, *e.Upper, e.MarginLower, e.MarginUpper)
	}
}

// decide gives the characteristic's verdict. Cells that could not be read, and non-detects without a rule, stop it whatever
// the interval: a verdict on part of the readings would be a silent choice.
func (c *comparison) decide(ref, cand Series) {
	switch {
	case c.Objective.AgainstMargin():
		c.Verdict = Undecided
		if c.Equivalence != nil {
			c.Verdict = c.Equivalence.Verdict
		}
	case c.Difference.P == nil:
		c.Verdict = Undecided
	case *c.Difference.P < c.Alpha:
		c.Verdict = map[Objective]Verdict{Difference: Different, Lower: IsLower, Higher: IsHigher}[c.Objective]
	default:
		c.Verdict = NoDifference
	}
	if n := ref.Unread + cand.Unread; n > 0 {
		c.undecided(WarnUnread, fmt.Sprintf("%s that could not be read as a number: undecided until each is corrected, or left out with a reason under exclude.", Count(n, "cell", "cells")))
	}
	if n := ref.NonDetects + cand.NonDetects; n > 0 {
		c.undecided(WarnNonDetects, fmt.Sprintf("%s below or above a detection limit: what such a cell counts as is not settled, so nothing is decided.", Count(n, "cell", "cells")))
	}
	if c.Verdict == NoDifference {
		c.warn(WarnAbsence, "", "verdict", "No difference shown is not evidence that there is none: state a margin to show equivalence.")
	}
}

// undecided withdraws the verdict, with the reason.
func (c *comparison) undecided(code, text string) {
	c.Verdict = Undecided
	if c.Equivalence != nil {
		c.Equivalence.Verdict = Undecided
	}
	c.warn(code, "", "verdict", text)
}

// holm adjusts the p-values of the characteristics asked for a difference as one family (Holm 1979, Scandinavian Journal of
// Statistics 6, 65-70) and rests their verdicts on them. With fewer than two there is nothing to adjust.
func holm(cs []Comparison) {
	var family []int
	for i, c := range cs {
		if !c.Objective.AgainstMargin() && c.Difference.P != nil {
			family = append(family, i)
		}
	}
	if len(family) < 2 {
		return
	}
	sort.SliceStable(family, func(i, j int) bool { return *cs[family[i]].Difference.P < *cs[family[j]].Difference.P })
	running := 0.0
	for rank, i := range family {
		p := math.Min(1, float64(len(family)-rank)**cs[i].Difference.P)
		running = math.Max(running, p)
		adjusted := running
		cs[i].Difference.PHolm = &adjusted
		if cs[i].Verdict.Shown() && adjusted >= cs[i].Alpha {
			cs[i].Verdict = NoDifference
			cs[i].Warnings = append(cs[i].Warnings, Warning{
				Code: WarnAbsence, Path: "verdict",
				Text: "After adjustment for the number of characteristics (Holm) the difference is not shown; this is not evidence that there is none. The interval is not adjusted.",
			})
		}
	}
}
