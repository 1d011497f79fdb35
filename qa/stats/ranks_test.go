package stats_test

import (
	"errors"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestRanksCountedOut holds U, V, their p, shifts and intervals to whole-number
// counts and to every difference sorted.
func TestRanksCountedOut(t *testing.T) { answers(t, "ranks.txt", 200, ofRanks(t)) }

// TestRanksAgainstR holds exact answers without ties, and normal ones, to R.
func TestRanksAgainstR(t *testing.T) { answers(t, "ranks_r.txt", 60, ofRanks(t)) }

func ofRanks(t *testing.T) func(ref, cand []float64, name string) (float64, float64) {
	return func(ref, cand []float64, name string) (float64, float64) {
		t.Helper()
		kind, what, _ := strings.Cut(name, ".")
		if kind == "v" {
			s := must[stats.SignedRank](t)(stats.WilcoxonSignedRank(stats.Differences(ref, cand, 3), 0.90, 3))
			return map[string]float64{"v": s.V, "p": s.P, "shift": s.Shift, "lower": s.Interval.Lower, "upper": s.Interval.Upper}[what], 0
		}
		r := must[stats.Ranks](t)(stats.MannWhitney(ref, cand, 0.90, 3, nil))
		return map[string]float64{"u": r.U, "p": r.P, "shift": r.Shift, "lower": r.Interval.Lower, "upper": r.Interval.Upper}[what], 0
	}
}

// TestPublishedRanks: examples of Hollander & Wolfe and of NIST/SEMATECH e-Handbook
// 7.3.5, and two sets of whole numbers from the tests of a Julia library.
func TestPublishedRanks(t *testing.T) {
	u := must[stats.Ranks](t)
	lots := readings(t, "hw_permeability.csv", 0, 1)
	x, y := lots["term_x"], lots["gest12to26_y"]
	r := u(stats.MannWhitney(x, y, 0.95, 2, nil)) // 35 = 50 - 15
	near(t, "permeability U", r.U, 15, 0)
	near(t, "permeability p", r.P, 2*382.0/3003, 1e-14) // printed .2544
	near(t, "permeability shift", r.Shift, -0.305, 0)
	near(t, "permeability lower", r.Interval.Lower, -0.76, 0)
	near(t, "permeability upper", r.Interval.Upper, 0.15, 0)

	alcohol := readings(t, "hw_alcohol.csv", 0, 1)
	r = u(stats.MannWhitney(alcohol["sst"], alcohol["control"], 0.95, 0, nil)) // printed .00098, 435.5, 186, 713
	near(t, "alcohol U", r.U, 117, 0)
	near(t, "alcohol p", r.P, 0.000980712651, 4e-10)
	near(t, "alcohol shift", r.Shift, 435.5, 0)
	near(t, "alcohol lower", r.Interval.Lower, 186, 0)
	near(t, "alcohol upper", r.Interval.Upper, 713, 0)

	wafers := readings(t, "nist_prc35_mannwhitney.csv", 0, 1)
	r = u(stats.MannWhitney(wafers["B"], wafers["A"], 0.95, 2, nil)) // printed U 40; the other 81
	near(t, "wafers U", r.U, 40, 0)
	near(t, "wafers p, exact with ties", r.P, 0.186592046, 2e-9)

	ramp := func(from, step, n int) []float64 {
		v := make([]float64, n)
		for i := range v {
			v[i] = float64(from + i*step)
		}
		return v
	}
	r = u(stats.MannWhitney(ramp(2, 1, 10), ramp(1, 1, 10), 0.95, 0, nil)) // printed .5096
	near(t, "1..10 and 2..11, U", r.U, 40.5, 0)
	near(t, "1..10 and 2..11, p", r.P, 0.5096235034, 1e-10)
	r = u(stats.MannWhitney(ramp(2, 2, 12), ramp(1, 1, 10), 0.95, 0, nil)) // printed .0120, -7.5
	near(t, "1..10 and 2..24, p", r.P, 0.0120034764, 3e-9)
	near(t, "1..10 and 2..24, shift", r.Shift, -7.5, 0)

	one, two := readings2(t, "r_sleep.csv", 1), readings2(t, "r_sleep.csv", 2)
	r = u(stats.MannWhitney(two, one, 0.95, 1, nil))
	near(t, "sleep U", r.U, 25.5, 0)
	near(t, "sleep p, exact with ties", r.P, 0.0658165364, 5e-10)

	// Depression scale, printed V 40, one-sided .01953125, -.786, -.010, -.46.
	before, after := depression(t)
	v := must[stats.SignedRank](t)(stats.WilcoxonSignedRank(stats.Differences(before, after, 3), 0.95, 3))
	near(t, "depression V", v.V, 45-40, 0)
	near(t, "depression p", v.P, 2*0.01953125, 0)
	near(t, "depression shift", v.Shift, -0.46, 0)
	near(t, "depression lower", v.Interval.Lower, -0.786, 0)
	near(t, "depression upper", v.Interval.Upper, -0.010, 0)
}

func depression(t *testing.T) (x, y []float64) {
	t.Helper()
	for _, line := range lines(t, "hw_depression.csv") {
		if a, b, found := strings.Cut(line, ","); found && a != "x" && !strings.HasPrefix(line, "#") {
			x, y = append(x, number(t, a)), append(y, number(t, b))
		}
	}
	return x, y
}

// Lower critical values of U, two-sided 0.05, equal lots of 4 to 20 (standard
// table, from memory): k-1 of the interval.
func TestRankCriticalValues(t *testing.T) {
	for i, want := range []float64{0, 2, 5, 8, 13, 17, 23, 30, 37, 45, 55, 64, 75, 87, 99, 113, 127} {
		n := i + 4
		// Rows and columns such that the k-th smallest difference is k.
		ref, cand := make([]float64, n), make([]float64, n)
		for j := range n {
			ref[j], cand[j] = float64(n-1-j), float64(j*n+n)
		}
		r := must[stats.Ranks](t)(stats.MannWhitney(ref, cand, 0.95, 0, nil))
		if r.Interval.Lower != want+1 {
			t.Errorf("n %d: got k %v, want %v", n, r.Interval.Lower, want+1)
		}
	}
}

// 300 readings a lot without ties, against the same coefficients in whole numbers.
func TestExactLarge(t *testing.T) {
	const m, n = 300, 300
	counts := gaussian(m, n)
	total := new(big.Int).Binomial(m+n, m)
	null := new(stats.NullU)
	for _, u := range []int{2, 3000, 20000, 36000, 40320, 40340, 41000, 44999, 45000} {
		ref, cand := orderWithU(m, n, u)
		r := must[stats.Ranks](t)(stats.MannWhitney(ref, cand, 0.90, 0, null))
		sum := new(big.Int)
		for _, c := range counts[:u+1] {
			sum.Add(sum, c)
		}
		want, _ := new(big.Rat).SetFrac(sum.Lsh(sum, 1), total).Float64()
		if !r.Exact || r.U != float64(u) {
			t.Fatalf("got %+v, want U %d, exact", r, u)
		}
		near(t, "p", r.P, min(1, want), 1e-13)
	}
}

// gaussian is the product of countU in whole numbers, lower half.
func gaussian(m, n int) []*big.Int {
	c := make([]*big.Int, m*n/2+1)
	for k := range c {
		c[k] = new(big.Int)
	}
	c[0].SetInt64(1)
	for i := 1; i <= m; i++ {
		for k := len(c) - 1; k >= n+i; k-- {
			c[k].Sub(c[k], c[k-n-i])
		}
		for k := i; k < len(c); k++ {
			c[k].Add(c[k], c[k-i])
		}
	}
	return c
}

// orderWithU gives lots of different readings with that U: every full n of U is a
// candidate's reading above all the reference's.
func orderWithU(m, n, u int) (ref, cand []float64) {
	for i := range m {
		ref = append(ref, float64(i)+1)
	}
	for j := range n {
		above := min(m, max(0, u-j*m))
		cand = append(cand, float64(above)+float64(j+1)/float64(n+2))
	}
	return ref, cand
}

// Shifts and Walsh averages of lots too large to count out, against every
// difference sorted.
func TestOrderStatisticsBySorting(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for _, c := range []struct {
		m, n, decimals int
		spread         float64
	}{
		{700, 500, 3, 0.01},
		{700, 500, 3, 1},
		{300, 301, 12, 1},
		{1000, 200, 0, 3},
		{150, 1500, 9, 1e-6},
	} {
		draw := func(n int) []float64 {
			x := make([]float64, n)
			for i := range x {
				x[i] = math.Round((12+c.spread*r.NormFloat64())*math.Pow10(c.decimals)) / math.Pow10(c.decimals)
			}
			return x
		}
		ref, cand := draw(c.m), draw(c.n)
		got := must[stats.Ranks](t)(stats.MannWhitney(ref, cand, 0.90, -1, nil))
		var all []float64
		for _, y := range cand {
			for _, x := range ref {
				all = append(all, y-x)
			}
		}
		slices.Sort(all)
		if want := all[(len(all)-1)/2]/2 + all[len(all)/2]/2; got.Shift != want {
			t.Errorf("%+v: shift got %v, want %v", c, got.Shift, want)
		}
		if i, found := slices.BinarySearch(all, got.Interval.Lower); !found || i == 0 {
			t.Errorf("%+v: lower %v is no difference", c, got.Interval.Lower)
		}
		d := must[stats.SignedRank](t)(stats.WilcoxonSignedRank(cand, 0.90, -1))
		all = all[:0]
		for i, a := range cand {
			for _, b := range cand[i:] {
				all = append(all, a/2+b/2)
			}
		}
		slices.Sort(all)
		if want := all[(len(all)-1)/2]/2 + all[len(all)/2]/2; d.Shift != want {
			t.Errorf("%+v: Walsh shift got %v, want %v", c, d.Shift, want)
		}
	}
}

func TestRanksErrors(t *testing.T) {
	ranks := func(r, c []float64) error { _, err := stats.MannWhitney(r, c, 0.9, 0, nil); return err }
	signed := func(d ...float64) error { _, err := stats.WilcoxonSignedRank(d, 0.9, 0); return err }
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"one reading", ranks([]float64{1}, []float64{1, 2}), stats.ErrTooFew},
		{"all equal", ranks([]float64{1, 1}, []float64{1, 1}), stats.ErrConstant},
		{"each constant", ranks([]float64{1, 1}, []float64{2, 2}), nil},
		{"one difference", signed(1), stats.ErrTooFew},
		{"equal differences", signed(2, 2, 2), stats.ErrConstant},
		{"one not 0", signed(0, 0, 1), nil},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	r := must[stats.Ranks](t)(stats.MannWhitney([]float64{1, 2}, []float64{3, 5}, 0.90, 0, nil))
	if !math.IsInf(r.Interval.Lower, -1) || !math.IsInf(r.Interval.Upper, 1) {
		t.Errorf("2 readings a lot at 90 %%: got %+v, want no limits", r.Interval)
	}
	big := must[stats.Ranks](t)(stats.MannWhitney([]float64{-math.MaxFloat64, 0, 1}, []float64{1, 2, math.MaxFloat64}, 0.90, -1, nil))
	if big.Shift != math.MaxFloat64 || big.Interval.Upper != math.MaxFloat64 {
		t.Errorf("got %+v, want the largest number", big)
	}
}

