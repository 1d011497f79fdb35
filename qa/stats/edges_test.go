package stats_test

import (
	"errors"
	"math"
	"slices"
	"testing"

	"lotpair/qa/stats"
)

func TestSummarizeEdges(t *testing.T) {
	for _, c := range []struct {
		name string
		x    []float64
		want stats.Summary
	}{
		{"nothing", nil, stats.Summary{}},
		{"one", []float64{3}, stats.Summary{N: 1, Mean: 3, Min: 3, Q1: 3, Median: 3, Q3: 3, Max: 3}},
		{"zeros", []float64{0, 0}, stats.Summary{N: 2}},
		// 0.1 has no float64 of its own; the SD of equal readings is 0 all the same.
		{"equal", []float64{0.1, 0.1, 0.1}, stats.Summary{N: 3, Mean: 0.1, Min: 0.1, Q1: 0.1, Median: 0.1, Q3: 0.1, Max: 0.1}},
		{"huge", []float64{1e300, 3e300, 2e300}, stats.Summary{N: 3, Mean: 2e300, SD: 1e300, Min: 1e300, Q1: 1.5e300, Median: 2e300, Q3: 2.5e300, Max: 3e300}},
		{"tiny", []float64{1e-300, 3e-300, 2e-300}, stats.Summary{N: 3, Mean: 2e-300, SD: 1e-300, Min: 1e-300, Q1: 1.5e-300, Median: 2e-300, Q3: 2.5e-300, Max: 3e-300}},
		{"both ends", []float64{-math.MaxFloat64, math.MaxFloat64, 0, 0}, stats.Summary{
			N: 4, SD: math.MaxFloat64 * math.Sqrt(2.0/3), Min: -math.MaxFloat64, Q1: -math.MaxFloat64 / 4, Q3: math.MaxFloat64 / 4, Max: math.MaxFloat64,
		}},
	} {
		got := stats.Summarize(c.x)
		for _, f := range []struct {
			name      string
			got, want float64
		}{
			{"n", float64(got.N), float64(c.want.N)},
			{"mean", got.Mean, c.want.Mean},
			{"sd", got.SD, c.want.SD},
			{"min", got.Min, c.want.Min},
			{"q1", got.Q1, c.want.Q1},
			{"median", got.Median, c.want.Median},
			{"q3", got.Q3, c.want.Q3},
			{"max", got.Max, c.want.Max},
		} {
			near(t, c.name+" "+f.name, f.got, f.want, 3e-16)
		}
		if want := c.want.Min == c.want.Max; got.Constant() != want {
			t.Errorf("%s constant: got %v, want %v", c.name, got.Constant(), want)
		}
	}
}

func TestWelchEdges(t *testing.T) {
	sum := stats.Summarize
	for _, c := range []struct {
		name      string
		ref, cand []float64
		err       error
		value     float64
	}{
		{"too few in the reference", []float64{1}, []float64{1, 2}, stats.ErrTooFew, 0},
		{"too few in the candidate", []float64{1, 2}, nil, stats.ErrTooFew, 0},
		{"both constant", []float64{1, 1}, []float64{3, 3, 3}, stats.ErrConstant, 2},
		{"both zero", []float64{0, 0}, []float64{0, 0}, stats.ErrConstant, 0},
		{"spread of a few roundings", []float64{1, 1 + 0x1p-52}, []float64{1, 1}, stats.ErrConstant, 0},
	} {
		e, err := stats.Welch(sum(c.ref), sum(c.cand))
		if !errors.Is(err, c.err) {
			t.Errorf("%s: got error %v, want %v", c.name, err, c.err)
		}
		if math.Abs(e.Value-c.value) > 1e-15 || e.SE != 0 || e.DF != 0 {
			t.Errorf("%s: got %+v, want only the value %v", c.name, e, c.value)
		}
		if _, p := e.TwoSided(1); !math.IsNaN(p) || !math.IsNaN(e.Interval(0.9).Lower) {
			t.Errorf("%s: got p %v and %+v, want NaN", c.name, p, e.Interval(0.9))
		}
	}
	// One constant lot: the other's variance and degrees of freedom alone.
	for _, constant := range [][]float64{{5, 5}, {5, 5, 5, 5, 5, 5}} {
		e := welch(t, constant, []float64{4, 6, 8})
		near(t, "one constant, df", e.DF, 2, 1e-15)
		near(t, "one constant, se", e.SE, 2/math.Sqrt(3), 3e-16)
	}
	// Variances of 1e600 and 1e-600 are no float64; the answer is.
	for _, scale := range []float64{1e300, 1e-300} {
		e := welch(t, []float64{scale, 2 * scale, 3 * scale}, []float64{2 * scale, 4 * scale, 6 * scale})
		tee, _ := e.TwoSided(0)
		near(t, "scaled df", e.DF, 50.0/17, 1e-15)
		near(t, "scaled t", tee, 2/math.Sqrt(5.0/3), 1e-15)
	}
}

