package stats

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"lotpair/qa/stats/dist"
)

// A FractionDesign is a study of two fractions that has not been made: so many
// parts, of which the true fractions PRef and PCand fail, tested by the score test
// of Miettinen and Nurminen. The aims are those of Design, for the difference of
// the fractions, candidate minus reference.
type FractionDesign struct {
	Aim          Aim
	NRef, NCand  int
	PRef, PCand  float64
	Alpha        float64
	Lower, Upper float64
}

// mostParts is the largest number of parts a lot for which the counts are gone
// through.
const mostParts = 1_000_000

// mostWalked is the largest number of parts up to which FractionSize looks below
// the number that it has found: each look goes through all likely counts.
const mostWalked = 5_000

func (d FractionDesign) check() error {
	in := func(p float64) bool { return p >= 0 && p <= 1 }
	within := func(v float64) bool { return v > -1 && v < 1 }
	limits := d.Aim == AimWithin || d.Aim == AimNotLower || d.Aim == AimNotHigher
	switch {
	case d.NRef < 2 || d.NCand < 2:
		return ErrTooFew
	case d.NRef > mostParts || d.NCand > mostParts:
		return fmt.Errorf("parts: found %d and %d, want at most %d a lot", d.NRef, d.NCand, mostParts)
	case !in(d.PRef) || !in(d.PCand):
		return fmt.Errorf("fractions: found %v and %v, want numbers from 0 to 1", d.PRef, d.PCand)
	case !(d.Alpha > 0 && d.Alpha < 0.5):
		return fmt.Errorf("alpha: found %v, want a number above 0 and below 0.5", d.Alpha)
	case limits && d.Aim != AimNotHigher && !within(d.Lower), limits && d.Aim != AimNotLower && !within(d.Upper), d.Aim == AimWithin && !(d.Lower < d.Upper):
		return fmt.Errorf("margin: found %v to %v, want fractions with the lower limit below the upper one", d.Lower, d.Upper)
	case d.Aim < AimWithin || d.Aim > AimHigher:
		return fmt.Errorf("aim: found %d, want one of the aims", d.Aim)
	}
	return nil
}

// Power returns the probability that the design shows its aim: the sum of the
// probabilities of all pairs of counts with which the score test does, exact.
func (d FractionDesign) Power() (float64, error) {
	if err := d.check(); err != nil {
		return 0, err
	}
	return d.power(), nil
}

func (d FractionDesign) power() float64 {
	ref, cand := chancesOf(d.NRef, d.PRef), chancesOf(d.NCand, d.PCand)
	z := -dist.NormalQuantile(d.Alpha)
	p := Proportions{ref: Counts{N: d.NRef}, cand: Counts{N: d.NCand}}
	// The score rises with y, so each test rejects from or up to one y, which
	// rises with x: the limits are carried along.
	from := func(s, z float64) func() int {
		reject := func(y int) bool {
			p.cand.Failed = y
			return p.Score(s) > z
		}
		y, step := -1, 0
		return func() int {
			last := y
			if last < 0 {
				y = sort.Search(d.NCand+1, reject)
				return y
			}
			// It rises steadily: look first where it is expected.
			for y = min(last+step, d.NCand+1); y > 0 && reject(y-1); {
				y--
			}
			for y <= d.NCand && !reject(y) {
				y++
			}
			step = max(0, y-last)
			return y
		}
	}
	none, all := func() int { return d.NCand + 1 }, func() int { return 0 }
	lower, upper := all, none // shown from lower() to before upper()
	switch d.Aim {
	case AimWithin:
		lower, upper = from(d.Lower, z), from(d.Upper, math.Nextafter(-z, math.Inf(-1)))
	case AimNotLower:
		lower = from(d.Lower, z)
	case AimNotHigher:
		upper = from(d.Upper, math.Nextafter(-z, math.Inf(-1)))
	case AimHigher:
		lower = from(0, z)
	case AimLower:
		upper = from(0, math.Nextafter(-z, math.Inf(-1)))
	case AimDifference:
		two := -dist.NormalQuantile(d.Alpha / 2)
		lower, upper = from(0, math.Nextafter(-two, math.Inf(-1))), from(0, two)
	}
	total := 0.0
	for i, chance := range ref.mass {
		p.ref.Failed = ref.first + i
		a, b := lower(), upper()
		if d.Aim == AimDifference { // shown outside
			total += chance * (cand.below(a) + 1 - cand.below(b))
		} else if a < b {
			total += chance * (cand.below(b) - cand.below(a))
		}
	}
	return min(1, total)
}

