package published

import (
	"errors"
	"math"

	"lotpair/qa"
	"lotpair/qa/stats"
)

// pair names the data of two lots: a file, the column that names the lots, and the readings' column.
type pair struct {
	file, by, reference, candidate, column string
}

func (p pair) readings() (ref, cand []float64, err error) {
	if ref, err = group(p.file, p.by, p.reference, p.column); err != nil {
		return nil, nil, err
	}
	cand, err = group(p.file, p.by, p.candidate, p.column)
	return ref, cand, err
}

// compare goes the whole way through qa.Compare with a margin and a method.
func (p pair) compare(m float64, method string, get func(qa.Comparison) *float64) func() (float64, error) {
	return func() (float64, error) {
		ref, cand, err := p.readings()
		if err != nil {
			return 0, err
		}
		plan := qa.Plan{Format: qa.PlanFormat, Criterion: qa.Criterion{Objective: qa.Equivalence, Method: method, Margin: &qa.Margin{Absolute: &m}}}
		ch := qa.Characteristic{Name: p.column}
		r := qa.Readings{Characteristics: []qa.Characteristic{ch}, Reference: lot("reference", ch.Name, ref), Candidate: lot("candidate", ch.Name, cand)}
		result, err := qa.Compare(plan, r, qa.Run{})
		if err != nil {
			return 0, err
		}
		v := get(result.Characteristics[0])
		if v == nil {
			return 0, errors.New("found no value, want one")
		}
		return *v, nil
	}
}

func lot(name, characteristic string, values []float64) qa.Lot {
	s := qa.Series{Characteristic: characteristic, Rows: len(values)}
	for _, v := range values {
		s.Readings = append(s.Readings, qa.Reading{Value: v, Decimals: 3})
	}
	return qa.Lot{Name: name, Rows: len(values), Series: []qa.Series{s}}
}

var (
	auto     = pair{"nist_auto83b.csv", "group", "Japan", "US", "mpg"}
	strength = pair{"nist_jahanmi2_strength_batch.csv", "batch", "1", "2", "strength"}
	clinic1  = pair{"tost_clinic.csv", "fact", "2", "1", "var1"}
	clinic2  = pair{"tost_clinic.csv", "fact", "2", "1", "var2"}
	bore     = pair{"d1.csv", "lot", "REF-0417", "CAND-0931", "bore_dia_mm"}
	assembly = pair{"nist_prc31.csv", "group", "new", "old", "value"}
)

func difference(c qa.Comparison) *float64 { return c.Difference.Estimate }
func statistic(c qa.Comparison) *float64  { return c.Difference.T }
func freedom(c qa.Comparison) *float64    { return c.Difference.DF }
func twoSided(c qa.Comparison) *float64   { return c.Difference.PTwoSided }
func wideLower(c qa.Comparison) *float64  { return c.Difference.Lower }
func wideUpper(c qa.Comparison) *float64  { return c.Difference.Upper }
func lower(c qa.Comparison) *float64      { return c.Equivalence.Lower }
func upper(c qa.Comparison) *float64      { return c.Equivalence.Upper }
func decidingP(c qa.Comparison) *float64  { return c.Equivalence.P }

func mean(file string) func() (float64, error) {
	return func() (float64, error) {
		x, err := certified(file)
		return stats.Summarize(x).Mean, err
	}
}

func deviation(file string) func() (float64, error) {
	return func() (float64, error) {
		x, err := certified(file)
		return stats.Summarize(x).SD, err
	}
}

const (
	strd  = "NIST StRD, univariate, certified values in the head of the file"
	eb    = "NIST/SEMATECH e-Handbook of Statistical Methods "
	more  = "; more digits by R 4.2.2"
	tost  = "reference run in R, quoted in the tests of statsmodels 0.13.5 (test_tost.py)"
	inR   = "R 4.2.2, t.test and var.test"
	grubb = "Tietjen and Moore 1972; NIST/SEMATECH e-Handbook 1.3.5.17.1"
)

