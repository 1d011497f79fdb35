package stats_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestMeansAgainstR holds pooled, paired and ratio answers to R.
func TestMeansAgainstR(t *testing.T) {
	answers(t, "means.txt", 250, func(ref, cand []float64, name string) (float64, float64) {
		r, c := stats.Summarize(ref), stats.Summarize(cand)
		if what, found := strings.CutPrefix(name, "ratio."); found {
			return ofRatio(t, ref, cand, what), 0
		}
		kind, what, _ := strings.Cut(name, ".")
		switch kind {
		case "spread":
			s := must[stats.PairedSpread](t)(stats.PitmanMorgan(ref, cand, 0.90))
			return map[string]float64{"t": s.T, "df": s.DF, "p": s.P, "lower": s.Interval.Lower, "upper": s.Interval.Upper}[what], 0
		case "pooled":
			return ofEstimate(t, must[stats.Estimate](t)(stats.Pooled(r, c)), what)
		}
		return ofEstimate(t, must[stats.Estimate](t)(stats.Paired(stats.Summarize(stats.Differences(ref, cand, 3)))), what)
	})
}

func contrastOf(t require, kind string, ref, cand []float64) stats.Contrast {
	var c stats.Contrast
	var err error
	switch kind {
	case "welch":
		c, err = stats.WelchContrast(stats.Summarize(ref), stats.Summarize(cand))
	case "pooled":
		c, err = stats.PooledContrast(stats.Summarize(ref), stats.Summarize(cand))
	default:
		c, err = stats.PairedContrast(ref, cand)
	}
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// require is the part of a test that ends it.
type require interface{ Fatal(args ...any) }

func ofRatio(t *testing.T, ref, cand []float64, name string) float64 {
	t.Helper()
	kind, what, _ := strings.Cut(name, ".")
	c := contrastOf(t, kind, ref, cand)
	switch what {
	case "value":
		return c.Value()
	case "lower":
		return must[stats.Interval](t)(c.Interval(0.90)).Lower
	case "upper":
		return must[stats.Interval](t)(c.Interval(0.90)).Upper
	}
	e := c.At(number(t, what[:3]))
	_, above := e.Above(0)
	_, below := e.Below(0)
	return map[string]float64{"se": e.SE, "df": e.DF, "p.above": above, "p.below": below}[what[4:]]
}

// TestPublishedMeans: NIST e-Handbook 1.3.5.3, R's help, the reference run of two
// one-sided tests in the tests of statsmodels (made there by R), and Box, Hunter
// & Hunter's shoes (from memory).
func TestPublishedMeans(t *testing.T) {
	pair := func(name, ref, cand string) (stats.Summary, stats.Summary) {
		lots := readings(t, name, 0, 1)
		return stats.Summarize(lots[ref]), stats.Summarize(lots[cand])
	}
	pooled := must[stats.Estimate](t)
	japan, us := pair("nist_auto83b.csv", "Japan", "US")
	e := pooled(stats.Pooled(japan, us)) // printed -12.62059, 326, 5.273e-30
	tee, p := e.TwoSided(0)
	near(t, "AUTO83B t", tee, -12.6205912887, 1e-11)
	near(t, "AUTO83B df", e.DF, 326, 0)
	near(t, "AUTO83B p", p, 5.27293545661e-30, 1e-11)
	near(t, "AUTO83B lower", e.Interval(0.95).Lower, -11.9476529573, 1e-11)
	near(t, "AUTO83B upper", e.Interval(0.95).Upper, -8.72521573266, 1e-11)

	screwsR, screwsC := pair("screws_two_sample.csv", "A2", "A1") // printed 1.959, 10, -.0131, .2031
	e = pooled(stats.Pooled(screwsR, screwsC))
	near(t, "screws p", second(e.TwoSided(0)), 0.0785657738572, 1e-11)
	near(t, "screws lower", e.Interval(0.95).Lower, -0.0130513340, 3e-9)
	near(t, "screws upper", e.Interval(0.95).Upper, 0.203051334, 2e-9)

	// Help of ci.mean2: printed SE .5408327, df 78, 7.023285, 9.176715.
	e = pooled(stats.Pooled(stats.Summary{N: 40, Mean: 11.3, SD: 2.1}, stats.Summary{N: 40, Mean: 19.4, SD: 2.7}))
	near(t, "summaries se", e.SE, 0.54083269132, 2e-11)
	near(t, "summaries lower", e.Interval(0.95).Lower, 7.02328482, 1e-9)
	near(t, "summaries upper", e.Interval(0.95).Upper, 9.17671518, 1e-9)

	// Student's sleep data, paired: printed -4.0621, 9, .002833.
	one, two := readings2(t, "r_sleep.csv", 1), readings2(t, "r_sleep.csv", 2)
	e = pooled(stats.Paired(stats.Summarize(stats.Differences(two, one, 1))))
	tee, p = e.TwoSided(0)
	near(t, "sleep t", tee, -4.06212768338, 1e-11)
	near(t, "sleep p", p, 0.00283289019738, 1e-11)

	// Boys' shoes, paired (from memory): printed d .41, t 3.35.
	shoes := stats.Differences(readings2(t, "bhh_shoes.csv", 1), readings2(t, "bhh_shoes.csv", 2), 1)
	e = pooled(stats.Paired(stats.Summarize(shoes)))
	tee, p = e.TwoSided(0)
	near(t, "shoes d", e.Value, 0.41, 1e-15)
	near(t, "shoes se", e.SE, 0.122429118, 5e-9)
	near(t, "shoes t", tee, 3.34887653622, 1e-12)
	near(t, "shoes p", p, 0.0085387807, 1e-8)

	for _, c := range []struct {
		name                        string
		column                      int
		paired                      bool
		lower, upper                float64
		ciLower, ciUpper, p, df, se float64
	}{
		{"var1 pooled", 2, false, -0.6, 0.6, -0.265996062075734, 0.595329395409067, 0.0482731510076147, 28, 0},
		{"var2 pooled", 3, false, -0.6, 0.6, 0.196945306497878, 0.928388026835454, 0.43169347692374, 28, 0},
		{"var1 paired", 2, true, -0.6, 0.6, -0.0744336620516462, 0.40376699538498, 0.00316688148926518, 14, 0.135751406786245},
		{"var2 paired", 3, true, -0.6, 0.6, 0.126165330509902, 0.999168002823431, 0.441203404601759, 14, 0.247827641078512},
	} {
		lots := readings(t, "tost_clinic.csv", 1, c.column)
		ref, cand := lots["2"], lots["1"]
		e := stats.Estimate{}
		if c.paired {
			e = pooled(stats.Paired(stats.Summarize(stats.Differences(ref, cand, 3))))
			near(t, c.name+" se", e.SE, c.se, 5e-15)
		} else {
			e = pooled(stats.Pooled(stats.Summarize(ref), stats.Summarize(cand)))
		}
		got := stats.TwoOneSided(e, c.lower, c.upper, 0.05)
		near(t, c.name+" df", e.DF, c.df, 0)
		near(t, c.name+" p", max(got.PLower, got.PUpper), c.p, 2e-13)
		near(t, c.name+" lower", got.Interval.Lower, c.ciLower, 5e-14)
		near(t, c.name+" upper", got.Interval.Upper, c.ciUpper, 1e-14)
	}
}

func second[A, B any](_ A, b B) B { return b }

func TestMeansErrors(t *testing.T) {
	one, flat, varied := stats.Summarize([]float64{1}), stats.Summarize([]float64{2, 2}), stats.Summarize([]float64{1, 2})
	pooled := func(r, c stats.Summary) error { _, err := stats.Pooled(r, c); return err }
	paired := func(d stats.Summary) error { _, err := stats.Paired(d); return err }
	spread := func(r, c []float64) error { _, err := stats.PitmanMorgan(r, c, 0.9); return err }
	contrast := func(r, c []float64) error { _, err := stats.PairedContrast(r, c); return err }
	ratio := func(ref ...float64) error {
		_, err := contrastOf(t, "welch", ref, []float64{3, 4, 5}).Interval(0.9)
		return err
	}
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"pooled, one reading", pooled(one, varied), stats.ErrTooFew},
		{"pooled, both constant", pooled(flat, flat), stats.ErrConstant},
		{"pooled, one constant", pooled(flat, varied), nil},
		{"paired, one difference", paired(one), stats.ErrTooFew},
		{"paired, equal differences", paired(flat), stats.ErrConstant},
		{"spread, two pairs", spread([]float64{1, 2}, []float64{1, 3}), stats.ErrTooFew},
		{"spread, unequal", spread([]float64{1, 2, 3}, []float64{1, 3}), stats.ErrUnequalLengths},
		{"spread, constant", spread([]float64{1, 1, 1}, []float64{1, 3, 4}), stats.ErrConstant},
		{"spread, on a line", spread([]float64{1, 2, 4}, []float64{3, 5, 9}), stats.ErrConstant},
		{"contrast, unequal", contrast([]float64{1, 2, 3}, []float64{1, 3}), stats.ErrUnequalLengths},
		{"contrast, one pair", contrast([]float64{1}, []float64{1}), stats.ErrTooFew},
		{"contrast, constant", contrast([]float64{1, 1}, []float64{3, 3}), stats.ErrConstant},
		{"ratio to about 0", ratio(-1, 0, 2), stats.ErrRatioUndefined},
		{"ratio", ratio(9, 10, 12), nil},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	if d := stats.Differences([]float64{12.001, 12.003}, []float64{12.003, 12.005}, 3); d[0] != 0.002 || d[1] != 0.002 {
		t.Errorf("differences: got %v, want twice 0.002", d)
	}
}

