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
// which falls with e. From the closed form of the cubic that it comes to, which loses
// digits near the ends, Newton's steps lead to all digits; one that leaves what the
// root is known to lie between is halved instead.
func likely(low, high Counts, apart float64) float64 {
	from, to := 0.0, 1-apart
	if !(to > 0) {
		return 0
	}
	x1, y1, x2, y2 := float64(low.Failed), float64(low.N-low.Failed), float64(high.Failed), float64(high.N-high.Failed)
	if apart == 0 {
		return (x1 + x2) / (x1 + y1 + x2 + y2)
	}
	if x1 == 0 && x2/apart <= y1+y2/to {
		return 0
	}
	if y2 == 0 && y1/apart <= x2+x1/to {
		return to
	}
	e := cubicRoot(low, high, apart)
	for range 200 {
		if !(e > from && e < to) {
			if e = from + (to-from)/2; e <= from || e >= to {
				break
			}
		}
		end := 1 - apart - e
		p, q, r, s := 1/e, 1/(1-e), 1/(e+apart), 1/end
		slope := x1*p - y1*q + x2*r - y2*s
		step := slope / (x1*p*p + y1*q*q + x2*r*r + y2*s*s)
		if math.Abs(step) <= 1e-9*min(e, end) { // the next would be its square of that
			return e + step
		}
		if slope > 0 {
			from = e
		} else {
			to = e
		}
		e += step
	}
	return from + (to-from)/2
}

// cubicRoot is the middle root of the cubic of likely (Miettinen & Nurminen 1985, from
// memory).
func cubicRoot(low, high Counts, apart float64) float64 {
	n, m, x := float64(low.N), float64(high.N), float64(low.Failed)
	total, failed := n+m, x+float64(high.Failed)
	a := ((m+2*n)*apart - total - failed) / total
	b := ((n*apart-total-2*x)*apart + failed) / total
	c := x * apart * (1 - apart) / total
	half := a*a*a/27 - a*b/6 + c/2
	w := math.Copysign(math.Sqrt(max(0, a*a/9-b/3)), half)
	if w == 0 {
		return -a / 3
	}
	angle := (math.Pi + math.Acos(min(1, max(-1, half/(w*w*w))))) / 3
	return 2*w*math.Cos(angle) - a/3
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
