package importers

import (
	"fmt"
	"math"
	"reflect"
	"strconv"
	"strings"

	"lotpair/qa"
)

// PlanText is the plan as a plan file: all that it states, in the order of the contract, and nothing else. LoadPlan reads the
// same plan from it.
func PlanText(p qa.Plan) string { return planWriter{}.text(p) }

// planWriter writes a plan. A key with a note is written even where it is empty, with the note behind it; after a key come the
// lines that stand in after, whether the key is written or not. Keys are "reading.sheet", "characteristic[2].lower".
type planWriter struct {
	notes map[string]string
	after map[string][]string
	lines []string
}

func (w planWriter) text(p qa.Plan) string {
	out := &planWriter{notes: w.notes, after: w.after}
	v := reflect.ValueOf(p)
	for _, f := range tomlFields(v, "") { // what stands below no heading comes first
		if !f.table() {
			out.pair(f)
		}
	}
	for _, f := range tomlFields(v, "") {
		switch {
		case !f.table():
		case f.value.Kind() == reflect.Slice:
			for i := range f.value.Len() {
				out.section("[["+f.name+"]]", f.value.Index(i), fmt.Sprintf("%s[%d]", f.key, i+1))
			}
		case f.value.Kind() == reflect.Pointer && !f.value.IsNil():
			out.section("["+f.name+"]", f.value.Elem(), f.key)
		case f.value.Kind() == reflect.Struct && (!f.value.IsZero() || f.must() || out.noted(f.key)):
			out.section("["+f.name+"]", f.value, f.key)
		}
	}
	return strings.Join(out.lines, "\n") + "\n"
}

func (w *planWriter) noted(key string) bool {
	for k := range w.notes {
		if strings.HasPrefix(k, key+".") {
			return true
		}
	}
	return false
}

func (w *planWriter) section(head string, v reflect.Value, key string) {
	w.lines = append(w.lines, "", head)
	for _, f := range tomlFields(v, key) {
		w.pair(f)
	}
}

// pair writes one key of a table, where there is something to write.
func (w *planWriter) pair(f tomlField) {
	note, noted := w.notes[f.key]
	if text := f.text(); text != "" && (noted || !f.value.IsZero()) {
		line := f.name + " = " + text
		if note != "" {
			line += " # " + note
		}
		w.lines = append(w.lines, line)
	}
	w.lines = append(w.lines, w.after[f.key]...)
}

// tomlField is one key of a plan with its value.
type tomlField struct {
	name, key string
	value     reflect.Value
}

func tomlFields(v reflect.Value, key string) []tomlField {
	var out []tomlField
	for i := range v.NumField() {
		name := v.Type().Field(i).Tag.Get("toml")
		out = append(out, tomlField{name, join(key, name), v.Field(i)})
	}
	return out
}

// table says whether a key of the plan itself has a heading of its own.
func (f tomlField) table() bool {
	t := pointed(f.value.Type())
	return t.Kind() == reflect.Struct || t == reflect.TypeFor[[]qa.Characteristic]()
}

// must says whether the plan needs the table.
func (f tomlField) must() bool {
	return f.name == "reference" || f.name == "candidate" || f.name == "criterion"
}

// text is the value as TOML writes it; empty for one that does not exist.
func (f tomlField) text() string {
	v := f.value
	switch v.Kind() {
	case reflect.Pointer:
		if v.IsNil() {
			return ""
		}
		return tomlField{f.name, f.key, v.Elem()}.text()
	case reflect.String:
		return tomlText(v.String())
	case reflect.Float64:
		return tomlNumber(v.Float())
	case reflect.Int, reflect.Int64:
		return strconv.FormatInt(v.Int(), 10)
	case reflect.Slice:
		return f.listText()
	case reflect.Struct:
		return inlineTable(v)
	}
	return ""
}

// listText is a list: of texts on one line, of tables a line each.
func (f tomlField) listText() string {
	var all []string
	for i := range f.value.Len() {
		all = append(all, tomlField{value: f.value.Index(i)}.text())
	}
	if f.value.Len() > 0 && f.value.Type().Elem().Kind() == reflect.Struct {
		return "[\n  " + strings.Join(all, ",\n  ") + ",\n]"
	}
	return "[" + strings.Join(all, ", ") + "]"
}

// inlineTable is a table on one line: what is empty is left out, but not a number that is no pointer, which is stated.
func inlineTable(v reflect.Value) string {
	var all []string
	for _, f := range tomlFields(v, "") {
		if f.value.IsZero() && f.value.Kind() != reflect.Float64 {
			continue
		}
		all = append(all, f.name+" = "+f.text())
	}
	return "{ " + strings.Join(all, ", ") + " }"
}

// tomlText is a TOML basic string (TOML 1.0, "String").
func tomlText(s string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range s {
		switch {
		case r == '"' || r == '\\':
			b.WriteByte('\\')
			b.WriteRune(r)
		case r < ' ' || r == 0x7f:
			fmt.Fprintf(&b, "\\u%04X", r)
		default:
			b.WriteRune(r)
		}
	}
	b.WriteByte('"')
	return b.String()
}

// tomlNumber is a number that reads back the same. Beyond what a whole number of TOML holds it is written with a point.
func tomlNumber(x float64) string {
	const exact = 1 << 53
	s := strconv.FormatFloat(x, 'g', -1, 64)
	if mantissa, exponent, ok := strings.Cut(s, "e"); ok {
		return mantissa + "e" + strings.TrimPrefix(exponent, "+")
	}
	if math.Abs(x) >= exact && !strings.Contains(s, ".") {
		s += ".0"
	}
	return s
}
