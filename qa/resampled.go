package qa

import (
	"math"

	"lotpair/qa/stats"
)

// The fewest and the most resamples that a plan may ask for: fewer give no interval, more take minutes.
const (
	fewestResamples = 100
	mostResamples   = 1_000_000
)

// resampled adds, where the plan asks for it, the bootstrap (BCa, Efron 1987) and the permutation on the margin's own scale, with
// the seed and number that the plan states. Pairs are drawn as pairs and their signs are flipped, all the ways where those are no
// more than the resamples, which is the number then stated; two lots are drawn each from itself, and their readings exchanged under
// Welch's t. Readings of random groups are not independent: of them there is none (see absences).
func (c *comparison) resampled(plan Plan) {
	s := plan.Sensitivity
	if s == nil || s.Resamples == 0 || c.asked.grouped {
		return
	}
	r := stats.Resampling{Seed: uint64(s.Seed), Resamples: s.Resamples, Run: c.known.watch.blocks(c.Name)}
	x, y, level := c.ref.values, c.cand.values, 1-2*c.Alpha
	paired, ratio := c.Method == "paired", c.margin.scale == scaleRatio
	switch {
	case c.margin.scale == scaleShift: // of one sample: nothing is exchanged
		d := make([]float64, len(y))
		for i, v := range y {
			d[i] = v - c.margin.mean
		}
		b, err := stats.BootstrapMean(d, level, r)
		c.drawn(b, err, r)
	case paired && ratio:
		b, err := stats.BootstrapPairedRatio(x, y, level, r)
		c.drawn(b, err, r)
		f, err := stats.NewRatioFlips(x, y, r)
		c.flipped(f, err, level, r)
	case paired:
		d := c.pairDifferences()
		b, err := stats.BootstrapMean(d, level, r)
		c.drawn(b, err, r)
		f, err := stats.NewSignFlips(d, r)
		c.flipped(f, err, level, r)
	case c.Method == "log":
		u, _ := logarithms(x)
		v, _ := logarithms(y) // there is an interval: all are above 0
		b, err := stats.BootstrapMeans(u, v, level, r)
		b.Value, b.Interval = math.Exp(b.Value), exponential(b.Interval)
		c.drawn(b, err, r)
		if p, err := stats.Permute(u, v, r); err == nil {
			c.interval("permutation", *c.Equivalence.Estimate, exponential(p.Interval(level)), &r)
		}
	case ratio:
		b, err := stats.BootstrapRatio(x, y, level, r)
		c.drawn(b, err, r)
	default:
		b, err := stats.BootstrapMeans(x, y, level, r)
		c.drawn(b, err, r)
		if p, err := stats.Permute(x, y, r); err == nil {
			c.interval("permutation", c.cand.summary.Mean-c.ref.summary.Mean, p.Interval(level), &r)
		}
	}
}

// drawn adds a bootstrap, where there is one.
func (c *comparison) drawn(b stats.Bootstrap, err error, r stats.Resampling) {
	if err == nil {
		c.interval("bootstrap", b.Value, b.Interval, &r)
	}
}

// flipped adds the flips of signs, where there are any.
func (c *comparison) flipped(f *stats.SignFlips, err error, level float64, r stats.Resampling) {
	if err == nil && c.Equivalence.Estimate != nil {
		r.Resamples, _ = f.Flips()
		c.interval("permutation", *c.Equivalence.Estimate, f.Interval(level), &r)
	}
}

// exponential is an interval of logarithms as one of what they are of.
func exponential(in stats.Interval) stats.Interval {
	in.Lower, in.Upper = math.Exp(in.Lower), math.Exp(in.Upper)
	return in
}
