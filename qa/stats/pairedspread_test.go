package stats_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// The power of Pitman and Morgan's test is that of SciPy by another integral, and what is counted among studies drawn.
func TestPairedSpreadPower(t *testing.T) {
	rows := 0
	for _, line := range lines(t, "paired.txt") {
		if strings.HasPrefix(line, "#") {
			continue
		}
		f := strings.Fields(line)
		d := stats.PairedSpreadDesign{
			N: int(number(t, f[0])), Ratio: number(t, f[1]), Correlation: number(t, f[2]), Asked: number(t, f[3]), Alpha: number(t, f[4]),
		}
		got := must[float64](t)(d.Power())
		near(t, line, got, number(t, f[5]), 1e-9)
		if counted := number(t, f[6]); math.Abs(got-counted) > 4*math.Sqrt(got*(1-got)/200_000) {
			t.Errorf("%s: got %v, counted %v", line, got, counted)
		}
		rows++
	}
	if rows != 8 {
		t.Errorf("got %d rows, want 8", rows)
	}
}

// At the ratio asked the power is alpha; the size has the power and one pair less has not.
func TestPairedSpreadSize(t *testing.T) {
	for _, r := range []float64{-0.3, 0, 0.5, 0.99} {
		at := stats.PairedSpreadDesign{N: 17, Ratio: 1.4, Correlation: r, Asked: 1.4, Alpha: 0.05}
		near(t, "at the ratio asked", must[float64](t)(at.Power()), 0.05, 1e-11)
		d := stats.PairedSpreadDesign{Ratio: 1, Correlation: r, Asked: 1.3, Alpha: 0.05}
		n, err := stats.PairedSpreadSize(d, 0.9)
		if err != nil {
			t.Fatal(err)
		}
		d.N = n
		enough := must[float64](t)(d.Power())
		if d.N--; n > 3 {
			if less := must[float64](t)(d.Power()); !(enough >= 0.9 && less < 0.9) {
				t.Errorf("correlation %v: got %d pairs with power %v, one less %v", r, n, enough, less)
			}
		}
	}
	good := stats.PairedSpreadDesign{N: 10, Ratio: 1, Asked: 1.3, Alpha: 0.05}
	for name, change := range map[string]func(d *stats.PairedSpreadDesign){
		"two pairs": func(d *stats.PairedSpreadDesign) { d.N = 2 }, "ratio": func(d *stats.PairedSpreadDesign) { d.Ratio = math.NaN() },
		"asked": func(d *stats.PairedSpreadDesign) { d.Asked = 0 }, "correlation": func(d *stats.PairedSpreadDesign) { d.Correlation = 1 },
		"alpha": func(d *stats.PairedSpreadDesign) { d.Alpha = 0.5 },
	} {
		d := good
		change(&d)
		if _, err := d.Power(); err == nil {
			t.Errorf("%s: got no error", name)
		}
	}
	good.Ratio = 1.3
	if _, err := stats.PairedSpreadSize(good, 0.9); !errors.Is(err, stats.ErrBeyondMargin) {
		t.Errorf("a ratio as asked: got %v, want ErrBeyondMargin", err)
	}
	if _, err := stats.PairedSpreadSize(good, 1); err == nil {
		t.Error("power 1: got no error")
	}
}
