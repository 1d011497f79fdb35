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
	m := momentsOf(x)
	if m.squares.value() == 0 {
		return nil, 0, ErrConstant
	}
	most := min(sought, n-2)
	summed := m.squares.value() // when m was last summed from readings
	low, high := extremes(x, most, false), extremes(x, most, true)
	for i := 1; i <= most; i++ {
		rest := float64(n - i)
		at, d := farther(x, m, low[0], high[0])
		t := -dist.StudentQuantile(alpha/(2*(rest+1)), rest-1)
		steps = append(steps, ESD{
			Index:  at,
			R:      math.Abs(d.value()) / math.Sqrt(m.squares.value()/rest),
			Lambda: rest * t / math.Sqrt((rest-1+t*t)*(rest+1)),
		})
		if steps[i-1].R > steps[i-1].Lambda {
			found = i
		}
		low, high = without(low, at), without(high, at)
		m.mean = m.mean.minus(d.over(rest))
		m.squares = m.squares.minus(d.times(d).times(double{high: rest + 1}).over(rest))
		if m.squares.value() < 0x1p-8*summed { // digits went with the readings
			m = momentsOf(remaining(x, steps))
			summed = m.squares.value()
		}
		if m.squares.value() == 0 {
			break
		}
	}
	return steps, found, nil
}

// extremes returns the places of the count+1 smallest readings, or largest, the
// farthest first, of equal ones the first in x first.
func extremes(x []float64, count int, largest bool) []int {
	var places []int
	for i, v := range x {
		after := func(j int) bool { return (largest && v > x[j]) || (!largest && v < x[j]) }
		if len(places) > count && !after(places[count]) {
			continue
		}
		k := len(places)
		for k > 0 && after(places[k-1]) {
			k--
		}
		places = slices.Insert(places, k, i)
		if len(places) > count+1 {
			places = places[:count+1]
		}
	}
	return places
}

// farther returns which of two places is farther from the mean, the first in x of
// equally far ones, and its deviation.
func farther(x []float64, m moments, low, high int) (int, double) {
	a, b := m.deviation(x[low]), m.deviation(x[high])
	first, second := math.Abs(a.value()), math.Abs(b.value())
	if first > second || first == second && low < high {
		return low, a
	}
	return high, b
}

func without(places []int, at int) []int {
	return slices.DeleteFunc(places, func(i int) bool { return i == at })
}

// remaining are the readings without those of the steps.
func remaining(x []float64, steps []ESD) []float64 {
	var left []float64
	for i, v := range x {
		if !slices.ContainsFunc(steps, func(s ESD) bool { return s.Index == i }) {
			left = append(left, v)
		}
	}
	return left
}

// ESDSought is the number of readings GeneralizedESD is asked for where nobody
// says another: a tenth, at least 1, at most 10.
func ESDSought(n int) int { return max(1, min(n/10, 10)) }
