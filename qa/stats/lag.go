package stats

// Lag1 returns the correlation of each reading with the next one, about the one
// mean of all readings (the definition of the NIST StRD univariate data):
//
//	r1 = sum (x[i]-m)(x[i+1]-m) / sum (x[i]-m)^2
//
// It needs 2 readings, not all equal.
func Lag1(x []float64) (float64, error) {
	if len(x) < 2 {
		return 0, ErrTooFew
	}
	m := momentsOf(x)
	squares := m.squares.value()
	if squares == 0 {
		return 0, ErrConstant
	}
	var sum double
	for i := 1; i < len(x); i++ {
		sum = sum.plus(m.deviation(x[i-1]).times(m.deviation(x[i])))
	}
	return sum.value() / squares, nil
}
