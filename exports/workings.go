package exports

import (
	"fmt"
	"math"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The columns of the sheet Workings.
const (
	workingsName = iota + 1
	workingsFormula
	workingsStated
	workingsDifference
	workingsHow
)

// workingsSheet derives the main figures again from the sheet Readings, by formulas that any spreadsheet program computes,
// beside what the record states. The stated value is stored as what the formula gave, so that nothing has to be computed to
// show the sheet. Functions are those that the programs share under one name; their t distribution cuts degrees of freedom to
// whole numbers, so the beta distribution stands in its place.
func workingsSheet(rec qa.Record) sheet {
	s := sheet{name: SheetWorkings, widths: []float64{34, 21, 21, 11, 50}}
	s.add(text("Workings", titleLook))
	s.addTall(44, wide("The figures derived from the sheet Readings by live formulas, beside what the record states. Compute them again with "+
		"Ctrl+Alt+F9 (Excel) or Ctrl+Shift+F9 (LibreOffice), and look at the column Difference: rounding only. Do not save: a saved copy loses its signatures.", wrapLook, 5))
	s.add(text("Figure", headLook), text("Computed here", headRightLook), text("Stated", headRightLook), text("Difference", headRightLook), text("How", headLook))
	s.frozen, s.heads = len(s.rows), len(s.rows)
	ranges := readingRanges(rec)
	for _, c := range rec.Result.Characteristics {
		s.gap()
		s.add(wide(nameWithUnit(c), groupLook, 5))
		w := workings{sheet: &s, at: map[string]string{}}
		w.characteristic(rec, c, ranges)
	}
	return s
}

// workings writes the lines of one characteristic.
type workings struct {
	sheet *sheet
	at    map[string]string // name of a figure to the cell that holds it
}

// derive adds a line whose formula names other figures in braces. A figure that the record does not state has no line.
func (w *workings) derive(name string, stated *float64, formula, how string) {
	if stated == nil {
		return
	}
	w.line(name, stated, formula, how, true)
}

func (w *workings) line(name string, value *float64, formula, how string, stated bool) {
	row := len(w.sheet.rows) + 1
	formula, ok := w.fill(formula)
	if !ok { // rests on a figure that does not exist
		return
	}
	here := cells.Name(workingsFormula, row)
	w.at[name] = here
	zero := 0.0
	computed := cell{number: value, formula: formula, look: ruledNumberLook}
	beside, difference := cell{look: ruledNumberLook}, cell{look: ruledNumberLook}
	if stated {
		beside.number = value
		difference = cell{number: &zero, formula: here + "-" + cells.Name(workingsStated, row), look: ruledNumberLook}
	}
	w.sheet.addTall(lines(how, 58)*13+2, text(name, ruledLook), computed, beside, difference, text(how, ruledWrapLook))
}

// fill puts cells in the place of the names in braces; false where a figure has none.
func (w *workings) fill(formula string) (string, bool) {
	var b strings.Builder
	for {
		before, rest, ok := strings.Cut(formula, "{")
		b.WriteString(before)
		if !ok {
			return b.String(), true
		}
		name, after, _ := strings.Cut(rest, "}")
		at, known := w.at[name]
		if !known {
			return "", false
		}
		b.WriteString(at)
		formula = after
	}
}

// given adds a line of the criterion: a number that nothing derives.
func (w *workings) given(name string, x *float64, what string) {
	if x == nil {
		return
	}
	row := len(w.sheet.rows) + 1
	w.at[name] = cells.Name(workingsFormula, row)
	w.sheet.add(text(name, ruledLook), number(x, ruledNumberLook), cell{look: ruledLook}, cell{look: ruledLook}, text(what, ruledWrapLook))
}

func (w *workings) say(t string) { w.sheet.addTall(lines(t, 138)*13+2, wide(t, wrapLook, 5)) }

func (w *workings) characteristic(rec qa.Record, c qa.Comparison, ranges map[string]string) {
	ref, cand := rec.Readings.Reference.Of(c.Name), rec.Readings.Candidate.Of(c.Name)
	if c.Kind != "numeric" || !describes(c.Reference, ref.Readings) || !describes(c.Candidate, cand.Readings) {
		w.say("Not derived here: the test does not rest on the readings one by one (see the sheets Method and Results). The embedded record and Lotpair compute it again.")
		return
	}
	w.lot("reference", c.Reference, ranges["reference"+c.Name])
	w.lot("candidate", c.Candidate, ranges["candidate"+c.Name])
	if restsOnMeans(c) {
		w.difference(c)
		w.equivalence(c)
	} else {
		w.say("The test by the method " + c.Method + " does not rest on these means and standard deviations alone and is not derived here; see the sheet Method.")
	}
	w.spread(c)
	w.performance(c)
}

// restsOnMeans says whether the test is the one that these formulas make: not of pairs, logarithms or means of groups.
func restsOnMeans(c qa.Comparison) bool {
	d, r, k := c.Difference, c.Reference, c.Candidate
	if c.Method != "welch" && c.Method != "pooled" {
		return false
	}
	if d.SE == nil || d.Estimate == nil || r.SD == nil || k.SD == nil || r.Mean == nil || k.Mean == nil {
		return true // no figure, no line
	}
	n, m := float64(r.N), float64(k.N)
	se := math.Hypot(*r.SD/math.Sqrt(n), *k.SD/math.Sqrt(m))
	if c.Method == "pooled" {
		se = math.Hypot(*r.SD*math.Sqrt(n-1), *k.SD*math.Sqrt(m-1)) / math.Sqrt(n+m-2) * math.Sqrt(1/n+1/m)
	}
	return sameNumber(se, *d.SE, 0) && sameNumber(*k.Mean-*r.Mean, *d.Estimate, math.Max(math.Abs(*k.Mean), math.Abs(*r.Mean)))
}

// describes says whether a lot's figures are those of its readings in use, one by one: not of repeats averaged, pairs or
// logarithms, which these formulas do not make.
func describes(s qa.SampleResult, all []qa.Reading) bool {
	n, sum, most := 0, 0.0, 0.0
	for i := range all {
		if r := &all[i]; r.Used() {
			n++
			sum += r.Value / float64(s.N)
			most = math.Max(most, math.Abs(r.Value))
		}
	}
	if s.N != n {
		return false
	}
	if n == 0 || s.Mean == nil {
		return s.Mean == nil
	}
	return sameNumber(sum, *s.Mean, most)
}

func whole64(n int) *float64 {
	x := float64(n)
	return &x
}

func (w *workings) lot(side string, s qa.SampleResult, at string) {
	if at == "" {
		return
	}
	w.derive(side+".n", whole64(s.N), "COUNT("+at+")", "readings in use, from "+at)
	w.derive(side+".mean", s.Mean, "AVERAGE("+at+")", "their mean")
	w.derive(side+".sd", s.SD, "STDEV("+at+")", "their standard deviation, divisor n − 1")
	w.derive(side+".min", s.Min, "MIN("+at+")", "smallest")
	w.derive(side+".max", s.Max, "MAX("+at+")", "largest")
}

// The t distribution by the beta distribution: P(|T| > t) = I(df/(df + t²); df/2, 1/2), and the quantile with
// P(|T| < t) = level by its inverse (Abramowitz and Stegun 1964, 26.7.1; from memory). Both take any degrees of freedom.
func twoSided(t, df string) string {
	return fmt.Sprintf("BETADIST(%s/(%s+%s^2),%s/2,0.5)", df, df, t, df)
}

func above(t, df string) string {
	p := twoSided(t, df)
	return fmt.Sprintf("IF(%s>0,%s/2,1-%s/2)", t, p, p)
}

func beneath(t, df string) string {
	p := twoSided(t, df)
	return fmt.Sprintf("IF(%s<0,%s/2,1-%s/2)", t, p, p)
}

func quantile(level, df string) string {
	y := fmt.Sprintf("BETAINV(%s,0.5,%s/2)", level, df)
	return fmt.Sprintf("SQRT(%s*%s/(1-%s))", df, y, y)
}

func (w *workings) difference(c qa.Comparison) {
	d := c.Difference
	alpha := c.Alpha
	w.given("alpha", &alpha, "from the criterion")
	w.derive("difference.estimate", d.Estimate, "{candidate.mean}-{reference.mean}", "candidate minus reference")
	if c.Method == "pooled" {
		w.derive("difference.df", d.DF, "{reference.n}+{candidate.n}-2", "degrees of freedom")
		w.derive("difference.se", d.SE, "SQRT((({reference.n}-1)*{reference.sd}^2+({candidate.n}-1)*{candidate.sd}^2)/{difference.df}*(1/{reference.n}+1/{candidate.n}))",
			"standard error from the pooled variance")
	} else {
		w.derive("difference.se", d.SE, "SQRT({reference.sd}^2/{reference.n}+{candidate.sd}^2/{candidate.n})", "standard error (Welch)")
		w.derive("difference.df", d.DF, "({reference.sd}^2/{reference.n}+{candidate.sd}^2/{candidate.n})^2/(({reference.sd}^2/{reference.n})^2/({reference.n}-1)+({candidate.sd}^2/{candidate.n})^2/({candidate.n}-1))",
			"degrees of freedom (Satterthwaite), seldom a whole number")
	}
	w.derive("difference.t", d.T, "{difference.estimate}/{difference.se}", "difference over its standard error")
	w.probability("difference.p_two_sided", d.PTwoSided, twoSided("{difference.t}", "{difference.df}"), "P(|T| > |t|), by the beta distribution: t² sets its argument")
	level := "1-{alpha}"
	switch d.Alternative {
	case "lower":
		w.probability("difference.p", d.P, beneath("{difference.t}", "{difference.df}"), "P(T < t)")
		level = "1-2*{alpha}"
	case "higher":
		w.probability("difference.p", d.P, above("{difference.t}", "{difference.df}"), "P(T > t)")
		level = "1-2*{alpha}"
	}
	w.interval("difference", d.Level, d.Estimate, d.SE, d.Lower, d.Upper, level)
}

// probability is a p-value; one that the record gives as its smallest is cut there too.
func (w *workings) probability(name string, p *float64, formula, how string) {
	if p != nil && *p == 1e-300 {
		formula, how = "MAX(1E-300,"+formula+")", how+"; given as 1e-300 below that"
	}
	w.derive(name, p, formula, how)
}

// interval derives the two ends; the quantile stands in a line of its own, for computing by hand.
func (w *workings) interval(what string, level, estimate, se, lower, upper *float64, formula string) {
	if level == nil || estimate == nil || se == nil || lower == nil || upper == nil || *se == 0 {
		return
	}
	w.derive(what+".level", level, formula, "level of the interval")
	q := (*upper - *estimate) / *se
	w.line(what+".quantile", &q, quantile("{"+what+".level}", "{difference.df}"), "t of this level and these degrees of freedom, as the stated interval has it", false)
	w.derive(what+".lower", lower, "{difference.estimate}-{"+what+".quantile}*{difference.se}", "lower end: difference − quantile · standard error")
	w.derive(what+".upper", upper, "{difference.estimate}+{"+what+".quantile}*{difference.se}", "upper end: difference + quantile · standard error")
}

func (w *workings) equivalence(c qa.Comparison) {
	e := c.Equivalence
	if e == nil || e.Scale != "difference" || e.SE == nil || c.Difference.SE == nil || *e.SE != *c.Difference.SE {
		return
	}
	w.given("equivalence.margin_lower", e.MarginLower, "lower end of the margin as tested, from the criterion")
	w.given("equivalence.margin_upper", e.MarginUpper, "upper end of the margin as tested, from the criterion")
	w.derive("equivalence.t_lower", e.TLower, "({difference.estimate}-{equivalence.margin_lower})/{difference.se}", "t against the lower end")
	w.probability("equivalence.p_lower", e.PLower, above("{equivalence.t_lower}", "{difference.df}"), "P(T > t): of a difference at or below the lower end")
	w.derive("equivalence.t_upper", e.TUpper, "({difference.estimate}-{equivalence.margin_upper})/{difference.se}", "t against the upper end")
	w.probability("equivalence.p_upper", e.PUpper, beneath("{equivalence.t_upper}", "{difference.df}"), "P(T < t): of a difference at or above the upper end")
	switch {
	case e.PLower != nil && e.PUpper != nil:
		w.derive("equivalence.p", e.P, "MAX({equivalence.p_lower},{equivalence.p_upper})", "the larger of the two")
	case e.PLower != nil:
		w.derive("equivalence.p", e.P, "{equivalence.p_lower}", "of the bound that is asked")
	default:
		w.derive("equivalence.p", e.P, "{equivalence.p_upper}", "of the bound that is asked")
	}
	w.interval("equivalence", e.Level, e.Estimate, e.SE, e.Lower, e.Upper, "1-2*{alpha}")
	guard := e.Margin.Guard
	w.given("equivalence.margin.guard", &guard, "taken off each end of the margin")
	smallest, how := "MAX(ABS({equivalence.lower}),ABS({equivalence.upper}))", "the farther end of the interval, and the guard"
	switch c.Objective {
	case qa.NotLower:
		smallest, how = "MAX(0,-{equivalence.lower})", "how far the lower end lies below 0, and the guard"
	case qa.NotHigher:
		smallest, how = "MAX(0,{equivalence.upper})", "how far the upper end lies above 0, and the guard"
	}
	w.derive("equivalence.smallest_margin", e.SmallestMargin, smallest+"+{equivalence.margin.guard}", how+"; after the fact, never a margin")
}

func (w *workings) spread(c qa.Comparison) {
	s := c.Spread
	if s == nil || s.SDRatio == nil || s.F == nil || c.Reference.SD == nil || c.Candidate.SD == nil || !sameNumber(*s.SDRatio, *c.Candidate.SD / *c.Reference.SD, 0) {
		return // of logarithms, or of pairs
	}
	if _, ok := w.at["alpha"]; !ok {
		alpha := c.Alpha
		w.given("alpha", &alpha, "from the criterion")
	}
	w.derive("spread.sd_ratio", s.SDRatio, "{candidate.sd}/{reference.sd}", "standard deviation of the candidate over the reference")
	f, f1, f2 := s.F.Statistic, s.F.DF1, s.F.DF2
	w.derive("spread.f.statistic", &f, "{spread.sd_ratio}^2", "ratio of the variances")
	w.derive("spread.f.df1", &f1, "{candidate.n}-1", "degrees of freedom, candidate")
	w.derive("spread.f.df2", &f2, "{reference.n}-1", "degrees of freedom, reference")
	p := s.F.P
	w.probability("spread.f.p", &p, "MIN(1,2*MIN(FDIST({spread.f.statistic},{spread.f.df1},{spread.f.df2}),FDIST(1/{spread.f.statistic},{spread.f.df2},{spread.f.df1})))", "twice the smaller tail of F")
	w.derive("spread.level", s.Level, "1-2*{alpha}", "level of the interval")
	w.derive("spread.lower", s.Lower, "{spread.sd_ratio}/SQRT(FINV({alpha},{spread.f.df1},{spread.f.df2}))", "ratio over the root of the upper F quantile")
	w.derive("spread.upper", s.Upper, "{spread.sd_ratio}*SQRT(FINV({alpha},{spread.f.df2},{spread.f.df1}))", "ratio times the root of the upper F quantile, degrees exchanged")
}

func (w *workings) performance(c qa.Comparison) {
	if c.Performance == nil {
		return
	}
	w.given("limits.lower", c.Limits.Lower, "lower specification limit")
	w.given("limits.upper", c.Limits.Upper, "upper specification limit")
	for _, l := range []struct {
		side string
		p    qa.LotPerformance
	}{{"reference", c.Performance.Reference}, {"candidate", c.Performance.Candidate}} {
		w.derive("performance."+l.side+".pp", l.p.Pp, "({limits.upper}-{limits.lower})/{"+l.side+".sd}/6", "tolerance over six standard deviations")
		mean, sd := "{"+l.side+".mean}", "{"+l.side+".sd}"
		var rooms, shares []string
		if c.Limits.Lower != nil {
			rooms = append(rooms, "("+mean+"-{limits.lower})/"+sd+"/3")
			shares = append(shares, "NORMSDIST(({limits.lower}-"+mean+")/"+sd+")")
		}
		if c.Limits.Upper != nil {
			rooms = append(rooms, "({limits.upper}-"+mean+")/"+sd+"/3")
			shares = append(shares, "NORMSDIST(("+mean+"-{limits.upper})/"+sd+")")
		}
		w.derive("performance."+l.side+".ppk", l.p.Ppk, "MIN("+strings.Join(rooms, ",")+")", "distance of the mean to the nearer limit over three standard deviations")
		w.derive("performance."+l.side+".outside_estimated", l.p.OutsideEstimated, strings.Join(shares, "+"), "normal shares beyond the limits")
	}
}
