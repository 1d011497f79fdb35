package qa

import (
	"fmt"
	"math"

	"lotpair/qa/stats"
	"lotpair/qa/stats/dist"
)

// pairsP is the p-value of a correlation below which lots with the same part ids are said to look like pairs. Common practice,
// no source: far below any other, because ids that merely count up from 1 in both lots are the rule.
const pairsP = 1e-4

// fewestToPair is the number of common parts from which that is looked at. Common practice, no source.
const fewestToPair = 5

// checkPairs tells where lots compared as independent look like the same parts measured twice: most ids are in both, once each,
// and the readings of the same id go together. Compared as pairs the interval would be narrower.
func (c *comparison) checkPairs() {
	if c.Method == "paired" || c.asked.grouped {
		return
	}
	x, y := c.sameParts()
	n := len(x)
	if n < fewestToPair || 10*n < 8*max(len(c.ref.used), len(c.cand.used)) {
		return
	}
	a, b := stats.MeanAndSD(x), stats.MeanAndSD(y)
	r := 0.0
	for i := range x {
		r += (x[i] - a.Mean) / a.SD * ((y[i] - b.Mean) / b.SD) / float64(n-1)
	}
	if !(r > 0) || math.IsInf(r, 1) {
		return
	}
	r = min(r, 1)
	if p := dist.StudentUpper(r*math.Sqrt(float64(n-2)/max(1-r*r, 0x1p-52)), float64(n-2)); p < pairsP {
		c.warn(WarnPairs, "", "difference", fmt.Sprintf("Both lots hold the same part ids and their readings go together (%d parts, correlation %s): if these are the same parts measured twice, the lots are not independent. Then state method = \"paired\" and pair_column in the plan.", n, Fixed(r, 2)))
	}
}

// sameParts are the readings of the ids that stand once in both lots; none where ids of a lot repeat or are not there.
func (c *comparison) sameParts() (x, y []float64) {
	ref, cand := c.ref.used, c.cand.used
	if countedUp(ref, cand) { // the usual case, no look-up needed
		return c.ref.values, c.cand.values
	}
	of := make(map[string]float64, len(ref))
	for _, r := range ref {
		of[r.Part] = r.Value
	}
	if len(of) < len(ref) {
		return nil, nil
	}
	for _, r := range cand {
		if v, ok := of[r.Part]; ok && r.Part != "" {
			x, y = append(x, v), append(y, r.Value)
			delete(of, r.Part)
		}
	}
	return x, y
}

// countedUp says whether both lots hold the same ids, counting up, so that none is there twice.
func countedUp(ref, cand []Reading) bool {
	if len(ref) != len(cand) {
		return false
	}
	for i := range ref {
		id := ref[i].Part
		if id == "" || id != cand[i].Part {
			return false
		}
		if i > 0 && !before(ref[i-1].Part, id) {
			return false
		}
	}
	return true
}

// The ratio of sizes from which lots are called unequal, and the size from which a lot is large enough for that not to matter
// (simulated for lognormal readings, log standard deviation 0.8: with 30 and 10 readings a false equivalence comes up in 10 % and
// not 5 %, with 30 and 5 in 15 %; with equal sizes in at most 5 %).
const (
	unequalSizes = 2
	largeEnough  = 30
)

// checkSkew tells where readings that do not look normal meet lots of unequal size, one of them small: there the means' test does
// not hold its alpha on one side.
func (c *comparison) checkSkew() {
	if c.Method == "log" || c.Method == "paired" || c.asked.grouped {
		return
	}
	less, more := min(len(c.ref.values), len(c.cand.values)), max(len(c.ref.values), len(c.cand.values))
	if less < 2 || less >= largeEnough || more < unequalSizes*less {
		return
	}
	for _, s := range []SampleChecks{c.Checks.Reference, c.Checks.Candidate} {
		if s.ShapiroWilk != nil && s.ShapiroWilk.P < notNormalP {
			c.warn(WarnSkewUnequal, "", "difference", fmt.Sprintf("Readings that do not look normal, and lots of unequal size (%d and %d): on one side the test of the means may err in 10 to 15 of 100 cases where 5 are allowed. Take lots of equal size, or plan the method log where the readings call for it.", len(c.ref.values), len(c.cand.values)))
			return
		}
	}
}

// severalAttempts says what more attempts than the plan allows do to the probability of a false verdict: by Bonferroni's
// inequality that of any of them is at most their number times alpha.
func severalAttempts(plan Plan, a Attempts) []Warning {
	allowed := 1
	if plan.Criterion.SecondSample == "one" {
		allowed = 2
	}
	if a.Known <= allowed || a.KeptBy == "" || a.KeptBy == NotCounted {
		return nil
	}
	return []Warning{{Code: WarnAttempts, Text: fmt.Sprintf("This is attempt %d with this plan, by what is known (kept by: %s); the plan allows %d. The probability that one of them shows what is not so is up to %d times the alpha stated: they belong together, and the last one is worth no more than the others.", a.Known, a.KeptBy, allowed, a.Known)}}
}

// claimOfSources says what a claim about sources takes for granted.
func claimOfSources(plan Plan) []Warning {
	if plan.Claim() != "sources" {
		return nil
	}
	return []Warning{{Code: WarnLotsInTime, Text: "The claim is about sources, and their lots stand for all lots to come: lots made close together show too little of how lots differ. Say under [record] sampling when each was made."}}
}
