package stats_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"lotpair/qa/stats"
)

// With a bias that is not known the power is that without one, over all that the bias may be: integrated by hand.
func TestPowerWithBias(t *testing.T) {
	with := func(change func(d *stats.Design)) stats.Design {
		d := lots2(20, 12, 1, 1, 0.2)
		change(&d)
		return d
	}
	for name, d := range map[string]stats.Design{
		"pooled":          with(func(*stats.Design) {}),
		"paired":          with(func(d *stats.Design) { d.Paired = true }),
		"not lower":       with(func(d *stats.Design) { d.Aim = stats.AimNotLower }),
		"not higher":      with(func(d *stats.Design) { d.Aim = stats.AimNotHigher }),
		"difference":      with(func(d *stats.Design) { d.Aim = stats.AimDifference }),
		"lower":           with(func(d *stats.Design) { d.Aim, d.Shift = stats.AimLower, -0.4 }),
		"higher":          with(func(d *stats.Design) { d.Aim = stats.AimHigher }),
		"with the spread": with(func(d *stats.Design) { d.SpreadRatio = 2 }),
		"Welch":           with(func(d *stats.Design) { d.Welch, d.SDCand = true, 1.5 }),
	} {
		const bias, steps, reach = 0.3, 240, 8
		want := 0.0
		for i := range steps + 1 { // the trapezoidal rule, which is exact here for all purposes
			z := reach * (2*float64(i)/steps - 1)
			at := d
			at.Shift += bias * z
			want += math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) * power(t, at) * 2 * reach / steps
		}
		d.Bias = bias
		near(t, name, power(t, d), want, 2e-11)
	}
}

// The size has the power and one reading less has not; where the bias alone takes too much, no number does.
func TestSizeWithBias(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 1))
	for range 60 {
		d := stats.Design{
			SDRef: 1, SDCand: []float64{1, 1.7}[r.IntN(2)], Alpha: 0.05, Lower: -1, Upper: 1.2, Aim: []stats.Aim{stats.AimWithin, stats.AimNotLower, stats.AimNotHigher}[r.IntN(3)],
			Shift: 0.3 * r.Float64(), Bias: 0.45 * r.Float64(), Welch: r.IntN(3) == 0, Paired: r.IntN(4) == 0,
		}
		want := 0.5 + 0.4*r.Float64()
		n, m, got, err := stats.Size(d, 1, want)
		if errors.Is(err, stats.ErrBias) {
			d.NRef, d.NCand = 1_000_000, 1_000_000
			if d.Welch = false; power(t, d) > want {
				t.Errorf("%+v: got no size, but a million a lot have the power %v", d, power(t, d))
			}
			continue
		}
		if errors.Is(err, stats.ErrNoSize) {
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		d.NRef, d.NCand = n-1, m-1
		if less, err := d.Power(); got < want || err == nil && less >= want {
			t.Errorf("%+v: got %d with power %v, one less has %v, want %v", d, n, got, less, want)
		}
		if d.NRef, d.NCand = n, m; !d.Welch && d.SDCand == 1 && d.Lower == -d.Upper {
			if s := must[float64](t)(stats.SmallestMargin(d, want)); s > 1+1e-9 {
				t.Errorf("%+v: smallest margin got %v, want at most 1", d, s)
			}
		}
	}
	d := lots2(0, 0, 1, 1, 0)
	for bias, want := range map[float64]error{0.1: nil, 0.6: nil, 0.61: stats.ErrBias} { // 1/0.6 is 1.67: P(|Z| < 1.67) = 0.9044
		d.Bias = bias
		if _, _, _, err := stats.Size(d, 1, 0.9); !errors.Is(err, want) {
			t.Errorf("bias %v: got %v, want %v", bias, err, want)
		}
	}
	if d.Bias = -1; !func() bool { _, _, _, err := stats.Size(d, 1, 0.9); return err != nil }() {
		t.Error("a bias below 0: got no error")
	}
}