// Exchanging the lots turns signs and U over; a rising change of all readings
// keeps U and p; a shift of the candidate moves the shift.
func TestRankLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		a, errA := stats.MannWhitney(ref, cand, 0.90, 3, nil)
		b, errB := stats.MannWhitney(cand, ref, 0.90, 3, nil)
		cube := func(v float64) float64 { return v * v * v }
		c, errC := stats.MannWhitney(mapped(ref, cube), mapped(cand, cube), 0.90, -1, nil)
		moved := mapped(cand, func(v float64) float64 { return math.Round((v+2.5)*1000) / 1000 })
		d, errD := stats.MannWhitney(ref, moved, 0.90, 3, nil)
		if err := errors.Join(errA, errB, errC, errD); err != nil {
			t.Fatal(err)
		}
		if a.U+b.U != float64(len(ref)*len(cand)) || !alike(a.P, b.P, 1e-12) || a.Shift != -b.Shift {
			t.Fatalf("got %+v, want %+v turned over", b, a)
		}
		// With ties and unequal sizes U is not the same from both ends, and k is
		// defined by its lower one.
		if len(ref) == len(cand) && a.Interval.Lower != -b.Interval.Upper {
			t.Fatalf("got %+v, want %+v turned over", b.Interval, a.Interval)
		}
		if c.U != a.U || c.P != a.P {
			t.Fatalf("got %+v, want U and p of %+v", c, a)
		}
		if math.Abs(d.Shift-a.Shift-2.5) > 1e-12 {
			t.Fatalf("got %+v, want %+v and 2.5", d, a)
		}
		if !(a.Interval.Lower <= a.Shift && a.Shift <= a.Interval.Upper) || !(a.P > 0 && a.P <= 1) {
			t.Fatalf("got %+v, want the shift inside and p in 0..1", a)
		}
	})
}

