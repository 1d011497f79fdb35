package figure

import "math"

// ticks are round values that cover low to high at about the given count, and how many decimals their labels need.
// The steps are 1, 2 and 5 times a power of ten.
func ticks(low, high float64, about int) (at []float64, decimals int) {
	span := high - low
	if !(span > 0) || math.IsInf(span, 0) || about < 1 {
		return nil, 0
	}
	raw := span / float64(about)
	power := math.Floor(math.Log10(raw))
	step := 0.0
	for _, m := range []float64{1, 2, 5, 10} {
		step = m * math.Pow(10, power)
		if step >= raw*0.999 {
			break
		}
	}
	decimals = max(0, min(12, int(-math.Floor(math.Log10(step)+1e-9))))
	first := math.Ceil(low/step - 1e-9)
	for i := 0.0; i <= 2*float64(about)+2; i++ {
		v := (first + i) * step
		if v > high+step*1e-9 || math.IsInf(v, 0) {
			break
		}
		at = append(at, v)
	}
	return at, decimals
}