// checks are all published values, in the order in which they are printed.
func checks() []Check {
	out := []Check{
		{"STRD-1", "mean, Lew", strd, -177.435, 1e-15, mean("Lew.dat")},
		{"STRD-2", "standard deviation, Lew", strd, 277.332168044316, 1e-14, deviation("Lew.dat")},
		{"STRD-3", "standard deviation, Mavro", strd, 0.000429123454003053, 1e-12, deviation("Mavro.dat")},
		{"STRD-4", "standard deviation, Michelso", strd, 0.0790105478190518, 1e-13, deviation("Michelso.dat")},
		{"STRD-5", "standard deviation, NumAcc1", strd, 1, 1e-15, deviation("NumAcc1.dat")},
		{"STRD-6", "standard deviation, NumAcc4 (9 digits are all that doubles keep)", strd, 0.1, 1e-8, deviation("NumAcc4.dat")},
		{"WELCH-1", "t, AUTO83B, United States less Japan", eb + "1.3.5.3" + more, -12.9462732749, 1e-11, auto.compare(1, "welch", statistic)},
		{"WELCH-2", "degrees of freedom, AUTO83B", eb + "1.3.5.3" + more, 136.874976673, 1e-11, auto.compare(1, "welch", freedom)},
		{"WELCH-3", "two-sided p, AUTO83B", eb + "1.3.5.3" + more, 1.5708547843e-25, 1e-9, auto.compare(1, "welch", twoSided)},
		{"WELCH-4", "95 % interval, lower end, JAHANMI2, batch 2 less 1", inR + " on the data of " + eb + "1.3.5.9", -89.273965664110207, 1e-13, strength.compare(30, "welch", wideLower)},
		{"WELCH-5", "95 % interval, upper end, JAHANMI2", inR + " on the data of " + eb + "1.3.5.9", -66.411367669223125, 1e-13, strength.compare(30, "welch", wideUpper)},
		{"WELCH-6", "t, assembly times", eb + "7.3.1" + more, 2.26937313336, 1e-11, assembly.compare(1, "welch", statistic)},
		{"POOLED-1", "t, AUTO83B", eb + "1.3.5.3" + more, -12.6205912887, 1e-11, auto.compare(1, "pooled", statistic)},
		{"POOLED-2", "two-sided p, AUTO83B", eb + "1.3.5.3" + more, 5.27293545661e-30, 1e-10, auto.compare(1, "pooled", twoSided)},
		{"TOST-1", "difference, first variable", tost, .164666666666667, 1e-13, clinic1.compare(0.6, "welch", difference)},
		{"TOST-2", "90 % interval, lower end, first variable", tost, -.266686298072253, 1e-12, clinic1.compare(0.6, "welch", lower)},
		{"TOST-3", "90 % interval, upper end, first variable", tost, .596019631405587, 1e-12, clinic1.compare(0.6, "welch", upper)},
		{"TOST-4", "p against ±0.6, first variable", tost, .0485308397623697, 1e-12, clinic1.compare(0.6, "welch", decidingP)},
		{"TOST-5", "p against ±0.6, second variable", tost, .43179368125948, 1e-12, clinic2.compare(0.6, "welch", decidingP)},
		{"TOST-6", "p against ±0.6, first variable, pooled", tost, .0482731510076147, 1e-12, clinic1.compare(0.6, "pooled", decidingP)},
		{"TOST-7", "90 % interval, upper end, bore diameters", inR, 0.01006020125, 1e-8, bore.compare(0.01, "welch", upper)},
		{"TOST-8", "p against ±0.010, bore diameters", inR, 0.0516733832, 1e-8, bore.compare(0.01, "welch", decidingP)},
	}
	for i, w := range []struct{ t, df, p float64 }{{-2.45535639829, 24.9885292902, .0213780014629}, {-1.5654335236, 9.90474124865, .148841696605}, {-2.21924091582, 24.4962231242, .0359722710298}} {
		n := string(rune('1' + i))
		p := pair{"welch_example" + n + ".csv", "group", "A2", "A1", "value"}
		const source = "worked example in an encyclopaedia's article on Welch's test; more digits by R 4.2.2"
		out = append(out,
			Check{"WELCH-EX" + n + "-T", "t, example " + n, source, w.t, 1e-10, p.compare(1, "welch", statistic)},
			Check{"WELCH-EX" + n + "-DF", "degrees of freedom, example " + n, source, w.df, 1e-10, p.compare(1, "welch", freedom)},
			Check{"WELCH-EX" + n + "-P", "two-sided p, example " + n, source, w.p, 1e-10, p.compare(1, "welch", twoSided)})
	}
	return append(out, otherChecks()...)
}

