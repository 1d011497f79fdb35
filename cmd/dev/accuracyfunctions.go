package main

import (
	"gonum.org/v1/gonum/stat/distuv"

	"lotpair/qa/stats"
	"lotpair/qa/stats/dist"
)

// An accuracyFunction is a function under the name that the tables use. R's and SciPy's ways stand in testdata/accuracy.R and
// accuracy.py; gonum is nil where it has none.
type accuracyFunction struct {
	args  []string
	ours  func(a []float64) float64
	gonum func(a []float64) float64
}

func studentsT(df float64) distuv.StudentsT { return distuv.StudentsT{Sigma: 1, Nu: df} }

var (
	tAndFreedom = []string{"t", "df"}
	fAndFreedom = []string{"f", "df1", "df2"}
	noncentral  = []string{"t", "df", "ncp"}
	owen        = []string{"df", "t", "delta", "r"}
)

var accuracyFunctions = map[string]accuracyFunction{
	"NormalLower":    {[]string{"z"}, func(a []float64) float64 { return dist.NormalLower(a[0]) }, func(a []float64) float64 { return distuv.UnitNormal.CDF(a[0]) }},
	"NormalUpper":    {[]string{"z"}, func(a []float64) float64 { return dist.NormalUpper(a[0]) }, func(a []float64) float64 { return distuv.UnitNormal.Survival(a[0]) }},
	"NormalQuantile": {[]string{"p"}, func(a []float64) float64 { return dist.NormalQuantile(a[0]) }, func(a []float64) float64 { return distuv.UnitNormal.Quantile(a[0]) }},

	"StudentLower":    {tAndFreedom, func(a []float64) float64 { return dist.StudentLower(a[0], a[1]) }, func(a []float64) float64 { return studentsT(a[1]).CDF(a[0]) }},
	"StudentUpper":    {tAndFreedom, func(a []float64) float64 { return dist.StudentUpper(a[0], a[1]) }, func(a []float64) float64 { return studentsT(a[1]).CDF(-a[0]) }},
	"StudentTwoSided": {tAndFreedom, func(a []float64) float64 { return dist.StudentTwoSided(a[0], a[1]) }, nil},
	"StudentQuantile": {[]string{"p", "df"}, func(a []float64) float64 { return dist.StudentQuantile(a[0], a[1]) }, func(a []float64) float64 { return studentsT(a[1]).Quantile(a[0]) }},

	"FLower":    {fAndFreedom, func(a []float64) float64 { return dist.FLower(a[0], a[1], a[2]) }, func(a []float64) float64 { return distuv.F{D1: a[1], D2: a[2]}.CDF(a[0]) }},
	"FUpper":    {fAndFreedom, func(a []float64) float64 { return dist.FUpper(a[0], a[1], a[2]) }, func(a []float64) float64 { return distuv.F{D1: a[1], D2: a[2]}.Survival(a[0]) }},
	"FQuantile": {[]string{"p", "df1", "df2"}, func(a []float64) float64 { return dist.FQuantile(a[0], a[1], a[2]) }, func(a []float64) float64 { return distuv.F{D1: a[1], D2: a[2]}.Quantile(a[0]) }},

	"ChiSquareLower":    {[]string{"x", "df"}, func(a []float64) float64 { return dist.ChiSquareLower(a[0], a[1]) }, func(a []float64) float64 { return distuv.ChiSquared{K: a[1]}.CDF(a[0]) }},
	"ChiSquareUpper":    {[]string{"x", "df"}, func(a []float64) float64 { return dist.ChiSquareUpper(a[0], a[1]) }, func(a []float64) float64 { return distuv.ChiSquared{K: a[1]}.Survival(a[0]) }},
	"ChiSquareQuantile": {[]string{"p", "df"}, func(a []float64) float64 { return dist.ChiSquareQuantile(a[0], a[1]) }, func(a []float64) float64 { return distuv.ChiSquared{K: a[1]}.Quantile(a[0]) }},

	"NoncentralTLower":    {noncentral, func(a []float64) float64 { return dist.NoncentralTLower(a[0], a[1], a[2]) }, nil},
	"NoncentralTUpper":    {noncentral, func(a []float64) float64 { return dist.NoncentralTUpper(a[0], a[1], a[2]) }, nil},
	"NoncentralTQuantile": {[]string{"p", "df", "ncp"}, func(a []float64) float64 { return dist.NoncentralTQuantile(a[0], a[1], a[2]) }, nil},

	"OwenQ1":         {owen, func(a []float64) float64 { return dist.OwenQ1(a[0], a[1], a[2], a[3]) }, nil},
	"OwenQ2":         {owen, func(a []float64) float64 { return dist.OwenQ2(a[0], a[1], a[2], a[3]) }, nil},
	"StudentBetween": {[]string{"t", "df", "below", "above"}, func(a []float64) float64 { return dist.StudentBetween(a[0], a[1], a[2], a[3]) }, nil},

	"TOSTPower": {[]string{"n1", "n2", "margin", "shift", "alpha"}, func(a []float64) float64 {
		return must(tostDesign(a[2], a[3], a[4], int(a[0]), int(a[1])).Power())
	}, nil},
	"TOSTSize": {[]string{"margin", "shift", "alpha", "power"}, func(a []float64) float64 {
		n, _, err := stats.Parts(tostDesign(a[0], a[1], a[2], 0, 0), 1, a[3])
		return float64(must(n, err))
	}, nil},
	"ToleranceFactor": {[]string{"n", "df", "coverage", "confidence"}, func(a []float64) float64 {
		return must(stats.ToleranceFactor(int(a[0]), a[1], a[2], a[3]))
	}, nil},
	"ToleranceFactorOneSided": {[]string{"n", "coverage", "confidence"}, func(a []float64) float64 {
		return must(stats.ToleranceFactorOneSided(int(a[0]), a[1], a[2]))
	}, nil},
}

// tostDesign is a study of two lots of standard deviation 1.
func tostDesign(margin, shift, alpha float64, n1, n2 int) stats.Design {
	return stats.Design{NRef: n1, NCand: n2, SDRef: 1, SDCand: 1, Alpha: alpha, Lower: -margin, Upper: margin, Shift: shift}
}
