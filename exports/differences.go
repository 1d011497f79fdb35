package exports

import (
	"encoding/json"
	"fmt"
	"math"
	"sort"
	"strings"

	"lotpair/qa"
)

// How closely two numbers must agree: 1e-9 relative, or 1e-12 of the largest reading (contract: console, "agrees").
const (
	relativeAgreement = 1e-9
	readingAgreement  = 1e-12
	maxDifferences    = 50 // listed; a changed reading moves every figure
)

// largest is the largest absolute reading of the record.
func largest(r qa.Readings) float64 {
	m := 0.0
	for _, l := range []qa.Lot{r.Reference, r.Candidate} {
		for _, s := range l.Series {
			for _, x := range s.Readings {
				m = math.Max(m, math.Abs(x.Value))
			}
		}
	}
	return m
}

// sameNumber says whether two numbers agree.
func sameNumber(a, b, largest float64) bool {
	d := math.Abs(a - b)
	return d <= relativeAgreement*math.Max(math.Abs(a), math.Abs(b)) || d <= readingAgreement*largest
}

// differences lists where two results differ, by the names of the result format. Words, verdicts and counts must be equal.
func differences(stated, again qa.Result, largest float64) []string {
	d := differ{largest: largest, unitless: map[string]bool{}}
	for i, c := range stated.Characteristics {
		if e := c.Equivalence; e != nil && e.Scale == "ratio" || c.Kind == "attribute" {
			d.unitless[fmt.Sprintf("characteristics[%d].equivalence.", i)] = true
		}
	}
	d.walk("", tree(stated), tree(again))
	return d.found
}

// tree is a result as plain JSON values.
func tree(r qa.Result) any {
	b, err := json.Marshal(r)
	if err != nil {
		return err.Error()
	}
	var t any
	if err := json.Unmarshal(b, &t); err != nil {
		return err.Error()
	}
	return t
}

type differ struct {
	largest  float64
	unitless map[string]bool // blocks whose figures are ratios or fractions
	found    []string
}

func (d *differ) say(path string, stated, again any) {
	if len(d.found) < maxDifferences {
		d.found = append(d.found, fmt.Sprintf("%s: the record states %v, the recomputation gives %v", path, short(stated), short(again)))
	}
}

func short(v any) string {
	b, err := json.Marshal(v)
	if err != nil {
		return fmt.Sprint(v)
	}
	if r := []rune(string(b)); len(r) > 80 {
		return string(r[:79]) + "…"
	}
	return string(b)
}

func (d *differ) walk(path string, a, b any) {
	switch x := a.(type) {
	case map[string]any:
		y, ok := b.(map[string]any)
		if !ok {
			d.say(path, a, b)
			return
		}
		for _, k := range keys(x, y) {
			d.walk(join(path, k), x[k], y[k])
		}
	case []any:
		y, ok := b.([]any)
		if !ok || len(x) != len(y) {
			d.say(path, a, b)
			return
		}
		for i := range x {
			d.walk(fmt.Sprintf("%s[%d]", path, i), x[i], y[i])
		}
	case float64:
		if y, ok := b.(float64); !ok || !sameNumber(x, y, d.scale(path)) {
			d.say(path, a, b)
		}
	default:
		if a != b {
			d.say(path, a, b)
		}
	}
}

// scale is the largest reading for a figure in the unit of the readings, and 1 for the others: rounding of readings near
// 1e12 must not excuse a p-value.
func (d *differ) scale(path string) float64 {
	if _, name, ok := strings.Cut(path, "]."); ok && meanings[name].inUnit && !d.unitless[path[:strings.LastIndex(path, ".")+1]] {
		return d.largest
	}
	return 1
}

func keys(a, b map[string]any) []string {
	var out []string
	for k := range a {
		out = append(out, k)
	}
	for k := range b {
		if _, ok := a[k]; !ok {
			out = append(out, k)
		}
	}
	sort.Strings(out)
	return out
}

func join(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}