func TestOneSidedMargin(t *testing.T) {
	e := stats.Estimate{Value: 0.1, SE: 0.05, DF: 17}
	both := stats.TwoOneSided(e, -0.2, 0.3, 0.05)
	low := stats.TwoOneSided(e, -0.2, math.Inf(1), 0.05)
	high := stats.TwoOneSided(e, math.Inf(-1), 0.3, 0.05)
	if low.TLower != both.TLower || low.PLower != both.PLower || low.TUpper != 0 || low.PUpper != 0 {
		t.Errorf("lower limit alone: got %+v, want the lower side of %+v and zeros", low, both)
	}
	if high.TUpper != both.TUpper || high.PUpper != both.PUpper || high.TLower != 0 || high.PLower != 0 {
		t.Errorf("upper limit alone: got %+v, want the upper side of %+v and zeros", high, both)
	}
	if low.Interval != both.Interval || high.Interval != both.Interval {
		t.Errorf("intervals: got %+v and %+v, want %+v", low.Interval, high.Interval, both.Interval)
	}
}

func TestErrors(t *testing.T) {
	one, flat, varied := stats.Summarize([]float64{1}), stats.Summarize([]float64{2, 2}), stats.Summarize([]float64{1, 2})
	fratio := func(r, c stats.Summary) error { _, err := stats.FRatio(r, c, 0.9); return err }
	grubbs := func(x ...float64) error { _, err := stats.GrubbsTest(x); return err }
	lag := func(x ...float64) error { _, err := stats.Lag1(x); return err }
	runs := func(x ...float64) error { _, err := stats.RunsTest(x); return err }
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"ratio, one reading", fratio(one, varied), stats.ErrTooFew},
		{"ratio, constant reference", fratio(flat, varied), stats.ErrConstant},
		{"ratio, constant candidate", fratio(varied, flat), stats.ErrConstant},
		{"outlier, two readings", grubbs(1, 2), stats.ErrTooFew},
		{"outlier, constant", grubbs(0.1, 0.1, 0.1), stats.ErrConstant},
		{"lag, one reading", lag(1), stats.ErrTooFew},
		{"lag, constant", lag(0.1, 0.1, 0.1), stats.ErrConstant},
		{"runs, one reading", runs(1), stats.ErrTooFew},
		{"runs, constant", runs(0.1, 0.1), stats.ErrConstant},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
}

func TestGrubbsOneApart(t *testing.T) {
	g, err := stats.GrubbsTest([]float64{0.1, 0.1, 0.3, 0.1, 0.1})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "G", g.G, 4/math.Sqrt(5), 3e-16) // (n-1)/sqrt(n), the largest there is
	if g.Index != 2 || g.P != 0 {
		t.Errorf("got %+v, want index 2 and p 0", g)
	}
}

