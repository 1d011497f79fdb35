package stats_test

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"testing"

	"lotpair/qa/stats"
)

// table reads the rows of a testdata file without its heading.
func table(t *testing.T, name string) [][]string {
	t.Helper()
	file, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

// TestPublishedToleranceFactors: ISO 16269-6:2014 Annex F (690 entries, rounded up to
// four decimals), Meeker, Hahn & Escobar 2017, Tables J.5 (1110, three decimals) and
// Montgomery & Runger 2018, Table XII, one-sided (288, three decimals).
func TestPublishedToleranceFactors(t *testing.T) {
	held := 0
	for _, row := range table(t, "iso16269_6_annexF_k_two_sided.csv") {
		n, m := number(t, row[3]), number(t, row[4])
		if math.IsInf(n, 1) { // the limit: the larger the nearer
			k := must[float64](t)(stats.ToleranceFactor(1<<60, n, number(t, row[1]), number(t, row[2])))
			if want := number(t, row[5]); math.Abs(k-want) > 0.00010001 || k > want {
				t.Errorf("%v: got %.8f, want %v after rounding up", row, k, want)
			}
			held++
			continue
		}
		k := must[float64](t)(stats.ToleranceFactor(int(n), m*(n-1), number(t, row[1]), number(t, row[2])))
		if want := number(t, row[5]); math.Abs(math.Ceil(k*1e4)/1e4-want) > 1e-9 {
			t.Errorf("%v: got %.8f, want %v after rounding up", row, k, want)
		}
		held++
	}
	for _, row := range table(t, "meeker_hahn_escobar_J5_k_two_sided.csv") {
		n := number(t, row[3])
		if math.IsInf(n, 1) {
			k := must[float64](t)(stats.ToleranceFactor(1<<60, n, number(t, row[1]), number(t, row[2])))
			if want := number(t, row[4]); math.Abs(k-want) > 0.00050001 {
				t.Errorf("%v: got %.8f, want %v", row, k, want)
			}
			held++
			continue
		}
		k := must[float64](t)(stats.ToleranceFactor(int(n), n-1, number(t, row[1]), number(t, row[2])))
		if want := number(t, row[4]); math.Abs(k-want) > 0.00050001 {
			t.Errorf("%v: got %.8f, want %v", row, k, want)
		}
		held++
	}
	for _, row := range table(t, "montgomery_runger_XII_k_one_sided.csv") {
		k := must[float64](t)(stats.ToleranceFactorOneSided(int(number(t, row[0])), number(t, row[1]), number(t, row[2])))
		if want := number(t, row[3]); math.Abs(k-want) > 0.00050001 {
			t.Errorf("%v: got %.8f, want %v", row, k, want)
		}
		held++
	}
	if held != 690+1110+288 {
		t.Errorf("got %d entries, want 2088", held)
	}
	// NIST/SEMATECH e-Handbook 7.2.6.3, exact one-sided factors: printed 1.8740, 4.4111.
	near(t, "N 43", must[float64](t)(stats.ToleranceFactorOneSided(43, 0.90, 0.99)), 1.87395360586, 1e-11)
	near(t, "N 6", must[float64](t)(stats.ToleranceFactorOneSided(6, 0.90, 0.99)), 4.41108057244, 1e-11)
}

// TestToleranceFactorDigits holds the exact factor to a quadrature of 25 digits over
// the other variable.
func TestToleranceFactorDigits(t *testing.T) {
	var seen quantityAccuracy
	for _, row := range table(t, "tolerance.csv") {
		n, want := int(number(t, row[0])), number(t, row[4])
		k := must[float64](t)(stats.ToleranceFactor(n, number(t, row[1]), number(t, row[2]), number(t, row[3])))
		near(t, "k", k, want, 1e-12)
		seen.add(math.Abs(k-want)/want, 1e-12, n)
	}
	seen.say(t, "tolerance.csv", maker(lines(t, "tolerance.csv")[0]), "two-sided tolerance factor")
}

// TestPublishedToleranceRanks: Meeker, Hahn & Escobar 2017, Table J.11, and the
// smallest lots of Wilks.
func TestPublishedToleranceRanks(t *testing.T) {
	for _, row := range table(t, "meeker_hahn_escobar_J11_nonparam_one_sided_rank.csv") {
		want := 0.0
		if row[3] != "NA" {
			want = number(t, row[3])
		}
		if k := stats.ToleranceRank(int(number(t, row[0])), number(t, row[1]), number(t, row[2])); float64(k) != want {
			t.Errorf("%v: got %d, want %v", row, k, want)
		}
	}
	for _, c := range []struct {
		coverage, confidence float64
		one, two             int
	}{
		{0.90, 0.90, 22, 38},
		{0.90, 0.95, 29, 46},
		{0.90, 0.99, 44, 64},
		{0.95, 0.90, 45, 77},
		{0.95, 0.95, 59, 93},
		{0.95, 0.99, 90, 130},
		{0.99, 0.90, 230, 388},
		{0.99, 0.95, 299, 473},
		{0.99, 0.99, 459, 662},
	} {
		for _, want := range []struct{ n, k int }{{c.one, 1}, {c.one - 1, 0}, {c.two, 2}, {c.two - 1, 1}} {
			if k := stats.ToleranceRank(want.n, c.coverage, c.confidence); k != want.k {
				t.Errorf("%+v n %d: got %d, want %d", c, want.n, k, want.k)
			}
		}
	}
}

func TestToleranceEdges(t *testing.T) {
	if _, err := stats.ToleranceFactor(0, 1, 0.9, 0.9); !errors.Is(err, stats.ErrTooFew) {
		t.Errorf("no readings: got %v, want %v", err, stats.ErrTooFew)
	}
	if _, err := stats.ToleranceFactorOneSided(1, 0.9, 0.9); !errors.Is(err, stats.ErrTooFew) {
		t.Errorf("one reading: got %v, want %v", err, stats.ErrTooFew)
	}
	for _, bad := range [][2]float64{{0, 0.9}, {1, 0.9}, {0.9, 0}, {0.9, 1}, {math.NaN(), 0.9}} {
		if k := must[float64](t)(stats.ToleranceFactor(10, 9, bad[0], bad[1])); !math.IsNaN(k) {
			t.Errorf("%v: got %v, want NaN", bad, k)
		}
	}
	// Many readings leave the normal quantile.
	near(t, "many", must[float64](t)(stats.ToleranceFactor(1e6, 1e6-1, 0.95, 0.95)), 1.959963984540054, 0.0013)
	if k := must[float64](t)(stats.ToleranceFactor(2, 1, 0.999, 0.999)); !(k > 1000) {
		t.Errorf("two readings: got %v, want a large number", k)
	}
}

func BenchmarkToleranceFactor(b *testing.B) {
	for b.Loop() {
		if _, err := stats.ToleranceFactor(30, 29, 0.95, 0.95); err != nil {
			b.Fatal(err)
		}
	}
}
