package stats

import (
	"math"
	"math/rand/v2"
	"slices"

	"lotpair/qa/stats/dist"
)

// A Bootstrap is a difference candidate minus reference and its BCa interval. Bias
// is the normal quantile of the part of the resamples below Value, Acceleration the
// skewness taken from leaving out one reading at a time.
type Bootstrap struct {
	Value, Bias, Acceleration float64
	Interval                  Interval
}

// BootstrapMeans returns the bias-corrected and accelerated interval of the
// difference of the means (Efron 1987, J. American Statistical Association 82,
// 171-185, from memory), each lot drawn again from itself. It needs 2 readings a
// lot, a spread in one of them, and 100 resamples.
func BootstrapMeans(ref, cand []float64, level float64, r Resampling) (Bootstrap, error) {
	if err := resampled(ref, cand, r); err != nil {
		return Bootstrap{}, err
	}
	a, b := deviations(ref), deviations(cand)
	value := Summarize(cand).Mean - Summarize(ref).Mean
	draws := make([]float64, r.Resamples)
	r.each(func(source *rand.PCG, from, to int) {
		for i := from; i < to; i++ {
			draws[i] = drawnSum(source, b)/float64(len(b)) - drawnSum(source, a)/float64(len(a))
		}
	})
	// Leaving out reading i moves the mean by its deviation over n-1.
	var out skew
	for lot, x := range [][]float64{a, b} {
		out.add(float64(2*lot-1)/float64(len(x)), x)
	}
	return bca(value, draws, 0, out.acceleration(), level)
}

// A skew adds up what readings put into an estimate, for the skewness of it.
type skew struct{ cubes, squares float64 }

func (s *skew) add(scale float64, x []float64) {
	for _, d := range x {
		d *= scale
		s.squares += d * d
		s.cubes += d * d * d
	}
}

func (s skew) acceleration() float64 { return s.cubes / math.Pow(s.squares, 1.5) / 6 }

func resampled(ref, cand []float64, r Resampling) error {
	switch {
	case len(ref) < 2 || len(cand) < 2:
		return ErrTooFew
	case slices.Min(ref) == slices.Max(ref) && slices.Min(cand) == slices.Max(cand):
		return ErrConstant
	case r.Resamples < fewestResamples:
		return ErrFewResamples
	}
	return nil
}

// deviations are the readings less their mean.
func deviations(x []float64) []float64 {
	m := momentsOf(x)
	return each(x, func(v float64) float64 { return math.Ldexp(m.deviation(v).value(), m.exp) })
}

// drawnSum is the sum of len(x) readings drawn from x, two from each random number.
func drawnSum(source *rand.PCG, x []float64) float64 {
	n := uint64(len(x))
	least := fair(uint32(n))
	var even, odd float64
	for i := len(x); i > 0; {
		v := source.Uint64()
		a, b := uint64(uint32(v))*n, v>>32*n
		if uint32(a) < least || uint32(b) < least {
			continue // both again: those kept are as likely as any
		}
		even += x[a>>32]
		if i > 1 {
			odd += x[b>>32]
		}
		i -= 2
	}
	return even + odd
}

// bca makes the interval of draws about centre, shifted by value - centre.
func bca(value float64, draws []float64, centre, acceleration, level float64) (Bootstrap, error) {
	slices.Sort(draws)
	if draws[0] == draws[len(draws)-1] {
		return Bootstrap{}, ErrConstant
	}
	below, _ := slices.BinarySearch(draws, centre)
	most, _ := slices.BinarySearchFunc(draws, centre, func(v, c float64) int {
		if v <= c {
			return -1
		}
		return 1
	})
	part := float64(below+most) / 2 / float64(len(draws))
	if part == 0 || part == 1 {
		return Bootstrap{}, ErrFewResamples
	}
	b := Bootstrap{Value: value, Bias: dist.NormalQuantile(part), Acceleration: acceleration}
	if math.IsNaN(acceleration) || math.IsInf(acceleration, 0) {
		b.Acceleration = 0
	}
	end := func(z float64) float64 {
		w := b.Bias + z
		at := dist.NormalLower(b.Bias + w/(1-b.Acceleration*w))
		if 1-b.Acceleration*w <= 0 { // beyond the pole all is inside
			at = dist.NormalLower(math.Copysign(math.Inf(1), w))
		}
		return value - centre + quantile(draws, at)
	}
	z := -dist.NormalQuantile((1 - level) / 2)
	b.Interval = Interval{Level: level, Lower: end(-z), Upper: end(z)}
	return b, nil
}
