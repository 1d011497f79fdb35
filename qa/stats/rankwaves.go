package stats

import "math"

// widest is the smaller lot from which rounding in countU, which grows towards
// the middle, costs more than a few units of the last place: from there on the
// middle is summed from waves.
const widest = 60

// waves is the distribution of U for two large lots without ties. In the middle
// it is summed from its characteristic function, which for such lots is nothing
// after a few terms; the tails, where a sum of waves would have no digits of its
// own, are counted when they are first asked for.
type waves struct {
	m, n   int
	period float64   // of the waves: 9 standard deviations to each side of the middle
	terms  []float64 // the characteristic function at 2 pi j/period, j = 1, 2, ...
	edge   int64     // below it is the tail
	tail   *halfTails
}

func newWaves(m, n int) *waves {
	sd := math.Sqrt(float64(m) * float64(n) / 12 * float64(m+n+1))
	middle := float64(m) * float64(n) / 2
	w := &waves{m: m, n: n, edge: int64(middle - 2.2*sd)}
	// The period counts places from as far below the middle as above.
	w.period = 2*(middle-math.Floor(middle-9*sd)) + 1
	for j := 1.0; ; j++ {
		half := math.Pi * j / w.period
		term := 1.0
		for i := 1; i <= m; i++ {
			a, b := float64(n+i), float64(i)
			term *= math.Sin(a*half) / math.Sin(b*half) * (b / a)
		}
		if math.Abs(term) < 1e-18 {
			return w
		}
		w.terms = append(w.terms, term)
	}
}

func (w *waves) lower(twice int64) float64 {
	most := int64(w.m) * int64(w.n)
	at := twice >> 1 // floor
	switch {
	case at < 0:
		return 0
	case at >= most:
		return 1
	case at > (most-1)/2:
		return 1 - w.lower(2*(most-at-1))
	case at < w.edge:
		if w.tail == nil {
			w.tail = countU(w.m, w.n, int(w.edge))
		}
		return w.tail.sums[at]
	}
	x := float64(at) + 0.5 - float64(most)/2
	sum := 0.0
	for j, term := range w.terms {
		half := math.Pi * float64(j+1) / w.period
		sum += term * math.Sin(2*half*x) / math.Sin(half)
	}
	return 0.5 + (x+sum)/w.period
}

func (w *waves) upper(twice int64) float64 {
	return w.lower(2*int64(w.m)*int64(w.n) - twice)
}
