package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// A Capability relates readings to limits. Pp needs both limits and Ppk at least
// one; both need a spread, and HasPp and HasPpk say which exist. OutsideCounted
// is the part of the readings beyond a limit, 0 to 1. OutsideEstimated is the
// part a normal distribution with the mean and SD of the readings has beyond
// the limits; where SD is 0 that is OutsideCounted.
type Capability struct {
	Pp, Ppk                          float64
	HasPp, HasPpk                    bool
	OutsideEstimated, OutsideCounted float64
}

// Performance returns the capability of x, whose summary is s, to the limits. A
// nil limit does not exist. A reading on a limit is inside. The indices are
// those of ISO 22514-2 for a normal distribution (from memory):
//
//	Pp = (upper-lower)/(6 SD), Ppk = min(upper-mean, mean-lower)/(3 SD)
func Performance(x []float64, s Summary, lower, upper *float64) Capability {
	var c Capability
	outside := 0
	for _, v := range x {
		if (lower != nil && v < *lower) || (upper != nil && v > *upper) {
			outside++
		}
	}
	if len(x) > 0 {
		c.OutsideCounted = float64(outside) / float64(len(x))
	}
	c.OutsideEstimated = c.OutsideCounted
	if s.N < 2 || s.SD == 0 || (lower == nil && upper == nil) {
		return c
	}
	c.HasPpk = true
	c.OutsideEstimated = 0
	c.Ppk = math.Inf(1)
	if lower != nil {
		room := (s.Mean - *lower) / s.SD
		c.Ppk = room / 3
		c.OutsideEstimated += dist.NormalUpper(room)
	}
	if upper != nil {
		room := (*upper - s.Mean) / s.SD
		c.Ppk = min(c.Ppk, room/3)
		c.OutsideEstimated += dist.NormalUpper(room)
	}
	if lower != nil && upper != nil {
		c.HasPp = true
		c.Pp = (*upper - *lower) / s.SD / 6
	}
	return c
}

// PpkLimits returns an approximate two-sided confidence interval for a Ppk that
// n readings gave (Bissell 1990, Applied Statistics 39, 331-340, from memory):
//
//	Ppk -+ z sqrt(1/(9n) + Ppk^2/(2(n-1)))
//
// It is a normal approximation, rough below about 30 readings. n below 2 gives
// an interval without limits.
func PpkLimits(ppk float64, n int, level float64) Interval {
	if n < 2 {
		return Interval{Level: level, Lower: math.Inf(-1), Upper: math.Inf(1)}
	}
	z := -dist.NormalQuantile((1 - level) / 2)
	half := z * math.Sqrt(1/(9*float64(n))+ppk*ppk/(2*float64(n-1)))
	return Interval{Level: level, Lower: ppk - half, Upper: ppk + half}
}
