package importers

import (
	"fmt"
	"reflect"
	"sort"
	"strings"

	"github.com/pelletier/go-toml/v2/unstable"

	"lotpair/qa"
)

// planKeys is where each key of a plan stands, and what is wrong with the keys and the types of their values. The TOML
// library stops at the first wrong type and takes keys in any case; a plan is checked whole and to the letter.
type planKeys struct {
	name   string
	lines  map[string]int // "criterion.margin.absolute", "characteristic[2].lower", elements from 1
	faults []Fault

	newlines []int
	counts   map[string]int // elements of [[tables]] so far
}

func walkPlan(name string, data []byte) *planKeys {
	k := &planKeys{name: name, lines: map[string]int{}, counts: map[string]int{}}
	for i, c := range data {
		if c == '\n' {
			k.newlines = append(k.newlines, i)
		}
	}
	var p unstable.Parser
	p.Reset(data)
	root := reflect.TypeFor[qa.Plan]()
	path, typ := "", root
	for p.NextExpression() {
		e := p.Expression()
		switch e.Kind {
		case unstable.Table, unstable.ArrayTable:
			path, typ = k.table(root, e)
		case unstable.KeyValue:
			if typ != nil { // keys of an unknown table are not reported one by one
				k.pair(path, typ, e)
			}
		}
	}
	return k
}

// lineAt is the 1-based line of an offset.
func (k *planKeys) lineAt(offset uint32) int {
	return sort.SearchInts(k.newlines, int(offset)) + 1
}

func (k *planKeys) fault(line int, format string, args ...any) {
	k.faults = append(k.faults, Fault{Place: placeOf(k.name, line), Line: line, Text: fmt.Sprintf(format, args...)})
}

// table goes to the table that a heading names; nil where there is no such table.
func (k *planKeys) table(root reflect.Type, e *unstable.Node) (string, reflect.Type) {
	path, typ := "", root
	line := 0
	for it := e.Key(); it.Next(); {
		line = k.lineAt(it.Node().Raw.Offset)
		name := string(it.Node().Data)
		field, ok := fieldOf(typ, name)
		if !ok {
			k.unknown(line, path, typ, name)
			return "", nil
		}
		path, typ = join(path, name), field
		if list := isList(typ); list {
			if it.IsLast() && e.Kind == unstable.ArrayTable {
				k.counts[path]++
			}
			path, typ = fmt.Sprintf("%s[%d]", path, k.counts[path]), typ.Elem()
		} else if it.IsLast() && e.Kind == unstable.ArrayTable {
			k.fault(line, "key %q: found a list of tables [[%s]], want one table [%s]; write single brackets", path, path, path)
			return "", nil
		}
		if typ = pointed(typ); typ.Kind() != reflect.Struct {
			k.fault(line, "key %q: found a table, want %s; write it as a key", path, wanted(typ))
			return "", nil
		}
		if it.IsLast() && e.Kind == unstable.Table && strings.HasSuffix(path, "]") {
			list := path[:strings.LastIndexByte(path, '[')]
			k.fault(line, "key %q: found one table [%s], want a list of tables [[%s]]; write double brackets", list, list, list)
			return "", nil
		}
	}
	k.lines[path] = line
	return path, typ
}

// pair checks one key and its value.
func (k *planKeys) pair(path string, typ reflect.Type, e *unstable.Node) {
	line := 0
	for it := e.Key(); it.Next(); {
		line = k.lineAt(it.Node().Raw.Offset)
		name := string(it.Node().Data)
		if typ = pointed(typ); typ.Kind() != reflect.Struct {
			k.fault(line, "key %q: found the key %q inside it, want %s; correct the plan", path, name, wanted(typ))
			return
		}
		field, ok := fieldOf(typ, name)
		if !ok {
			k.unknown(line, path, typ, name)
			return
		}
		path, typ = join(path, name), field
		if _, ok := k.lines[path]; !ok {
			k.lines[path] = line
		}
	}
	k.value(path, pointed(typ), e.Value(), line)
}

