package stats_test

import (
	"math"
	"math/big"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// lot draws readings on a grid, as a gauge gives them: not all equal.
func lot(t *rapid.T, label string) []float64 {
	x := rapid.SliceOfN(rapid.IntRange(-5000, 5000), 2, 40).Draw(t, label)
	out := make([]float64, len(x))
	varied := false
	for i, v := range x {
		out[i] = 12 + float64(v)/1000
		varied = varied || v != x[0]
	}
	if !varied {
		out[0]++
	}
	return out
}

func estimate(t *rapid.T, ref, cand []float64) stats.Estimate {
	e, err := stats.Welch(stats.Summarize(ref), stats.Summarize(cand))
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func mapped(x []float64, f func(float64) float64) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		out[i] = f(v)
	}
	return out
}

func alike(a, b, allowed float64) bool {
	return math.Abs(a-b) <= allowed*math.Max(math.Abs(a), math.Abs(b))
}

// A power of two changes no digit, so nothing but the scale may change.
func TestScale(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		k := rapid.IntRange(-900, 900).Draw(t, "power of two")
		scaled := func(v float64) float64 { return math.Ldexp(v, k) }
		e, f := estimate(t, ref, cand), estimate(t, mapped(ref, scaled), mapped(cand, scaled))
		if f.Value != math.Ldexp(e.Value, k) || f.SE != math.Ldexp(e.SE, k) || f.DF != e.DF {
			t.Fatalf("got %+v, want %+v times 2^%d", f, e, k)
		}
	})
}

func TestShift(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		by := rapid.Float64Range(-1e3, 1e3).Draw(t, "shift")
		shifted := func(v float64) float64 { return v + by }
		e, f := estimate(t, ref, cand), estimate(t, mapped(ref, shifted), mapped(cand, shifted))
		// Rounding a sum near 1000 moves a reading by at most 1.2e-13.
		if math.Abs(e.Value-f.Value) > 5e-13 || math.Abs(e.SE-f.SE) > 5e-13 {
			t.Fatalf("got %+v, want %+v", f, e)
		}
	})
}

func TestSwap(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		h0 := rapid.Float64Range(-1, 1).Draw(t, "h0")
		e, f := estimate(t, ref, cand), estimate(t, cand, ref)
		if f.Value != -e.Value || f.SE != e.SE || !alike(f.DF, e.DF, 1e-15) {
			t.Fatalf("got %+v, want %+v with the other sign", f, e)
		}
		f.DF = e.DF
		_, above := e.Above(h0)
		_, below := f.Below(-h0)
		if above != below {
			t.Fatalf("got p %v, want %v", below, above)
		}
	})
}

// Both one-sided p below alpha is the interval strictly inside the margin. Half
// of the margins lie within a billionth of an end of the interval.
func TestIntervalIsTheTests(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := estimate(t, lot(t, "ref"), lot(t, "cand"))
		alpha := rapid.SampledFrom([]float64{0.001, 0.01, 0.025, 0.05, 0.1, 0.2, 0.45}).Draw(t, "alpha")
		i := stats.TwoOneSided(e, -1, 1, alpha).Interval
		nudge := func(label string) float64 {
			return e.SE * rapid.SampledFrom([]float64{-3, -1e-9, 1e-9, 3}).Draw(t, label)
		}
		lower, upper := i.Lower+nudge("lower"), i.Upper+nudge("upper")
		got := stats.TwoOneSided(e, lower, upper, alpha)
		inside := lower < got.Interval.Lower && got.Interval.Upper < upper
		if shown := got.PLower < alpha && got.PUpper < alpha; shown != inside {
			t.Fatalf("p %v and %v say %v, interval %+v in %v..%v says %v", got.PLower, got.PUpper, shown, got.Interval, lower, upper, inside)
		}
	})
}

// Equal sizes and variances make Satterthwaite's degrees of freedom n1+n2-2.
func TestPooledFreedom(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref := stats.Summarize(lot(t, "ref"))
		cand := ref
		cand.Mean += 0.25
		e, err := stats.Welch(ref, cand)
		if err != nil {
			t.Fatal(err)
		}
		if want := float64(2*ref.N - 2); !alike(e.DF, want, 1e-15) {
			t.Fatalf("got df %v, want %v", e.DF, want)
		}
	})
}

// Mean and SD against rational arithmetic of the same float64 readings.
func TestExactMoments(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		base := rapid.SampledFrom([]float64{0, 1, 12, 1e6, -1e9}).Draw(t, "base")
		x := rapid.SliceOfN(rapid.Float64Range(-1, 1), 2, 30).Draw(t, "x")
		sum := new(big.Rat)
		for i := range x {
			x[i] += base
			sum.Add(sum, new(big.Rat).SetFloat64(x[i]))
		}
		mean := sum.Quo(sum, big.NewRat(int64(len(x)), 1))
		squares := new(big.Rat)
		for _, v := range x {
			d := new(big.Rat).SetFloat64(v)
			d.Sub(d, mean)
			squares.Add(squares, d.Mul(d, d))
		}
		variance := new(big.Float).SetPrec(200).SetRat(squares.Quo(squares, big.NewRat(int64(len(x)-1), 1)))
		sd, _ := variance.Sqrt(variance).Float64()
		want, _ := mean.Float64()
		s := stats.Summarize(x)
		if !alike(s.Mean, want, 0x1p-52) && math.Abs(want) > 1e-15 {
			t.Fatalf("mean: got %v, want %v", s.Mean, want)
		}
		if !alike(s.SD, sd, 0x1p-51) {
			t.Fatalf("sd: got %v, want %v", s.SD, sd)
		}
	})
}

func TestGrubbsBounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := lot(t, "x")
		g, err := stats.GrubbsTest(x)
		if len(x) < 3 {
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		n := float64(len(x))
		if !(g.G > 0 && g.G <= (n-1)/math.Sqrt(n)*(1+1e-15)) || !(g.P >= 0 && g.P <= 1) {
			t.Fatalf("got %+v, want G up to (n-1)/sqrt(n) and P in 0..1", g)
		}
	})
}
