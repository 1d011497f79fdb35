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
	t.to(&s, func(name string) string {
		m := meanings[name]
		if m.inUnit {
			return m.text + ", in the unit"
		}
		return m.text
	})
	return s
}

// resultsTable is the figures of all characteristics, name and verdict first.
func resultsTable(r qa.Result) *table {
	t := &table{}
	t.head("name", "unit", "verdict")
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
			tag := strings.Split(v.Type().Field(i).Tag.Get("json"), ",")[0]
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
	"objective": {"what was to be shown", false}, "alpha": {"largest probability of a false verdict", false}, "method": {"Welch: unequal variances", false},
	"verdict": {"what the criterion says of the readings", false}, "detectable": {"is any difference detectable: two-sided p below alpha", false},
	"difference.estimate": {"mean of the candidate minus mean of the reference", true}, "difference.se": {"standard error of the difference", true},
	"difference.df": {"degrees of freedom (Satterthwaite)", false}, "difference.t": {"t against a difference of 0", false},
	"difference.p": {"p in the direction asked", false}, "difference.p_two_sided": {"two-sided p", false}, "difference.p_holm": {"adjusted over the family (Holm)", false},
	"difference.alternative": {"direction of the test for a difference", false}, "difference.level": {"level of the interval", false},
	"difference.lower": {"lower end of the interval", true}, "difference.upper": {"upper end of the interval", true},
	"equivalence.scale": {"what is held against the margin", false}, "equivalence.estimate": {"mean of the candidate minus mean of the reference", true},
	"equivalence.se": {"standard error", true}, "equivalence.df": {"degrees of freedom", false},
	"equivalence.margin.kind": {"how the margin is stated", false}, "equivalence.margin.stated": {"as the plan states it", false},
	"equivalence.margin.stated_lower": {"lower bound as stated", true}, "equivalence.margin.stated_upper": {"upper bound as stated", true},
	"equivalence.margin.of": {"part of which width", false}, "equivalence.margin.full": {"part of the full tolerance", true}, "equivalence.margin.half": {"part of half the tolerance", true},
	"equivalence.margin.guard": {"taken off each end for measurement bias", true}, "equivalence.margin.reason": {"why this margin", false}, "equivalence.margin.approved_by": {"who approved it", false},
	"equivalence.margin_lower": {"lower end as tested (equivalence limit, ASTM E2935)", true}, "equivalence.margin_upper": {"upper end as tested (equivalence limit, ASTM E2935)", true},
	"equivalence.t_lower": {"t against the lower end", false}, "equivalence.p_lower": {"p of: difference at or below the lower end", false},
	"equivalence.t_upper": {"t against the upper end", false}, "equivalence.p_upper": {"p of: difference at or above the upper end", false},
	"equivalence.p": {"p that the verdict rests on", false}, "equivalence.verdict": {"of the mean alone", false},
	"equivalence.level": {"level of the interval, 1 − 2 alpha", false}, "equivalence.lower": {"lower end of the interval", true}, "equivalence.upper": {"upper end of the interval", true},
	"equivalence.smallest_margin": {"smallest symmetric margin that would have been shown; after the fact, never a margin", true},
	"equivalence.permits.ppk":     {"Ppk left at the worse end of the margin", false}, "equivalence.permits.outside": {"fraction outside the limits there", false},
	"spread.sd_ratio": {"standard deviation of the candidate over the reference", false}, "spread.level": {"level of the F interval", false},
	"spread.lower": {"lower end", false}, "spread.upper": {"upper end", false}, "spread.verdict": {"whether a ratio was asked for", false},
	"spread.f.statistic": {"variance of the candidate over the reference", false}, "spread.f.df1": {"degrees of freedom, candidate", false},
	"spread.f.df2": {"degrees of freedom, reference", false}, "spread.f.p": {"two-sided p", false},
}, map[string]meaning{
	"rows": {"rows of the lot", false}, "parts": {"parts with a reading in use", false}, "n": {"readings the test used", false}, "excluded": {"left out with a reason", false},
	"missing": {"blank or marked as missing", false}, "non_detects": {"below or above a detection limit", false}, "unread": {"could not be read", false},
	"mean": {"mean", true}, "sd": {"standard deviation (n − 1)", true}, "min": {"smallest", true}, "q1": {"lower quartile (type 7)", true},
	"median": {"median", true}, "q3": {"upper quartile (type 7)", true}, "max": {"largest", true},
}, map[string]meaning{
	"checks.%.grubbs.g": {"distance of the farthest reading in standard deviations (Grubbs)", false}, "checks.%.grubbs.p": {"two-sided p of the farthest reading", false},
	"checks.%.grubbs.cell": {"where the farthest reading stands", false}, "checks.%.resolution": {"step of the readings", true},
	"performance.%.pp": {"Pp", false}, "performance.%.ppk": {"Ppk", false}, "performance.%.outside_counted": {"fraction of readings outside the limits", false},
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
	return all
}
