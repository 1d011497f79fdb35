package stats

import (
	"errors"
	"math"

	"lotpair/qa/stats/dist"
)

// ErrNotCounts says that numbers are not counts of parts: no parts, or more failed
// than there are.
var ErrNotCounts = errors.New("not counts of parts")

// Counts are parts that were judged and those of them that failed.
type Counts struct{ N, Failed int }

func (c Counts) fraction() float64 { return float64(c.Failed) / float64(c.N) }

// Proportions compares the fractions of two lots that fail, candidate minus
// reference. CompareProportions makes one.
type Proportions struct{ ref, cand Counts }

// CompareProportions checks the counts: at least one part a lot, and no more failed
// than parts. Else it returns ErrNotCounts.
func CompareProportions(ref, cand Counts) (Proportions, error) {
	for _, c := range []Counts{ref, cand} {
		if c.N < 1 || c.Failed < 0 || c.Failed > c.N {
			return Proportions{}, ErrNotCounts
		}
	}
	return Proportions{ref, cand}, nil
}

// Difference returns the difference of the fractions.
func (p Proportions) Difference() float64 { return p.cand.fraction() - p.ref.fraction() }

// Score returns the statistic of the hypothesis that the true difference is delta
// (Miettinen & Nurminen 1985, Statistics in Medicine 4, 213-226, from memory):
//
//	z = (difference - delta)/sqrt(V N/(N-1)), V = r(1-r)/n1 + c(1-c)/n2, N = n1+n2
//
// with r and c = r + delta the most likely fractions under the hypothesis. It is 0
// where difference and delta are equal, and infinite where the hypothesis leaves
// no spread. delta is from -1 to 1.
func (p Proportions) Score(delta float64) float64 {
	// (c n1 - r n2)/(n1 n2) is exactly 0 for equal fractions; a difference of quotients is not.
	n1, n2 := float64(p.ref.N), float64(p.cand.N)
	d := (float64(p.cand.Failed)*n1-float64(p.ref.Failed)*n2)/(n1*n2) - delta
	if d == 0 {
		return 0
	}
	n := n1 + n2
	return d / math.Sqrt(p.spread(delta)*n/(n-1))
}

// spread is V for the most likely fractions when the candidate's is delta larger.
func (p Proportions) spread(delta float64) float64 {
	low, high := p.ref, p.cand
	if delta < 0 {
		low, high = high, low
	}
	apart := math.Abs(delta)
	if low.Failed+high.Failed > (low.N+high.N)/2 { // count those that passed: the smaller fractions have more digits
		low, high = Counts{N: high.N, Failed: high.N - high.Failed}, Counts{N: low.N, Failed: low.N - low.Failed}
	}
	e := likely(low, high, apart)
	return e*(1-e)/float64(low.N) + (e+apart)*(1-apart-e)/float64(high.N)
}

// likely is the most likely fraction e of low where that of high is apart larger:
// the root of the derivative of the log-likelihood
//
//	x1/e - (n1-x1)/(1-e) + x2/(e+apart) - (n2-x2)/(1-apart-e)
//
// which falls with e. Halving needs no cubic and keeps all digits near the ends.
func likely(low, high Counts, apart float64) float64 {
	part := func(count int, share float64) float64 {
		if count == 0 {
			return 0
		}
		return float64(count) / share
	}
	from, to := 0.0, 1-apart
	for range 2000 {
		e := from + (to-from)/2
		if e <= from || e >= to {
			break
		}
		slope := part(low.Failed, e) - part(low.N-low.Failed, 1-e) +
			part(high.Failed, e+apart) - part(high.N-high.Failed, 1-apart-e)
		if slope > 0 {
			from = e
		} else {
			to = e
		}
	}
	return from + (to-from)/2
}

// Above tests the hypothesis that the true difference is at most delta.
func (p Proportions) Above(delta float64) (z, pValue float64) {
	z = p.Score(delta)
	return z, dist.NormalUpper(z)
}

// Below tests the hypothesis that the true difference is at least delta.
func (p Proportions) Below(delta float64) (z, pValue float64) {
	z = p.Score(delta)
	return z, dist.NormalLower(z)
}

// TwoSided tests the hypothesis that the true difference is delta.
func (p Proportions) TwoSided(delta float64) (z, pValue float64) {
	z = p.Score(delta)
	return z, min(1, 2*dist.NormalUpper(math.Abs(z)))
}

// Interval returns every difference that Score does not reject: the interval of
// Miettinen & Nurminen (1985).
func (p Proportions) Interval(level float64) Interval {
	z := -dist.NormalQuantile((1 - level) / 2)
	d := p.Difference()
	// Score falls with delta: the ends are where it passes z and -z.
	end := func(low, high, at float64) float64 {
		for range 200 {
			middle := low + (high-low)/2
			if middle <= low || middle >= high {
				break
			}
			if p.Score(middle) > at {
				low = middle
			} else {
				high = middle
			}
		}
		return low + (high-low)/2
	}
	i := Interval{Level: level, Lower: -1, Upper: 1}
	if d > -1 {
		i.Lower = end(-1, d, z)
	}
	if d < 1 {
		i.Upper = end(d, 1, -z)
	}
	return i
}

// Newcombe returns the interval made of Wilson's two (Newcombe 1998, Statistics in
// Medicine 17, 873-890, method 10, from memory), without correction for continuity.
func (p Proportions) Newcombe(level float64) Interval {
	z := -dist.NormalQuantile((1 - level) / 2)
	d := p.Difference()
	a, b := p.ref.wilson(z), p.cand.wilson(z)
	r, c := p.ref.fraction(), p.cand.fraction()
	return Interval{
		Level: level,
		Lower: d - math.Hypot(c-b.Lower, a.Upper-r),
		Upper: d + math.Hypot(b.Upper-c, r-a.Lower),
	}
}

// wilson is the score interval of one fraction (Wilson 1927, J. American
// Statistical Association 22, 209-212, from memory).
func (c Counts) wilson(z float64) Interval {
	n, x := float64(c.N), float64(c.Failed)
	half := z * math.Sqrt(z*z+4*x*(1-x/n))
	// The smaller root from the larger: x = 0 and x = n give exactly 0 and 1.
	upper := (2*x + z*z + half) / (2 * (n + z*z))
	lower := 2 * x * x / n / (2*x + z*z + half)
	if c.Failed == c.N {
		upper = 1
	}
	return Interval{Lower: lower, Upper: upper}
}