// Without ties the interval is the test: 0 lies outside exactly where p is at most
// 1-level; for signed ranks too.
func TestRankIntervalIsTheTest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(4, 90).Draw(t, "n")
		all := rapid.Permutation(count(n)).Draw(t, "order")
		at := rapid.IntRange(2, n-2).Draw(t, "at")
		ref, cand := all[:at], mapped(all[at:], func(v float64) float64 { return v + 0.5 })
		r, err := stats.MannWhitney(ref, cand, 0.90, 1, nil)
		if err != nil {
			t.Fatal(err)
		}
		if outside := r.Interval.Lower > 0 || r.Interval.Upper < 0; outside != (r.P <= 0.1*(1+1e-12)) || !r.Exact {
			t.Fatalf("got %+v, want p and interval to say the same", r)
		}
		// Sizes 1..n, each with a sign: no two differences are equal in size.
		d := mapped(all, func(v float64) float64 { return v + 1 })
		for i := range d {
			if rapid.Bool().Draw(t, "minus") {
				d[i] = -d[i]
			}
		}
		s, err := stats.WilcoxonSignedRank(d, 0.90, 0)
		if err != nil {
			t.Fatal(err)
		}
		if outside := s.Interval.Lower > 0 || s.Interval.Upper < 0; outside != (s.P <= 0.1*(1+1e-12)) && s.Interval.Lower != 0 && s.Interval.Upper != 0 {
			t.Fatalf("got %+v, want p and interval to say the same", s)
		}
	})
}

func count(n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = float64(i)
	}
	return x
}
