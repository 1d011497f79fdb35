package stats

import (
	"math"
	"testing"
)

// TestNearError holds the quick power of Welch's test to the error that the search for a size allows it.
func TestNearError(t *testing.T) {
	worst := 0.0
	for _, c := range []struct {
		n       int
		ratios  []float64
		largest float64
	}{{2, []float64{1, 2, 4}, 6}, {4, []float64{0.5, 1, 3}, 5}, {12, []float64{0.25, 1}, 5}, {200, []float64{0.25, 1}, 4}} {
		for _, ratio := range c.ratios {
			for _, sd := range []float64{0.2, 1, 5} {
				for _, alpha := range []float64{0.001, 0.05} {
					for _, aim := range []Aim{AimWithin, AimNotHigher} {
						for k := 2.5; k <= c.largest; k += 1.5 {
							m := Share(c.n, ratio)
							wide := k * math.Hypot(1/math.Sqrt(float64(c.n)), sd/math.Sqrt(float64(m)))
							d := Design{Aim: aim, Welch: true, NRef: c.n, NCand: m, SDRef: 1, SDCand: sd, Alpha: alpha, Lower: -wide, Upper: wide, Shift: 0.2 * wide}
							p := d.power()
							off := math.Abs(p-d.near()) / nearError(alpha, min(c.n, m))
							if worst = max(worst, off); off > 0.6 {
								t.Errorf("%d and %d readings, sd %v, alpha %v, aim %v, margin %v: got %.2f of what is allowed, want at most 0.6", c.n, m, sd, alpha, aim, k, off)
							}
						}
					}
				}
			}
		}
	}
	if worst < 0.05 {
		t.Errorf("got at most %.3f of what is allowed, want it looked at where it matters", worst)
	}
}
