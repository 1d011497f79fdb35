package stats_test

import (
	"errors"
	"math"
	"testing"

	"lotpair/qa/stats"
	"lotpair/qa/stats/dist"

	"pgregory.net/rapid"
)

// chance is the binomial probability of k of n, by the F distribution.
func chance(k, n int, p float64) float64 {
	lower := func(k int) float64 {
		switch {
		case k < 0:
			return 0
		case k >= n:
			return 1
		}
		return dist.FUpper(float64(n-k)*p/(float64(k+1)*(1-p)), 2*float64(k+1), 2*float64(n-k))
	}
	return lower(k) - lower(k-1)
}

// The power is the sum over every pair of counts with which the tests that judge
// counts reject, counted out one by one.
func TestFractionPowerCountedOut(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := stats.FractionDesign{
			Aim:  stats.Aim(rapid.IntRange(int(stats.AimWithin), int(stats.AimHigher)).Draw(t, "aim")),
			NRef: rapid.IntRange(2, 25).Draw(t, "n"), NCand: rapid.IntRange(2, 25).Draw(t, "m"),
			PRef: rapid.Float64Range(0.01, 0.99).Draw(t, "p"), PCand: rapid.Float64Range(0.01, 0.99).Draw(t, "q"),
			Alpha: rapid.SampledFrom([]float64{0.01, 0.05, 0.1, 0.2}).Draw(t, "alpha"),
			Lower: -rapid.Float64Range(0.013, 0.6).Draw(t, "lower"), Upper: rapid.Float64Range(0.013, 0.6).Draw(t, "upper"),
		}
		got, err := d.Power()
		if err != nil {
			t.Fatal(err)
		}
		want := 0.0
		for x := range d.NRef + 1 {
			for y := range d.NCand + 1 {
				p, err := stats.CompareProportions(stats.Counts{N: d.NRef, Failed: x}, stats.Counts{N: d.NCand, Failed: y})
				if err != nil {
					t.Fatal(err)
				}
				_, above := p.Above(d.Lower)
				_, below := p.Below(d.Upper)
				_, higher := p.Above(0)
				_, lower := p.Below(0)
				_, two := p.TwoSided(0)
				if []bool{max(above, below) < d.Alpha, above < d.Alpha, below < d.Alpha, two < d.Alpha, lower < d.Alpha, higher < d.Alpha}[d.Aim] {
					want += chance(x, d.NRef, d.PRef) * chance(y, d.NCand, d.PCand)
				}
			}
		}
		if math.Abs(got-want) > 1e-12 {
			t.Fatalf("got %v, want %v", got, want)
		}
	})
}

// TestPublishedFractionSizes holds sizes of a formula by Bonett (size.equiv.prop2)
// and of R's power.prop.test, both normal, beside what counting gives.
func TestPublishedFractionSizes(t *testing.T) {
	for _, c := range []struct {
		name  string
		d     stats.FractionDesign
		power float64
		want  int
	}{
		{"Bonett, printed 488", stats.FractionDesign{PRef: 0.8, PCand: 0.8, Alpha: 0.1, Lower: -0.075, Upper: 0.075}, 0.9, 488},
		{"Bonett, printed 288 with z(beta/2) at a shift", stats.FractionDesign{PRef: 0.3, PCand: 0.35, Alpha: 0.1, Lower: -0.15, Upper: 0.15}, 0.8, 199},
		{"R, printed 76.7", stats.FractionDesign{Aim: stats.AimDifference, PRef: 0.5, PCand: 0.75, Alpha: 0.05}, 0.9, 76},
	} {
		n, m, p, err := stats.FractionSize(c.d, 1, c.power)
		if err != nil || n != c.want || m != n || p < c.power {
			t.Errorf("%s: got %d and %d with power %v, %v, want %d", c.name, n, m, p, err, c.want)
		}
	}
	// R, power.prop.test(n = 50, p1 = .5, p2 = .75), printed .7401659, normal.
	d := stats.FractionDesign{Aim: stats.AimDifference, NRef: 50, NCand: 50, PRef: 0.5, PCand: 0.75, Alpha: 0.05}
	if got := must[float64](t)(d.Power()); math.Abs(got-0.7401659) > 6e-3 {
		t.Errorf("R: got %v, want about 0.7401659", got)
	}
}

