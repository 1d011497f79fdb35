package stats_test

import (
	"encoding/binary"
	"math"
	"testing"

	"lotpair/qa/stats"
)

// FuzzMethods gives every method two lots read from bytes: none panics, and what
// comes without an error is a number, in order, and a probability from 0 to 1. Ends
// of an interval may be infinite where the method says so. The seeds are in
// testdata/fuzz.
func FuzzMethods(f *testing.F) {
	f.Fuzz(func(t *testing.T, split uint8, data []byte) {
		var all []float64
		for ; len(data) >= 8 && len(all) < 60; data = data[8:] {
			if v := math.Float64frombits(binary.LittleEndian.Uint64(data)); !math.IsNaN(v) && math.Abs(v) < 1e150 && (v == 0 || math.Abs(v) > 1e-150) {
				all = append(all, v)
			}
		}
		at := int(split) % (len(all) + 1)
		ref, cand := all[:at], all[at:]
		same := min(len(ref), len(cand))
		r, c := stats.Summarize(ref), stats.Summarize(cand)

		estimates(t, "pooled", ref, cand)(stats.Pooled(r, c))
		estimates(t, "paired", ref, cand)(stats.Paired(stats.Summarize(stats.Differences(ref[:same], cand[:same], 3))))
		estimates(t, "yuen", ref, cand)(stats.Yuen(ref, cand))
		if s, err := stats.StratifiedDifference([][]float64{ref, cand}, [][]float64{cand, ref}); err == nil {
			estimates(t, "stratified", ref, cand)(s.Estimate, nil)
		}
		contrast, err := stats.WelchContrast(r, c)
		ratios(t, "welch", ref, cand, contrast, err)
		contrast, err = stats.PooledContrast(r, c)
		ratios(t, "pooled", ref, cand, contrast, err)
		contrast, err = stats.PairedContrast(ref[:same], cand[:same])
		ratios(t, "paired", ref, cand, contrast, err)
		if s, err := stats.PitmanMorgan(ref[:same], cand[:same], 0.9); err == nil {
			probable(t, "Pitman-Morgan", s.P)
			ordered(t, "Pitman-Morgan", s.Interval)
		}
		if i, err := stats.BonettRatio(ref, cand, 0.9); err == nil {
			ordered(t, "Bonett", i)
		}
		for _, decimals := range []int{-1, 3} {
			if v, err := stats.MannWhitney(ref, cand, 0.9, decimals, nil); err == nil {
				probable(t, "ranks", v.P)
				ordered(t, "ranks", v.Interval)
				finite(t, "ranks", v.U, v.Shift)
			}
			if v, err := stats.WilcoxonSignedRank(all, 0.9, decimals); err == nil {
				probable(t, "signed ranks", v.P)
				ordered(t, "signed ranks", v.Interval)
				finite(t, "signed ranks", v.V, v.Shift)
			}
		}
		if v, err := stats.ShapiroWilk(all); err == nil {
			probable(t, "normality", v.P)
			probable(t, "normality W", v.W)
		}
		if steps, found, err := stats.GeneralizedESD(all, stats.ESDSought(len(all)), 0.05); err == nil {
			for _, s := range steps {
				finite(t, "outlying", s.R, s.Lambda)
			}
			if found > len(steps) {
				t.Fatalf("outlying: got %d of %d", found, len(steps))
			}
		}
		if v, err := stats.CutOffAt(ref, r, c.Mean, split%2 == 0); err == nil {
			probable(t, "cut-off", v.P)
		}
		if v, err := stats.OneWay([][]float64{ref, cand}); err == nil {
			probable(t, "groups", v.P)
			finite(t, "groups", v.SDBetween, v.SDWithin)
		}
		draws := stats.Resampling{Seed: uint64(split), Resamples: 100}
		for _, boot := range []func(ref, cand []float64, level float64, r stats.Resampling) (stats.Bootstrap, error){stats.BootstrapMeans, medians} {
			if b, err := boot(ref, cand, 0.9, draws); err == nil {
				ordered(t, "bootstrap", b.Interval)
				finite(t, "bootstrap", b.Value, b.Interval.Lower, b.Interval.Upper)
			}
		}
		if p, err := stats.Permute(ref, cand, draws); err == nil {
			probable(t, "permutation", second(p.TwoSided(0)))
			ordered(t, "permutation", p.Interval(0.8))
		}
	})
}

func estimates(t *testing.T, what string, ref, cand []float64) func(e stats.Estimate, err error) {
	return func(e stats.Estimate, err error) {
		t.Helper()
		if err != nil {
			return
		}
		finite(t, what, e.Value, e.SE, e.DF)
		probable(t, what, second(e.TwoSided(0)))
		if !(e.SE > 0 && e.DF > 0) {
			t.Fatalf("%s of %v and %v: got %+v, want se and df above 0", what, ref, cand, e)
		}
	}
}

func ratios(t *testing.T, what string, ref, cand []float64, c stats.Contrast, err error) {
	t.Helper()
	if err != nil {
		return
	}
	if i, err := c.Interval(0.9); err == nil {
		finite(t, what, c.Value(), i.Lower, i.Upper)
		if slack := 1e-9 * math.Abs(c.Value()); !(i.Lower <= c.Value()+slack && c.Value() <= i.Upper+slack) {
			t.Fatalf("%s ratio of %v and %v: got %+v, want it about %v", what, ref, cand, i, c.Value())
		}
	}
}

func finite(t *testing.T, what string, values ...float64) {
	t.Helper()
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			t.Fatalf("%s: got %v, want numbers", what, values)
		}
	}
}

func probable(t *testing.T, what string, p float64) {
	t.Helper()
	if !(p >= 0 && p <= 1) {
		t.Fatalf("%s: got %v, want 0..1", what, p)
	}
}

func ordered(t *testing.T, what string, i stats.Interval) {
	t.Helper()
	if !(i.Lower <= i.Upper) {
		t.Fatalf("%s: got %+v, want an interval in order", what, i)
	}
}
