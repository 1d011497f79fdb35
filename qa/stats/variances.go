package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// A VarianceRatio compares two spreads, candidate over reference. SDRatio is the
// ratio of the standard deviations and F its square; Interval is for the ratio
// of the true standard deviations. P is two-sided: twice the smaller tail of F
// with DF1 and DF2 degrees of freedom, at most 1.
type VarianceRatio struct {
	SDRatio, F, DF1, DF2, P float64
	Interval                Interval
}

// FRatio returns the ratio of the spread of cand to that of ref for normal
// readings (Snedecor's F). It returns ErrTooFew when a group has fewer than 2
// readings and ErrConstant when a standard deviation is 0.
func FRatio(ref, cand Summary, level float64) (VarianceRatio, error) {
	if ref.N < 2 || cand.N < 2 {
		return VarianceRatio{}, ErrTooFew
	}
	if ref.SD == 0 || cand.SD == 0 {
		return VarianceRatio{}, ErrConstant
	}
	v := VarianceRatio{SDRatio: cand.SD / ref.SD, DF1: float64(cand.N - 1), DF2: float64(ref.N - 1)}
	v.F = v.SDRatio * v.SDRatio
	v.P = min(1, 2*min(dist.FLower(v.F, v.DF1, v.DF2), dist.FUpper(v.F, v.DF1, v.DF2)))
	tail := (1 - level) / 2
	// 1/F has the degrees of freedom exchanged, so both limits use a lower tail.
	v.Interval = Interval{
		Level: level,
		Lower: v.SDRatio * math.Sqrt(dist.FQuantile(tail, v.DF2, v.DF1)),
		Upper: v.SDRatio / math.Sqrt(dist.FQuantile(tail, v.DF1, v.DF2)),
	}
	return v, nil
}
