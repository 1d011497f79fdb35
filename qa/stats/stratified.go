package stats

import "math"

// A Stratified is a difference candidate minus reference within groups that both
// lots have. Groups is their number, Left that of groups that only one lot has.
type Stratified struct {
	Estimate
	Groups, Left int
}

// StratifiedDifference compares two lots that are mixed from the same groups
// (cavities, machines) in unequal parts: ref[i] and cand[i] are the readings of the
// same group, either may be empty. The difference of each group counts with the
// weight w = n1 n2/(n1+n2), the best for equal spread (Cochran & Cox 1957,
// Experimental Designs, from memory):
//
//	difference = sum w d/sum w, SE^2 = (s1^2 sum w^2/n1 + s2^2 sum w^2/n2)/(sum w)^2
//
// with s1 and s2 the standard deviations within the groups of each lot, which need
// not be equal, and the degrees of freedom of Satterthwaite. It returns ErrTooFew
// where no group is in both lots or a lot has no group of 2 readings among these,
// and ErrConstant with only the Value where there is no spread within groups.
func StratifiedDifference(ref, cand [][]float64) (Stratified, error) {
	var s Stratified
	var weights, sum double
	var within [2]double
	var parts, df [2]float64
	exp := commonExponent(ref, cand)
	largest := 0.0
	for i := range max(len(ref), len(cand)) {
		a, b := group(ref, i), group(cand, i)
		if len(a) == 0 || len(b) == 0 {
			if len(a)+len(b) > 0 {
				s.Left++
			}
			continue
		}
		s.Groups++
		n := [2]float64{float64(len(a)), float64(len(b))}
		w := n[0] * n[1] / (n[0] + n[1])
		var means [2]double
		for lot, x := range [2][]float64{a, b} {
			m := momentsOf(x)
			means[lot] = m.mean.shifted(m.exp - exp)
			within[lot] = within[lot].plus(m.squares.shifted(2 * (m.exp - exp)))
			parts[lot] += w * w / n[lot]
			df[lot] += n[lot] - 1
			largest = max(largest, math.Abs(means[lot].value()))
		}
		sum = sum.plus(means[1].minus(means[0]).times(double{high: w}))
		weights = weights.plus(double{high: w})
	}
	if s.Groups == 0 || df[0] == 0 || df[1] == 0 {
		return s, ErrTooFew
	}
	s.Value = math.Ldexp(sum.value()/weights.value(), exp)
	var se [2]float64
	for lot := range se {
		se[lot] = math.Sqrt(within[lot].value()/df[lot]*parts[lot]) / weights.value()
	}
	all := math.Hypot(se[0], se[1])
	if unmeasured(all, largest, 0) {
		return s, ErrConstant
	}
	s.SE = math.Ldexp(all, exp)
	p, q := (se[0]/all)*(se[0]/all), (se[1]/all)*(se[1]/all)
	s.DF = (p + q) * (p + q) / (p*p/df[0] + q*q/df[1])
	return s, nil
}

func group(groups [][]float64, i int) []float64 {
	if i < len(groups) {
		return groups[i]
	}
	return nil
}

// commonExponent brings the largest reading of all near 1.
func commonExponent(lots ...[][]float64) int {
	largest := 0.0
	for _, groups := range lots {
		for _, g := range groups {
			for _, v := range g {
				largest = max(largest, math.Abs(v))
			}
		}
	}
	_, exp := math.Frexp(largest)
	return exp
}

// shifted is d times 2^exp.
func (d double) shifted(exp int) double {
	return double{math.Ldexp(d.high, exp), math.Ldexp(d.low, exp)}
}
