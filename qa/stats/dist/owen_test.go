package dist

import (
	"math"
	"path/filepath"
	"testing"

	"pgregory.net/rapid"
)

func init() {
	functions["ChiSquareLower"] = func(a []float64) float64 { return ChiSquareLower(a[0], a[1]) }
	functions["ChiSquareUpper"] = func(a []float64) float64 { return ChiSquareUpper(a[0], a[1]) }
	functions["ChiSquareQuantile"] = func(a []float64) float64 { return ChiSquareQuantile(a[0], a[1]) }
	functions["OwenQ1"] = func(a []float64) float64 { return OwenQ1(a[0], a[1], a[2], a[3]) }
	functions["OwenQ2"] = func(a []float64) float64 { return OwenQ2(a[0], a[1], a[2], a[3]) }
	functions["StudentBetween"] = func(a []float64) float64 { return StudentBetween(a[0], a[1], a[2], a[3]) }
}

// TestOwenTables: owen.txt is made by refowen.py.
func TestOwenTables(t *testing.T) { testTable(t, filepath.Join("testdata", "owen.txt")) }

// TestOwenPublished holds Owen's Q to 20 printed digits (tests of the R package
// OwenQ by S. Laurent, commit 68d893c4; Owen 1965 for the definition).
func TestOwenPublished(t *testing.T) {
	for _, c := range []struct{ df, q1, q2 float64 }{
		{1, 0.52485658843054409291, 5.7330314375838782335e-7},
		{2, 0.62938193306526904118, 3.7266531720786709899e-6},
		{3, 0.68001173355723140333, 0.000015440498291040247642},
		{4, 0.71048916647247223585, 0.000050309817486816081076},
		{5, 0.73097050978732740047, 0.00013933372105156197162},
		{6, 0.74563903448183001384, 0.00034145176657217697536},
		{7, 0.75650064658430460294, 0.00075875604691111263929},
		{8, 0.76456656856157965989, 0.0015541802819728694091},
		{9, 0.77030437685878389173, 0.0029690444288361936486},
		{10, 0.77383547873740988537, 0.0053365202327988767708},
	} {
		if got := OwenQ1(c.df, 3, 2, 5); !(math.Abs(got-c.q1) <= 1e-14) {
			t.Errorf("Q1(%v, 3, 2, 5): got %.17g, want %.17g", c.df, got, c.q1)
		}
		if got := OwenQ2(c.df, 3, 2, 5); !(math.Abs(got-c.q2) <= 1e-14*c.q2+1e-17) {
			t.Errorf("Q2(%v, 3, 2, 5): got %.17g, want %.17g", c.df, got, c.q2)
		}
	}
	if got := OwenQ1(1, 3, 2, 1); !(math.Abs(got-0.219018703856082) <= 1e-15) {
		t.Errorf("Q1(1, 3, 2, 1): got %.17g, want 0.219018703856082", got)
	}
}

func TestOwenEdges(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		name string
		args []float64
		want float64
	}{
		{"ChiSquareLower", []float64{-1, 3}, 0},
		{"ChiSquareUpper", []float64{0, 3}, 1},
		{"ChiSquareUpper", []float64{inf, 3}, 0},
		{"ChiSquareLower", []float64{1, 0}, nan},
		{"ChiSquareLower", []float64{nan, 3}, nan},
		{"ChiSquareLower", []float64{1, inf}, nan},
		{"ChiSquareQuantile", []float64{0, 3}, 0},
		{"ChiSquareQuantile", []float64{1, 3}, inf},
		{"ChiSquareQuantile", []float64{1e-300, 0.5}, 0},
		{"ChiSquareQuantile", []float64{0.5, -3}, nan},
		{"ChiSquareQuantile", []float64{nan, 3}, nan},
		{"OwenQ1", []float64{3, 1, 2, 0}, 0},
		{"OwenQ2", []float64{3, 1, 2, inf}, 0},
		{"OwenQ1", []float64{3, 1, 2, -1}, nan},
		{"OwenQ1", []float64{0, 1, 2, 1}, nan},
		{"OwenQ1", []float64{3, nan, 2, 1}, nan},
		{"StudentBetween", []float64{1.7, 18, -1, 1}, 0},
		{"StudentBetween", []float64{1.7, 18, -inf, 1}, 0},
		{"StudentBetween", []float64{1.7, 18, inf, inf}, 1},
		{"StudentBetween", []float64{1.7, 18, inf, 2}, NoncentralTUpper(1.7, 18, 2)},
		{"StudentBetween", []float64{1.7, 18, 2, inf}, NoncentralTUpper(1.7, 18, 2)},
		{"StudentBetween", []float64{0, 18, 2, 2}, nan},
		{"StudentBetween", []float64{1.7, 0, 2, 2}, nan},
		{"StudentBetween", []float64{1.7, 18, nan, 2}, nan},
	} {
		got := functions[c.name](c.args)
		if got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s(%v): got %v, want %v", c.name, c.args, got, c.want)
		}
	}
}

// Both parts of Owen's integral add to the noncentral t, and a far second limit
// changes nothing.
func TestOwenIsNoncentral(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df := math.Pow(10, rapid.Float64Range(0, 4).Draw(t, "log df"))
		v, delta := rapid.Float64Range(0.1, 8).Draw(t, "t"), rapid.Float64Range(-3, 9).Draw(t, "delta")
		r := math.Sqrt(df) * rapid.Float64Range(0, 3).Draw(t, "r")
		whole := NoncentralTLower(v, df, delta)
		if got := OwenQ1(df, v, delta, r) + OwenQ2(df, v, delta, r); math.Abs(got-whole) > 1e-13 {
			t.Fatalf("got %v, want %v", got, whole)
		}
		one := NoncentralTUpper(v, df, delta)
		if got := StudentBetween(v, df, delta, 40+v*40); math.Abs(got-one) > 1e-12*one+1e-300 && df > 3 {
			t.Fatalf("df %v, t %v, delta %v: got %v with a far limit, want %v", df, v, delta, got, one)
		}
	})
}

// Chi-square is a limit of F, with the freedoms of the numerator.
func TestChiSquareTails(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df := freedom.Draw(t, "df")
		x := df * rapid.Float64Range(0.01, 4).Draw(t, "x")
		lower, upper := ChiSquareLower(x, df), ChiSquareUpper(x, df)
		if math.Abs(lower+upper-1) > 1e-14 {
			t.Fatalf("got tails adding to %v, want 1", lower+upper)
		}
		if further := ChiSquareUpper(x*1.0001, df); further > upper {
			t.Fatalf("got %v further out, want at most %v", further, upper)
		}
		p := rapid.Float64Range(1e-12, 1).Draw(t, "p")
		if got := ChiSquareLower(ChiSquareQuantile(p, df), df); math.Abs(got-p) > 1e-12*p*math.Max(1, math.Sqrt(df)/10) {
			t.Fatalf("got p %v of the quantile, want %v", got, p)
		}
	})
}

func BenchmarkStudentBetween(b *testing.B) {
	t := -StudentQuantile(0.05, 98)
	for b.Loop() {
		StudentBetween(t, 98, 3.5, 2.5)
	}
}

func BenchmarkChiSquareQuantile(b *testing.B) {
	for b.Loop() {
		ChiSquareQuantile(0.05, 29)
	}
}
