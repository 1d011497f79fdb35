package stats_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestNormalityAgainstR holds W and p to R's shapiro.test.
func TestNormalityAgainstR(t *testing.T) {
	answers(t, "normality.txt", 70, func(x, _ []float64, what string) (float64, float64) {
		s := must[stats.Normality](t)(stats.ShapiroWilk(x))
		return map[string]float64{"w": s.W, "p": s.P}[what], 0
	})
}

// TestPublishedNormality: Shapiro & Wilk 1965 (printed W .79), Royston 1992 (.8078,
// .018) and SciPy's tests. The critical values of the 1965 table belong to other
// weights and are not used.
func TestPublishedNormality(t *testing.T) {
	for _, c := range []struct {
		file          string
		w, p, allowed float64
	}{
		{"shapiro_mens_weights.csv", 0.788814694835, 0.0067038140565, 1e-10},
		{"shapiro_royston1992.csv", 0.807828817767, 0.0180465884223, 1e-10},
		{"shapiro_original25.csv", 0.83466627531817, 0.000913490481813, 1e-10},
	} {
		s := must[stats.Normality](t)(stats.ShapiroWilk(readings(t, c.file, 0, 1)["y"]))
		near(t, c.file+" W", s.W, c.w, 1e-12)
		near(t, c.file+" p", s.P, c.p, c.allowed)
	}
}

// TestPublishedESD holds every step to the NIST/SEMATECH e-Handbook 1.3.5.17.3,
// Rosner's readings: 3 of 10 sought are outlying.
func TestPublishedESD(t *testing.T) {
	var x []float64
	for _, line := range lines(t, "nist_rosner_esd.csv") {
		if line != "y" && !strings.HasPrefix(line, "#") {
			x = append(x, number(t, line))
		}
	}
	steps, found, err := stats.GeneralizedESD(x, 10, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	r := []float64{3.118906, 2.942973, 3.179424, 2.810181, 2.815580, 2.848172, 2.279327, 2.310366, 2.101581, 2.067178}
	lambda := []float64{3.158794, 3.151430, 3.143890, 3.136165, 3.128247, 3.120128, 3.111796, 3.103243, 3.094456, 3.085425}
	for i, s := range steps {
		near(t, "R", s.R, r[i], 2.5e-7)
		near(t, "lambda", s.Lambda, lambda[i], 2e-7)
	}
	if found != 3 || x[steps[0].Index] != 6.01 || x[steps[1].Index] != 5.42 || x[steps[2].Index] != 5.34 {
		t.Errorf("got %d, %+v, want 3: 6.01, 5.42, 5.34", found, steps)
	}
}

func TestCutOff(t *testing.T) {
	// A curve from -8 to 8 of a standard deviation 5: cut, and whole.
	var whole, cut []float64
	for i := range 400 {
		v := 5 * normalPlace(float64(i)+0.5, 400)
		whole = append(whole, v)
		if math.Abs(v) <= 8 {
			cut = append(cut, v)
		}
	}
	for _, upper := range []bool{true, false} {
		limit := 8.0
		if !upper {
			limit = -8
		}
		c := must[stats.CutOff](t)(stats.CutOffAt(cut, stats.Summarize(cut), limit, upper))
		if c.Beyond != 0 || !(c.P < 0.001) {
			t.Errorf("cut: got %+v, want none beyond and a small p", c)
		}
		c = must[stats.CutOff](t)(stats.CutOffAt(whole, stats.Summarize(whole), limit, upper))
		if !(c.P > 0.2) {
			t.Errorf("whole: got %+v, want p above 0.2", c)
		}
	}
	// 8 inside and none beyond, mean 0 and SD 1 given, limit 1: share beyond by R
	// 4.2.2, d <- pnorm(1:2) - pnorm(0:1); (1 - d[2]/sum(d))^8.
	x := []float64{0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 1}
	c := must[stats.CutOff](t)(stats.CutOffAt(x, stats.Summary{N: 8, SD: 1}, 1, true))
	near(t, "p", c.P, 0.0684824430724239, 1e-12)
	far := must[stats.CutOff](t)(stats.CutOffAt(x, stats.Summarize(x), 1e9, true))
	if far.P != 1 || far.Inside != 0 {
		t.Errorf("far limit: got %+v, want p 1", far)
	}
}

// normalPlace is the quantile of place/n by halving.
func normalPlace(place, n float64) float64 {
	z := 0.0
	for step := 4.0; step > 1e-9; step /= 2 {
		if 0.5*math.Erfc(-z/math.Sqrt2) < place/n {
			z += step
		} else {
			z -= step
		}
	}
	return z
}

func TestEffectiveN(t *testing.T) {
	for _, c := range []struct {
		n    int
		r    float64
		want float64
	}{{30, 0.5, 10}, {30, 0, 30}, {30, -0.5, 30}, {30, 0.99, 1}, {30, 1, 30}, {30, math.NaN(), 30}, {9, 0.25, 5.4}} {
		near(t, "effective n", stats.EffectiveN(c.n, c.r), c.want, 1e-15)
	}
}

func TestChecksErrors(t *testing.T) {
	shapiro := func(x []float64) error { _, err := stats.ShapiroWilk(x); return err }
	esd := func(x ...float64) error { _, _, err := stats.GeneralizedESD(x, 3, 0.05); return err }
	cut := func(s stats.Summary) error { _, err := stats.CutOffAt(nil, s, 1, true); return err }
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"normality, two readings", shapiro([]float64{1, 2}), stats.ErrTooFew},
		{"normality, 5001 readings", shapiro(make([]float64, 5001)), stats.ErrBeyondMethod},
		{"normality, constant", shapiro([]float64{0.1, 0.1, 0.1}), stats.ErrConstant},
		{"outlying, two readings", esd(1, 2), stats.ErrTooFew},
		{"outlying, constant", esd(0.1, 0.1, 0.1), stats.ErrConstant},
		{"outlying, one apart", esd(1, 1, 1, 5), nil},
		{"cut-off, one reading", cut(stats.Summary{N: 1}), stats.ErrTooFew},
		{"cut-off, constant", cut(stats.Summary{N: 5}), stats.ErrConstant},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	if got := []int{stats.ESDSought(5), stats.ESDSought(54), stats.ESDSought(500)}; got[0] != 1 || got[1] != 5 || got[2] != 10 {
		t.Errorf("sought: got %v, want 1, 5, 10", got)
	}
}

