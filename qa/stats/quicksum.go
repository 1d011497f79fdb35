package stats

import "math"

// blockSize is how many readings are summed before their parts are joined.
const blockSize = 1024

// mostQuick is the most readings of which quickMoments is known to be good enough.
const mostQuick = 1 << 21

// quickMoments is momentsOf in one pass of plain sums, for readings that it can be
// shown to be good enough for; else false.
//
// With e the exponent of the farthest d = x - c, each d is cut at 2^(e-21):
//
//	d = h + l, d^2 = h^2 + l (h + d)
//
// h is a whole number of 2^(e-21) and h^2 one of 2^(2e-42), so that the sums of 1024
// of them need no more than 52 digits and are exact; what is rounded is only the
// sums of l and l (h + d), a two-millionth of the whole and less. (Cut by adding and
// taking off a large number: Rump, Ogita & Oishi 2008, SIAM J. Scientific Computing
// 31, 189-224, from memory.)
//
// c is a reading where all others lie between half and twice of it, for then d is
// exact (Sterbenz 1974); else 0. The sum S of the squared deviations from the mean is
// that about c less n times the square of the mean's distance from c. Of n readings
// in a block, S at least half the square of the range and the sum about c at most
// 16 S, the rounding is at most n 2^-53 * 2^(e-20) * sum |d| of S, with
// sum |d| <= 4 sqrt(n S): below 2^-53.
func quickMoments(x []float64, low, high float64) (moments, bool) {
	c := x[len(x)/2]
	if !(2*low >= c && high <= 2*c || 2*high <= c && low >= 2*c) {
		c = 0
	}
	_, e := math.Frexp(max(high-c, c-low))
	if low == high || e < -100 || e > 100 || len(x) > mostQuick {
		return moments{}, false
	}
	cut := math.Ldexp(1.5, e+31) // its digits end at 2^(e-21)
	var sum, squares double
	for rest := x; len(rest) > 0; {
		block := rest[:min(len(rest), blockSize)]
		rest = rest[len(block):]
		s, q := blockSums(block, c, cut)
		sum, squares = sum.plus(s), squares.plus(q)
	}
	shift := sum.over(float64(len(x)))
	about := squares.minus(sum.times(shift))
	if !(16*about.high >= squares.high) {
		return moments{}, false
	}
	return moments{mean: shift.plus(double{high: c}), squares: about}, true
}

// blockSums are the sums of x - c and of their squares. Two of each are kept, so that
// one addition need not wait for the other.
func blockSums(x []float64, c, cut float64) (sum, squares double) {
	var h1, h2, l1, l2, s1, s2, m1, m2 float64
	for len(x) >= 2 {
		d1, d2 := x[0]-c, x[1]-c
		x = x[2:]
		a1, a2 := (d1+cut)-cut, (d2+cut)-cut
		b1, b2 := d1-a1, d2-a2
		h1 += a1
		h2 += a2
		l1 += b1
		l2 += b2
		s1 += float64(a1 * a1)
		s2 += float64(a2 * a2)
		m1 += float64(b1 * (a1 + d1))
		m2 += float64(b2 * (a2 + d2))
	}
	for _, v := range x {
		d := v - c
		a := (d + cut) - cut
		b := d - a
		h1 += a
		l1 += b
		s1 += float64(a * a)
		m1 += float64(b * (a + d))
	}
	return twoSum(h1+h2, l1+l2), twoSum(s1+s2, m1+m2)
}
