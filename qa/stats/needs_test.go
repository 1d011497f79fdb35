package stats_test

import (
	"slices"
	"testing"

	"lotpair/qa/stats"
)

func boreDiameter(t *testing.T) (ref, cand []float64) {
	t.Helper()
	lots := readings(t, "d1.csv", 0, 2)
	return lots["REF-0417"], lots["CAND-0931"]
}

// TestBoreDiameter holds every number of the canonical example to R 4 (t.test,
// var.test), as printed to nine or more digits.
func TestBoreDiameter(t *testing.T) {
	a, b := boreDiameter(t)
	ref, cand := stats.Summarize(a), stats.Summarize(b)
	near(t, "mean A", ref.Mean, 12.0039166667, 5e-12)
	near(t, "sd A", ref.SD, 0.00766880734, 1e-9)
	near(t, "mean B", cand.Mean, 12.0081666667, 5e-12)
	near(t, "sd B", cand.SD, 0.00885061203, 1e-9)
	e := welch(t, a, b)
	near(t, "difference", e.Value, 0.00425, 1e-12)
	near(t, "se", e.SE, 0.00338063036, 2e-9)
	near(t, "df", e.DF, 21.5630439, 3e-9)
	tee, p := e.TwoSided(0)
	near(t, "t", tee, 1.25716199, 4e-9)
	near(t, "p", p, 0.222141870, 3e-9)
	ci := e.Interval(0.95)
	near(t, "95 % lower", ci.Lower, -0.00276924463, 2e-9)
	near(t, "95 % upper", ci.Upper, 0.01126924463, 1e-9)

	wide := stats.TwoOneSided(e, -0.020, 0.020, 0.05)
	near(t, "90 % lower", wide.Interval.Lower, -0.00156020125, 4e-9)
	near(t, "90 % upper", wide.Interval.Upper, 0.01006020125, 1e-9)
	near(t, "p at 0.020", max(wide.PLower, wide.PUpper), 6.32458964e-05, 1e-9)
	// The sentinel: not shown by a hair.
	hair := stats.TwoOneSided(e, -0.010, 0.010, 0.05)
	near(t, "p at 0.010", max(hair.PLower, hair.PUpper), 0.0516733832, 1e-9)

	v, err := stats.FRatio(ref, cand, 0.90)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "SD ratio", v.SDRatio, 1.154105409, 1e-9)
	near(t, "SD ratio lower", v.Interval.Lower, 0.687512090, 1e-9)
	near(t, "SD ratio upper", v.Interval.Upper, 1.937361267, 1e-9)

	lower, upper := 11.950, 12.050
	near(t, "Ppk A", stats.Performance(a, ref, &lower, &upper).Ppk, 2.003, 3e-4)
	near(t, "Ppk B", stats.Performance(b, cand, &lower, &upper).Ppk, 1.576, 3e-4)
}

// upper90 is the upper end of the 90 % interval, the number that each misreading
// of the example changes in its own way.
func upper90(t *testing.T, ref, cand []float64) float64 {
	t.Helper()
	return welch(t, ref, cand).Interval(0.90).Upper
}

// TestFootRowReadAsData shows how 0.009575 arises: the row "Mean" under each lot
// taken as a thirteenth reading. A reader that gives it has misread.
func TestFootRowReadAsData(t *testing.T) {
	a, b := boreDiameter(t)
	a = append(slices.Clone(a), stats.Summarize(a).Mean)
	b = append(slices.Clone(b), stats.Summarize(b).Mean)
	near(t, "upper limit with foot rows", upper90(t, a, b), 0.009575, 6e-5)
}

// TestDoubledBlock shows how 0.009091 arises: the candidate's readings present
// twice, 12 beside 24. A reader that gives it has misread.
func TestDoubledBlock(t *testing.T) {
	a, b := boreDiameter(t)
	near(t, "upper limit with a doubled block", upper90(t, a, append(slices.Clone(b), b...)), 0.009091, 6e-5)
}

// TestOtherMisreadings shows the remaining wrong numbers of the example.
func TestOtherMisreadings(t *testing.T) {
	a, b := boreDiameter(t)
	blank := slices.Clone(b)
	blank[2] = 0
	slip := slices.Clone(b)
	slip[0] = 12008
	for _, c := range []struct {
		name      string
		ref, cand []float64
		want      float64
		allowed   float64
	}{
		{"read right", a, b, 0.010060, 5e-5},
		{"both blocks twice", append(slices.Clone(a), a...), append(slices.Clone(b), b...), 0.008176, 7e-5},
		{"12.022 dropped", a, append(slices.Clone(b[:10]), b[11]), 0.008662, 7e-5},
		{"limits and nominal as readings", append([]float64{12, 12.05, 11.95}, a...), append([]float64{12, 12.05, 11.95}, b...), 0.016101, 4e-5},
		{"12,008 read as 12008", a, slip, 2795, 2e-4},
	} {
		near(t, c.name, upper90(t, c.ref, c.cand), c.want, c.allowed)
	}
}
