package stats_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"lotpair/qa/stats"

	"pgregory.net/rapid"
)

// power ends the test where there is none.
func power(t *testing.T, d stats.Design) float64 {
	t.Helper()
	return must[float64](t)(d.Power())
}

// lots2 is a design of two lots with one standard deviation.
func lots2(n1, n2 int, sd, margin, shift float64) stats.Design {
	return stats.Design{NRef: n1, NCand: n2, SDRef: sd, SDCand: sd, Alpha: 0.05, Lower: -margin, Upper: margin, Shift: shift}
}

// TestPublishedPowerTable holds 60 powers of two one-sided tests to four printed
// digits, and to the integral by SciPy, whose
// default rule is good to 2e-9 here.
func TestPublishedPowerTable(t *testing.T) {
	rows := 0
	for _, line := range lines(t, "tost_power_two_sample.csv") {
		f := strings.Split(line, ",")
		if strings.HasPrefix(line, "#") || f[0] == "n1" {
			continue
		}
		v := make([]float64, len(f))
		for i := range f {
			v[i] = number(t, f[i])
		}
		got := power(t, lots2(int(v[0]), int(v[1]), 1, 1, v[2]))
		if math.Abs(got-v[3]) > 5e-5 || math.Abs(got-v[4]) > 2e-9 {
			t.Errorf("n %v and %v, shift %v: got %.12f, want %v and %v", v[0], v[1], v[2], got, v[3], v[4])
		}
		rows++
	}
	if rows != 60 {
		t.Errorf("got %d rows, want 60", rows)
	}
}

// TestPublishedPower holds single powers that others printed or that the
// definition gives in 40 digits.
func TestPublishedPower(t *testing.T) {
	plus := func(d stats.Design, change func(d *stats.Design)) stats.Design {
		change(&d)
		return d
	}
	for _, c := range []struct {
		name       string
		d          stats.Design
		want, half float64
	}{
		// The draft guidance "Statistical Approaches to Evaluate Analytical
		// Similarity" (FDA 2017, withdrawn), printed 87 %, from memory.
		{"ten lots, margin 1.5, shift 1/8", lots2(10, 10, 1, 1.5, 0.125), 0.87273873, 5e-9},
		// mpmath 1.2.1, 40 digits, sigma 0.01, margin 0.006, shift 0.001;
		// and two of the table above.
		{"n 10", lots2(10, 10, 0.01, 0.006, 0.001), 0.00891176682333260, 1e-16},
		{"n 50", lots2(50, 50, 0.01, 0.006, 0.001), 0.765373385501638, 1e-14},
		{"n 20", lots2(20, 20, 1, 1, 0), 0.855804946790615, 1e-14},
		{"n 10 and 30", lots2(10, 30, 1, 1, 0.3), 0.561919894043847, 1e-14},
		{"n 500", lots2(500, 500, 0.01, 0.006, 0.001), 0.999999999801843, 1e-14},
		// Bonett's size for var 15, shift 2, margin 4, 90 % interval and power 0.80 is
		// 50 by the normal formula; the exact power there.
		{"Bonett", lots2(50, 50, math.Sqrt(15), 4, 2), 0.821016, 5e-7},
		// R's power.t.test as printed in its examples counts one tail; both by R.
		{"R n 20", plus(lots2(20, 20, 1, 1, 1), func(d *stats.Design) { d.Aim = stats.AimDifference }), 0.868953027725, 5e-12},
		{"R n 20, printed .8689528", plus(lots2(20, 20, 1, 1, 1), func(d *stats.Design) { d.Aim, d.Alpha = stats.AimHigher, 0.025 }), 0.868952801692, 5e-12},
		{"R n 4, printed .2224633", plus(lots2(4, 4, 1, 1, 1), func(d *stats.Design) { d.Aim, d.Alpha = stats.AimHigher, 0.025 }), 0.222463338355, 5e-12},
		// Bonett, power.mean2, printed .8398417 for Welch's df held fixed; the
		// exact power is near it.
		{"Bonett Welch", stats.Design{Aim: stats.AimDifference, Welch: true, NRef: 25, NCand: 25, SDRef: math.Sqrt(5), SDCand: math.Sqrt(6), Alpha: 0.05, Shift: 2}, 0.8398417, 6e-4},
	} {
		if got := power(t, c.d); !(math.Abs(got-c.want) <= c.half) {
			t.Errorf("%s: got %.15g, want %.15g within %.1g", c.name, got, c.want, c.half)
		}
	}
}

