package exports

import (
	"reflect"
	"strings"

	"lotpair/qa"
)

// resultsSheet states all figures at full precision under the names of the result format: a row a characteristic, a column a
// figure, so that characteristics can be sorted and filtered and another program can read them.
func resultsSheet(rec qa.Record) sheet {
	s := sheet{name: SheetResults, landscape: true, flows: true}
	s.add(text("Results", titleLook))
	s.add(cell{}, text("All figures at full precision, a line a characteristic. Differences are candidate minus reference. An empty cell: the value does not exist; the sheet Findings says why.", plainLook))
	s.add(cell{}, text("Overall: "+string(rec.Result.Verdict)+". "+"The same figures, one a line and with their formulas: sheet Workings.", strongLook))
	t := resultsTable(rec.Result)
	ratio := false
	for _, c := range rec.Result.Characteristics {
		ratio = ratio || c.Equivalence != nil && c.Equivalence.Scale == "ratio"
	}
	t.to(&s, func(name string) string {
		m := meanings[name]
		if m.inUnit && ratio && strings.HasPrefix(name, "equivalence.") {
			return m.text + ", in the unit, or a ratio where the scale is one"
		}
		if m.inUnit {
			return m.text + ", in the unit"
		}
		return m.text
	})
	return s
}

// resultsTable is the figures of all characteristics: first those that are looked at first, then all others in the order of the
// result format.
func resultsTable(r qa.Result) *table {
	t := &table{}
	t.head("name", "unit", "verdict", "reference.n", "candidate.n", "reference.mean", "candidate.mean", "reference.sd", "candidate.sd", "difference.estimate",
		"equivalence.lower", "equivalence.upper", "equivalence.margin_lower", "equivalence.margin_upper", "equivalence.p", "spread.sd_ratio")
	for _, c := range r.Characteristics {
		t.add(flatten("", reflect.ValueOf(c)))
	}
	return t
}

// figureRow is one value of the result with its dotted name.
type figureRow struct {
	name   string
	text   string
	number *float64
}

func (f figureRow) value() cell {
	if f.number != nil {
		return number(f.number, ruledNumberLook)
	}
	return text(f.text, ruledLook)
}

// flatten lists every number, text and truth value of a result struct in its own order, under the JSON names.
func flatten(prefix string, v reflect.Value) []figureRow {
	switch v.Kind() {
	case reflect.Pointer:
		if v.IsNil() {
			return nil
		}
		return flatten(prefix, v.Elem())
	case reflect.Struct:
		var out []figureRow
		for i := range v.NumField() {
			tag, rest, _ := strings.Cut(v.Type().Field(i).Tag.Get("json"), ",")
			if strings.Contains(rest, "omitempty") && v.Field(i).Kind() == reflect.Int && v.Field(i).IsZero() {
				continue // a count of what this comparison does not have
			}
			if tag == "-" || tag == "warnings" || tag == "sensitivity" { // they have sheets of their own
				continue
			}
			name := tag
			if prefix != "" {
				name = prefix + "." + tag
			}
			out = append(out, flatten(name, v.Field(i))...)
		}
		return out
	case reflect.Slice:
		return flattenList(prefix, v)
	case reflect.Float64:
		x := v.Float()
		return []figureRow{{name: prefix, number: &x}}
	case reflect.Int:
		x := float64(v.Int())
		return []figureRow{{name: prefix, number: &x}}
	case reflect.Bool:
		return []figureRow{{name: prefix, text: map[bool]string{true: "yes", false: "no"}[v.Bool()]}}
	case reflect.String:
		if v.String() == "" {
			return nil
		}
		return []figureRow{{name: prefix, text: v.String()}}
	}
	return nil
}

// flattenList joins a list of words into one text; other lists have sheets of their own.
func flattenList(prefix string, v reflect.Value) []figureRow {
	if v.Type().Elem().Kind() != reflect.String || v.Len() == 0 {
		return nil
	}
	words := make([]string, v.Len())
	for i := range words {
		words[i] = v.Index(i).String()
	}
	return []figureRow{{name: prefix, text: strings.Join(words, ", ")}}
}

// meaning explains a figure; inUnit says that it is in the characteristic's unit.
type meaning struct {
	text   string
	inUnit bool
}

