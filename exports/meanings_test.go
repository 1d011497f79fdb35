package exports

import (
	"reflect"
	"strings"
	"testing"

	"lotpair/qa"
)

// TestMeanings wants every figure of the result format to have a meaning in plain words, and no meaning without a figure.
func TestMeanings(t *testing.T) {
	known := map[string]bool{}
	var walk func(prefix string, typ reflect.Type)
	walk = func(prefix string, typ reflect.Type) {
		switch typ.Kind() {
		case reflect.Pointer:
			walk(prefix, typ.Elem())
		case reflect.Struct:
			for i := range typ.NumField() {
				f := typ.Field(i)
				tag, _, _ := strings.Cut(f.Tag.Get("json"), ",")
				if tag == "-" || tag == "" || tag == "warnings" || tag == "sensitivity" {
					continue
				}
				walk(strings.TrimPrefix(prefix+"."+tag, "."), f.Type)
			}
		default:
			known[prefix] = true
		}
	}
	walk("", reflect.TypeFor[qa.Comparison]())
	for name := range known {
		if meanings[name].text == "" {
			t.Errorf("%s: found no meaning", name)
		}
	}
	for name := range meanings {
		if !known[name] {
			t.Errorf("%s: a meaning of no figure", name)
		}
	}
}
