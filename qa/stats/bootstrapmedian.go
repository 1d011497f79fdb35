package stats

import (
	"math"
	"math/rand/v2"
	"slices"
)

// BootstrapMedians is BootstrapMeans for the difference of the medians. The median
// of a lot drawn again is one of its readings (or the mean of two): which one is
// drawn directly, from the distribution of the place that it has, instead of
// drawing a whole lot. With U(k) the k-th smallest of n uniform numbers, the k-th
// smallest of the lot drawn is reading floor(n U(k)) of the sorted lot, and U(k) is
// a beta number with parameters k and n+1-k.
//
// Differences are rounded to one decimal more than the readings were written with,
// so that equal ones are equal; decimals below 0 leave them as they are.
func BootstrapMedians(ref, cand []float64, level float64, decimals int, r Resampling) (Bootstrap, error) {
	if err := resampled(ref, cand, r); err != nil {
		return Bootstrap{}, err
	}
	a, b := slices.Clone(ref), slices.Clone(cand)
	slices.Sort(a)
	slices.Sort(b)
	if decimals >= 0 {
		decimals++
	}
	value := rounded(quantile(b, 0.5)-quantile(a, 0.5), decimals)
	draws := make([]float64, r.Resamples)
	r.each(func(source *rand.PCG, from, to int) {
		random := rand.New(source)
		for i := from; i < to; i++ {
			draws[i] = rounded(drawnMedian(random, b)-drawnMedian(random, a), decimals)
		}
	})
	var out skew
	for lot, x := range [][]float64{a, b} {
		out.add(float64(2*lot-1)/float64(len(x)), leftOut(x))
	}
	return bca(value, draws, value, out.acceleration(), level)
}

// drawnMedian is the median of a lot drawn from sorted readings.
func drawnMedian(random *rand.Rand, sorted []float64) float64 {
	n := float64(len(sorted))
	k := float64((len(sorted) + 1) / 2)
	g, h := gammaNumber(random, k), gammaNumber(random, n+1-k)
	u := g / (g + h)
	at := func(u float64) float64 { return sorted[min(int(n*u), len(sorted)-1)] }
	if len(sorted)%2 == 1 {
		return at(u)
	}
	// The next one: the least of n-k numbers from u to 1.
	next := 1 - (1-u)*math.Exp(-random.ExpFloat64()/(n-k))
	low, high := at(u), at(max(u, next))
	if low == high {
		return low
	}
	return low + 0.5*(high-low)
}

// gammaNumber is a random number of the gamma distribution with shape k, at least 1
// (Marsaglia & Tsang 2000, ACM Transactions on Mathematical Software 26, 363-372,
// from memory).
func gammaNumber(random *rand.Rand, k float64) float64 {
	d := k - 1.0/3
	c := 1 / math.Sqrt(9*d)
	for {
		x := random.NormFloat64()
		v := 1 + c*x
		if v <= 0 {
			continue
		}
		v *= v * v
		if math.Log(1-random.Float64()) < x*x/2+d-d*v+d*math.Log(v) {
			return d * v
		}
	}
}

// leftOut is (n-1)(mean of m - m[i]) for the medians m[i] of sorted readings
// without the i-th.
func leftOut(sorted []float64) []float64 {
	n := len(sorted)
	h := n / 2
	m := make([]float64, n)
	sum := 0.0
	middle := quantile(sorted, 0.5)
	for i := range m {
		switch {
		case n%2 == 0 && i < h:
			m[i] = sorted[h]
		case n%2 == 0:
			m[i] = sorted[h-1]
		case i < h:
			m[i] = sorted[h]/2 + sorted[h+1]/2
		case i > h:
			m[i] = sorted[h-1]/2 + sorted[h]/2
		default:
			m[i] = sorted[h-1]/2 + sorted[h+1]/2
		}
		m[i] -= middle
		sum += m[i]
	}
	for i := range m {
		m[i] = float64(n-1) * (sum/float64(n) - m[i])
	}
	return m
}
