package dist

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

var (
	freedom = rapid.Map(rapid.Float64Range(-0.3, 6), func(e float64) float64 { return math.Pow(10, e) })
	small   = rapid.Map(rapid.Float64Range(-290, -0.4), func(e float64) float64 { return math.Pow(10, e) })
)

// The probability of a quantile is the one asked for. A quantile is rounded,
// which moves its probability by t*density/tail roundings.
func TestStudentRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df, p := freedom.Draw(t, "df"), small.Draw(t, "p")
		q := StudentQuantile(p, df)
		if math.IsInf(q, -1) {
			return
		}
		got := StudentLower(q, df)
		moved := 1.0
		if !far(-q, df) {
			moved += studentPoint(q, df).power() / got
		} else {
			moved += df
		}
		if math.Abs(got-p) > p*(1e-13+moved*0x1p-50) {
			t.Fatalf("df %v: got p %v of quantile %v, want %v", df, got, q, p)
		}
		if above := StudentQuantile(1-p, df); p > 1e-3 && math.Abs(above+StudentQuantile(1-(1-p), df)) > 1e-13*above {
			t.Fatalf("df %v: got %v above, want %v", df, above, -q)
		}
	})
}

func TestFRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d1, d2, p := freedom.Draw(t, "d1"), freedom.Draw(t, "d2"), small.Draw(t, "p")
		f := FQuantile(p, d1, d2)
		if f < 1e-300 {
			return
		}
		got := FLower(f, d1, d2)
		moved := 1 + fPoint(f, d1, d2).power()/got
		if math.Abs(got-p) > p*(1e-12+moved*0x1p-50) {
			t.Fatalf("d %v %v: got p %v of quantile %v, want %v", d1, d2, got, f, p)
		}
	})
}

// Student's t squared is F with 1 and df degrees of freedom.
func TestStudentIsF(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df, v := freedom.Draw(t, "df"), rapid.Float64Range(1e-3, 30).Draw(t, "t")
		two, f := StudentTwoSided(v, df), FUpper(v*v, 1, df)
		if math.Abs(two-f) > two*(1e-13+v*v*0x1p-50) {
			t.Fatalf("got %v, want %v", two, f)
		}
	})
}

func TestOrder(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df, v := freedom.Draw(t, "df"), rapid.Float64Range(0, 40).Draw(t, "t")
		up, further := StudentUpper(v, df), StudentUpper(v*1.001+1e-6, df)
		if !(further < up) && up > 0 {
			t.Fatalf("got %v beyond %v, want less", further, up)
		}
		if sum := StudentLower(v, df) + up; math.Abs(sum-1) > 1e-14 {
			t.Fatalf("got tails adding to %v, want 1", sum)
		}
	})
}

func BenchmarkStudentUpper(b *testing.B) {
	for b.Loop() {
		StudentUpper(1.7, 21.5630439)
	}
}

func BenchmarkStudentQuantile(b *testing.B) {
	for b.Loop() {
		StudentQuantile(0.05, 21.5630439)
	}
}

func BenchmarkFQuantile(b *testing.B) {
	for b.Loop() {
		FQuantile(0.05, 11, 11)
	}
}