var aims = map[string]stats.Aim{
	"within": stats.AimWithin, "notlower": stats.AimNotLower, "nothigher": stats.AimNotHigher,
	"difference": stats.AimDifference, "lower": stats.AimLower, "higher": stats.AimHigher,
}

// TestPowerAgainstR: power_r.txt is made by refpower.R.
func TestPowerAgainstR(t *testing.T) {
	rows := 0
	var seen quantityAccuracy
	for _, line := range lines(t, "power_r.txt") {
		if strings.HasPrefix(line, "#") {
			continue
		}
		f := strings.Fields(line)
		n := int(number(t, f[2]))
		d := stats.Design{
			Aim: aims[f[0]], Paired: f[1] == "paired", NRef: n, NCand: n,
			Shift: number(t, f[3]), SDRef: number(t, f[4]), SDCand: number(t, f[4]), Alpha: number(t, f[5]),
		}
		got, want, allowed := power(t, d), number(t, f[6]), number(t, f[7])
		near(t, line, got, want, allowed)
		seen.add(math.Abs(got-want)/want, allowed, n)
		rows++
	}
	seen.say(t, "power_r.txt", maker(lines(t, "power_r.txt")[0]), "power, one-sided and two-sided t")
	if rows < 300 {
		t.Errorf("got %d rows, want at least 300", rows)
	}
}

// TestPowerUnequal: power.txt is made by refpower.py, by adaptive quadrature over
// both variances.
func TestPowerUnequal(t *testing.T) {
	rows := 0
	var seen quantityAccuracy
	for _, line := range lines(t, "power.txt") {
		if strings.HasPrefix(line, "#") {
			continue
		}
		f := strings.Fields(line)
		v := make([]float64, len(f))
		for i := 2; i < len(f); i++ {
			v[i] = number(t, f[i])
		}
		d := stats.Design{
			Aim: aims[f[0]], Welch: f[1] == "welch", NRef: int(v[2]), NCand: int(v[3]), SDRef: v[4], SDCand: v[5],
			Alpha: v[6], Lower: v[7], Upper: v[8], Shift: v[9],
		}
		got := power(t, d)
		seen.add(math.Abs(got-v[10]), v[11], d.NRef, d.NCand)
		if !(math.Abs(got-v[10]) <= v[11]) {
			t.Errorf("%s: got %.12g", line, got)
		}
		rows++
	}
	seen.say(t, "power.txt", maker(lines(t, "power.txt")[0]), "power, unequal deviations (absolute)")
	if rows != 100 {
		t.Errorf("got %d rows, want 100", rows)
	}
}

var designs = rapid.Custom(func(t *rapid.T) stats.Design {
	sd := math.Pow(10, rapid.Float64Range(-3, 3).Draw(t, "log sd"))
	d := stats.Design{
		Aim:    stats.Aim(rapid.IntRange(int(stats.AimWithin), int(stats.AimHigher)).Draw(t, "aim")),
		Paired: rapid.Bool().Draw(t, "paired"), Welch: rapid.Bool().Draw(t, "welch"),
		NRef: rapid.IntRange(2, 80).Draw(t, "n"), NCand: rapid.IntRange(2, 80).Draw(t, "m"),
		SDRef: sd, SDCand: sd * rapid.SampledFrom([]float64{1, 1, 0.5, 2, 1.1}).Draw(t, "sds"),
		Alpha: rapid.SampledFrom([]float64{0.001, 0.01, 0.05, 0.1, 0.2}).Draw(t, "alpha"),
	}
	d.Lower = -sd * rapid.Float64Range(0.1, 4).Draw(t, "lower")
	d.Upper = sd * rapid.Float64Range(0.1, 4).Draw(t, "upper")
	d.Shift = rapid.Float64Range(d.Lower, d.Upper).Draw(t, "shift")
	return d
})

