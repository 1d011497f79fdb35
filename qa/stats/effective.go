package stats

// EffectiveN is the number of independent readings that tell as much about a mean
// as n readings whose neighbours have the correlation r, for a series in which each
// reading remembers only the one before it (Bartlett 1946, Supplement to the J.
// Royal Statistical Society 8, 27-41, from memory):
//
//	n (1-r)/(1+r)
//
// for large n. It is never above n, since a negative r is not taken as a gift, and
// at least 1. n is returned where r is not between -1 and 1.
func EffectiveN(n int, r float64) float64 {
	size := float64(n)
	if !(r > 0 && r < 1) {
		return size
	}
	return min(size, max(1, size*(1-r)/(1+r)))
}
