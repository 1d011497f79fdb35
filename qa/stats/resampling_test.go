package stats_test

import (
	"errors"
	"math"
	"runtime"
	"strings"
	"sync"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestResamplingAgainstOthers holds permutation p to all rearrangements and BCa
// intervals to SciPy (means) and NumPy (medians), within chance.
func TestResamplingAgainstOthers(t *testing.T) {
	draws := stats.Resampling{Seed: 11, Resamples: 100000, Run: together(runtime.GOMAXPROCS(0))}
	answers(t, "resampling.txt", 45, func(ref, cand []float64, name string) (float64, float64) {
		kind, what, _ := strings.Cut(name, ".")
		switch kind {
		case "mean", "median":
			at := strings.LastIndex(what, ".")
			boot := stats.BootstrapMeans
			if kind == "median" {
				boot = medians
			}
			b := must[stats.Bootstrap](t)(boot(ref, cand, number(t, what[:at]), draws))
			width := b.Interval.Upper - b.Interval.Lower
			if end := what[at+1:]; end == "bias" || end == "acceleration" {
				return map[string]float64{"bias": b.Bias, "acceleration": b.Acceleration}[end], 1
			}
			return map[string]float64{"lower": b.Interval.Lower, "upper": b.Interval.Upper}[what[at+1:]], width
		}
		p := must[*stats.Permutation](t)(stats.Permute(ref, cand, draws))
		h0 := number(t, what)
		return map[string]float64{"above": second(p.Above(h0)), "below": second(p.Below(h0)), "two": second(p.TwoSided(h0))}[kind], 1
	})
}

// medians has the readings' three decimals.
func medians(ref, cand []float64, level float64, r stats.Resampling) (stats.Bootstrap, error) {
	return stats.BootstrapMedians(ref, cand, level, 3, r)
}

// together runs blocks with so many workers.
func together(workers int) func(blocks int, do func(block int)) {
	return func(blocks int, do func(block int)) {
		var all sync.WaitGroup
		next := make(chan int)
		for range workers {
			all.Go(func() {
				for block := range next {
					do(block)
				}
			})
		}
		for block := range blocks {
			next <- block
		}
		close(next)
		all.Wait()
	}
}

// The same seed gives the same answer however the blocks are run; another does not.
func TestResamplingWorkers(t *testing.T) {
	ref, cand := boreDiameter(t)
	type all struct {
		means, medians stats.Bootstrap
		p              float64
		interval       stats.Interval
	}
	run := func(seed uint64, run func(int, func(int))) all {
		r := stats.Resampling{Seed: seed, Resamples: 3000, Run: run}
		p := must[*stats.Permutation](t)(stats.Permute(ref, cand, r))
		return all{
			must[stats.Bootstrap](t)(stats.BootstrapMeans(ref, cand, 0.90, r)),
			must[stats.Bootstrap](t)(medians(ref, cand, 0.90, r)),
			second(p.TwoSided(0)), p.Interval(0.90),
		}
	}
	want := run(1, nil)
	for _, workers := range []int{1, 2, 7} {
		if got := run(1, together(workers)); got != want {
			t.Errorf("%d workers: got %+v, want %+v", workers, got, want)
		}
	}
	backwards := func(blocks int, do func(int)) {
		for block := range blocks {
			do(blocks - 1 - block)
		}
	}
	if got := run(1, backwards); got != want {
		t.Errorf("backwards: got %+v, want %+v", got, want)
	}
	if got := run(2, nil); got.means == want.means || got.p == want.p {
		t.Errorf("another seed: got %+v, want another answer", got)
	}
	// And near what Welch says of these readings.
	e := welch(t, ref, cand).Interval(0.90)
	width := e.Upper - e.Lower
	for name, i := range map[string]stats.Interval{"bootstrap": want.means.Interval, "permutation": want.interval} {
		if math.Abs(i.Lower-e.Lower) > width/10 || math.Abs(i.Upper-e.Upper) > width/10 {
			t.Errorf("%s: got %+v, want about %+v", name, i, e)
		}
	}
}

func TestResamplingErrors(t *testing.T) {
	varied, flat := []float64{1, 2, 3}, []float64{2, 2, 2}
	enough := stats.Resampling{Seed: 1, Resamples: 200}
	means := func(r, c []float64, d stats.Resampling) error {
		_, err := stats.BootstrapMeans(r, c, 0.9, d)
		return err
	}
	middles := func(r, c []float64, d stats.Resampling) error { _, err := medians(r, c, 0.9, d); return err }
	permute := func(r, c []float64, d stats.Resampling) error { _, err := stats.Permute(r, c, d); return err }
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"means, one reading", means(varied[:1], varied, enough), stats.ErrTooFew},
		{"means, both constant", means(flat, flat, enough), stats.ErrConstant},
		{"means, one constant", means(flat, varied, enough), nil},
		{"means, few resamples", means(varied, varied, stats.Resampling{Resamples: 99}), stats.ErrFewResamples},
		{"medians, one reading", middles(varied[:1], varied, enough), stats.ErrTooFew},
		{"medians, hardly any spread", middles(flat, []float64{1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 2}, enough), stats.ErrConstant},
		{"permutation, both constant", permute(flat, flat, enough), stats.ErrConstant},
		{"permutation, few resamples", permute(varied, varied, stats.Resampling{Resamples: 99}), stats.ErrFewResamples},
		{"permutation, one constant", permute(flat, varied, enough), nil},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	// Two readings a lot: 6 rearrangements never reach 5 %, so there is no end.
	p := must[*stats.Permutation](t)(stats.Permute([]float64{1, 2}, []float64{3, 5}, enough))
	if i := p.Interval(0.90); !math.IsInf(i.Lower, -1) || !math.IsInf(i.Upper, 1) {
		t.Errorf("two readings a lot: got %+v, want no ends", i)
	}
}

// Whatever the readings, an interval is in order and a probability between 0 and 1;
// the ends of the permutation interval are where its tests turn.
func TestResamplingLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		r := stats.Resampling{Seed: rapid.Uint64().Draw(t, "seed"), Resamples: 200}
		for _, boot := range []func(r, c []float64, level float64, d stats.Resampling) (stats.Bootstrap, error){stats.BootstrapMeans, medians} {
			b, err := boot(ref, cand, 0.90, r)
			if err == nil && !(b.Interval.Lower <= b.Interval.Upper) {
				t.Fatalf("got %+v, want an interval in order", b)
			}
		}
		p, err := stats.Permute(ref, cand, r)
		if err != nil {
			t.Fatal(err)
		}
		i := p.Interval(0.80)
		if _, v := p.TwoSided(0.25); !(v > 0 && v <= 1) || !(i.Lower <= i.Upper) {
			t.Fatalf("got p %v and %+v, want p in 0..1 and an interval in order", v, i)
		}
		if _, v := p.Above(i.Lower); !math.IsInf(i.Lower, -1) && v >= 0.1 {
			t.Fatalf("got p %v at the lower end, want below 0.1", v)
		}
	})
}
