package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// spread is the probability that the ratio of the standard deviations is shown to
// lie below SpreadRatio: that the upper end of its F interval does.
func (d Design) spread() float64 {
	d1, d2 := float64(d.NRef-1), float64(d.NCand-1)
	return dist.FLower(d.spreadLimit(d1, d2), d2, d1)
}

// spreadLimit is the largest F, candidate over reference, each over its true
// variance, with which the ratio is shown.
func (d Design) spreadLimit(d1, d2 float64) float64 {
	room := d.SpreadRatio / (d.SDCand / d.SDRef)
	return room * room * dist.FQuantile(d.Alpha, d2, d1)
}

// spreadShare is the least X1/X2 with which the ratio is shown, for the chi-squares
// of reference and candidate.
func (d Design) spreadShare() float64 {
	d1, d2 := float64(d.NRef-1), float64(d.NCand-1)
	return d1 / d2 / d.spreadLimit(d1, d2)
}

// SpreadPower returns the probability that the ratio of the standard deviations
// alone, without the mean, is shown to lie below SpreadRatio, by the F interval at
// level 1 - 2 alpha.
func (d Design) SpreadPower() (float64, error) {
	if err := d.check(); err != nil {
		return 0, err
	}
	return d.spread(), nil
}

// spreadGuess is the sample size by the normal distribution of the logarithm of the
// ratio, whose variance is about 1/(2 d1) + 1/(2 d2).
func (d Design) spreadGuess(ratio, power float64) float64 {
	z := max(0.1, -dist.NormalQuantile(d.Alpha)+dist.NormalQuantile(power))
	return square(z/math.Log(d.SpreadRatio/(d.SDCand/d.SDRef)))*(1+1/ratio)/2 + 2
}
