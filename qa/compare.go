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
	Watch    Watch // follows the comparison and can stop it
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
	shared := known{watch: run.Watch}
	for i, c := range readings.Characteristics {
		if err := run.Watch.Told(Progress{Doing: comparing, Of: c.Name, Done: int64(i), Total: int64(len(readings.Characteristics))}); err != nil {
			return Result{}, err
		}
		one, err := compareOne(plan, c, &shared, readings.Reference.Of(c.Name), readings.Candidate.Of(c.Name))
		if err != nil {
			return Result{}, err
		}
		r.Characteristics = append(r.Characteristics, one)
	}
	if err := run.Watch.Stop(Progress{Doing: comparing}); err != nil { // what was not done any more is in no result
		return Result{}, err
	}
	holm(r.Characteristics)
	r.Warnings = append(r.Warnings, claimOfSources(plan)...)
	r.Warnings = append(r.Warnings, differentGauges(plan.Record, readings.Characteristics)...)
	r.Warnings = append(r.Warnings, severalAttempts(plan, run.Attempts)...)
	if plan.Criterion.SecondSample == "one" {
		r.Warnings = append(r.Warnings, Warning{Code: WarnSecondSample, Text: "The plan allows one enlargement of the sample: each of the two looks is held against half of the alpha stated."})
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
	ch        Characteristic
	asked     asked
	margin    tested
	ref, cand sample
	known     *known // shared by all characteristics of a comparison
}

func (c *comparison) warn(code string, side Side, path, text string) {
	c.Warnings = append(c.Warnings, Warning{Code: code, Side: side, Path: path, Text: text})
}

func compareOne(plan Plan, ch Characteristic, k *known, ref, cand Series) (Comparison, error) {
	if ch.Kind == "attribute" {
		return compareAttribute(plan, ch, ref, cand)
	}
	a := plan.askedOf(ch)
	c := &comparison{ch: ch, asked: a, known: k, Comparison: Comparison{
		Name: ch.Name, Unit: ch.Unit, Kind: "numeric", Limits: Limits{Lower: ch.Lower, Target: ch.Target, Upper: ch.Upper},
		Objective: a.objective, Alpha: a.alpha, Method: a.method, Warnings: []Warning{},
	}}
	c.ref, c.cand = newSample(Reference, ref, ref.used()), newSample(Candidate, cand, cand.used())
	if a.method == "paired" {
		if err := c.match(ref, cand); err != nil {
			return Comparison{}, err
		}
	}
	if a.margin != nil {
		t, err := a.margin.resolve(ch, a, c.ref.summary)
		if err != nil {
			return Comparison{}, err
		}
		c.margin = t
		c.checkMargin()
	} else if a.objective.AgainstMargin() {
		return Comparison{}, fmt.Errorf("margin of %q: found none, want one for the objective %s; state it under [criterion] or in the characteristic", ch.Name, a.objective)
	}
	c.Reference, c.Candidate = c.sample(c.ref), c.sample(c.cand)
	c.Decimals = Decimals(ch, ref, cand)
	c.checkSamples()
	c.checkPairs()
	c.checkSkew()
	c.groups()
	if err := c.test(); err != nil {
		return Comparison{}, err
	}
	for _, step := range []func(){
		c.spread,
		func() { c.performance(plan) },
		c.ranks,
		func() { c.otherMethods(plan, ref, cand) },
		func() { c.decide(ref, cand) },
		func() { c.nonDetects(plan, ch, ref, cand) },
		c.absence,
		func() { c.newStudy(plan) },
		c.checkUncertainty,
		func() { c.absences(plan) },
	} {
		if err := k.watch.Stop(Progress{Doing: comparing, Of: ch.Name}); err != nil {
			return Comparison{}, err
		}
		step()
	}
	return c.Comparison, nil
}

// sample describes one lot's readings.
func (c *comparison) sample(from sample) SampleResult {
	side, s, sum := from.side, from.series, from.summary
	out := SampleResult{
		Rows: s.Rows, Parts: partsOf(from.used), N: sum.N, Excluded: s.Excluded(),
		Missing: s.Missing, NonDetects: s.NonDetects, Unread: s.Unread, Repeats: s.Repeats, Unmatched: len(s.Readings) - s.leftOut() - sum.N,
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

// partsOf counts the parts that readings are of: a part's id counts within its group, a reading without one is a part of its own.
func partsOf(readings []Reading) int {
	rising := true // ids that count up need no look-up
	for i := 1; i < len(readings) && rising; i++ {
		rising = before(readings[i-1].Part, readings[i].Part)
	}
	if rising {
		return len(readings)
	}
	parts := map[[2]string]bool{}
	unnamed := 0
	for _, r := range readings {
		if r.Part == "" {
			unnamed++
			continue
		}
		parts[[2]string{r.Group, r.Part}] = true
	}
	return len(parts) + unnamed
}

// before says whether an id comes before another where ids count up: shorter ones first.
func before(a, b string) bool { return len(a) < len(b) || len(a) == len(b) && a < b }

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

// test fills difference and equivalence: the estimate by the method asked, its tests and its intervals.
func (c *comparison) test() error {
	d := &c.Difference
	d.Alternative = "two-sided"
	switch c.Objective {
	case Lower:
		d.Alternative = "lower"
	case Higher:
		d.Alternative = "higher"
	}
	ref, cand := c.ref.summary, c.cand.summary
	if m := c.margin; m.stated.Kind != "" {
		e := &EquivalenceResult{Scale: m.scale, Margin: m.stated, MarginLower: m.lower, MarginUpper: m.upper, Verdict: Undecided}
		if ref.N > 1 {
			e.Permits = permits(c.ch, m, ref.Mean, ref.SD)
		}
		c.Equivalence = e
	}
	if ref.N > 0 && cand.N > 0 {
		d.Estimate = c.number(cand.Mean-ref.Mean, "difference.estimate")
		if c.Equivalence != nil && c.margin.scale == scaleDifference {
			c.Equivalence.Estimate = d.Estimate
		}
	}
	est, err := c.estimate()
	if err != nil || !finite(est.Value, est.SE, est.DF) {
		c.testFailed(err)
		if c.margin.scale != scaleShift {
			return nil
		}
	} else {
		c.difference(est)
	}
	return c.equivalence(est)
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

// decide gives the characteristic's verdict. Cells that could not be read stop it whatever the interval: a verdict on part of
// the readings would be a silent choice.
func (c *comparison) decide(ref, cand Series) {
	switch {
	case c.Objective.AgainstMargin():
		c.Verdict = Undecided
		if c.Equivalence != nil {
			c.Verdict = c.withSpread(c.Equivalence.Verdict)
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
}

// absence warns that no difference shown shows nothing.
func (c *comparison) absence() {
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
