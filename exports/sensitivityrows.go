package exports

import (
	"reflect"
	"strings"

	"lotpair/qa"
)

// sensitivitySheet states the verdict again under each other method. It is there only where the result has any.
func sensitivitySheet(rec qa.Record) (sheet, bool) {
	names := make([]string, 0, len(rec.Result.Characteristics))
	var all []reflect.Value
	for _, c := range rec.Result.Characteristics {
		names = append(names, nameWithUnit(c))
		all = append(all, reflect.ValueOf(c))
	}
	return sensitivityOf(names, all)
}

// sensitivityOf reads the blocks under the result format's name, so that a figure that comes to them comes to the sheet.
func sensitivityOf(names []string, all []reflect.Value) (sheet, bool) {
	t := table{least: 20}
	t.head("characteristic", "characteristic")
	for i, c := range all {
		list := fieldOf(c, "sensitivity")
		if list.Kind() != reflect.Slice {
			continue
		}
		for j := range list.Len() {
			rows := append([]figureRow{{name: "characteristic", text: names[i]}}, flatten("", list.Index(j))...)
			t.add(rows)
		}
	}
	s := sheet{name: SheetSensitivity, landscape: true}
	s.add(text("Sensitivity", titleLook))
	s.addTall(30, wide("The verdict again under each other method. None of them changes the verdict of the criterion; where they part, look why.", wrapLook, max(2, len(t.names))))
	t.to(&s, sensitivityMeaning)
	s.gap()
	seen := map[string]bool{}
	for _, r := range t.rows {
		if m := r["method"].text; !seen[m] && waysWords[m] != "" {
			seen[m] = true
			s.add(text(m, mutedLook), text(waysWords[m], plainLook))
		}
	}
	return s, len(t.rows) > 0
}

// waysWords say in words what each other way of computing the verdict is.
var waysWords = map[string]string{
	"welch": "means with their own variances (Welch)", "pooled": "means with one variance for both lots (Student)",
	"log": "ratio of geometric means, on natural logarithms", "trimmed": "means without the lowest and highest fifth of the readings (Yuen)",
	"ranks":     "shift by ranks: the median of all differences between the lots (Hodges, Lehmann)",
	"bootstrap": "readings drawn again from each lot with replacement, pairs as pairs", "permutation": "readings dealt again to the two lots; of pairs, their differences with signs turned",
	"exclusions-put-back": "with every reading that was left out", "exclusion-put-back": "with the one reading of the named cell that was left out",
	"outlying-removed": "without the readings that the generalized ESD test calls outlying; no ground to leave them out",
	"non-detects-best": "non-detects at the end of their range that favours what is to be shown", "non-detects-worst": "non-detects at the end that speaks against it",
	"newcombe": "difference of the fractions by the interval of Newcombe (1998)", "gauge-bias": "with the stated uncertainty of the bias of the gauges",
}

func sensitivityMeaning(name string) string {
	return map[string]string{
		"characteristic": "with its unit", "method": "computed otherwise", "estimate": "what is held against the margin", "level": "level of the interval",
		"lower": "lower end", "upper": "upper end", "verdict": "what the criterion would say", "p": "p that the verdict rests on",
		"cell": "the one reading put back", "seed": "of the random numbers", "resamples": "how often drawn again",
	}[name]
}

// fieldOf is the field of a struct with the JSON name, or the zero Value.
func fieldOf(v reflect.Value, name string) reflect.Value {
	for i := range v.NumField() {
		if tag, _, _ := strings.Cut(v.Type().Field(i).Tag.Get("json"), ","); tag == name {
			return v.Field(i)
		}
	}
	return reflect.Value{}
}
