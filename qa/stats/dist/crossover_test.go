package dist

import (
	"math"
	"testing"
)

// TestCrossover holds the chance that two one-sided tests both reject to sizes and
// powers of two-period crossover studies on the log scale: N-2 freedoms, standard
// error sigma sqrt(2/N), sigma^2 = log(1 + CV^2), margin log 0.8 to log 1.25. The
// sizes are those of Diletti, Hauschke & Steinijans (1991, Int. J. Clinical
// Pharmacology 29, 1-8) from memory, recomputed from Owen's Q.
func TestCrossover(t *testing.T) {
	power := func(n, cv, theta float64) float64 {
		se := math.Sqrt(math.Log1p(cv*cv) * 2 / n)
		shift := math.Log(theta)
		return StudentBetween(-StudentQuantile(0.05, n-2), n-2, (shift-math.Log(0.8))/se, (math.Log(1.25)-shift)/se)
	}
	cvs := []float64{0.10, 0.125, 0.15, 0.175, 0.20, 0.225, 0.25, 0.275, 0.30}
	for _, c := range []struct {
		theta, power float64
		sizes        []float64
	}{
		{0.95, 0.8, []float64{8, 10, 12, 16, 20, 24, 28, 34, 40}},
		{1.00, 0.8, []float64{6, 8, 10, 14, 16, 20, 24, 28, 32}},
		{1.05, 0.8, []float64{8, 10, 12, 16, 18, 24, 28, 34, 38}},
		{0.95, 0.9, []float64{8, 12, 16, 20, 26, 32, 38, 44, 52}},
		{1.00, 0.9, []float64{8, 10, 12, 16, 20, 24, 28, 34, 40}},
	} {
		for i, cv := range cvs {
			n := 4.0
			for power(n, cv, c.theta) < c.power {
				n += 2
			}
			if n != c.sizes[i] {
				t.Errorf("CV %v, ratio %v, power %v: got %v, want %v", cv, c.theta, c.power, n, c.sizes[i])
			}
		}
	}
	// Phillips 1990, J. Pharmacokinetics and Biopharmaceutics 18, 137-144, figure 1:
	// n 9, sigma 10, margin 20, 7 freedoms; the figure prints no digits.
	se := 10 * math.Sqrt(2.0/9)
	for i, want := range []float64{0.968205, 0.885884, 0.605003, 0.246583} {
		d := float64(5 * i)
		if got := StudentBetween(-StudentQuantile(0.05, 7), 7, (20+d)/se, (20-d)/se); math.Abs(got-want) > 5e-7 {
			t.Errorf("difference %v: got %.7f, want %v", d, got, want)
		}
	}
}
