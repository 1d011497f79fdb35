package stats_test

import (
	"errors"
	"math"
	"runtime"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestResamplingPairsAgainstOthers holds sign flips to all of them, and the BCa intervals of pairs and ratios to SciPy within
// chance.
func TestResamplingPairsAgainstOthers(t *testing.T) {
	draws := stats.Resampling{Seed: 11, Resamples: 60000, Run: together(runtime.GOMAXPROCS(0))}
	answers(t, "resampling_pairs.txt", 90, func(ref, cand []float64, name string) (float64, float64) {
		kind, what, _ := strings.Cut(name, ".")
		diffs := func() []float64 { return stats.Differences(ref, cand, 3) }
		if kind == "flips" || kind == "ratioflips" {
			what, at, _ := strings.Cut(what, ".")
			var f *stats.SignFlips
			if kind == "flips" {
				f = must[*stats.SignFlips](t)(stats.NewSignFlips(diffs(), draws))
			} else {
				f = must[*stats.SignFlips](t)(stats.NewRatioFlips(ref, cand, draws))
			}
			if n, all := f.Flips(); all != (len(ref) < 16) || all && n != 1<<len(ref) || !all && n != 60000 {
				t.Errorf("%d pairs: got %d flips, all of them %v", len(ref), n, all)
			}
			v := number(t, at)
			return map[string]func() float64{
				"above": func() float64 { return f.Above(v) }, "below": func() float64 { return f.Below(v) },
				"lower": func() float64 { return f.Interval(v).Lower }, "upper": func() float64 { return f.Interval(v).Upper },
			}[what](), 1
		}
		at := strings.LastIndex(what, ".")
		level := number(t, what[:at])
		b := must[stats.Bootstrap](t)(map[string]func() (stats.Bootstrap, error){
			"diff":        func() (stats.Bootstrap, error) { return stats.BootstrapMean(diffs(), level, draws) },
			"ratio":       func() (stats.Bootstrap, error) { return stats.BootstrapRatio(ref, cand, level, draws) },
			"pairedratio": func() (stats.Bootstrap, error) { return stats.BootstrapPairedRatio(ref, cand, level, draws) },
		}[kind]())
		return map[string]float64{"lower": b.Interval.Lower, "upper": b.Interval.Upper, "acceleration": b.Acceleration}[what[at+1:]], b.Interval.Upper - b.Interval.Lower
	})
}

// The same seed gives the same answer for any number of workers; another does not.
func TestResamplingPairsWorkers(t *testing.T) {
	ref, cand := boreDiameter(t)
	type all struct {
		mean, ratio, paired stats.Bootstrap
		flips, ratioFlips   stats.Interval
	}
	run := func(seed uint64, run func(int, func(int))) all {
		r := stats.Resampling{Seed: seed, Resamples: 2000, Run: run} // 2^12 is more
		boot, flips := must[stats.Bootstrap](t), must[*stats.SignFlips](t)
		d := stats.Differences(ref, cand, 3)
		return all{
			boot(stats.BootstrapMean(d, 0.90, r)), boot(stats.BootstrapRatio(ref, cand, 0.90, r)), boot(stats.BootstrapPairedRatio(ref, cand, 0.90, r)),
			flips(stats.NewSignFlips(d, r)).Interval(0.90), flips(stats.NewRatioFlips(ref, cand, r)).Interval(0.90),
		}
	}
	want := run(1, nil)
	for _, workers := range []int{1, 2, 7} {
		if got := run(1, together(workers)); got != want {
			t.Errorf("%d workers: got %+v, want %+v", workers, got, want)
		}
	}
	if got := run(2, nil); got.mean == want.mean || got.ratio == want.ratio || got.paired == want.paired || got.flips == want.flips {
		t.Errorf("another seed: got %+v, want another answer", got)
	}
}

func TestResamplingPairsErrors(t *testing.T) {
	varied, flat, across := []float64{1, 2, 3}, []float64{2, 2, 2}, []float64{-1, 0.5, 2}
	enough, few := stats.Resampling{Seed: 1, Resamples: 200}, stats.Resampling{Resamples: 99}
	mean := func(x []float64, r stats.Resampling) error { _, err := stats.BootstrapMean(x, 0.9, r); return err }
	flips := func(x []float64, r stats.Resampling) error { _, err := stats.NewSignFlips(x, r); return err }
	ratio := func(x, y []float64, r stats.Resampling) error {
		_, err := stats.BootstrapRatio(x, y, 0.9, r)
		return err
	}
	paired := func(x, y []float64, r stats.Resampling) error {
		_, err := stats.BootstrapPairedRatio(x, y, 0.9, r)
		return err
	}
	ratioFlips := func(x, y []float64, r stats.Resampling) error { _, err := stats.NewRatioFlips(x, y, r); return err }
	for name, c := range map[string][2]error{
		"mean, one": {mean(varied[:1], enough), stats.ErrTooFew}, "mean, constant": {mean(flat, enough), stats.ErrConstant}, "mean, few": {mean(varied, few), stats.ErrFewResamples},
		"flips, one": {flips(varied[:1], enough), stats.ErrTooFew}, "flips, constant": {flips(flat, enough), stats.ErrConstant}, "flips, few": {flips(varied, few), stats.ErrFewResamples},
		"ratio, one": {ratio(varied, varied[:1], enough), stats.ErrTooFew}, "ratio, across 0": {ratio(across, varied, enough), stats.ErrRatioUndefined}, "ratio": {ratio(varied, flat, enough), nil},
		"pairs, unequal": {paired(varied, varied[:2], enough), stats.ErrUnequalLengths}, "pairs, across 0": {paired(across, varied, enough), stats.ErrRatioUndefined},
		"ratio flips, unequal": {ratioFlips(varied, varied[:2], enough), stats.ErrUnequalLengths}, "ratio flips, across 0": {ratioFlips(across, varied, enough), stats.ErrRatioUndefined},
		"ratio flips, in proportion": {ratioFlips(varied, []float64{2, 4, 6}, enough), stats.ErrConstant},
	} {
		if !errors.Is(c[0], c[1]) {
			t.Errorf("%s: got %v, want %v", name, c[0], c[1])
		}
	}
}

// The interval of flips holds what its tests do not refute and nothing else; a shift of the readings shifts it.
func TestSignFlipsLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := lot(t, "differences")
		f, err := stats.NewSignFlips(x, stats.Resampling{Seed: rapid.Uint64().Draw(t, "seed"), Resamples: rapid.SampledFrom([]int{200, 5000}).Draw(t, "resamples")})
		if err != nil {
			t.Fatal(err)
		}
		i, tail := f.Interval(0.80), (1-0.80)/2
		if !(i.Lower <= i.Upper) {
			t.Fatalf("got %+v, want an interval in order", i)
		}
		beside := 1e-6 * (1 + math.Abs(i.Upper-i.Lower))
		if !math.IsInf(i.Lower, -1) && (f.Above(i.Lower) < tail || f.Above(i.Lower-beside) >= tail) {
			t.Fatalf("got p %v at the lower end and %v below it, want it to pass %v there", f.Above(i.Lower), f.Above(i.Lower-beside), tail)
		}
		if !math.IsInf(i.Upper, 1) && (f.Below(i.Upper) < tail || f.Below(i.Upper+beside) >= tail) {
			t.Fatalf("got p %v at the upper end and %v above it, want it to pass %v there", f.Below(i.Upper), f.Below(i.Upper+beside), tail)
		}
	})
}
