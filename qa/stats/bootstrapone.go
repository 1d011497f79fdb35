package stats

import (
	"math/rand/v2"
	"slices"
)

// BootstrapMean is BootstrapMeans for the mean of one sample, such as the differences
// of pairs: what the two readings of a part share stays with them. It needs 2 readings
// with a spread, and 100 resamples.
func BootstrapMean(x []float64, level float64, r Resampling) (Bootstrap, error) {
	switch {
	case len(x) < 2:
		return Bootstrap{}, ErrTooFew
	case slices.Min(x) == slices.Max(x):
		return Bootstrap{}, ErrConstant
	case r.Resamples < fewestResamples:
		return Bootstrap{}, ErrFewResamples
	}
	d := deviations(x)
	draws := make([]float64, r.Resamples)
	r.each(func(source *rand.PCG, from, to int) {
		for i := from; i < to; i++ {
			draws[i] = drawnSum(source, d) / float64(len(d))
		}
	})
	var out skew
	out.add(1/float64(len(d)), d)
	return bca(Summarize(x).Mean, draws, 0, out.acceleration(), level)
}