// A change of unit changes nothing, exchanging signs exchanges the aims, and two
// one-sided aims bound the two-sided one.
func TestPowerLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := designs.Draw(t, "design")
		p, err := d.Power()
		if err != nil {
			t.Fatal(err)
		}
		if !(p >= 0 && p <= 1+1e-12) {
			t.Fatalf("got %v, want a probability", p)
		}
		unit := d
		for _, v := range []*float64{&unit.SDRef, &unit.SDCand, &unit.Lower, &unit.Upper, &unit.Shift} {
			*v *= 64
		}
		if q, _ := unit.Power(); math.Abs(p-q) > 1e-13 {
			t.Fatalf("got %v in another unit, want %v", q, p)
		}
		turned := d
		turned.Lower, turned.Upper, turned.Shift = -d.Upper, -d.Lower, -d.Shift
		turned.Aim = []stats.Aim{stats.AimWithin, stats.AimNotHigher, stats.AimNotLower, stats.AimDifference, stats.AimHigher, stats.AimLower}[d.Aim]
		if q, _ := turned.Power(); math.Abs(p-q) > 1e-12 {
			t.Fatalf("got %v with signs exchanged, want %v", q, p)
		}
		within, low, high := d, d, d
		within.Aim, low.Aim, high.Aim = stats.AimWithin, stats.AimNotLower, stats.AimNotHigher
		a, _ := within.Power()
		b, _ := low.Power()
		c, _ := high.Power()
		if a > min(b, c)+1e-12 || a < b+c-1-1e-12 {
			t.Fatalf("got %v within, want at most the smaller of %v and %v and at least their sum less 1", a, b, c)
		}
		both := d
		both.SpreadRatio, both.Paired = 2.5, false
		alone := both
		alone.SpreadRatio = 0
		mean, _ := alone.Power()
		spread, err := both.SpreadPower()
		if err != nil {
			t.Fatal(err)
		}
		if joint, _ := both.Power(); joint > min(mean, spread)+1e-11 || joint < mean+spread-1-1e-11 {
			t.Fatalf("got %v jointly, want between %v and %v", joint, mean+spread-1, min(mean, spread))
		}
	})
}

// At the margin the power is alpha, whatever the number of readings: exactly for
// the pooled test, nearly for Welch's.
func TestPowerAtMargin(t *testing.T) {
	for _, n := range []int{2, 3, 10, 100} {
		d := lots2(n, n, 1, 1, 1)
		d.Aim = stats.AimNotHigher
		near(t, "pooled", power(t, d), 0.05, 1e-12)
		d.Aim = stats.AimWithin
		d.Lower = -1e6
		near(t, "pooled, the other limit far", power(t, d), 0.05, 1e-12)
		d.Welch = true
		if got := power(t, d); got > 0.051 || n >= 10 && got < 0.0485 {
			t.Errorf("Welch, n %d: got %v at the margin, want about 0.05", n, got)
		}
		d.Aim, d.Shift, d.Welch = stats.AimDifference, 0, false
		near(t, "difference", power(t, d), 0.05, 1e-12)
	}
}

func TestDesignErrors(t *testing.T) {
	good := lots2(10, 10, 1, 1, 0)
	for name, change := range map[string]func(d *stats.Design){
		"one reading":        func(d *stats.Design) { d.NCand = 1 },
		"no sd":              func(d *stats.Design) { d.SDRef = 0 },
		"sd not a number":    func(d *stats.Design) { d.SDCand = math.NaN() },
		"alpha":              func(d *stats.Design) { d.Alpha = 0.5 },
		"shift":              func(d *stats.Design) { d.Shift = math.Inf(1) },
		"margin":             func(d *stats.Design) { d.Lower = 1 },
		"margin not there":   func(d *stats.Design) { d.Upper = math.Inf(1) },
		"aim":                func(d *stats.Design) { d.Aim = 17 },
		"spread":             func(d *stats.Design) { d.SpreadRatio = -1 },
		"spread of pairs":    func(d *stats.Design) { d.SpreadRatio, d.Paired = 2, true },
		"margin, one-sided":  func(d *stats.Design) { d.Aim, d.Lower = stats.AimNotLower, math.Inf(-1) },
		"margin, other side": func(d *stats.Design) { d.Aim, d.Upper = stats.AimNotHigher, math.NaN() },
	} {
		d := good
		change(&d)
		if _, err := d.Power(); err == nil {
			t.Errorf("%s: got no error", name)
		}
	}
	pairs := good
	pairs.Paired, pairs.NCand, pairs.SDCand = true, 0, 0
	if _, err := pairs.Power(); err != nil {
		t.Errorf("pairs: got %v, want no need of a second lot", err)
	}
	few := good
	few.NRef = 1
	if _, err := few.Power(); !errors.Is(err, stats.ErrTooFew) {
		t.Errorf("one reading: got %v, want ErrTooFew", err)
	}
}
