package stats

import "math"

// Resolution returns the largest step of which every reading is a multiple,
// where the readings were written with the given number of decimals: 0.005 for
// 12.005, 12.010 and 12.025. It returns 0 when it cannot tell: all readings
// equal, decimals outside 0 to 22, or numbers too large for their decimals to
// be held in a float64.
func Resolution(x []float64, decimals int) float64 {
	if decimals < 0 || decimals > 22 { // 10^22 is the last exact power in a float64
		return 0
	}
	scale := 1.0
	for range decimals {
		scale *= 10
	}
	var step int64
	varied := false
	for _, v := range x {
		units := math.Round(v * scale)
		if !(math.Abs(units) < 1<<53) {
			return 0
		}
		varied = varied || v != x[0]
		step = gcd(step, int64(math.Abs(units)))
	}
	if !varied {
		return 0
	}
	return float64(step) / scale
}

func gcd(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}