// A chances holds the binomial probabilities of first and more of n, as far as they
// are not far from what is likely, and the sums before each.
type chances struct {
	first      int
	mass, sums []float64
}

// chancesOf goes from the largest probability outwards and scales them to add to 1,
// so that no factorial is needed.
func chancesOf(n int, p float64) chances {
	const least = 1e-20 // of the largest: what lies beyond adds to less than 1e-18
	top := min(n, int(float64(n+1)*p))
	up, down := []float64{1}, []float64{}
	if p > 0 && p < 1 {
		odds := p / (1 - p)
		for k, v := top, 1.0; k < n && v > least; k++ {
			v *= odds * float64(n-k) / float64(k+1)
			up = append(up, v)
		}
		for k, v := top, 1.0; k > 0 && v > least; k-- {
			v *= float64(k) / float64(n-k+1) / odds
			down = append(down, v)
		}
	}
	slices.Reverse(down)
	c := chances{first: top - len(down), mass: append(down, up...)}
	c.sums = make([]float64, len(c.mass)+1)
	for i, v := range c.mass {
		c.sums[i+1] = c.sums[i] + v
	}
	whole := c.sums[len(c.mass)]
	for i := range c.mass {
		c.mass[i] /= whole
		c.sums[i+1] /= whole
	}
	return c
}

// below is the probability of less than k.
func (c chances) below(k int) float64 {
	return c.sums[min(max(k-c.first, 0), len(c.mass))]
}

// room is how far the true difference is from what is to be refuted.
func (d FractionDesign) room() float64 {
	return Design{Aim: d.Aim, Lower: d.Lower, Upper: d.Upper, Shift: d.PCand - d.PRef}.room()
}

// FractionSize returns the smallest number of reference parts, at least 2, with
// which the design shows its aim with at least the given power, the candidate's,
// and the power they have. The power of counted parts goes up and down a little
// from one number to the next, by about the probability of one count, which is
// made good by about the root of the number in parts; the first that has it is
// given. Above 600 parts none is tried that is more than a tenth, or four roots,
// below one that does and follows one that does not; above 5,000 none at all.
func FractionSize(d FractionDesign, ratio, power float64) (nRef, nCand int, achieved float64, err error) {
	if err := targets(ratio, power); err != nil {
		return 0, 0, 0, err
	}
	d.NRef, d.NCand = 2, 2
	if err := d.check(); err != nil {
		return 0, 0, 0, err
	}
	if d.room() <= 0 {
		return 0, 0, 0, ErrBeyondMargin
	}
	at := func(n int) float64 {
		d.NRef, d.NCand = n, Share(n, ratio)
		if d.NCand < 2 {
			return 0
		}
		return d.power()
	}
	first, most := 2, int(mostParts/max(1, ratio))
	if g := d.guess(ratio, power); g > 600 {
		high := int(min(g, float64(most)))
		for high < most && at(high) < power {
			high = min(most, high+high/2)
		}
		low := 2
		for high-low > 1 {
			if middle := low + (high-low)/2; at(middle) < power {
				low = middle
			} else {
				high = middle
			}
		}
		if first = high; high <= mostWalked {
			first -= min(high/10, 4*int(math.Sqrt(float64(high))))
		}
	}
	for n := first; n <= most; n++ {
		if p := at(n); p >= power {
			return d.NRef, d.NCand, p, nil
		}
	}
	return 0, 0, 0, ErrNoSize
}

// guess is the number that the normal distribution would need.
func (d FractionDesign) guess(ratio, power float64) float64 {
	v := d.PRef*(1-d.PRef) + d.PCand*(1-d.PCand)/ratio
	z := -dist.NormalQuantile(d.Alpha) - dist.NormalQuantile((1-power)/2)
	return max(0, z) * max(0, z) * v / square(d.room())
}
