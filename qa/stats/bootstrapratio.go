package stats

import (
	"math"
	"math/rand/v2"
	"slices"
)

// BootstrapRatio is BootstrapMeans for the ratio of the means, candidate over
// reference. Where every mean drawn of the reference lies on one side of 0, a ratio
// drawn is below theta where the contrast candidate - theta*reference is below 0, so
// that it is the interval of the contrasts as well. It returns ErrRatioUndefined where
// one does not.
func BootstrapRatio(ref, cand []float64, level float64, r Resampling) (Bootstrap, error) {
	if err := resampled(ref, cand, r); err != nil {
		return Bootstrap{}, err
	}
	x, y := ratioParts(ref), ratioParts(cand)
	value := y.mean / x.mean
	draws := make([]float64, r.Resamples)
	r.each(func(source *rand.PCG, from, to int) {
		for i := from; i < to; i++ {
			over := drawnSum(source, y.apart) / y.n
			under := drawnSum(source, x.apart) / x.n
			draws[i] = x.moved(over-value*under, under)
		}
	})
	var out skew
	out.add(1/y.n/x.mean, y.apart)
	out.add(1/x.n, x.leftOut(func(i int) float64 { return -value * x.apart[i] }))
	return ratioInterval(value, draws, out, level)
}

// BootstrapPairedRatio is BootstrapRatio for parts measured in both lots: a part is
// drawn with both its readings.
func BootstrapPairedRatio(ref, cand []float64, level float64, r Resampling) (Bootstrap, error) {
	if len(ref) != len(cand) {
		return Bootstrap{}, ErrUnequalLengths
	}
	if err := resampled(ref, cand, r); err != nil {
		return Bootstrap{}, err
	}
	x, y := ratioParts(ref), ratioParts(cand)
	value := y.mean / x.mean
	contrast := make([]float64, len(ref))
	for i := range contrast {
		contrast[i] = y.apart[i] - value*x.apart[i]
	}
	draws := make([]float64, r.Resamples)
	r.each(func(source *rand.PCG, from, to int) {
		for i := from; i < to; i++ {
			same := *source // the same parts of both
			under := drawnSum(&same, x.apart) / x.n
			draws[i] = x.moved(drawnSum(source, contrast)/x.n, under)
		}
	})
	var out skew
	out.add(1/x.n, x.leftOut(func(i int) float64 { return contrast[i] }))
	return ratioInterval(value, draws, out, level)
}

// ratioPart is one lot of a ratio: its mean and the readings less it.
type ratioPart struct {
	n, mean float64
	apart   []float64
}

func ratioParts(x []float64) ratioPart {
	return ratioPart{n: float64(len(x)), mean: Summarize(x).Mean, apart: deviations(x)}
}

// moved is how far the ratio moves with the contrast's mean where the reference's moves
// by under; NaN where that reaches 0.
func (p ratioPart) moved(contrast, under float64) float64 {
	mean := p.mean + under
	if !(mean/p.mean > 0) {
		return math.NaN()
	}
	return contrast / mean
}

// leftOut is (n-1)(mean of m - m[i]) for the ratios m[i] without the i-th reading,
// adds[i] being its contrast.
func (p ratioPart) leftOut(adds func(i int) float64) []float64 {
	m := make([]float64, len(p.apart))
	sum := 0.0
	for i, d := range p.apart {
		m[i] = p.moved(-adds(i)/(p.n-1), -d/(p.n-1))
		sum += m[i]
	}
	for i := range m {
		m[i] = (p.n - 1) * (sum/p.n - m[i])
	}
	return m
}

func ratioInterval(value float64, draws []float64, out skew, level float64) (Bootstrap, error) {
	if math.IsNaN(value) || math.IsNaN(out.squares) || slices.ContainsFunc(draws, math.IsNaN) {
		return Bootstrap{}, ErrRatioUndefined
	}
	return bca(value, draws, 0, out.acceleration(), level)
}
