package stats_test

import (
	"math"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// strd reads a NIST StRD univariate file: the certified values stand in lines
// that start with "Sample", the data after a line of dashes that follows
// "Data: Y".
func strd(t *testing.T, name string) (x []float64, mean, sd, lag1 float64) {
	t.Helper()
	certified := func(line string) float64 {
		return number(t, line[strings.LastIndexByte(line, ':')+1:])
	}
	inData, begun := false, false
	for _, line := range lines(t, filepath.Join("strd", name)) {
		switch {
		case begun:
			if strings.TrimSpace(line) != "" {
				x = append(x, number(t, line))
			}
		case strings.HasPrefix(line, "Sample Mean"):
			mean = certified(line)
		case strings.HasPrefix(line, "Sample Standard Deviation"):
			sd = certified(line)
		case strings.HasPrefix(line, "Sample Autocorrelation"):
			lag1 = certified(line)
		case strings.HasPrefix(line, "Data: Y"):
			inData = true
		case inData && strings.HasPrefix(line, "---"):
			begun = true
		}
	}
	return x, mean, sd, lag1
}

// TestStRD holds means, standard deviations and lag-1 correlations to the
// certified values of NIST. The allowed error is that of printing 15 digits,
// except where the readings themselves are rounded to float64: then no
// arithmetic gives more digits (Mavro, Michelso: 13; NumAcc3: 9; NumAcc4: 8), and
// exact names the value of the rounded readings, from rational arithmetic.
func TestStRD(t *testing.T) {
	var seen quantityAccuracy
	for _, c := range []struct {
		name              string
		n                 int
		sdError, lagError float64
		exact             float64
	}{
		{name: "PiDigits.txt", n: 5000, sdError: 2e-15, lagError: 2e-15},
		{name: "Lottery.dat", n: 218, sdError: 2e-15, lagError: 2e-15},
		{name: "Lew.dat", n: 200, sdError: 2e-15, lagError: 2e-15},
		{name: "Mavro.dat", n: 50, sdError: 1e-13, lagError: 1e-12},
		{name: "Michelso.dat", n: 100, sdError: 2e-14, lagError: 1e-13},
		{name: "NumAcc1.dat", n: 3},
		{name: "NumAcc2.dat", n: 1001, sdError: 1e-15, lagError: 1e-15},
		{name: "NumAcc3.dat", n: 1001, sdError: 4e-10, lagError: 1e-9, exact: 0.10000000003492461},
		{name: "NumAcc4.dat", n: 1001, sdError: 6e-9, lagError: 1e-8, exact: 0.10000000055879354},
	} {
		t.Run(c.name, func(t *testing.T) {
			x, mean, sd, lag1 := strd(t, c.name)
			if len(x) != c.n {
				t.Fatalf("got %d readings, want %d", len(x), c.n)
			}
			s := stats.Summarize(x)
			near(t, "mean", s.Mean, mean, 1e-15)
			near(t, "sd", s.SD, sd, c.sdError)
			if c.exact != 0 {
				near(t, "sd of the float64 readings", s.SD, c.exact, 2e-16)
			}
			got, err := stats.Lag1(x)
			if err != nil {
				t.Fatal(err)
			}
			near(t, "lag-1", got, lag1, c.lagError)
			for _, q := range [][3]float64{{s.Mean, mean, 1e-15}, {s.SD, sd, c.sdError}, {got, lag1, c.lagError}} {
				off := math.Abs(q[0] - q[1])
				if q[1] != 0 {
					off /= math.Abs(q[1])
				}
				seen.add(off, q[2], c.n)
			}
		})
	}
	seen.say(t, "strd", "NIST StRD, certified to 15 digits", "univariate: mean, sd, lag-1")
}
