package qa

import (
	"fmt"
	"strings"

	"lotpair/qa/stats"
)

// otherMethods gives the verdict again under each other sound method on the same margin, with the exclusions put back and with
// the outlying readings removed. None of them changes the verdict; one that differs is a warning.
func (c *comparison) otherMethods(plan Plan, ref, cand Series) {
	if c.known.verdictOnly || c.Equivalence == nil || !c.Objective.AgainstMargin() || c.margin.fromSample || c.Equivalence.Lower == nil {
		return
	}
	paired := c.Method == "paired"
	if c.margin.scale != scaleDifference {
		c.otherRatios()
		c.withBias()
		c.resampled(plan)
		if !paired {
			c.putBack(ref, cand)
			c.withoutOutlying()
		}
		c.flips()
		return
	}
	if !paired && !c.asked.grouped {
		if c.Method != "welch" {
			e, err := stats.Welch(c.ref.summary, c.cand.summary)
			c.again("welch", e, err)
		}
		if c.Method != "pooled" {
			e, err := stats.Pooled(c.ref.summary, c.cand.summary)
			c.again("pooled", e, err)
		}
		e, err := stats.Yuen(c.ref.sorted, c.cand.sorted)
		c.again("trimmed", e, err)
		c.stratified()
	}
	c.withBias()
	if r := c.Ranks; r != nil && r.Lower != nil && r.Upper != nil {
		c.interval("ranks", r.Shift, stats.Interval{Level: r.Level, Lower: *r.Lower, Upper: *r.Upper}, nil)
	}
	c.resampled(plan)
	if !paired {
		c.putBack(ref, cand)
		c.withoutOutlying()
	}
	c.flips()
}

// stratified compares within the groups that both lots have (cavities, machines), where the readings name them: a lot mixed of
// the same groups in other shares differs by the mix alone.
func (c *comparison) stratified() {
	at := map[string]int{}
	var x, y [][]float64
	for _, s := range []sample{c.ref, c.cand} {
		for _, r := range s.used {
			if r.Group == "" {
				return
			}
			i, ok := at[r.Group]
			if !ok {
				i = len(at)
				at[r.Group] = i
				x, y = append(x, nil), append(y, nil)
			}
			if s.side == Reference {
				x[i] = append(x[i], r.Value)
			} else {
				y[i] = append(y[i], r.Value)
			}
		}
	}
	if e, err := stats.StratifiedDifference(x, y); err == nil && e.Groups > 1 {
		c.again("stratified", e.Estimate, nil)
	}
}

// interval adds an interval to the list, where it has two ends.
func (c *comparison) interval(method string, value float64, in stats.Interval, r *stats.Resampling) {
	if !finite(value, in.Lower, in.Upper) {
		return
	}
	s := SensitivityResult{
		Method: method, Estimate: ptr(value), Level: ptr(in.Level), Lower: ptr(in.Lower), Upper: ptr(in.Upper),
		Verdict: againstMargin(c.Objective, in.Lower, in.Upper, c.margin.lower, c.margin.upper),
	}
	if r != nil {
		s.Seed, s.Resamples = ptr(int64(r.Seed)), r.Resamples
	}
	c.Sensitivity = append(c.Sensitivity, s)
}

// again adds one method's answer to the list, where it has one.
func (c *comparison) again(method string, e stats.Estimate, err error) {
	if err != nil || !finite(e.Value, e.SE, e.DF) {
		return
	}
	c.interval(method, e.Value, e.Interval(1-2*c.Alpha), nil)
}

// withoutOutlying compares without the readings that the generalized ESD test calls outlying. It shows how much the verdict
// rests on them; it is no ground to leave them out.
func (c *comparison) withoutOutlying() {
	a, b := c.Checks.Reference.outlying, c.Checks.Candidate.outlying
	if len(a)+len(b) > 0 {
		c.same("outlying-removed", c.Method, c.ref.without(a, c.asked.grouped), c.cand.without(b, c.asked.grouped))
	}
}

// otherRatios gives the ratio of means by the other sound methods: the other test of the means, and the ratio of the geometric
// means where all readings are above 0.
func (c *comparison) otherRatios() {
	if c.margin.stated.Kind != "reference_fraction" || c.Method == "paired" || c.asked.grouped {
		return
	}
	for _, m := range []string{"welch", "pooled", "log"} {
		if m != c.Method {
			c.same(m, m, c.ref, c.cand)
		}
	}
}

// variant adds the plan's own method on other readings.
func (c *comparison) variant(name string, ref, cand Series) {
	c.same(name, c.Method, newSample(Reference, ref, ref.used()), newSample(Candidate, cand, cand.used()))
}

// same adds the answer of a method on the margin's own scale.
func (c *comparison) same(name, method string, ref, cand sample) {
	v := &comparison{ch: c.ch, asked: c.asked, margin: c.margin, ref: ref, cand: cand, Comparison: Comparison{
		Name: c.Name, Objective: c.Objective, Alpha: c.Alpha, Method: method,
		Equivalence: &EquivalenceResult{Scale: c.margin.scale, MarginLower: c.margin.lower, MarginUpper: c.margin.upper},
	}}
	est, err := v.estimate()
	if c.margin.scale == scaleDifference && (err != nil || !finite(est.Value, est.SE, est.DF)) {
		return
	}
	e := v.Equivalence
	if err := v.equivalence(est); err != nil || e.Estimate == nil || e.Lower == nil || e.Upper == nil {
		return
	}
	c.interval(name, *e.Estimate, stats.Interval{Level: *e.Level, Lower: *e.Lower, Upper: *e.Upper}, nil)
}

// flips warns where another method gives another verdict than the plan's on the mean.
func (c *comparison) flips() {
	var other []string
	for _, s := range c.Sensitivity {
		if s.Verdict != c.Equivalence.Verdict && !strings.HasPrefix(s.Method, "non-detects") {
			other = append(other, fmt.Sprintf("%s: %s", strings.TrimSpace(strings.ReplaceAll(s.Method, "-", " ")+" "+s.Cell), s.Verdict))
		}
	}
	if len(other) > 0 && c.Equivalence.Verdict != "" {
		c.warn(WarnFlips, "", "sensitivity", "The verdict on the mean is not the same in every way of computing it ("+strings.Join(other, "; ")+"). The plan's own method decides.")
	}
}
