package dist

import (
	"bufio"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func init() {
	functions["NoncentralTLower"] = func(a []float64) float64 { return NoncentralTLower(a[0], a[1], a[2]) }
	functions["NoncentralTUpper"] = func(a []float64) float64 { return NoncentralTUpper(a[0], a[1], a[2]) }
	functions["NoncentralTQuantile"] = func(a []float64) float64 { return NoncentralTQuantile(a[0], a[1], a[2]) }
}

// TestNoncentralTables: noncentral.txt is made by refnoncentral.py from a series,
// where the package integrates.
func TestNoncentralTables(t *testing.T) {
	testTable(t, filepath.Join("testdata", "noncentral.txt"))
}

// TestNoncentralPublished holds the probabilities printed with AS 243 (Lenth
// 1989, Applied Statistics 38, 185-189); the allowed error is that of the print.
func TestNoncentralPublished(t *testing.T) {
	file, err := os.Open(filepath.Join("testdata", "as243.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	rows := 0
	for lines := bufio.NewScanner(file); lines.Scan(); {
		line := lines.Text()
		if strings.HasPrefix(line, "#") || strings.HasPrefix(line, "x") {
			continue
		}
		var x, delta, df, want, exact float64
		if _, err := fmt.Sscanf(strings.ReplaceAll(line, ",", " "), "%g %g %g %g %g", &x, &delta, &df, &want, &exact); err != nil {
			t.Fatalf("as243.csv: found %q: %v", line, err)
		}
		got := NoncentralTLower(x, df, delta)
		if !(math.Abs(got-want) <= 1e-10) {
			t.Errorf("P(T <= %v), df %v, delta %v: got %.15g, want %.15g as printed", x, df, delta, got, want)
		}
		if !(math.Abs(got-exact) <= 1e-14*exact) {
			t.Errorf("P(T <= %v), df %v, delta %v: got %.17g, want %.17g", x, df, delta, got, exact)
		}
		rows++
	}
	if rows != 30 {
		t.Errorf("got %d rows, want 30", rows)
	}
}

func TestNoncentralEdges(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		name string
		args []float64
		want float64
	}{
		{"NoncentralTLower", []float64{0, 7, 0}, 0.5},
		{"NoncentralTLower", []float64{inf, 7, 3}, 1},
		{"NoncentralTUpper", []float64{inf, 7, 3}, 0},
		{"NoncentralTLower", []float64{-inf, 7, -3}, 0},
		{"NoncentralTLower", []float64{1.5, 7, 0}, StudentLower(1.5, 7)},
		{"NoncentralTUpper", []float64{1.5, inf, 3}, NormalUpper(-1.5)},
		{"NoncentralTUpper", []float64{-1.5, inf, -3}, NormalUpper(1.5)},
		{"NoncentralTLower", []float64{1, 7, 1000}, 0},
		{"NoncentralTUpper", []float64{1, 7, 1000}, 1},
		{"NoncentralTLower", []float64{-1e9, 1e6, 1}, 0},
		{"NoncentralTLower", []float64{1, 0, 2}, nan},
		{"NoncentralTLower", []float64{1, 0.49, 2}, nan},
		{"NoncentralTUpper", []float64{1.7, 18, 1e300}, 1},
		{"NoncentralTLower", []float64{-1.7, 18, 1e300}, 0},
		{"NoncentralTLower", []float64{0, 18, 1e60}, 0},
		{"NoncentralTLower", []float64{1e60, 4, 1e60}, ChiSquareUpper(4, 4)},
		{"NoncentralTUpper", []float64{1e300, 7, 3}, 0},
		{"NoncentralTLower", []float64{-1e300, 7, 3}, 0},
		{"NoncentralTQuantile", []float64{0.5, 3, 1e60}, nan},
		{"NoncentralTLower", []float64{nan, 3, 2}, nan},
		{"NoncentralTLower", []float64{1, 3, nan}, nan},
		{"NoncentralTLower", []float64{1, 3, inf}, nan},
		{"NoncentralTQuantile", []float64{0, 3, 2}, -inf},
		{"NoncentralTQuantile", []float64{1, 3, 2}, inf},
		{"NoncentralTQuantile", []float64{0.2, 3, 0}, StudentQuantile(0.2, 3)},
		{"NoncentralTQuantile", []float64{0.2, inf, 2}, 2 + NormalQuantile(0.2)},
		{"NoncentralTQuantile", []float64{1.1, 3, 2}, nan},
		{"NoncentralTQuantile", []float64{nan, 3, 2}, nan},
		{"NoncentralTQuantile", []float64{0.5, -3, 2}, nan},
		{"NoncentralTQuantile", []float64{0.5, 3, inf}, nan},
		{"NoncentralTQuantile", []float64{1e-300, 0.5, 2}, -inf},
	} {
		got := functions[c.name](c.args)
		if got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s(%v): got %v, want %v", c.name, c.args, got, c.want)
		}
	}
}

// The tails add to 1, exchanging the sign of everything exchanges them, and the
// probability at 0 is the normal one.
func TestNoncentralTails(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df := freedom.Draw(t, "df")
		delta := rapid.Float64Range(-60, 60).Draw(t, "delta")
		v := rapid.Float64Range(-200, 200).Draw(t, "t")
		lower, upper := NoncentralTLower(v, df, delta), NoncentralTUpper(v, df, delta)
		if math.Abs(lower+upper-1) > 1e-14 {
			t.Fatalf("got tails adding to %v, want 1", lower+upper)
		}
		if mirrored := NoncentralTUpper(-v, df, -delta); mirrored != lower {
			t.Fatalf("got %v mirrored, want %v", mirrored, lower)
		}
		if further := NoncentralTLower(v, df, delta+0.01); further > lower*(1+1e-12) {
			t.Fatalf("got %v for a larger delta, want less than %v", further, lower)
		}
		zero := NoncentralTLower(0, df, delta)
		if want := NormalLower(-delta); math.Abs(zero-want) > 1e-12*want {
			t.Fatalf("at 0: got %v, want %v", zero, want)
		}
	})
}