func TestFractionEnds(t *testing.T) {
	good := stats.FractionDesign{NRef: 10, NCand: 10, PRef: 0.1, PCand: 0.1, Alpha: 0.05, Lower: -0.1, Upper: 0.1}
	for name, change := range map[string]func(d *stats.FractionDesign){
		"one part": func(d *stats.FractionDesign) { d.NRef = 1 },
		"too many": func(d *stats.FractionDesign) { d.NCand = 2_000_000 },
		"fraction": func(d *stats.FractionDesign) { d.PCand = 1.1 },
		"alpha":    func(d *stats.FractionDesign) { d.Alpha = math.NaN() },
		"margin":   func(d *stats.FractionDesign) { d.Upper = 1 },
		"turned":   func(d *stats.FractionDesign) { d.Lower, d.Upper = 0.1, -0.1 },
		"aim":      func(d *stats.FractionDesign) { d.Aim = -1 },
	} {
		d := good
		change(&d)
		if _, err := d.Power(); err == nil {
			t.Errorf("%s: got no error", name)
		}
	}
	beyond := good
	beyond.PCand = 0.2
	if _, _, _, err := stats.FractionSize(beyond, 1, 0.9); !errors.Is(err, stats.ErrBeyondMargin) {
		t.Errorf("on the margin: got %v, want ErrBeyondMargin", err)
	}
	if _, _, _, err := stats.FractionSize(good, math.Inf(1), 0.9); err == nil {
		t.Error("ratio: got no error")
	}
	if _, _, _, err := stats.FractionSize(good, 1, 0); err == nil {
		t.Error("power: got no error")
	}
	never := good
	never.PRef, never.PCand = 0, 0
	if p := must[float64](t)(never.Power()); p != 0 && p != 1 {
		t.Errorf("nothing fails: got %v, want what is certain", p)
	}
	if n, m, _, err := stats.FractionSize(never, 2, 0.9); err != nil || m != 2*n {
		t.Errorf("nothing fails, twice as many: got %d and %d, %v", n, m, err)
	}
}

// halved is the most likely fraction of the reference where the candidate's is delta larger, by halving alone: slow and with all
// digits.
func halved(ref, cand stats.Counts, delta float64) float64 {
	if delta < 0 {
		return halved(cand, ref, -delta) - delta
	}
	part := func(count int, share float64) float64 {
		if count == 0 {
			return 0
		}
		return float64(count) / share
	}
	from, to := 0.0, 1-delta
	for range 2000 {
		e := from + (to-from)/2
		if e <= from || e >= to {
			break
		}
		if part(ref.Failed, e)-part(ref.N-ref.Failed, 1-e)+part(cand.Failed, e+delta)-part(cand.N-cand.Failed, 1-delta-e) > 0 {
			from = e
		} else {
			to = e
		}
	}
	return from + (to-from)/2
}

// The score is that of the most likely fractions, found by halving, for counts and differences of every size.
func TestScoreByHalving(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		count := rapid.Custom(func(t *rapid.T) stats.Counts {
			n := rapid.OneOf(rapid.IntRange(1, 30), rapid.IntRange(1, 3000), rapid.IntRange(1, 10_000_000)).Draw(t, "n")
			return stats.Counts{N: n, Failed: rapid.OneOf(rapid.IntRange(0, n), rapid.IntRange(0, min(n, 3))).Draw(t, "failed")}
		})
		ref, cand := count.Draw(t, "ref"), count.Draw(t, "cand")
		delta := rapid.OneOf(rapid.Float64Range(-1, 1), rapid.Float64Range(-1e-6, 1e-6), rapid.SampledFrom([]float64{-1, 0, 1, 0.5, 0.05})).Draw(t, "delta")
		p, err := stats.CompareProportions(ref, cand)
		if err != nil {
			t.Fatal(err)
		}
		r := halved(ref, cand, delta)
		c := min(1, max(0, r+delta))
		n1, n2 := float64(ref.N), float64(cand.N)
		want := (p.Difference() - delta) / math.Sqrt((r*(1-r)/n1+c*(1-c)/n2)*(n1+n2)/(n1+n2-1))
		got := p.Score(delta)
		// Halving has fewer digits of 1 - r where nearly all failed, and both lose them where difference and delta are near.
		if short := min(r, 1-r, c+1e-300, 1-c+1e-300); short < 1e-9 || math.Abs(p.Difference()-delta) < 1e-4 {
			return
		}
		if math.Abs(got-want) > 1e-9*math.Abs(want) {
			t.Fatalf("%v %v at %v: got %v, want %v", ref, cand, delta, got, want)
		}
	})
}

func BenchmarkFractionSize(b *testing.B) {
	d := stats.FractionDesign{PRef: 0.001, PCand: 0.001, Alpha: 0.05, Aim: stats.AimNotHigher, Upper: 0.001}
	for b.Loop() {
		if _, _, _, err := stats.FractionSize(d, 1, 0.9); err != nil {
			b.Fatal(err)
		}
	}
}