var meanings = withSides(map[string]meaning{
	"name": {"characteristic", false}, "unit": {"unit of the characteristic", false}, "kind": {"kind of characteristic", false},
	"limits.lower": {"lower specification limit", true}, "limits.target": {"target", true}, "limits.upper": {"upper specification limit", true},
	"objective": {"what was to be shown", false}, "alpha": {"largest probability of a false verdict", false}, "method": {"how difference and error are estimated", false},
	"verdict": {"what the criterion says of the readings", false}, "detectable": {"is any difference detectable: two-sided p below alpha", false},
	"difference.estimate": {"mean of the candidate minus mean of the reference", true}, "difference.se": {"standard error of the difference", true},
	"difference.df": {"degrees of freedom", false}, "difference.t": {"t against a difference of 0", false},
	"difference.p": {"p in the direction asked", false}, "difference.p_two_sided": {"two-sided p", false}, "difference.p_holm": {"adjusted over the family (Holm)", false},
	"difference.alternative": {"direction of the test for a difference", false}, "difference.level": {"level of the interval", false},
	"difference.lower": {"lower end of the interval", true}, "difference.upper": {"upper end of the interval", true},
	"difference.method": {"how fractions are compared", false},
	"equivalence.scale": {"what is held against the margin", false}, "equivalence.estimate": {"estimate on that scale", true},
	"equivalence.se": {"standard error", true}, "equivalence.df": {"degrees of freedom", false},
	"equivalence.df_lower": {"degrees of freedom at the lower end (ratio of means)", false}, "equivalence.df_upper": {"degrees of freedom at the upper end (ratio of means)", false},
	"equivalence.margin.mean": {"mean that the Ppk is kept at", true}, "equivalence.margin.sd": {"standard deviation that the Ppk is kept at", true},
	"equivalence.z_lower": {"score against the lower end (fractions)", false}, "equivalence.z_upper": {"score against the upper end (fractions)", false},
	"equivalence.margin.kind": {"how the margin is stated", false}, "equivalence.margin.stated": {"as the plan states it", false},
	"equivalence.margin.stated_lower": {"lower bound as stated", true}, "equivalence.margin.stated_upper": {"upper bound as stated", true},
	"equivalence.margin.of": {"part of which width", false}, "equivalence.margin.full": {"part of the full tolerance", true}, "equivalence.margin.half": {"part of half the tolerance", true},
	"equivalence.margin.guard": {"taken off each end for measurement bias", true}, "equivalence.margin.reason": {"why this margin", false}, "equivalence.margin.approved_by": {"who approved it", false},
	"equivalence.margin_lower": {"lower end as tested (equivalence limit, ASTM E2935)", true}, "equivalence.margin_upper": {"upper end as tested (equivalence limit, ASTM E2935)", true},
	"equivalence.t_lower": {"t against the lower end", false}, "equivalence.p_lower": {"p of: difference at or below the lower end", false},
	"equivalence.t_upper": {"t against the upper end", false}, "equivalence.p_upper": {"p of: difference at or above the upper end", false},
	"equivalence.p": {"p that the verdict rests on", false}, "equivalence.verdict": {"of the mean alone", false},
	"equivalence.level": {"level of the interval, 1 − 2 alpha", false}, "equivalence.lower": {"lower end of the interval", true}, "equivalence.upper": {"upper end of the interval", true},
	"equivalence.smallest_margin": {"smallest symmetric margin that would have been shown; never a margin", true},
	"equivalence.permits.ppk":     {"Ppk left at the worse end of the margin", false}, "equivalence.permits.outside": {"fraction outside the limits there", false},
	"new_study.power":             {"probability with which a new, separate study would show it", false},
	"new_study.at_zero.reference": {"parts of the reference it takes where there is no difference", false}, "new_study.at_zero.candidate": {"parts of the candidate", false},
	"new_study.at_estimate.reference":    {"parts of the reference it takes where the difference is as found; not to extend these readings", false},
	"new_study.at_estimate.candidate":    {"parts of the candidate", false},
	"new_study.at_zero.groups_reference": {"groups that these are, of the reference", false}, "new_study.at_zero.groups_candidate": {"groups, of the candidate", false},
	"new_study.at_estimate.groups_reference": {"groups that these are, of the reference", false}, "new_study.at_estimate.groups_candidate": {"groups, of the candidate", false},
	"spread.sd_ratio": {"standard deviation of the candidate over the reference", false}, "spread.level": {"level of the F interval", false},
	"spread.lower": {"lower end", false}, "spread.upper": {"upper end", false}, "spread.verdict": {"what is asked of the ratio holds or not", false},
	"spread.asked": {"largest acceptable ratio of standard deviations", false}, "spread.bonett.level": {"level of the interval that is robust to shape (Bonett)", false},
	"spread.bonett.lower": {"its lower end", false}, "spread.bonett.upper": {"its upper end", false},
	"spread.pitman_morgan.t": {"t of equal spread, same parts (Pitman, Morgan)", false}, "spread.pitman_morgan.df": {"its degrees of freedom", false}, "spread.pitman_morgan.p": {"its two-sided p", false},
	"spread.f.statistic": {"variance of the candidate over the reference", false}, "spread.f.df1": {"degrees of freedom, candidate", false},
	"spread.f.df2": {"degrees of freedom, reference", false}, "spread.f.p": {"two-sided p", false},
	"fisher.p":         {"two-sided p of Fisher's exact test; decides nothing", false},
	"groups.reference": {"groups of the reference", false}, "groups.candidate": {"groups of the candidate", false},
	"groups.sd_between": {"standard deviation between groups", true}, "groups.sd_within": {"standard deviation within groups", true},
	"ranks.u": {"pairs in which the candidate is above (Mann and Whitney)", false}, "ranks.v": {"sum of positive signed ranks (Wilcoxon)", false},
	"ranks.p": {"two-sided p by ranks", false}, "ranks.exact": {"is that p exact", false}, "ranks.shift": {"shift by ranks (Hodges, Lehmann)", true},
	"ranks.level": {"level of its interval", false}, "ranks.lower": {"lower end of the shift", true}, "ranks.upper": {"upper end of the shift", true},
}, map[string]meaning{
	"rows": {"rows of the lot", false}, "parts": {"parts with a reading in use", false}, "n": {"readings the test used", false}, "excluded": {"left out with a reason", false},
	"missing": {"blank or marked as missing", false}, "non_detects": {"below or above a detection limit", false}, "unread": {"could not be read", false},
	"unmatched": {"without a partner in the other lot", false}, "repeats": {"repeat readings, averaged into their part", false},
	"failed": {"parts that failed", false}, "fraction": {"fraction that failed", false},
	"mean": {"mean", true}, "sd": {"standard deviation (n − 1)", true}, "min": {"smallest", true}, "q1": {"lower quartile (type 7)", true},
	"median": {"median", true}, "q3": {"upper quartile (type 7)", true}, "max": {"largest", true},
}, map[string]meaning{
	"checks.%.grubbs.g": {"distance of the farthest reading in standard deviations (Grubbs)", false}, "checks.%.grubbs.p": {"two-sided p of the farthest reading", false},
	"checks.%.shapiro_wilk.w": {"closeness to a normal distribution (Shapiro, Wilk)", false}, "checks.%.shapiro_wilk.p": {"its p", false},
	"checks.%.esd_outliers": {"readings beyond the generalized ESD test (Rosner)", false}, "checks.%.runs.runs": {"runs about the median", false}, "checks.%.runs.p": {"two-sided p of so many runs", false},
	"checks.%.lag1":        {"correlation of neighbouring readings", false},
	"checks.%.grubbs.cell": {"where the farthest reading stands", false}, "checks.%.resolution": {"step of the readings", true},
	"performance.%.pp": {"Pp", false}, "performance.%.ppk": {"Ppk", false}, "performance.%.outside_counted": {"fraction of readings outside the limits", false},
	"performance.%.level": {"level of the interval of Ppk", false}, "performance.%.ppk_lower": {"lower end of Ppk (Bissell)", false}, "performance.%.ppk_upper": {"upper end of Ppk (Bissell)", false},
	"performance.%.tolerance_interval.coverage": {"part of the lot that the tolerance interval holds", false}, "performance.%.tolerance_interval.confidence": {"its confidence", false},
	"performance.%.tolerance_interval.k": {"its factor", false}, "performance.%.tolerance_interval.lower": {"its lower end", true}, "performance.%.tolerance_interval.upper": {"its upper end", true},
	"performance.%.outside_estimated": {"fraction expected outside, normal model", false},
})

// withSides adds the meanings that hold for either lot.
func withSides(all, sample, other map[string]meaning) map[string]meaning {
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		for name, m := range sample {
			all[string(side)+"."+name] = meaning{string(side) + ": " + m.text, m.inUnit}
		}
		for name, m := range other {
			all[strings.Replace(name, "%", string(side), 1)] = meaning{string(side) + ": " + m.text, m.inUnit}
		}
	}
	for name, m := range other { // of pairs
		if rest, ok := strings.CutPrefix(name, "checks.%."); ok {
			all["checks.difference."+rest] = meaning{"differences: " + m.text, m.inUnit}
		}
	}
	return all
}
