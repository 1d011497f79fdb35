package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// ToleranceFactor returns the k for which mean -+ k SD of n normal readings
// contains at least the part coverage of all with the given confidence, where SD
// has df degrees of freedom (n-1 for one lot). It is the exact factor of ISO
// 16269-6, Annex F, and not one of its approximations: with R(x) the half width
// of the interval about x that holds coverage of a standard normal curve,
//
//	confidence = integral of phi(y) P(chi-square(df) >= df R(y/sqrt(n))^2/k^2) dy
//
// over all y (Wald & Wolfowitz 1946, Annals of Mathematical Statistics 17, 208-215;
// Odeh 1978, Communications in Statistics B7, 183-201; from memory). The relative
// error is below 1e-12. It returns ErrTooFew for n below 1 or df below 1, and NaN
// where coverage or confidence is not between 0 and 1.
func ToleranceFactor(n int, df, coverage, confidence float64) (float64, error) {
	if n < 1 || !(df >= 1) {
		return math.NaN(), ErrTooFew
	}
	if !(coverage > 0 && coverage < 1 && confidence > 0 && confidence < 1) {
		return math.NaN(), nil
	}
	size := math.Sqrt(float64(n))
	if math.IsInf(df, 1) { // the standard deviation is known
		return halfWidth(-dist.NormalQuantile((1-confidence)/2)/size, coverage), nil
	}
	// The sum of equal steps over an even bell that ends at nothing: its error falls
	// faster than any power of the step, once that is fine enough for both factors.
	step := max(1.0/2048, min(1.0/5, size/math.Sqrt(2*df)))
	steps := int(9 / step)
	weights, widths := make([]float64, steps+1), make([]float64, steps+1)
	for i := range weights {
		y := step * float64(i)
		weights[i] = 2 * step * math.Exp(-y*y/2) / math.Sqrt(2*math.Pi)
		widths[i] = halfWidth(y/size, coverage)
	}
	weights[0] /= 2
	// ln k is sought for which the doubt is 1 - confidence, or the confidence is
	// that, whichever is smaller.
	f := func(u float64) float64 {
		sum := 0.0
		for i, w := range weights {
			r := widths[i] * math.Exp(-u)
			if confidence >= 0.5 {
				sum += w * dist.ChiSquareLower(df*r*r, df)
			} else {
				sum -= w * dist.ChiSquareUpper(df*r*r, df)
			}
		}
		if confidence >= 0.5 {
			return sum/(1-confidence) - 1
		}
		return sum/confidence + 1
	}
	// Howe's factor (1969) is near; f falls with u.
	howe := -dist.NormalQuantile((1-coverage)/2) * math.Sqrt((1+1/(size*size))*df/dist.ChiSquareQuantile(1-confidence, df))
	low, high := math.Log(howe)-0.1, math.Log(howe)+0.1
	for f(low) < 0 {
		low -= 0.5
	}
	for f(high) > 0 {
		high += 0.5
	}
	return math.Exp(bracketed(low, high, f)), nil
}

// halfWidth is the R for which x-R..x+R holds coverage of the standard normal curve.
func halfWidth(x, coverage float64) float64 {
	outside := 1 - coverage
	high := x - dist.NormalQuantile(outside/2)
	low := max(-dist.NormalQuantile(outside/2), x-dist.NormalQuantile(outside))
	if !(low < high) {
		return high
	}
	f := func(r float64) float64 { return (dist.NormalUpper(r-x)+dist.NormalUpper(r+x))/outside - 1 }
	if f(low) <= 0 { // the far tail is nothing
		return low
	}
	return bracketed(low, high, f)
}

// ToleranceFactorOneSided returns the k for which mean + k SD of n normal readings
// is above at least the part coverage of all with the given confidence (and mean -
// k SD below it): the quantile of noncentral t with n-1 degrees of freedom and
// noncentrality z sqrt(n), over sqrt(n) (Owen 1968, Technometrics 10, 445-478, from
// memory). It returns ErrTooFew for n below 2.
func ToleranceFactorOneSided(n int, coverage, confidence float64) (float64, error) {
	if n < 2 {
		return math.NaN(), ErrTooFew
	}
	root := math.Sqrt(float64(n))
	return dist.NoncentralTQuantile(confidence, float64(n-1), dist.NormalQuantile(coverage)*root) / root, nil
}

// ToleranceRank returns the largest k for which the k-th smallest of n readings is
// below at least the part coverage of all with the given confidence, and the k-th
// largest above it, whatever the distribution (Wilks 1941, Annals of Mathematical
// Statistics 12, 91-96, from memory): P(Binomial(n, 1-coverage) >= k) >= confidence.
// Between the i-th smallest and the j-th largest lies coverage with that confidence
// where i+j is at most k. It is 0 where n is too small for any.
func ToleranceRank(n int, coverage, confidence float64) int {
	low, high := 0, n // low is right, or nothing is
	for low < high {
		k := (low + high + 1) / 2
		if binomialUpper(k, n, 1-coverage) >= confidence {
			low = k
		} else {
			high = k - 1
		}
	}
	return low
}