// Neither scale nor sign changes W or the outlying readings; the first step is
// Grubbs' reading.
func TestChecksLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := lot(t, "x")
		if len(x) < 3 {
			return
		}
		minus := mapped(x, func(v float64) float64 { return math.Ldexp(-v, 100) })
		a, errA := stats.ShapiroWilk(x)
		b, errB := stats.ShapiroWilk(minus)
		if errA != nil || errB != nil || !alike(a.W, b.W, 1e-14) || !(a.W > 0 && a.W <= 1) || !(a.P >= 0 && a.P <= 1) {
			t.Fatalf("got %+v %v, want %+v %v", b, errB, a, errA)
		}
		steps, found, err := stats.GeneralizedESD(x, stats.ESDSought(len(x)), 0.05)
		g, errG := stats.GrubbsTest(x)
		if err != nil || errG != nil || steps[0].Index != g.Index || !alike(steps[0].R, g.G, 1e-15) {
			t.Fatalf("got %+v %v, want the first at %+v", steps, err, g)
		}
		if len(steps) == 1 && (found == 1) != (g.P < 0.05) {
			t.Fatalf("got %d found, want as p %v says", found, g.P)
		}
	})
}

// Each step is the reading farthest from the mean of those left, by summing them
// anew.
func TestESDSteps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := lot(t, "x")
		if len(x) < 3 {
			return
		}
		if rapid.Bool().Draw(t, "wild") {
			x[len(x)/2] = math.Ldexp(x[len(x)/2], rapid.IntRange(0, 200).Draw(t, "power"))
		}
		steps, _, err := stats.GeneralizedESD(x, 10, 0.05)
		if err != nil {
			t.Fatal(err)
		}
		left := x
		for _, s := range steps {
			g, err := stats.GrubbsTest(left)
			if len(left) < 3 || err != nil || !alike(g.G, s.R, 1e-14) || left[g.Index] != x[s.Index] && !alike(g.G, s.R, 1e-15) {
				t.Fatalf("got %+v, want %+v %v of %v", s, g, err, left)
			}
			at := g.Index
			for i, v := range left {
				if v == x[s.Index] {
					at = i
					break
				}
			}
			left = append(append([]float64{}, left[:at]...), left[at+1:]...)
		}
	})
}