// value checks a value against the type of its key.
func (k *planKeys) value(path string, typ reflect.Type, v *unstable.Node, line int) {
	found := tomlKind(v.Kind)
	switch {
	case typ.Kind() == reflect.Struct && v.Kind == unstable.InlineTable:
		for it := v.Children(); it.Next(); {
			k.pair(path, typ, it.Node())
		}
		return
	case isList(typ) && v.Kind == unstable.Array:
		n := 0
		for it := v.Children(); it.Next(); {
			if it.Node().Kind == unstable.Comment {
				continue
			}
			n++
			element := fmt.Sprintf("%s[%d]", path, n)
			at := line
			if first := it.Node().Child(); first != nil && first.Kind == unstable.KeyValue {
				if keys := first.Key(); keys.Next() {
					at = k.lineAt(keys.Node().Raw.Offset)
				}
			}
			k.lines[element] = at
			k.value(element, pointed(typ.Elem()), it.Node(), at)
		}
		return
	case typ.Kind() == reflect.String && v.Kind == unstable.String,
		typ.Kind() == reflect.Float64 && (v.Kind == unstable.Float || v.Kind == unstable.Integer),
		(typ.Kind() == reflect.Int || typ.Kind() == reflect.Int64) && v.Kind == unstable.Integer,
		typ.Kind() == reflect.Bool && v.Kind == unstable.Bool:
		return
	}
	if len(v.Data) > 0 && v.Kind != unstable.InlineTable && v.Kind != unstable.Array {
		found += " " + quoted(string(v.Data))
	}
	k.fault(line, "key %q: found %s, want %s; correct the plan", path, found, wanted(typ))
}

// unknown reports a key that no plan has, with the nearest one that it has.
func (k *planKeys) unknown(line int, path string, typ reflect.Type, name string) {
	var known []string
	for i := range typ.NumField() {
		known = append(known, typ.Field(i).Tag.Get("toml"))
	}
	near := nearest(name, known)
	if distance(name, near) > (len(name)+1)/2 { // a key of another table
		var all []string
		allKeys("", reflect.TypeFor[qa.Plan](), &all)
		best := ""
		for _, full := range all {
			last := full[strings.LastIndexByte(full, '.')+1:]
			if best == "" || distance(name, last) < distance(name, best[strings.LastIndexByte(best, '.')+1:]) {
				best = full
			}
		}
		last := best[strings.LastIndexByte(best, '.')+1:]
		if d := distance(name, last); d < distance(name, near) && d <= (len(name)+1)/2 {
			near = best
			if last == best && path != "" {
				k.fault(line, "unknown key %q under %q; nearest known key is %q, which stands before the first [table]", name, path, near)
				return
			}
		}
	}
	where := ""
	if path != "" {
		where = fmt.Sprintf(" under %q", path)
	}
	k.fault(line, "unknown key %q%s; nearest known key is %q", name, where, near)
}

func allKeys(path string, typ reflect.Type, into *[]string) {
	for i := range typ.NumField() {
		name := join(path, typ.Field(i).Tag.Get("toml"))
		*into = append(*into, name)
		t := pointed(typ.Field(i).Type)
		if isList(t) {
			t = pointed(t.Elem())
		}
		if t.Kind() == reflect.Struct {
			allKeys(name, t, into)
		}
	}
}

func fieldOf(typ reflect.Type, key string) (reflect.Type, bool) {
	for i := range typ.NumField() {
		if typ.Field(i).Tag.Get("toml") == key {
			return pointed(typ.Field(i).Type), true
		}
	}
	return nil, false
}

func pointed(t reflect.Type) reflect.Type {
	if t.Kind() == reflect.Pointer {
		return t.Elem()
	}
	return t
}

func isList(t reflect.Type) bool { return t.Kind() == reflect.Slice }

func join(path, name string) string {
	if path == "" {
		return name
	}
	return path + "." + name
}

// wanted is a type in the words of a plan.
func wanted(t reflect.Type) string {
	switch t.Kind() {
	case reflect.String:
		return "text in quotes"
	case reflect.Float64:
		return "a number"
	case reflect.Int, reflect.Int64:
		return "a whole number"
	case reflect.Bool:
		return "true or false"
	case reflect.Slice:
		if pointed(t.Elem()).Kind() == reflect.Struct {
			return "a list of tables"
		}
		return "a list"
	}
	return "a table { … }"
}

func tomlKind(kind unstable.Kind) string {
	switch kind {
	case unstable.String:
		return "text"
	case unstable.Bool:
		return "the truth value"
	case unstable.Float, unstable.Integer:
		return "the number"
	case unstable.Array:
		return "a list"
	case unstable.InlineTable:
		return "a table"
	}
	return "a date or time"
}
