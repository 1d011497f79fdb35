package stats_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
	"lotpair/qa/stats/dist"
)

// contrasts are made of two lots, a name each.
func contrasts(t *rapid.T, ref, cand []float64) map[string]stats.Contrast {
	out := map[string]stats.Contrast{}
	n := min(len(ref), len(cand))
	x, y := stats.Summarize(ref), stats.Summarize(cand)
	for name, make := range map[string]func() (stats.Contrast, error){
		"Welch": func() (stats.Contrast, error) { return stats.WelchContrast(x, y) }, "pooled": func() (stats.Contrast, error) { return stats.PooledContrast(x, y) },
		"paired": func() (stats.Contrast, error) { return stats.PairedContrast(ref[:n], cand[:n]) },
	} {
		c, err := make()
		if err != nil && !errors.Is(err, stats.ErrConstant) {
			t.Fatal(err)
		}
		if err == nil {
			out[name] = c
		}
	}
	return out
}

// At the ends of the interval with a bias the test of the contrast just does not reject, inside it does not and outside it does;
// a bias widens, and one of nothing changes nothing.
func TestContrastWithBias(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		uRef, uCand := rapid.Float64Range(0, 1).Draw(t, "u ref"), rapid.Float64Range(0.001, 1).Draw(t, "u cand")
		for name, c := range contrasts(t, ref, cand) {
			plain, err1 := c.Interval(0.90)
			in, err2 := c.IntervalWithBias(0.90, uRef, uCand)
			if err1 != nil || err2 != nil {
				continue
			}
			if same, err := c.IntervalWithBias(0.90, 0, 0); err != nil || math.Abs(same.Lower-plain.Lower)+math.Abs(same.Upper-plain.Upper) > 1e-9*(1+math.Abs(plain.Upper)) {
				t.Fatalf("%s, no bias: got %+v, %v, want %+v", name, same, err, plain)
			}
			p := func(theta float64) float64 {
				e := c.AtWithBias(theta, uRef, uCand)
				se := c.At(theta).SE
				if want := math.Sqrt(se*se + uCand*uCand + theta*theta*uRef*uRef); math.Abs(e.SE-want) > 1e-12*want {
					t.Fatalf("%s: got standard error %v, want %v", name, e.SE, want)
				}
				_, above := e.Above(0)
				_, below := e.Below(0)
				return min(above, below)
			}
			width := in.Upper - in.Lower
			for _, end := range []float64{in.Lower, in.Upper} {
				if got := p(end); math.Abs(got-0.05) > 1e-7 {
					t.Fatalf("%s: got p %v at the end %v of %+v, want 0.05", name, got, end, in)
				}
			}
			if p(in.Lower+width/100) < 0.05 || p(in.Upper-width/100) < 0.05 || p(in.Lower-width/100) > 0.05 || p(in.Upper+width/100) > 0.05 {
				t.Fatalf("%s: got p %v and %v inside the ends of %+v, %v and %v outside", name, p(in.Lower+width/100), p(in.Upper-width/100), in, p(in.Lower-width/100), p(in.Upper+width/100))
			}
		}
	})
}

// With a bias that is normal and not seen, the test of a true ratio rejects it as often as alpha says: over all standard
// deviations that may be found, by the middles of 2000 equal parts of their chi-square distribution. It is Satterthwaite's
// approximation, whose error is seen here.
func TestContrastBiasRate(t *testing.T) {
	const sd, theta, parts = 0.4, 1.1, 2000
	for _, n := range []int{6, 12, 30} {
		for _, u := range []float64{0.02, 0.1, 0.3} {
			df := float64(2*n - 2)
			k := (1 + theta*theta) / float64(n)
			bias := math.Hypot(u, theta*u/2)
			true2 := sd*sd*k + bias*bias
			rate := 0.0
			for i := range parts {
				s := sd * math.Sqrt(dist.ChiSquareQuantile((float64(i)+0.5)/parts, df)/df)
				summary := func(mean float64) stats.Summary { return stats.Summary{N: n, Mean: mean, SD: s} }
				c, err := stats.PooledContrast(summary(10), summary(10*theta))
				if err != nil {
					t.Fatal(err)
				}
				e := c.AtWithBias(theta, u/2, u)
				rate += dist.NormalLower(dist.StudentQuantile(0.05, e.DF)*e.SE/math.Sqrt(true2)) / parts
			}
			if math.Abs(rate-0.05) > 0.003 {
				t.Errorf("%d a lot, uncertainty %v: got a rate of %v, want 0.05 within 0.003", n, u, rate)
			}
		}
	}
}
