package stats

import (
	"math"
	"math/rand/v2"

	"lotpair/qa/stats/dist"
)

// A Permutation holds the rearrangements of two lots' readings for tests of the
// difference of their means that need no normal curve. Permute makes one; it keeps
// 32 bytes a resample.
type Permutation struct {
	observed  Estimate
	small     int // readings in the smaller lot, which is drawn
	swapped   bool
	all, cand float64 // readings in both lots, in the candidate
	total     drawn
	draws     []drawn
}

// drawn are sums over the readings drawn for the smaller lot: of the deviations z
// from the mean of the lot that a reading came from, of their squares, of those
// from the candidate, and how many of these.
type drawn struct{ sum, squares, candSum, cands float64 }

// Permute draws, Resamples times, which readings might have been the reference's
// and which the candidate's, with Welch's t as the statistic: so the test also
// holds, nearly, where the spreads differ (Janssen 1997, Statistics & Probability
// Letters 36, 9-21, from memory). Errors are those of Welch, and ErrFewResamples.
func Permute(ref, cand []float64, r Resampling) (*Permutation, error) {
	e, err := Welch(Summarize(ref), Summarize(cand))
	if err != nil {
		return nil, err
	}
	if r.Resamples < fewestResamples {
		return nil, ErrFewResamples
	}
	p := &Permutation{
		observed: e, small: min(len(ref), len(cand)), swapped: len(cand) < len(ref),
		all: float64(len(ref) + len(cand)), cand: float64(len(cand)),
		draws: make([]drawn, r.Resamples),
	}
	readings := make([]drawn, 0, len(ref)+len(cand))
	for _, z := range deviations(ref) {
		readings = append(readings, drawn{sum: z, squares: z * z})
	}
	for _, z := range deviations(cand) {
		readings = append(readings, drawn{sum: z, squares: z * z, candSum: z, cands: 1})
	}
	for i := range readings {
		p.total = p.total.plus(&readings[i])
	}
	r.each(func(source *rand.PCG, from, to int) {
		order := make([]uint32, len(readings))
		for i := range order {
			order[i] = uint32(i)
		}
		for i := from; i < to; i++ {
			p.draws[i] = draw(source, order, readings, p.small)
		}
	})
	return p, nil
}

func (d drawn) plus(e *drawn) drawn {
	return drawn{d.sum + e.sum, d.squares + e.squares, d.candSum + e.candSum, d.cands + e.cands}
}

// draw moves count of the readings, each as likely as any, to the front of order
// and adds them up.
func draw(source *rand.PCG, order []uint32, readings []drawn, count int) drawn {
	var d drawn
	var v uint64
	half := false
	for i := 0; i < count; {
		if half = !half; half {
			v = source.Uint64()
		} else {
			v >>= 32
		}
		n := uint32(len(order) - i)
		at := uint64(uint32(v)) * uint64(n)
		if uint32(at) < n && uint32(at) < fair(n) {
			continue
		}
		j := i + int(at>>32)
		order[i], order[j] = order[j], order[i]
		d = d.plus(&readings[order[i]])
		i++
	}
	return d
}

// statistic is Welch's t of a rearrangement of the readings, with those from the
// candidate moved up by e: a candidate that differs by the observed difference less
// e from the one under test.
func (p *Permutation) statistic(d *drawn, e float64) float64 {
	n := float64(p.small)
	m := p.all - n
	a := d.sum + e*d.cands
	qa := d.squares + e*(2*d.candSum+e*d.cands)
	b := p.total.sum + e*p.total.cands - a
	qb := p.total.squares + e*(2*p.total.candSum+e*p.total.cands) - qa
	variance := max(0, qa-a*a/n)/(n*(n-1)) + max(0, qb-b*b/m)/(m*(m-1))
	diff := b/m - a/n
	if p.swapped {
		diff = -diff
	}
	if diff == 0 {
		return 0
	}
	return diff / math.Sqrt(variance)
}

// part is (1 + the rearrangements for which extreme is true)/(1 + all), so that no
// probability is 0 (Phipson & Smyth 2010, Statistical Applications in Genetics and
// Molecular Biology 9, 39, from memory).
func (p *Permutation) part(h0 float64, extreme func(t float64) bool) float64 {
	count := 1
	for i := range p.draws {
		if extreme(p.statistic(&p.draws[i], p.observed.Value-h0)) {
			count++
		}
	}
	return float64(count) / float64(len(p.draws)+1)
}

// alike is what equal statistics may differ by after rounding.
func alike(t float64) float64 { return 1e-10 * math.Abs(t) }

// Above tests the hypothesis that the true difference is at most h0, against a
// larger one: the candidate is moved by h0, and p is the part of rearrangements with
// as large a t.
func (p *Permutation) Above(h0 float64) (t, pValue float64) {
	t = (p.observed.Value - h0) / p.observed.SE
	return t, p.part(h0, func(v float64) bool { return v >= t-alike(t) })
}

// Below tests the hypothesis that the true difference is at least h0.
func (p *Permutation) Below(h0 float64) (t, pValue float64) {
	t = (p.observed.Value - h0) / p.observed.SE
	return t, p.part(h0, func(v float64) bool { return v <= t+alike(t) })
}

// TwoSided tests the hypothesis that the true difference is h0.
func (p *Permutation) TwoSided(h0 float64) (t, pValue float64) {
	t = (p.observed.Value - h0) / p.observed.SE
	size := math.Abs(t) - alike(t)
	return t, p.part(h0, func(v float64) bool { return math.Abs(v) >= size })
}

// Interval returns the interval of the true difference: its ends are where the
// one-sided p passes (1-level)/2, found by halving to a millionth of the standard
// error. It costs about fifty tests. An end is infinite where the readings or the
// resamples are too few for the level.
func (p *Permutation) Interval(level float64) Interval {
	tail := (1 - level) / 2
	end := func(side float64, test func(h0 float64) (float64, float64)) float64 {
		rejected := func(distance float64) bool {
			_, v := test(p.observed.Value + side*distance*p.observed.SE)
			return v < tail
		}
		// From where Student's interval ends, out to where the test rejects.
		out := -dist.StudentQuantile(tail, p.observed.DF)
		in := 0.0
		for range 12 {
			if rejected(out) {
				for out-in > 1e-6 {
					middle := in + (out-in)/2
					if rejected(middle) {
						out = middle
					} else {
						in = middle
					}
				}
				return p.observed.Value + side*out*p.observed.SE
			}
			in, out = out, out*1.5
		}
		return math.Inf(int(side))
	}
	return Interval{Level: level, Lower: end(-1, p.Above), Upper: end(1, p.Below)}
}