// otherChecks are those that do not go through a comparison of means.
func otherChecks() []Check {
	return []Check{
		{"F-1", "ratio of variances, JAHANMI2, batch 1 over 2", eb + "1.3.5.9" + more, 1.12303752331, 1e-11, strength.ratio(func(v stats.VarianceRatio) float64 { return 1 / v.F })},
		{"F-2", "two-sided p of the ratio", eb + "1.3.5.9" + more, .370382930269, 1e-11, strength.ratio(func(v stats.VarianceRatio) float64 { return v.P })},
		{"F-3", "ratio of standard deviations, bore diameters, upper 90 % end", inR, 1.937361267, 1e-9, bore.ratio(func(v stats.VarianceRatio) float64 { return v.Interval.Upper })},
		{"GRUBBS-1", "Grubbs' G, uranium readings", grubb + more, 2.46876461121, 1e-11, func() (float64, error) {
			x, err := group("nist_grubbs_uranium.csv", "", "", "value")
			if err != nil {
				return 0, err
			}
			g, err := stats.GrubbsTest(x)
			return g.G, err
		}},
		{"RANKS-1", "U of 10 with 5, permeability of membranes", "Hollander and Wolfe 1973, p. 69; R's wilcox.test", 35, 0, func() (float64, error) {
			r, err := membranes()
			return 50 - r.U, err // the source counts the other way about
		}},
		{"RANKS-2", "exact two-sided p, permeability of membranes (twice 382/3003)", "Hollander and Wolfe 1973, p. 69; R's wilcox.test", 2 * 382.0 / 3003, 1e-13, func() (float64, error) {
			r, err := membranes()
			return r.P, err
		}},
		{"FRACTIONS-1", "Miettinen and Nurminen's lower end, 56/70 less 48/80", "Newcombe 1998, Statistics in Medicine 17, table II (a), recomputed to six digits", 0.052830, 1e-5, fractions(func(p stats.Proportions) float64 { return p.Interval(0.95).Lower })},
		{"FRACTIONS-2", "Miettinen and Nurminen's upper end", "Newcombe 1998, Statistics in Medicine 17, table II (a), recomputed to six digits", 0.338173, 1e-5, fractions(func(p stats.Proportions) float64 { return p.Interval(0.95).Upper })},
		{"TOLERANCE-1", "two-sided factor, n 2, 90 % of the lot, confidence 0.90", "ISO 16269-6:2014, annex F, rounded up in the fourth decimal", 15.5124, 1e-5, func() (float64, error) { return stats.ToleranceFactor(2, 1, 0.9, 0.9) }},
		{"TOLERANCE-2", "one-sided factor, n 43, 90 % of the lot, confidence 0.99", eb + "7.2.6.3; more digits by R 4.2.2", 1.87395360586, 1e-10, func() (float64, error) { return stats.ToleranceFactorOneSided(43, 0.9, 0.99) }},
	}
}

func (p pair) ratio(get func(stats.VarianceRatio) float64) func() (float64, error) {
	return func() (float64, error) {
		ref, cand, err := p.readings()
		if err != nil {
			return 0, err
		}
		v, err := stats.FRatio(stats.Summarize(ref), stats.Summarize(cand), 0.9)
		if err != nil {
			return 0, err
		}
		x := get(v)
		if math.IsNaN(x) {
			return 0, errors.New("found no number, want one")
		}
		return x, nil
	}
}

func membranes() (stats.Ranks, error) {
	x, err := group("hw_permeability.csv", "group", "term_x", "value")
	if err != nil {
		return stats.Ranks{}, err
	}
	y, err := group("hw_permeability.csv", "group", "gest12to26_y", "value")
	if err != nil {
		return stats.Ranks{}, err
	}
	return stats.MannWhitney(x, y, 0.95, 2, nil)
}

func fractions(get func(stats.Proportions) float64) func() (float64, error) {
	return func() (float64, error) {
		p, err := stats.CompareProportions(stats.Counts{N: 80, Failed: 48}, stats.Counts{N: 70, Failed: 56})
		if err != nil {
			return 0, err
		}
		return get(p), nil
	}
}