// One constant lot has the ratio interval of the other alone, and only where the
// reference varies is the interval lopsided.
func TestRatioOneConstant(t *testing.T) {
	tee := 2.9199855803537256 // qt(0.95, 2), R 4.2.2
	se := 1 / math.Sqrt(3)
	i := must[stats.Interval](t)(contrastOf(t, "welch", []float64{10, 10}, []float64{19, 20, 21}).Interval(0.90))
	near(t, "reference constant, lower", i.Lower, (20-tee*se)/10, 1e-15)
	near(t, "reference constant, upper", i.Upper, (20+tee*se)/10, 1e-15)
	i = must[stats.Interval](t)(contrastOf(t, "welch", []float64{19, 20, 21}, []float64{10, 10}).Interval(0.90))
	near(t, "candidate constant, lower", i.Lower, 10/(20+tee*se), 1e-15)
	near(t, "candidate constant, upper", i.Upper, 10/(20-tee*se), 1e-15)
}

// A ratio is inside its interval where neither one-sided test at it rejects.
func TestRatioIntervalIsTheTests(t *testing.T) {
	for _, kind := range []string{"welch", "pooled", "paired"} {
		rapid.Check(t, func(t *rapid.T) {
			ref, cand := lot(t, "ref"), lot(t, "cand")
			if kind == "paired" {
				n := min(len(ref), len(cand))
				ref, cand = ref[:n], cand[:n]
				if _, err := stats.PairedContrast(ref, cand); err != nil {
					return
				}
			}
			c := contrastOf(t, kind, ref, cand)
			i, err := c.Interval(0.90)
			if err != nil || stats.Summarize(ref).Mean < 0 {
				return
			}
			if !(i.Lower <= c.Value() && c.Value() <= i.Upper) {
				t.Fatalf("got %+v, want it about %v", i, c.Value())
			}
			// The roots are those nearest the estimate: just outside a test rejects.
			for _, end := range []struct{ outside, inside float64 }{
				{i.Lower - 1e-6*(c.Value()-i.Lower), i.Lower + 1e-6*(c.Value()-i.Lower)},
				{i.Upper + 1e-6*(i.Upper-c.Value()), i.Upper - 1e-6*(i.Upper-c.Value())},
			} {
				_, above := c.At(end.outside).Above(0)
				_, below := c.At(end.outside).Below(0)
				_, above2 := c.At(end.inside).Above(0)
				_, below2 := c.At(end.inside).Below(0)
				if min(above, below) >= 0.05 || min(above2, below2) <= 0.05 {
					t.Fatalf("%s: got p %v and %v outside, %v and %v inside, want below and above 0.05", kind, above, below, above2, below2)
				}
			}
		})
	}
}

