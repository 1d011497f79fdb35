package qa

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"lotpair/qa/stats"
)

// sample is what one lot brings to the test: the readings that are used, in their order, and what they come to.
type sample struct {
	side    Side
	series  Series
	used    []Reading
	values  []float64
	sorted  []float64 // the values in rising order: sorted once, for all that ask nothing of their order
	summary stats.Summary
}

func newSample(side Side, s Series, used []Reading) sample {
	out := sample{side: side, series: s, used: used, values: make([]float64, len(used))}
	for i, r := range used {
		out.values[i] = r.Value
	}
	out.sorted = slices.Clone(out.values)
	slices.Sort(out.sorted)
	out.summary = stats.SummarizeSorted(out.sorted)
	return out
}

// without is the sample without the readings at the given places; only with groups does it keep the readings beside their values.
func (s sample) without(places []int, groups bool) sample {
	if len(places) == 0 {
		return s
	}
	out := sample{side: s.side, series: s.series, values: make([]float64, 0, len(s.values))}
	for i, v := range s.values {
		if slices.Contains(places, i) {
			continue
		}
		out.values = append(out.values, v)
		if groups {
			out.used = append(out.used, s.used[i])
		}
	}
	out.sorted = slices.Clone(out.values)
	slices.Sort(out.sorted)
	out.summary = stats.SummarizeSorted(out.sorted)
	return out
}

// logarithms are the natural logarithms of the values; false where a reading is not above 0.
func (s sample) logarithms() ([]float64, bool) { return logarithms(s.values) }

func logarithms(values []float64) ([]float64, bool) {
	out := make([]float64, len(values))
	for i, v := range values {
		if !(v > 0) {
			return nil, false
		}
		out[i] = math.Log(v)
	}
	return out, true
}

// estimate is candidate minus reference by the method asked, on the readings. For the method log it is Welch's: what is tested
// on the logarithms stands in equivalence (contract: result, "Log").
func (c *comparison) estimate() (stats.Estimate, error) {
	ref, cand := c.ref.summary, c.cand.summary
	if c.asked.grouped {
		var ok bool
		if ref, cand, ok = c.groupMeans(); !ok {
			return stats.Estimate{}, stats.ErrTooFew
		}
	}
	switch c.Method {
	case "pooled":
		return stats.Pooled(ref, cand)
	case "paired":
		return stats.Paired(stats.MeanAndSD(c.pairDifferences()))
	}
	return stats.Welch(ref, cand)
}

// pairDifferences are candidate minus reference of every pair, rounded to the decimals written.
func (c *comparison) pairDifferences() []float64 {
	return stats.Differences(c.ref.values, c.cand.values, written(c.ref, c.cand))
}

// written is the most decimals written among the readings used, or -1 where that is more than a decimal fraction can be
// rounded to without harm.
func written(samples ...sample) int {
	d := 0
	for _, s := range samples {
		for _, r := range s.used {
			d = max(d, r.Decimals)
		}
	}
	if d > 12 {
		return -1
	}
	return d
}

// match takes the readings that have a partner in the other lot, in the order of the reference, and counts the others. A pair
// id twice in a lot is an error: which of them belongs to the partner is not known.
func (c *comparison) match(ref, cand Series) error {
	partner := map[string]Reading{}
	for _, r := range cand.used() {
		if _, twice := partner[r.Pair]; twice {
			return fmt.Errorf("%s: found the pair %q a second time in the candidate at %s, want it once a lot; correct the file or exclude one", c.Name, r.Pair, r.Source)
		}
		partner[r.Pair] = r
	}
	seen := map[string]bool{}
	var x, y []Reading
	for _, r := range ref.used() {
		if seen[r.Pair] {
			return fmt.Errorf("%s: found the pair %q a second time in the reference at %s, want it once a lot; correct the file or exclude one", c.Name, r.Pair, r.Source)
		}
		seen[r.Pair] = true
		if p, ok := partner[r.Pair]; ok && r.Pair != "" {
			x, y = append(x, r), append(y, p)
		}
	}
	c.ref, c.cand = newSample(Reference, ref, x), newSample(Candidate, cand, y)
	matched := map[string]bool{}
	for _, r := range x {
		matched[r.Pair] = true
	}
	for _, s := range []struct {
		side Side
		used []Reading
	}{{Reference, ref.used()}, {Candidate, cand.used()}} {
		var left []string
		for _, r := range s.used {
			if !matched[r.Pair] {
				left = append(left, fmt.Sprintf("%q in %s", r.Pair, r.Source.Place()))
			}
		}
		if n := len(left); n > 0 {
			c.warn(WarnUnmatched, s.side, string(s.side)+".unmatched", fmt.Sprintf("%s of the %s without a partner in the other lot, left out of the paired test: %s.", Count(n, "part", "parts"), s.side, strings.Join(left, ", ")))
		}
	}
	return nil
}

// testFailed says why there is no test.
func (c *comparison) testFailed(err error) {
	switch {
	case c.asked.grouped && errors.Is(err, stats.ErrTooFew):
		// Said where the groups were counted.
	case errors.Is(err, stats.ErrTooFew) && c.Method == "paired":
		c.warn(WarnTooFew, "", "difference", "A paired test needs at least two parts measured in both lots.")
	case errors.Is(err, stats.ErrTooFew):
		c.warn(WarnTooFew, "", "difference", "A test needs at least two readings in each lot.")
	case errors.Is(err, stats.ErrConstant) && c.Method == "paired":
		c.warn(WarnNoVariation, "", "difference", "The differences of the pairs are constant to within rounding: there is no standard error, no test and no interval.")
	case errors.Is(err, stats.ErrConstant):
		c.warn(WarnNoVariation, "", "difference", "The readings of both lots are constant to within rounding: there is no standard error, no test and no interval.")
	default:
		c.warn(WarnNotComputable, "", "difference", "The difference lies outside the range of the arithmetic; no test was made.")
	}
}
