package stats_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"lotpair/qa/stats"

	"pgregory.net/rapid"
)

// TestPublishedSizes holds sample sizes of R's examples and of two textbooks whose
// formula is normal; the exact number is then the one that this definition gives.
func TestPublishedSizes(t *testing.T) {
	sized := func(aim stats.Aim, sd, alpha, lower, upper, shift float64) stats.Design {
		return stats.Design{Aim: aim, SDRef: sd, SDCand: sd, Alpha: alpha, Lower: lower, Upper: upper, Shift: shift}
	}
	for _, c := range []struct {
		name  string
		d     stats.Design
		power float64
		want  int
	}{
		{"R, power .90, two-sided, printed 22.02110", sized(stats.AimDifference, 1, 0.05, 0, 0, 1), 0.9, 23},
		{"R, power .90, one-sided, printed 17.84713", sized(stats.AimHigher, 1, 0.05, 0, 0, 1), 0.9, 18},
		{"R, power .80, two-sided, printed 16.71477", sized(stats.AimDifference, 1, 0.05, 0, 0, 1), 0.8, 17},
		{"R, power .80, one-sided, printed 13.09777", sized(stats.AimLower, 1, 0.05, 0, 0, -1), 0.8, 14},
		// Chow, Shao & Wang 2003, example 3.2.4: 107 by z(beta/2), exact 85.
		{"Chow, equivalence", sized(stats.AimWithin, 0.1, 0.1, -0.05, 0.05, 0.01), 0.9, 85},
		// The same, chapter 3: 50 by the normal formula 49.46.
		{"Chow, not lower", sized(stats.AimNotLower, 0.1, 0.05, -0.05, 0, 0), 0.8, 51},
		// Bonett, size.equiv.mean2: 50 by the normal formula 49.68, exact 48.
		{"Bonett, equivalence", sized(stats.AimWithin, math.Sqrt(15), 0.05, -4, 4, 2), 0.8, 48},
		// Bonett, size.test.mean2: 27 by the normal formula.
		{"Bonett, difference", sized(stats.AimDifference, 10, 0.05, 0, 0, 10), 0.95, 27},
		{"71", sized(stats.AimWithin, 0.01, 0.05, -0.006, 0.006, 0.001), 0.9, 71},
		{"6852", sized(stats.AimWithin, 0.01, 0.05, -0.006, 0.006, 0.0055), 0.9, 6852},
	} {
		n, m, p, err := stats.Size(c.d, 1, c.power)
		if err != nil || n != c.want || m != n || p < c.power {
			t.Errorf("%s: got %d and %d with power %v, %v, want %d", c.name, n, m, p, err, c.want)
		}
	}
}

// The size has the power, one reading less has not; and by trying all of them,
// none before has.
func TestSizeIsSmallest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := designs.Draw(t, "design")
		d.Welch = d.Welch && d.SDRef != d.SDCand // each power is a double integral
		ratio := rapid.SampledFrom([]float64{1, 1, 0.5, 0.3, 2, 1.1, 2.5}).Draw(t, "ratio")
		power := rapid.SampledFrom([]float64{0.06, 0.3, 0.8, 0.9, 0.99}).Draw(t, "power")
		n, m, got, err := stats.Size(d, ratio, power)
		if errors.Is(err, stats.ErrNoSize) || errors.Is(err, stats.ErrBeyondMargin) {
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		with := func(n int) float64 {
			e := d
			e.NRef, e.NCand = n, int(math.Ceil(float64(n)*ratio*(1-1e-13)))
			if d.Paired {
				e.NCand = n
			}
			p, err := e.Power()
			if err != nil {
				return 0 // too few candidates
			}
			return p
		}
		if with(n) != got || got < power {
			t.Fatalf("got power %v with %d and %d, want that of the design, %v, and at least %v", got, n, m, with(n), power)
		}
		from := max(2, n-3)
		if n < 60 && d.SDRef == d.SDCand || n < 12 {
			from = 2
		}
		for k := from; k < n; k++ {
			if with(k) >= power {
				t.Fatalf("got %d, want %d with power %v", n, k, with(k))
			}
		}
	})
}

// Lots of very unequal size: with as many candidate readings a reference reading more may lower the power. Of powers just below
// those at the ends of such runs the smallest number is found, as by trying all from 2 on.
func TestSizeOfUnequalLots(t *testing.T) {
	random := rand.New(rand.NewPCG(4, 2))
	falls := 0
	for range 24 {
		ratio := []float64{0.02, 0.035, 0.09, 0.3, 0.77, 1.3}[random.IntN(6)]
		d := stats.Design{SDRef: 1, SDCand: math.Exp(2*random.Float64() - 1.5), Alpha: 0.05, Welch: random.IntN(2) == 0}
		m := 0.5 + 1.5*random.Float64()
		d.Lower, d.Upper = -m, m
		known := map[int]float64{}
		with := func(n int) float64 {
			if _, found := known[n]; !found {
				d.NRef, d.NCand = n, stats.Share(n, ratio)
				p, err := d.Power()
				if err != nil {
					p = 0 // too few candidates
				}
				known[n] = p
			}
			return known[n]
		}
		candidates := 2 + random.IntN(4) // the run of these, and its ends
		last := int(float64(candidates) / ratio * (1 + 1e-12))
		start := int(float64(candidates-1)/ratio*(1+1e-12)) + 1
		if with(last) < with(start) {
			falls++
		}
		for _, at := range []int{start, last} {
			want := with(at) * (1 - 1e-6)
			if !(want > 0.06 && want < 0.999) {
				continue
			}
			n, _, got, err := stats.Size(d, ratio, want)
			if err != nil {
				t.Fatal(err)
			}
			smallest := 2
			for with(smallest) < want {
				smallest++
			}
			if n != smallest || got != with(n) {
				t.Errorf("%+v, ratio %v, power %v: got %d with %v, want %d", d, ratio, want, n, got, smallest)
			}
		}
	}
	if falls < 5 {
		t.Errorf("got %d runs in which the power falls, want some", falls)
	}
}

