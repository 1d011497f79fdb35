package dist

import (
	"math"
	"testing"
)

// TestPublished holds critical values and probabilities that others printed; the
// allowed error is half a unit of the last digit given.
func TestPublished(t *testing.T) {
	for _, c := range []struct {
		source     string
		name       string
		args       []float64
		want, half float64
	}{
		{"NIST handbook 1.3.5.9, JAHANMI2, printed .7756", "FQuantile", []float64{0.025, 239, 239}, 0.775563903, 5e-10},
		{"the same, printed .8080", "FQuantile", []float64{0.05, 239, 239}, 0.807980470, 5e-10},
		{"the same, printed 1.238", "FQuantile", []float64{0.95, 239, 239}, 1.237653678, 5e-10},
		{"the same, printed 1.289", "FQuantile", []float64{0.975, 239, 239}, 1.289384402, 5e-10},
		{"the same, printed .814808", "FLower", []float64{1.12303752331, 239, 239}, 0.814808534865, 1e-11},
		{"NIST handbook 7.3.2, printed 3.347", "FQuantile", []float64{0.95, 10, 8}, 3.34716312, 5e-9},
		{"the same with its s 4.9082 and 2.5874, printed .9589", "FLower", []float64{3.59847, 10, 8}, 0.9589, 5e-5},
		{"USP <1010>, printed 2.168", "FQuantile", []float64{0.95, 19, 19}, 2.16825160141, 5e-12},
		{"the same, printed .461", "FQuantile", []float64{0.05, 19, 19}, 0.461201089, 5e-10},
		{"NIST handbook 1.3.5.3, printed 1.9673", "StudentQuantile", []float64{0.975, 326}, 1.96726752226, 5e-12},
		{"the same, printed 5.273e-30 (two-sided)", "StudentTwoSided", []float64{-12.6205912887, 326}, 5.27293545661e-30, 1e-38},
		{"NIST handbook 7.2.2, printed 2.262", "StudentQuantile", []float64{0.975, 9}, 2.26215716, 5e-9},
		{"USP <1010> table 8, 99 %", "NormalQuantile", []float64{0.99}, 2.326, 5e-4},
		{"the same, 95 %", "NormalQuantile", []float64{0.95}, 1.645, 5e-4},
		{"the same, 90 %", "NormalQuantile", []float64{0.90}, 1.282, 5e-4},
		{"the same, 80 %", "NormalQuantile", []float64{0.80}, 0.842, 5e-4},
		{"ISO 14253-1 multiplier of a 5 % risk, from memory", "NormalQuantile", []float64{0.95}, 1.644853627, 5e-10},
		{"conformance at 2 u, from memory", "NormalLower", []float64{2}, 0.977249868, 5e-10},
	} {
		if got := functions[c.name](c.args); !(math.Abs(got-c.want) <= c.half) {
			t.Errorf("%s: %s(%v): got %.15g, want %.15g within %.2g", c.source, c.name, c.args, got, c.want, c.half)
		}
	}
}

// TestClosedForms: degrees of freedom for which the answer is elementary.
func TestClosedForms(t *testing.T) {
	alike := func(what string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 3e-15*math.Abs(want) {
			t.Errorf("%s: got %.17g, want %.17g", what, got, want)
		}
	}
	for _, v := range []float64{1e-9, 1e-3, 0.3, 1, 2, 17, 1e5, 1e90, 1e101, 1e160} {
		alike("Cauchy tail", StudentUpper(v, 1), math.Atan2(1, v)/math.Pi)
		if v < 1e5 {
			r := v / math.Sqrt(2+v*v)
			alike("two degrees, lower", StudentLower(v, 2), 0.5+r/2)
		}
		alike("F(2,2) lower", FLower(v, 2, 2), v/(1+v))
		alike("F(2,2) upper", FUpper(v, 2, 2), 1/(1+v))
		alike("F(2,6) upper", FUpper(v, 2, 6), math.Pow(1+v/3, -3))
	}
	for _, p := range []float64{1e-200, 1e-9, 0.01, 0.25, 0.4, 0.5, 0.75, 0.99} {
		alike("F(2,2) quantile", FQuantile(p, 2, 2), p/(1-p))
		if p != 0.5 {
			alike("Cauchy quantile", StudentQuantile(p, 1), -1/math.Tan(math.Pi*p))
		}
	}
}

func TestEdges(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		name string
		args []float64
		want float64
	}{
		{"StudentUpper", []float64{0, 7}, 0.5},
		{"StudentLower", []float64{0, 7}, 0.5},
		{"StudentTwoSided", []float64{0, 7}, 1},
		{"StudentUpper", []float64{inf, 7}, 0},
		{"StudentUpper", []float64{-inf, 7}, 1},
		{"StudentUpper", []float64{1.5, inf}, NormalUpper(1.5)},
		{"StudentUpper", []float64{1, 0}, nan},
		{"StudentUpper", []float64{1, -1}, nan},
		{"StudentUpper", []float64{nan, 5}, nan},
		{"StudentUpper", []float64{1, nan}, nan},
		{"StudentQuantile", []float64{0.5, 3.3}, 0},
		{"StudentQuantile", []float64{0, 3}, -inf},
		{"StudentQuantile", []float64{1, 3}, inf},
		{"StudentQuantile", []float64{0.01, inf}, NormalQuantile(0.01)},
		{"StudentQuantile", []float64{1e-300, 0.5}, -inf}, // about -1e599
		{"StudentQuantile", []float64{-0.1, 3}, nan},
		{"StudentQuantile", []float64{nan, 3}, nan},
		{"StudentQuantile", []float64{0.1, 0}, nan},
		{"FLower", []float64{-1, 2, 3}, 0},
		{"FUpper", []float64{0, 2, 3}, 1},
		{"FUpper", []float64{inf, 2, 3}, 0},
		{"FLower", []float64{1, 0, 3}, nan},
		{"FLower", []float64{1, 2, inf}, nan},
		{"FLower", []float64{nan, 2, 3}, nan},
		{"FQuantile", []float64{0, 2, 3}, 0},
		{"FQuantile", []float64{1, 2, 3}, inf},
		{"FQuantile", []float64{1e-300, 1, 1}, 0}, // about 1e-600
		{"FQuantile", []float64{2, 2, 3}, nan},
		{"FQuantile", []float64{0.5, 2, -3}, nan},
		{"NormalUpper", []float64{0}, 0.5},
		{"NormalUpper", []float64{inf}, 0},
		{"NormalUpper", []float64{-inf}, 1},
		{"NormalUpper", []float64{nan}, nan},
		{"NormalQuantile", []float64{0.5}, 0},
		{"NormalQuantile", []float64{0}, -inf},
		{"NormalQuantile", []float64{1}, inf},
		{"NormalQuantile", []float64{1.1}, nan},
		{"NormalQuantile", []float64{nan}, nan},
	} {
		got := functions[c.name](c.args)
		if got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s(%v): got %v, want %v", c.name, c.args, got, c.want)
		}
	}
}
