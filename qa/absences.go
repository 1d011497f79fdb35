package qa

import (
	"slices"
	"strings"
)

// absences names every value that a reader of the result may look for and that does not exist, where nothing that was said before
// names it or the block it is of (contract: result, "a warning whose path names it"). What a comparison of its kind does not have
// at all, such as the other end of a one-sided margin, is not missed.
func (c *comparison) absences(plan Plan) {
	for _, s := range []struct {
		side   Side
		result SampleResult
		checks SampleChecks
	}{{Reference, c.Reference, c.Checks.Reference}, {Candidate, c.Candidate, c.Checks.Candidate}} {
		side := string(s.side)
		c.absent(s.result.N == 0, s.side, side, "No reading of the "+side+" lot is in use: it has no mean.")
		c.absent(s.result.N == 1, s.side, side+".sd", "One reading of the "+side+" lot has no standard deviation.")
		k := s.checks
		c.absent(k.ShapiroWilk == nil && s.result.N <= mostForShapiro || k.Grubbs == nil || k.Runs == nil || k.Lag1 == nil, s.side, "checks."+side,
			"Some checks of the "+side+" lot need three readings and some variation; they are left out.")
		c.absent(k.Resolution == nil, s.side, "checks."+side+".resolution", "The readings of the "+side+" lot are not written in decimals that show the step of the gauge.")
	}
	if p := c.Performance; p != nil {
		both := c.ch.Lower != nil && c.ch.Upper != nil
		for _, l := range []struct {
			side Side
			LotPerformance
		}{{Reference, p.Reference}, {Candidate, p.Candidate}} {
			c.absent(both && l.Pp == nil || l.Ppk == nil || l.Tolerance == nil, l.side, "performance."+string(l.side), "Pp, Ppk and what may lie outside the limits need two readings and some variation.")
		}
	}
	c.absent(c.Performance == nil && (c.ch.Lower != nil || c.ch.Upper != nil), "", "performance", "A lot without a reading has no performance.")
	c.absent(c.Difference.P == nil, "", "difference", "There is no test of the difference.")
	if e := c.Equivalence; e != nil {
		c.absent(e.Lower == nil || e.Upper == nil, "", "equivalence", "There is no interval to hold against the margin.")
		c.absent(e.Permits == nil && (c.ch.Lower != nil || c.ch.Upper != nil), "", "equivalence.permits", "What a mean at the margin would leave needs a standard deviation of the reference.")
	}
	if s := c.Spread; s != nil {
		c.absent(s.SDRatio == nil, "", "spread", "There is no ratio of standard deviations.")
		c.absent(s.SDRatio != nil && s.Bonett == nil && c.Method != "paired", "", "spread.bonett", "Bonett's interval needs five readings in each lot.")
	}
	if s := plan.Sensitivity; s != nil && s.Resamples > 0 {
		made := slices.ContainsFunc(c.Sensitivity, func(s SensitivityResult) bool { return s.Resamples > 0 })
		why := "it needs a margin, readings that vary, and for a ratio a reference whose means drawn are all above 0."
		if c.asked.grouped {
			why = "readings of one group are not independent, and drawing or exchanging single ones would show too little variation."
		}
		c.absent(!made, "", "sensitivity.resamples", "The resampling that the plan asks for is not made here: "+why)
	}
	switch r := c.Ranks; {
	case r == nil:
		c.absent(true, "", "ranks", "Readings that are all equal, or none, have no ranks.")
	case r.Lower == nil || r.Upper == nil:
		c.absent(true, "", "ranks", "So few readings give no interval of this level by their ranks.")
	}
}

// absent warns of a missing value unless its path, or one it lies under, is named already.
func (c *comparison) absent(missing bool, side Side, path, text string) {
	if !missing {
		return
	}
	for _, w := range c.Warnings {
		if w.Path != "" && (path == w.Path || strings.HasPrefix(path, w.Path+".")) {
			return
		}
	}
	c.warn(WarnNotComputable, side, path, text)
}