// The probability of a quantile is the one asked for, but for the rounding of the
// quantile itself.
func TestNoncentralRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		df := math.Pow(10, rapid.Float64Range(0, 6).Draw(t, "log df"))
		delta := rapid.Float64Range(-80, 80).Draw(t, "delta")
		p := math.Pow(10, rapid.Float64Range(-12, -0.31).Draw(t, "log p"))
		q := NoncentralTQuantile(p, df, delta)
		got := NoncentralTLower(q, df, delta)
		moved := math.Abs(q) * noncentralDensity(q, df, delta) / p
		if !(math.Abs(got-p) <= p*(1e-12+moved*2e-13)) {
			t.Fatalf("df %v delta %v: got p %v of quantile %v, want %v", df, delta, got, q, p)
		}
	})
}

// FuzzNoncentral: whatever the arguments, an answer is a probability or NaN, in
// finite time.
func FuzzNoncentral(f *testing.F) {
	for _, c := range [][4]float64{
		{1.5, 58, 2, 0.3},
		{-1e300, 0.5, 1e300, 1e-300},
		{1e-300, 1e19, -1e49, 0.5},
		{1e99, 0.5, 3, 1 - 0x1p-53},
		{3e49, 1e9, 1e50, 0.9},
		{-40, 1e6, 38, 1e-9},
		{1e100, 2, 1e50, 1e-15},
	} {
		f.Add(c[0], c[1], c[2], c[3])
	}
	f.Fuzz(func(t *testing.T, v, df, delta, p float64) {
		for _, got := range []float64{
			NoncentralTLower(v, df, delta), NoncentralTUpper(v, df, delta), ChiSquareLower(v, min(df, 1e12)), ChiSquareUpper(v, min(df, 1e12)),
			OwenQ1(df, v, delta, p), StudentBetween(v, df, delta, p),
		} {
			if !math.IsNaN(got) && !(got >= 0 && got <= 1+1e-12) {
				t.Errorf("t %v, df %v, delta %v, p %v: got %v, want a probability", v, df, delta, p, got)
			}
		}
		q := NoncentralTQuantile(p, df, delta)
		if back := NoncentralTLower(q, df, delta); df >= 1 && df < 1e6 && math.Abs(delta) < 1e6 && p > 1e-12 && p < 0.999 && !(math.Abs(back-p) <= 1e-7) {
			t.Errorf("df %v, delta %v: got %v of the quantile %v, want %v", df, delta, back, q, p)
		}
	})
}

func BenchmarkNoncentralTLower(b *testing.B) {
	for b.Loop() {
		NoncentralTLower(1.5, 58, 2)
	}
}

func BenchmarkNoncentralTQuantile(b *testing.B) {
	for b.Loop() {
		NoncentralTQuantile(0.95, 29, 12.7)
	}
}