func TestResolution(t *testing.T) {
	for _, c := range []struct {
		name     string
		x        []float64
		decimals int
		want     float64
	}{
		{"thousandths", []float64{12.003, 11.994, 12.011}, 3, 0.001},
		{"steps of 0.005", []float64{12.005, 12.010, 12.025}, 3, 0.005},
		{"more decimals than meant", []float64{12.01, 12.02, 12.05}, 4, 0.01},
		{"tens", []float64{10, 20, -50}, 0, 10},
		{"with zero", []float64{0, 0.3, 0.6}, 1, 0.3},
		{"all equal", []float64{12.01, 12.01}, 2, 0},
		{"nothing", nil, 2, 0},
		{"too large for its decimals", []float64{1e12, 2e12}, 6, 0},
		{"decimals out of range", []float64{1, 2}, 23, 0},
		{"decimals below range", []float64{1, 2}, -1, 0},
		{"not a number", []float64{1, math.NaN()}, 2, 0},
	} {
		if got := stats.Resolution(c.x, c.decimals); got != c.want {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

// TestPerformance: values from the definitions, by hand and with R's pnorm.
func TestPerformance(t *testing.T) {
	x := []float64{9, 10, 11, 10, 13}
	s := stats.Summarize(x) // mean 10.6, variance 2.3
	low, high := 9.0, 12.0
	sd := math.Sqrt(2.3)
	both := stats.Performance(x, s, &low, &high)
	near(t, "Pp", both.Pp, 3/(6*sd), 3e-16)
	near(t, "Ppk", both.Ppk, 1.4/(3*sd), 1e-15)
	near(t, "counted", both.OutsideCounted, 0.2, 0) // 9 is on the limit, so inside
	// pnorm(9, 10.6, sqrt(2.3)) + pnorm(12, 10.6, sqrt(2.3), lower.tail = FALSE)
	near(t, "estimated", both.OutsideEstimated, 0.32367969723523904, 1e-13)
	lower := stats.Performance(x, s, &low, nil)
	near(t, "lower Ppk", lower.Ppk, 1.6/(3*sd), 1e-15)
	upper := stats.Performance(x, s, nil, &high)
	near(t, "upper Ppk", upper.Ppk, 1.4/(3*sd), 1e-15)
	near(t, "parts", lower.OutsideEstimated+upper.OutsideEstimated, both.OutsideEstimated, 3e-16)
	if lower.HasPp || upper.HasPp || !lower.HasPpk || !both.HasPp {
		t.Errorf("got %+v, %+v, %+v, want Pp with both limits only", lower, upper, both)
	}
	if none := stats.Performance(x, s, nil, nil); none != (stats.Capability{}) {
		t.Errorf("without limits: got %+v, want nothing", none)
	}
	flat := []float64{13, 13}
	want := stats.Capability{OutsideCounted: 1, OutsideEstimated: 1}
	if got := stats.Performance(flat, stats.Summarize(flat), &low, &high); got != want {
		t.Errorf("without spread: got %+v, want %+v", got, want)
	}
}

func TestPpkLimits(t *testing.T) {
	// 1.33 -+ qnorm(0.975) sqrt(1/(9*30) + 1.33^2/(2*29)), by R 4.2.2.
	i := stats.PpkLimits(1.33, 30, 0.95)
	near(t, "lower", i.Lower, 0.96752862721569644, 1e-14)
	near(t, "upper", i.Upper, 1.6924713727843037, 1e-14)
	if i = stats.PpkLimits(1, 1, 0.95); !math.IsInf(i.Lower, -1) || !math.IsInf(i.Upper, 1) {
		t.Errorf("one reading: got %+v, want no limits", i)
	}
}

func TestInputsUnchanged(t *testing.T) {
	x := []float64{3, 1, 2, 5, 4}
	before := slices.Clone(x)
	s := stats.Summarize(x)
	stats.Performance(x, s, nil, nil)
	stats.Resolution(x, 1)
	_, errG := stats.GrubbsTest(x)
	_, errL := stats.Lag1(x)
	_, errR := stats.RunsTest(x)
	if err := errors.Join(errG, errL, errR); err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(x, before) {
		t.Errorf("got %v, want %v", x, before)
	}
}
