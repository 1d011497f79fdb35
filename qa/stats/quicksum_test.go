package stats_test

import (
	"math"
	"math/big"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// knuth makes the readings of testdata/refwelch.py.
func knuth(seed uint64, n int, level, spread float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		total := 0
		for range 12 {
			seed = seed*6364136223846793005 + 1442695040888963407
			total += int(seed >> 40)
		}
		step := spread * (float64(total-6<<24) / (1 << 24))
		x[i] = level + step
	}
	return x
}

// Of 1,000 and 1,000 readings Welch's p has eleven digits, wherever they lie.
func TestWelchIn50Digits(t *testing.T) {
	var seen quantityAccuracy
	rows := 0
	for _, line := range lines(t, "welch.txt") {
		if strings.HasPrefix(line, "#") {
			continue
		}
		f := strings.Fields(line)
		seed, err := strconv.ParseUint(f[0], 10, 64)
		if err != nil {
			t.Fatal(err)
		}
		ref := knuth(seed, 1000, number(t, f[1]), number(t, f[3]))
		cand := knuth(seed+1, 1000, number(t, f[2]), number(t, f[4]))
		for name, of := range map[string]func([]float64) stats.Summary{"Summarize": stats.Summarize, "MeanAndSD": stats.MeanAndSD} {
			e := must[stats.Estimate](t)(stats.Welch(of(ref), of(cand)))
			_, p := e.TwoSided(0)
			want := number(t, f[5])
			near(t, name+" "+line, p, want, 1e-11)
			seen.add(math.Abs(p/want-1), 1e-11, 1000)
		}
		rows++
	}
	if rows < 12 {
		t.Errorf("got %d rows, want 12", rows)
	}
	seen.say(t, "welch.txt", "mpmath, 50 digits", "Welch's p from the readings")
}

// The mean and the standard deviation are those of rational arithmetic, rounded about once, for readings of every kind: far from 0
// and near each other, about 0, over many sizes, one far from all others, more than a block, few.
func TestMomentsExact(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 17))
	kinds := map[string]func(n int) []float64{
		"near each other": func(int) []float64 { return []float64{12.0034 + 0.01*r.NormFloat64()} },
		"about 0":         func(int) []float64 { return []float64{r.NormFloat64()} },
		"rounded":         func(int) []float64 { return []float64{math.Round(1000*(5+r.NormFloat64())) / 1000} },
		"many sizes":      func(int) []float64 { return []float64{math.Exp(6 * r.NormFloat64())} },
		"one far": func(i int) []float64 {
			return []float64{map[bool]float64{true: 1e9, false: 1 + 1e-9*float64(i)}[i == 3]}
		},
		"all but equal": func(i int) []float64 {
			return []float64{map[bool]float64{true: math.Nextafter(7, 8), false: 7}[i%5 == 0]}
		},
		"very small": func(int) []float64 { return []float64{1e-200 * r.NormFloat64()} },
		"two hills":  func(i int) []float64 { return []float64{float64(i%2)*1e6 + r.Float64()} },
	}
	for name, of := range kinds {
		for _, n := range []int{2, 3, 7, 100, 1023, 1024, 1025, 5000} {
			x := make([]float64, n)
			for i := range x {
				x[i] = of(i)[0]
			}
			mean, sd := exactMoments(x)
			got := stats.MeanAndSD(x)
			if size := max(math.Abs(mean), sd*1e-3); math.Abs(got.Mean-mean) > 1.2e-16*size {
				t.Errorf("%s, %d readings: mean got %.17g, want %.17g", name, n, got.Mean, mean)
			}
			if math.Abs(got.SD-sd) > 2.3e-16*sd {
				t.Errorf("%s, %d readings: sd got %.17g, want %.17g", name, n, got.SD, sd)
			}
			if all := stats.Summarize(x); math.Abs(all.SD-got.SD) > 2.3e-16*sd || !math.IsNaN(got.Median) {
				t.Errorf("%s, %d readings: sd got %.17g in order of size, %.17g as they come, median %v", name, n, all.SD, got.SD, got.Median)
			}
		}
	}
}

func exactMoments(x []float64) (mean, sd float64) {
	const digits = 4000
	sum, n := new(big.Float).SetPrec(digits), new(big.Float).SetInt64(int64(len(x)))
	for _, v := range x {
		sum.Add(sum, new(big.Float).SetFloat64(v))
	}
	m := new(big.Float).SetPrec(digits).Quo(sum, n)
	squares := new(big.Float).SetPrec(digits)
	for _, v := range x {
		d := new(big.Float).SetPrec(digits).Sub(new(big.Float).SetFloat64(v), m)
		squares.Add(squares, d.Mul(d, d))
	}
	squares.Quo(squares, new(big.Float).SetInt64(int64(len(x)-1)))
	mean, _ = m.Float64()
	sd, _ = squares.Sqrt(squares).Float64()
	return mean, sd
}
