package main

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"lotpair/qa/stats"
	"lotpair/qa/stats/dist"
)

// points is how many arguments one call goes through: a time is that of a mix of them.
const points = 240

// freedoms are the degrees of freedom of the mix.
var freedoms = []float64{3, 9, 22, 57.3, 198, 1987.4}

// shares are tail probabilities of the mix.
var shares = []float64{0.0005, 0.005, 0.025, 0.05, 0.1, 0.3, 0.7, 0.975}

// mixed calls of for every point, the i-th with the degrees of freedom and share that are its turn.
func mixed(of func(i int, df, share float64) float64) func() {
	return func() {
		for i := range points {
			kept += of(i, freedoms[i%len(freedoms)], shares[i/len(freedoms)%len(shares)])
		}
	}
}

// place is a value of t where there is something to compute.
func place(i int) float64 { return 0.1 + float64(i%17)/3 }

// A pointRow is a function of one point, ours beside gonum's.
func pointRow(name string, g goal, ours func(i int, df, share float64) float64, floor, gonum func(i int, df, share float64) float64, floorName string) benchRow {
	return benchRow{name: name, build: func() work {
		w := work{per: points, goal: g, ours: mixed(ours)}
		if floor != nil {
			w.floor = rival{floorName, mixed(floor)}
		}
		if gonum != nil {
			w.peers = []rival{{"gonum", mixed(gonum)}}
		}
		return w
	}}
}

var distributionRows = []benchRow{
	pointRow("t CDF", goal{},
		func(i int, df, _ float64) float64 { return dist.StudentUpper(place(i), df) },
		nil,
		func(i int, df, _ float64) float64 { return distuv.StudentsT{Sigma: 1, Nu: df}.CDF(-place(i)) }, ""),
	pointRow("t quantile", goal{seconds: 3e-6},
		func(_ int, df, p float64) float64 { return dist.StudentQuantile(p, df) },
		func(i int, df, _ float64) float64 { return dist.StudentUpper(place(i), df) },
		func(_ int, df, p float64) float64 { return distuv.StudentsT{Sigma: 1, Nu: df}.Quantile(p) }, "t CDF"),
	pointRow("F quantile", goal{},
		func(i int, df, p float64) float64 { return dist.FQuantile(p, df, 7+float64(i)) },
		func(i int, df, _ float64) float64 { return dist.FUpper(place(i), df, 7+float64(i)) },
		func(i int, df, p float64) float64 { return distuv.F{D1: df, D2: 7 + float64(i)}.Quantile(p) }, "F CDF"),
	pointRow("chi-square quantile", goal{},
		func(_ int, df, p float64) float64 { return dist.ChiSquareQuantile(p, df) },
		func(i int, df, _ float64) float64 { return dist.ChiSquareUpper(df+place(i), df) },
		func(_ int, df, p float64) float64 { return distuv.ChiSquared{K: df}.Quantile(p) }, "chi-square CDF"),
	pointRow("noncentral t CDF", goal{seconds: 5e-6},
		func(i int, df, _ float64) float64 { return dist.NoncentralTLower(place(i), df, 2+place(i)/3) },
		nil, nil, ""),
	pointRow("noncentral t quantile", goal{},
		func(i int, df, p float64) float64 { return dist.NoncentralTQuantile(p, df, 2+place(i)/3) },
		func(i int, df, _ float64) float64 { return dist.NoncentralTLower(place(i), df, 2+place(i)/3) },
		nil, "noncentral t CDF"),
}

// planned is the study of the power rows: two lots, standard deviation 0.01, shift 0.001, margin 0.006.
var planned = stats.Design{NRef: 50, NCand: 50, SDRef: 0.01, SDCand: 0.01, Alpha: 0.05, Lower: -0.006, Upper: 0.006, Shift: 0.001}

var powerRows = []benchRow{
	{
		name: "TOST power, 2 x 50",
		build: func() work {
			t, se := -dist.StudentQuantile(0.05, 98), 0.01*math.Sqrt(2.0/50)
			return work{
				goal: goal{seconds: 6e-6},
				ours: func() { kept += must(planned.Power()) },
				floor: rival{"the integral alone", func() {
					kept += dist.StudentBetween(t, 98, 0.007/se, 0.005/se)
				}},
			}
		},
		growth: &growth{sizes: []int{10, 100, 1000, 10_000}, of: "readings a lot", build: func(n int) func() {
			d := planned
			d.NRef, d.NCand = n, n
			return func() { kept += must(d.Power()) }
		}},
	},
	{
		name: "TOST power, Welch, 2 x 50",
		build: func() work {
			d := planned
			d.Welch = true
			return work{ours: func() { kept += must(d.Power()) }}
		},
	},
	{
		name: "TOST size, 71 a lot",
		build: func() work {
			return work{
				goal:  goal{seconds: 1e-4},
				ours:  func() { size(planned) },
				floor: rival{"two powers", func() { kept += must(planned.Power()) + must(planned.Power()) }},
			}
		},
		growth: &growth{sizes: []int{71, 710, 6852}, of: "readings a lot found", build: func(n int) func() {
			d := planned // the room of 0.005 shrinks as the root of the number grows
			d.Upper = d.Shift + 0.005*math.Sqrt(71/float64(n))
			d.Lower = -d.Upper
			return func() { size(d) }
		}},
	},
	{
		name: "power curve, 200 shifts, 2 x 50",
		build: func() work {
			return work{goal: goal{seconds: 1.5e-3}, ours: func() {
				for i := range 200 {
					d := planned
					d.Shift = 0.006 * float64(i) / 200
					kept += must(d.Power())
				}
			}}
		},
	},
	{
		name: "tolerance factor, two-sided, 30 readings",
		build: func() work {
			return work{ours: func() { kept += must(stats.ToleranceFactor(30, 29, 0.95, 0.95)) }}
		},
		growth: &growth{sizes: []int{10, 100, 1000, 10_000}, of: "readings", build: func(n int) func() {
			return func() { kept += must(stats.ToleranceFactor(n, float64(n-1), 0.95, 0.95)) }
		}},
	},
}

func size(d stats.Design) {
	n, _, p, err := stats.Size(d, 1, 0.9)
	kept += must(p, err) + float64(n)
}
