package qa

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/qa/stats"
)

// otherMethods gives the verdict again under each other sound method on the same margin, with the exclusions put back and with
// the outlying readings removed. None of them changes the verdict; one that differs is a warning.
func (c *comparison) otherMethods(ref, cand Series) {
	if c.Equivalence == nil || c.margin.scale != scaleDifference || !c.Objective.AgainstMargin() || c.margin.fromSample || c.Equivalence.Lower == nil {
		return
	}
	paired := c.Method == "paired"
	if !paired && !c.asked.grouped {
		if c.Method != "welch" {
			e, err := stats.Welch(c.ref.summary, c.cand.summary)
			c.again("welch", e, err)
		}
		if c.Method != "pooled" {
			e, err := stats.Pooled(c.ref.summary, c.cand.summary)
			c.again("pooled", e, err)
		}
		e, err := stats.Yuen(c.ref.values, c.cand.values)
		c.again("trimmed", e, err)
	}
	if r := c.Ranks; r != nil && r.Lower != nil && r.Upper != nil {
		c.Sensitivity = append(c.Sensitivity, SensitivityResult{
			Method: "ranks", Estimate: ptr(r.Shift), Level: ptr(r.Level), Lower: r.Lower, Upper: r.Upper,
			Verdict: againstMargin(c.Objective, *r.Lower, *r.Upper, c.margin.lower, c.margin.upper),
		})
	}
	if !paired {
		c.putBack(ref, cand)
		c.withoutOutlying(ref, cand)
	}
	c.flips()
}

// again adds one method's answer to the list, where it has one.
func (c *comparison) again(method string, e stats.Estimate, err error) {
	if err != nil || !finite(e.Value, e.SE, e.DF) {
		return
	}
	in := e.Interval(1 - 2*c.Alpha)
	if !finite(in.Lower, in.Upper) {
		return
	}
	c.Sensitivity = append(c.Sensitivity, SensitivityResult{
		Method: method, Estimate: ptr(e.Value), Level: ptr(in.Level), Lower: ptr(in.Lower), Upper: ptr(in.Upper),
		Verdict: againstMargin(c.Objective, in.Lower, in.Upper, c.margin.lower, c.margin.upper),
	})
}

// putBack compares with every reading that was left out put back.
func (c *comparison) putBack(ref, cand Series) {
	back := func(s Series) (Series, int) {
		n := 0
		out := s
		out.Readings = slices.Clone(s.Readings)
		for i := range out.Readings {
			if !out.Readings[i].Used() {
				out.Readings[i].LeftOut = ""
				n++
			}
		}
		return out, n
	}
	x, a := back(ref)
	y, b := back(cand)
	if a+b > 0 {
		c.variant("exclusions-put-back", x, y)
	}
}

// withoutOutlying compares without the readings that the generalized ESD test calls outlying. It shows how much the verdict
// rests on them; it is no ground to leave them out.
func (c *comparison) withoutOutlying(ref, cand Series) {
	drop := func(s Series, from sample, places []int) Series {
		out := s
		out.Readings = nil
		gone := map[Source]bool{}
		for _, i := range places {
			gone[from.used[i].Source] = true
		}
		for _, r := range s.Readings {
			if r.Used() && !gone[r.Source] {
				out.Readings = append(out.Readings, r)
			}
		}
		return out
	}
	a, b := c.Checks.Reference.outlying, c.Checks.Candidate.outlying
	if len(a)+len(b) > 0 {
		c.variant("outlying-removed", drop(ref, c.ref, a), drop(cand, c.cand, b))
	}
}

// variant adds the plan's own method on other readings.
func (c *comparison) variant(name string, ref, cand Series) {
	x, y := newSample(Reference, ref, ref.used()), newSample(Candidate, cand, cand.used())
	v := &comparison{ch: c.ch, asked: c.asked, margin: c.margin, ref: x, cand: y, Comparison: Comparison{Name: c.Name, Objective: c.Objective, Alpha: c.Alpha, Method: c.Method}}
	e, err := v.estimate()
	c.again(name, e, err)
}

// flips warns where another method gives another verdict than the plan's on the mean.
func (c *comparison) flips() {
	var other []string
	for _, s := range c.Sensitivity {
		if s.Verdict != c.Equivalence.Verdict && !strings.HasPrefix(s.Method, "non-detects") {
			other = append(other, fmt.Sprintf("%s: %s", s.Method, s.Verdict))
		}
	}
	if len(other) > 0 && c.Equivalence.Verdict != "" {
		c.warn(WarnFlips, "", "sensitivity", "The verdict on the mean is not the same in every way of computing it ("+strings.Join(other, "; ")+"). The plan's own method decides.")
	}
}
