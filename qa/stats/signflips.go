package stats

import (
	"math"
	"math/bits"
	"math/rand/v2"
	"slices"
)

// SignFlips tests the mean of pairs without a normal curve: where a part's two readings
// might as well have been the other way round, its difference might as well have had
// the other sign (Fisher 1935, The Design of Experiments, section 21, from memory).
// NewSignFlips makes one.
//
// A flip of some of the differences less h0 makes their sum as large or larger where
// the mean of those flipped is at most h0. So the means of subsets, in order, hold every
// test and the interval (Hartigan 1969, J. American Statistical Association 64,
// 1303-1317, from memory).
type SignFlips struct {
	means []float64 // of the readings flipped, in rising order
	none  int       // how often none was flipped: as large whatever h0
	all   int       // flips, with the one found where it is not among them
	exact bool
	alike float64 // what equal means may differ by after rounding
}

// NewSignFlips flips the signs of x, a mean of which is asked about: all the 2^n ways
// where that is no more than the Resamples, else so many random ones. It needs 2 readings
// with a spread, and 100 resamples.
func NewSignFlips(x []float64, r Resampling) (*SignFlips, error) {
	one := make([]float64, len(x))
	for i := range one {
		one[i] = 1
	}
	return signFlips(one, x, r)
}

// NewRatioFlips is NewSignFlips for pairs of which the ratio of the means is asked:
// the signs of candidate - theta*reference are flipped. It returns ErrRatioUndefined
// where a reading of the reference is not above 0: then the theta that are not refuted
// need not be one stretch.
func NewRatioFlips(ref, cand []float64, r Resampling) (*SignFlips, error) {
	switch {
	case len(ref) != len(cand):
		return nil, ErrUnequalLengths
	case len(ref) > 0 && !(slices.Min(ref) > 0):
		return nil, ErrRatioUndefined
	}
	return signFlips(ref, cand, r)
}

func signFlips(under, over []float64, r Resampling) (*SignFlips, error) {
	switch {
	case len(over) < 2:
		return nil, ErrTooFew
	case r.Resamples < fewestResamples:
		return nil, ErrFewResamples
	}
	// Of the contrasts with the estimate, so that sums are of small numbers.
	value := Summarize(over).Mean / Summarize(under).Mean
	p := parts{under: under, over: make([]float64, len(over))}
	largest := 0.0
	for i := range over {
		p.over[i] = math.FMA(-value, under[i], over[i])
		largest = max(largest, math.Abs(p.over[i]/under[i]))
	}
	if largest <= 1e-12*math.Abs(value) || largest == 0 {
		return nil, ErrConstant
	}
	f := &SignFlips{exact: len(over) < 31 && 1<<len(over) <= r.Resamples, alike: 1e-10 * largest}
	if f.exact {
		f.means, f.all = p.every(), 1<<len(over)
	} else {
		f.means, f.all = make([]float64, r.Resamples), r.Resamples+1
		r.each(func(source *rand.PCG, from, to int) {
			for i := from; i < to; i++ {
				f.means[i] = p.drawn(source)
			}
		})
	}
	kept := f.means[:0]
	for _, m := range f.means {
		if math.IsNaN(m) {
			f.none++
			continue
		}
		kept = append(kept, value+m)
	}
	f.means = kept
	slices.Sort(f.means)
	return f, nil
}

// parts are pairs whose sums are divided, over by under.
type parts struct{ under, over []float64 }

// every are the ratios of the sums of every subset; of none it is NaN.
func (p parts) every() []float64 {
	n := len(p.over)
	out, under := make([]float64, 1<<n), make([]float64, 1<<n)
	for set := 1; set < len(out); set++ {
		rest, i := set&(set-1), bits.TrailingZeros(uint(set))
		out[set], under[set] = out[rest]+p.over[i], under[rest]+p.under[i]
	}
	for set := range out {
		out[set] /= under[set] // 0/0 of none
	}
	return out
}

// drawn is the ratio of the sums of a subset, each as likely as any.
func (p parts) drawn(source *rand.PCG) float64 {
	var over, under float64
	for from := 0; from < len(p.over); from += 64 {
		set := source.Uint64()
		if left := len(p.over) - from; left < 64 {
			set &= 1<<left - 1
		}
		for ; set != 0; set &= set - 1 {
			i := from + bits.TrailingZeros64(set)
			over += p.over[i]
			under += p.under[i]
		}
	}
	return over / under
}

// Flips returns how many flips there are, and whether they are all there could be.
func (f *SignFlips) Flips() (flips int, exact bool) {
	return len(f.means) + f.none, f.exact
}

// always counts the flips that are as far out whatever is tested: those of none, and
// the one found where it is not among them.
func (f *SignFlips) always() int { return f.all - len(f.means) }

// Above returns p of the hypothesis that the true mean is at most h0, against a larger
// one: no probability is 0 (see Permutation).
func (f *SignFlips) Above(h0 float64) float64 {
	at, _ := slices.BinarySearchFunc(f.means, h0+f.alike, func(m, h float64) int {
		if m <= h {
			return -1
		}
		return 1
	})
	return float64(f.always()+at) / float64(f.all)
}

// Below returns p of the hypothesis that the true mean is at least h0.
func (f *SignFlips) Below(h0 float64) float64 {
	at, _ := slices.BinarySearch(f.means, h0-f.alike)
	return float64(f.always()+len(f.means)-at) / float64(f.all)
}

// Interval returns every mean that neither test refutes at (1-level)/2. An end is
// infinite where the flips are too few for the level.
func (f *SignFlips) Interval(level float64) Interval {
	tail := (1 - level) / 2
	// The least count that is not refuted, of which always are there at once.
	least := int(math.Ceil(tail*float64(f.all)*(1-1e-12))) - f.always()
	out := Interval{Level: level, Lower: math.Inf(-1), Upper: math.Inf(1)}
	if least >= 1 && least <= len(f.means) {
		out.Lower, out.Upper = f.means[least-1], f.means[len(f.means)-least]
	}
	return out
}
