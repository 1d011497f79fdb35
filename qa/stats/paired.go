package stats

import "math"

// Differences returns cand[i] - ref[i] for parts measured in both lots, rounded
// to the decimals the readings were written with: 12.003 - 12.001 is then 0.002
// and equal differences are equal numbers. Decimals outside 0 to 22 leave the
// differences as they are. The slices must have the same length.
func Differences(ref, cand []float64, decimals int) []float64 {
	d := make([]float64, len(ref))
	for i := range d {
		d[i] = rounded(cand[i]-ref[i], decimals)
	}
	return d
}

// rounded is the float64 nearest to the decimal number of that many decimals
// that is nearest to v. A number too large for its decimals stays as it is.
func rounded(v float64, decimals int) float64 {
	if decimals < 0 || decimals > 22 { // 10^22 is the last exact power in a float64
		return v
	}
	scale := 1.0
	for range decimals {
		scale *= 10
	}
	units := math.Round(v * scale)
	if !(math.Abs(units) < 1<<53) {
		return v
	}
	return units / scale
}

// Paired returns the mean of differences candidate minus reference, one a part,
// with N-1 degrees of freedom (Student 1908). It returns ErrTooFew below 2
// differences, and ErrConstant with an Estimate of only its Value when the
// differences have no spread.
func Paired(diffs Summary) (Estimate, error) {
	if diffs.N < 2 {
		return Estimate{}, ErrTooFew
	}
	e := Estimate{Value: diffs.Mean}
	n := float64(diffs.N)
	se := diffs.SD / math.Sqrt(n)
	if unmeasured(se, diffs.Mean, 0) {
		return e, ErrConstant
	}
	e.SE, e.DF = se, n-1
	return e, nil
}