// A ratio is the same whatever the unit and the sign of both lots.
func TestRatioUnits(t *testing.T) {
	for _, kind := range []string{"welch", "pooled", "paired"} {
		rapid.Check(t, func(t *rapid.T) {
			ref, cand := lot(t, "ref"), lot(t, "cand")
			if kind == "paired" {
				n := min(len(ref), len(cand))
				ref, cand = ref[:n], cand[:n]
				if _, err := stats.PairedContrast(ref, cand); err != nil {
					return
				}
			}
			minus := func(v float64) float64 { return math.Ldexp(-v, 300) }
			i, err := contrastOf(t, kind, ref, cand).Interval(0.90)
			j, err2 := contrastOf(t, kind, mapped(ref, minus), mapped(cand, minus)).Interval(0.90)
			if !errors.Is(err, err2) || err == nil && (!alike(i.Lower, j.Lower, 1e-12) || !alike(i.Upper, j.Upper, 1e-12)) {
				t.Fatalf("%s: got %+v %v, want %+v %v", kind, j, err2, i, err)
			}
		})
	}
}

// Exchanging the lots turns the spread ratio over, and no shift of a lot counts.
func TestPitmanMorganLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		n := min(len(ref), len(cand))
		ref, cand = ref[:n], cand[:n]
		a, err := stats.PitmanMorgan(ref, cand, 0.90)
		b, err2 := stats.PitmanMorgan(cand, mapped(ref, func(v float64) float64 { return v * 0x1p20 }), 0.90)
		if (err == nil) != (err2 == nil) {
			t.Fatalf("got %v, want %v", err2, err)
		}
		if err != nil {
			return
		}
		if !alike(a.SDRatio*b.SDRatio, 0x1p20, 1e-14) || !alike(a.Interval.Lower*b.Interval.Upper, 0x1p20, 1e-9) {
			t.Fatalf("got %+v, want %+v turned over", b, a)
		}
		if (a.P < 0.10) != (a.Interval.Lower > 1 || a.Interval.Upper < 1) {
			t.Fatalf("got p %v and %+v, want them to say the same", a.P, a.Interval)
		}
	})
}
