package stats

import (
	"math"
	"slices"

	"lotpair/qa/stats/dist"
)

// An ESD is one step of the generalized ESD test: Index is the place in the
// readings of the one farthest from the mean of those left, R its distance in
// standard deviations, Lambda the critical value of the step.
type ESD struct {
	Index     int
	R, Lambda float64
}

// GeneralizedESD looks for up to sought readings that do not belong to the others,
// for normal readings (Rosner 1983, Technometrics 25, 165-172, from memory). In
// step i the reading farthest from the mean is taken away, and
//
//	lambda = (n-i) t/sqrt((n-i-1+t^2)(n-i+1)), t the 1 - alpha/(2(n-i+1)) quantile, n-i-1 freedoms
//
// The steps up to the last with R above Lambda are the outlying readings; found is
// their number, and they may hide each other before it. It needs 3 readings; steps
// end where the readings left are all equal.
func GeneralizedESD(x []float64, sought int, alpha float64) (steps []ESD, found int, err error) {
	n := len(x)
	if n < 3 {
		return nil, 0, ErrTooFew
	}
	if s := momentsOf(x); s.squares.value() == 0 {
		return nil, 0, ErrConstant
	}
	left, places := slices.Clone(x), make([]int, n)
	for i := range places {
		places[i] = i
	}
	for i := 1; i <= min(sought, n-2); i++ {
		m := momentsOf(left)
		squares := m.squares.value()
		if squares == 0 {
			break
		}
		at, farthest := 0, -1.0
		for j, v := range left {
			if d := math.Abs(m.deviation(v).value()); d > farthest {
				at, farthest = j, d
			}
		}
		rest := float64(n - i)
		t := -dist.StudentQuantile(alpha/(2*(rest+1)), rest-1)
		steps = append(steps, ESD{
			Index:  places[at],
			R:      farthest / math.Sqrt(squares/rest),
			Lambda: rest * t / math.Sqrt((rest-1+t*t)*(rest+1)),
		})
		if steps[i-1].R > steps[i-1].Lambda {
			found = i
		}
		left, places = slices.Delete(left, at, at+1), slices.Delete(places, at, at+1)
	}
	return steps, found, nil
}

// ESDSought is the number of readings GeneralizedESD is asked for where nobody
// says another: a tenth, at least 1, at most 10.
func ESDSought(n int) int { return max(1, min(n/10, 10)) }
