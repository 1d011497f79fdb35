package stats

import (
	"math"

	"lotpair/qa/stats/dist"
)

// Power returns the probability that the design shows its aim, exact for normal
// readings.
//
// Two one-sided tests both reject where the standard deviation found is small
// enough, which is one integral over its distribution (Owen 1965, Biometrika 52,
// 437-446; Phillips 1990, J. Pharmacokinetics and Biopharmaceutics 18, 137-144,
// from memory); one-sided aims are a noncentral t; a two-sided difference counts
// both tails. Where the standard deviations differ, or the test is Welch's, a
// second integral goes over the share of the variance that either group has.
func (d Design) Power() (float64, error) {
	if err := d.check(); err != nil {
		return 0, err
	}
	return d.power(), nil
}

func (d Design) power() float64 {
	nr, nc := float64(d.NRef), float64(d.NCand)
	switch {
	case d.Paired:
		return d.shown(d.critical(nr-1), nr-1, d.SDRef/math.Sqrt(nr))
	case !d.Welch && d.SDRef == d.SDCand:
		// The difference is independent of both standard deviations, and the
		// pooled one of their ratio.
		mean := d.shown(d.critical(nr+nc-2), nr+nc-2, d.SDRef*math.Sqrt(1/nr+1/nc))
		if d.SpreadRatio == 0 {
			return mean
		}
		return mean * d.spread()
	}
	return d.unequal()
}

// critical is the t beyond which the aim's test rejects.
func (d Design) critical(df float64) float64 {
	tail := d.Alpha
	if d.Aim == AimDifference {
		tail /= 2
	}
	return -dist.StudentQuantile(tail, df)
}

// shown is the probability that the aim is shown where the critical value is t and
// the standard error found is se times S, df S^2 being chi-square. A bias is not in
// what is found, but the estimate varies by it as well: with w the root of the sum of
// both squares, t se S is t (se/w) times w S.
func (d Design) shown(t, df, se float64) float64 {
	if d.Bias > 0 {
		w := math.Hypot(se, d.Bias)
		t, se = t*(se/w), w
	}
	switch d.Aim {
	case AimNotLower:
		return dist.NoncentralTUpper(t, df, (d.Shift-d.Lower)/se)
	case AimNotHigher:
		return dist.NoncentralTUpper(t, df, (d.Upper-d.Shift)/se)
	case AimDifference:
		shift := math.Abs(d.Shift) / se
		return dist.NoncentralTUpper(t, df, shift) + dist.NoncentralTLower(-t, df, shift)
	case AimLower:
		return dist.NoncentralTUpper(t, df, -d.Shift/se)
	case AimHigher:
		return dist.NoncentralTUpper(t, df, d.Shift/se)
	}
	return dist.StudentBetween(t, df, (d.Shift-d.Lower)/se, (d.Upper-d.Shift)/se)
}

// near is about the power, with the degrees of freedom that the true standard
// deviations have in Welch's test: quick, and good enough to start a search.
func (d Design) near() float64 {
	if d.Paired || !d.Welch && d.SDRef == d.SDCand {
		return d.power()
	}
	w := d
	w.Welch = true
	df, se := w.expected()
	return d.shown(d.critical(df), df, se)
}

// unequal is the power where the standard error found does not follow one
// chi-square: Welch's test, or the pooled one of unequal standard deviations.
//
// Let X1 and X2 be the chi-squares of the two groups, n1-1 and n2-1 freedoms.
// Their sum X and the share B = X1/X are independent, X chi-square, B beta
// distributed. Given B the squared standard error found is X times a constant, and
// Welch's degrees of freedom are a constant, so that the inner integral is that of
// a single standard deviation.
func (d Design) unequal() float64 {
	nr, nc := float64(d.NRef), float64(d.NCand)
	d1, d2 := nr-1, nc-1
	df := d1 + d2
	// Of the larger standard deviation, so that no square overflows.
	unit := max(d.SDRef, d.SDCand)
	v1, v2 := (d.SDRef/unit)*(d.SDRef/unit), (d.SDCand/unit)*(d.SDCand/unit)
	se := math.Sqrt(v1/nr + v2/nc)
	pooled := d.critical(df)
	least := 0.0
	if d.SpreadRatio > 0 {
		least = d.spreadShare()
	}
	return dist.BetaIntegral(d1/2, d2/2, least, math.Inf(1), func(x, y float64) float64 {
		a, b := v1*x/d1, v2*y/d2 // variances found, over X
		t, found := pooled, (v1*x+v2*y)/df*(1/nr+1/nc)
		if d.Welch {
			found = a/nr + b/nc
			p, q := a/nr/found, b/nc/found
			t = d.critical(1 / (p*p/d1 + q*q/d2))
		}
		return d.shown(t*math.Sqrt(found*df)/se, df, se*unit)
	})
}