func TestSizeEnds(t *testing.T) {
	d := stats.Design{SDRef: 1, SDCand: 1, Alpha: 0.05, Lower: -1, Upper: 1}
	for name, c := range map[string]struct {
		change       func(d *stats.Design)
		ratio, power float64
		want         error
	}{
		"shift on the margin":       {func(d *stats.Design) { d.Shift = 1 }, 1, 0.9, stats.ErrBeyondMargin},
		"shift beyond the margin":   {func(d *stats.Design) { d.Shift = -1.5 }, 1, 0.9, stats.ErrBeyondMargin},
		"no difference":             {func(d *stats.Design) { d.Aim = stats.AimDifference }, 1, 0.9, stats.ErrBeyondMargin},
		"the other side":            {func(d *stats.Design) { d.Aim, d.Shift = stats.AimLower, 0.3 }, 1, 0.9, stats.ErrBeyondMargin},
		"a spread as wide as asked": {func(d *stats.Design) { d.SpreadRatio, d.SDCand = 2, 2 }, 1, 0.9, stats.ErrBeyondMargin},
		"a hair from the margin":    {func(d *stats.Design) { d.Shift = 1 - 1e-9 }, 1, 0.9, stats.ErrNoSize},
		"ratio":                     {func(*stats.Design) {}, 0, 0.9, nil},
		"power 1":                   {func(*stats.Design) {}, 1, 1, nil},
		"alpha":                     {func(d *stats.Design) { d.Alpha = 0 }, 1, 0.9, nil},
	} {
		e := d
		c.change(&e)
		_, _, _, err := stats.Size(e, c.ratio, c.power)
		if err == nil || c.want != nil && !errors.Is(err, c.want) {
			t.Errorf("%s: got %v, want %v", name, err, c.want)
		}
	}
	// Two readings are the least there are.
	if n, m, p, err := stats.Size(stats.Design{SDRef: 1e-3, SDCand: 1e-3, Alpha: 0.05, Lower: -1, Upper: 1}, 0.1, 0.9); err != nil || n != 11 || m != 2 || p < 0.9 {
		t.Errorf("small spread, a tenth: got %d and %d, %v, %v, want 11 and 2", n, m, p, err)
	}
}

// TestSpread holds the spread's power to F by hand, its size to trying all, and
// the joint power to the product where the test is pooled.
func TestSpread(t *testing.T) {
	d := stats.Design{NRef: 20, NCand: 20, SDRef: 1, SDCand: 1, Alpha: 0.05, Lower: -1, Upper: 1, SpreadRatio: 2}
	// R 4.2.2: pf(4*qf(0.05,19,19), 19, 19), and 0.889857948973 for 18.
	spread := must[float64](t)(d.SpreadPower())
	near(t, "spread", spread, 0.904436954206, 1e-9)
	alone := d
	alone.SpreadRatio = 0
	near(t, "joint", power(t, d), power(t, alone)*spread, 1e-13)
	n, _, p, err := stats.SpreadSize(d, 1, 0.9)
	if err != nil || n != 20 || p != spread {
		t.Errorf("size: got %d, %v, %v, want 20, %v", n, p, err, spread)
	}
	d.NRef, d.NCand = 19, 19
	if less := must[float64](t)(d.SpreadPower()); math.Abs(less-0.889857948973) > 1e-11 {
		t.Errorf("19 a lot: got power %v, want 0.889857948973", less)
	}
	if _, _, _, err := stats.SpreadSize(stats.Design{SDRef: 1, SDCand: 1, Alpha: 0.05}, 1, 0.9); err == nil {
		t.Error("no ratio: got no error")
	}
}

// The smallest margin has the power, and the size for it is the number given.
func TestSmallestMargin(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := designs.Draw(t, "design")
		d.Aim = stats.Aim(rapid.IntRange(0, 2).Draw(t, "with margin"))
		d.Welch, d.SDCand = false, d.SDRef // each power of unequal ones is a double integral
		want := rapid.Float64Range(0.1, 0.99).Draw(t, "power")
		m, err := stats.SmallestMargin(d, want)
		if err != nil {
			t.Fatal(err)
		}
		d.Lower, d.Upper = -m, m
		if got, _ := d.Power(); math.Abs(got-want) > 1e-9 {
			t.Fatalf("got power %v at margin %v, want %v", got, m, want)
		}
	})
	if _, err := stats.SmallestMargin(stats.Design{NRef: 9, NCand: 9, SDRef: 1, SDCand: 1, Alpha: 0.05, Aim: stats.AimHigher}, 0.9); err == nil {
		t.Error("an aim without margin: got no error")
	}
	if _, err := stats.SmallestMargin(lots2(9, 9, 1, 1, 0), 1); err == nil {
		t.Error("power 1: got no error")
	}
}

func BenchmarkPower(b *testing.B) {
	d := lots2(50, 50, 0.01, 0.006, 0.001)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := d.Power(); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkPowerWelch(b *testing.B) {
	d := lots2(50, 50, 0.01, 0.006, 0.001)
	d.Welch = true
	for b.Loop() {
		if _, err := d.Power(); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkSize(b *testing.B) {
	d := lots2(0, 0, 0.01, 0.006, 0.001)
	b.ReportAllocs()
	for b.Loop() {
		if _, _, _, err := stats.Size(d, 1, 0.9); err != nil {
			b.Fatal(err)
		}
	}
}
