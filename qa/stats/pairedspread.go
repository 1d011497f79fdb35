package stats

import (
	"fmt"
	"math"

	"lotpair/qa/stats/dist"
)

// A PairedSpreadDesign is a study of the ratio of standard deviations of the same
// parts in two lots that has not been made: N normal pairs of the Correlation given,
// whose true ratio of standard deviations, candidate over reference, is Ratio, and
// which is to be shown to lie below Asked by the upper end of the interval of
// PitmanMorgan at level 1 - 2 Alpha.
type PairedSpreadDesign struct {
	N                  int
	Ratio, Correlation float64
	Asked, Alpha       float64
}

func (d PairedSpreadDesign) check() error {
	above := func(v float64) bool { return v > 0 && !math.IsInf(v, 1) }
	switch {
	case d.N < 3:
		return ErrTooFew
	case !above(d.Ratio) || !above(d.Asked):
		return fmt.Errorf("ratios: found %v and %v, want numbers above 0", d.Ratio, d.Asked)
	case !(math.Abs(d.Correlation) < 1):
		return fmt.Errorf("correlation: found %v, want a number between -1 and 1", d.Correlation)
	case !(d.Alpha > 0 && d.Alpha < 0.5):
		return fmt.Errorf("alpha: found %v, want a number above 0 and below 0.5", d.Alpha)
	}
	return nil
}

// Power returns the probability that the design shows its aim, exact for normal pairs.
//
// With R the ratio asked, the ratio is R where candidate - R reference and candidate +
// R reference are not correlated (Pitman 1939, Biometrika 31, 9-12, from memory); it
// is shown to lie below where their correlation is found far enough below 0. With h
// that correlation and its root
//
//	h = (R^2 - w^2)/sqrt((R^2 + w^2)^2 - 4 r^2 w^2 R^2), g = h/sqrt(1 - h^2)
//
// for the true ratio w and the correlation r of the pairs, t of the correlation found
// is (Z + g A) sqrt(n-2)/B, Z normal, A^2 and B^2 chi-squares of n-1 and n-2 freedoms,
// all independent: given A, a slope's noncentral t. A^2 + B^2 is a chi-square of
// 2n-3 freedoms and independent of A's share of it, so that given the share Z over
// the root of the sum is a t.
func (d PairedSpreadDesign) Power() (float64, error) {
	if err := d.check(); err != nil {
		return 0, err
	}
	return d.power(), nil
}

func (d PairedSpreadDesign) power() float64 {
	n := float64(d.N)
	w := d.Ratio / d.Asked // so that R is 1
	// 1 - h^2 is 4 w^2 (1 - r^2) over the same, without a difference of near equals.
	g := (1 - w) * (1 + w) / (2 * w * math.Sqrt((1-d.Correlation)*(1+d.Correlation)))
	t := -dist.StudentQuantile(d.Alpha, n-2) / math.Sqrt(n-2)
	df := 2*n - 3
	return dist.BetaIntegral((n-1)/2, (n-2)/2, 0, math.Inf(1), func(x, y float64) float64 {
		return dist.StudentUpper(math.Sqrt(df)*(t*math.Sqrt(y)-g*math.Sqrt(x)), df)
	})
}

// PairedSpreadSize returns the smallest number of pairs, at least 3, with which the
// design shows its aim with at least the given power. It returns ErrBeyondMargin where
// the true ratio is not below the one asked. N of d is not read.
func PairedSpreadSize(d PairedSpreadDesign, power float64) (int, error) {
	d.N = 3
	if err := d.check(); err != nil {
		return 0, err
	}
	if err := targets(1, power); err != nil {
		return 0, err
	}
	if d.Ratio >= d.Asked {
		return 0, ErrBeyondMargin
	}
	at := func(n int) float64 {
		e := d
		e.N = n
		return e.power()
	}
	z := max(0.1, -dist.NormalQuantile(d.Alpha)+dist.NormalQuantile(power))
	// The logarithm of the ratio has about the variance (1 - r^2)/n.
	guess := square(z/math.Log(d.Asked/d.Ratio))*(1-square(d.Correlation)) + 3
	n, _, err := smallest(at, 3, guess, power)
	return n, err
}
