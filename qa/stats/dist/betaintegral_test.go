package dist

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

var wholeFreedom = rapid.Map(rapid.Float64Range(0, 5), func(e float64) float64 { return math.Floor(math.Pow(10, e)) })

// The integral of 1 is the probability, that of x and of x^2 are the moments, and
// a half line gives the tail of F.
func TestBetaIntegral(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d1, d2 := wholeFreedom.Draw(t, "d1"), wholeFreedom.Draw(t, "d2")
		a, b := d1/2, d2/2
		mean := a / (a + b)
		for _, c := range []struct {
			f    func(x, y float64) float64
			want float64
		}{
			{func(_, _ float64) float64 { return 1 }, 1},
			{func(x, _ float64) float64 { return x }, mean},
			{func(x, _ float64) float64 { return x * x }, mean * (a + 1) / (a + b + 1)},
		} {
			if got := BetaIntegral(a, b, 0, math.Inf(1), c.f); math.Abs(got-c.want) > 1e-12*c.want+1e-13 {
				t.Fatalf("d %v %v: got %v, want %v", d1, d2, got, c.want)
			}
		}
		f := FQuantile(rapid.Float64Range(0.01, 0.99).Draw(t, "p"), d1, d2)
		cut := d1 * f / d2
		one := func(_, _ float64) float64 { return 1 }
		if got, want := BetaIntegral(a, b, cut, math.Inf(1), one), FUpper(f, d1, d2); math.Abs(got-want) > 1e-12 {
			t.Fatalf("d %v %v, f %v: got %v, want %v", d1, d2, f, got, want)
		}
		if got, want := BetaIntegral(a, b, 0, cut, one), FLower(f, d1, d2); math.Abs(got-want) > 1e-12 {
			t.Fatalf("d %v %v, f %v: got %v, want %v", d1, d2, f, got, want)
		}
	})
	for _, c := range [][4]float64{{0, 1, 0, 1}, {1, math.Inf(1), 0, 1}, {1, 1, 0.5, 0.4}, {1, math.NaN(), 0, 1}} {
		if got := BetaIntegral(c[0], c[1], c[2], c[3], func(_, _ float64) float64 { return 1 }); !math.IsNaN(got) {
			t.Errorf("%v: got %v, want NaN", c, got)
		}
	}
}

// What is integrated may take long itself: few places do, also where a density with few freedoms falls off slowly.
func TestBetaIntegralPlaces(t *testing.T) {
	for _, d := range [][2]float64{{1, 1}, {1, 2}, {2, 30}, {1, 5000}, {10, 12}, {1e4, 1e4}} {
		for low, most := range map[float64]int{0: 300, d[0] / d[1]: 700} {
			places := 0
			BetaIntegral(d[0]/2, d[1]/2, low, math.Inf(1), func(x, _ float64) float64 { places++; return math.Sin(9 * x) })
			if places > most {
				t.Errorf("freedoms %v from %v: got %d places, want at most %d", d, low, places, most)
			}
		}
	}
}
