//go:build outside

package stats_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os/exec"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// TestPowerOutside holds random designs to R's power.t.test, run now.
func TestPowerOutside(t *testing.T) {
	random := rand.New(rand.NewPCG(4, 2026))
	var script strings.Builder
	var designs []stats.Design
	for range 500 {
		n := 2 + int(math.Exp(random.Float64()*7))
		sd := math.Exp(random.NormFloat64() * 3)
		d := stats.Design{NRef: n, NCand: n, SDRef: sd, SDCand: sd, Alpha: 0.2 * (0.01 + random.Float64()), Paired: random.IntN(2) == 0, Aim: stats.AimHigher}
		d.Shift = sd * random.Float64() * 6 / math.Sqrt(float64(n))
		kind, side := "two.sample", "one.sided"
		if d.Paired {
			kind = "paired"
		}
		if random.IntN(2) == 0 {
			d.Aim, side = stats.AimDifference, "two.sided"
		}
		designs = append(designs, d)
		fmt.Fprintf(&script, "cat(sprintf('%%.17g\\n', power.t.test(n=%d, delta=%v, sd=%v, sig.level=%v, type='%s', alternative='%s', strict=TRUE)$power))\n", n, d.Shift, sd, d.Alpha, kind, side)
	}
	command := exec.Command("Rscript", "-")
	command.Stdin = strings.NewReader(script.String())
	out, err := command.Output()
	if err != nil {
		t.Fatal(err)
	}
	answers := strings.Fields(string(out))
	if len(answers) != len(designs) {
		t.Fatalf("got %d answers of R, want %d", len(answers), len(designs))
	}
	for i, d := range designs {
		// R's noncentral t is good to about 1e-10, absolutely.
		if got, want := power(t, d), number(t, answers[i]); !(math.Abs(got-want) <= 2e-10) {
			t.Errorf("%+v: got %.15g, want %.15g", d, got, want)
		}
	}
}

// TestPowerSimulated counts how often the tests themselves show the aim in simulated
// studies, against the power computed.
func TestPowerSimulated(t *testing.T) {
	const studies = 20000
	random := rand.New(rand.NewPCG(1, 2))
	for _, d := range []stats.Design{
		{Welch: true, NRef: 5, NCand: 9, SDRef: 1, SDCand: 2, Alpha: 0.05, Lower: -3, Upper: 2.5, Shift: 0.2},
		{Welch: true, NRef: 12, NCand: 6, SDRef: 1, SDCand: 1, Alpha: 0.1, Lower: -1, Upper: 1},
		{NRef: 8, NCand: 8, SDRef: 1, SDCand: 1, Alpha: 0.05, Lower: -1.5, Upper: 1.5, Shift: 0.3, SpreadRatio: 3},
		{NRef: 6, NCand: 20, SDRef: 2, SDCand: 1, Alpha: 0.05, Lower: -2, Upper: 2.5, Shift: -0.3},
		{Welch: true, NRef: 7, NCand: 7, SDRef: 1, SDCand: 3, Alpha: 0.05, Lower: -5, Upper: 5, Shift: 1, SpreadRatio: 8},
	} {
		shown := 0
		for range studies {
			if simulated(random, d) {
				shown++
			}
		}
		want := power(t, d)
		got := float64(shown) / studies
		if sd := math.Sqrt(want * (1 - want) / studies); math.Abs(got-want) > 4*sd {
			t.Errorf("%+v: got %v of the studies, want %.5f within %.5f", d, got, want, 4*sd)
		}
	}
}

// simulated makes one study and tests it.
func simulated(random *rand.Rand, d stats.Design) bool {
	draw := func(n int, mean, sd float64) stats.Summary {
		x := make([]float64, n)
		for i := range x {
			x[i] = mean + sd*random.NormFloat64()
		}
		return stats.Summarize(x)
	}
	ref, cand := draw(d.NRef, 0, d.SDRef), draw(d.NCand, d.Shift, d.SDCand)
	estimate := stats.Pooled
	if d.Welch {
		estimate = stats.Welch
	}
	e, err := estimate(ref, cand)
	if err != nil {
		return false
	}
	tests := stats.TwoOneSided(e, d.Lower, d.Upper, d.Alpha)
	if max(tests.PLower, tests.PUpper) >= d.Alpha {
		return false
	}
	if d.SpreadRatio == 0 {
		return true
	}
	v, err := stats.FRatio(ref, cand, 1-2*d.Alpha)
	return err == nil && v.Interval.Upper < d.SpreadRatio
}
