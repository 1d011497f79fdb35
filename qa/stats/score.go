package stats

import "math"

// A fractionPair is two counts of failed parts: x of n in the reference, y of m in
// the candidate.
type fractionPair struct{ x, n, y, m float64 }

// score is Proportions.Score by the closed form of the cubic (Miettinen & Nurminen
// 1985, Statistics in Medicine 4, 213-226, from memory), quick enough to be gone
// through for many pairs of counts: the statistic of the hypothesis that the true
// difference is s.
func (p fractionPair) score(s float64) float64 {
	total, failed := p.n+p.m, p.x+p.y
	r := p.likeliest(s)
	q := min(1, max(0, r+s))
	v := (q*(1-q)/p.m + r*(1-r)/p.n) * total / (total - 1)
	diff := p.y/p.m - p.x/p.n - s
	if s == 0 {
		f := failed / total
		v = f * (1 - f) * (1/p.m + 1/p.n) * total / (total - 1)
	}
	if v <= 0 {
		switch {
		case diff > 0:
			return math.Inf(1)
		case diff < 0:
			return math.Inf(-1)
		}
		return 0
	}
	return diff / math.Sqrt(v)
}

// likeliest is the reference's fraction at the maximum of the likelihood among
// pairs of fractions that differ by s, the middle root of a cubic.
func (p fractionPair) likeliest(s float64) float64 {
	total, failed := p.n+p.m, p.x+p.y
	a := ((p.m+2*p.n)*s - total - failed) / total
	b := ((p.n*s-total-2*p.x)*s + failed) / total
	c := p.x * s * (1 - s) / total
	half := a*a*a/27 - a*b/6 + c/2
	w := math.Copysign(math.Sqrt(max(0, a*a/9-b/3)), half)
	r := -a / 3
	if w != 0 {
		angle := (math.Pi + math.Acos(min(1, max(-1, half/(w*w*w))))) / 3
		r += 2 * w * math.Cos(angle)
	}
	return min(min(1, 1-s), max(max(0, -s), r))
}
