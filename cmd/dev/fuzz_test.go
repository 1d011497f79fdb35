package main

import (
	"bytes"
	"slices"
	"strings"
	"testing"
)

func TestFuzzTargets(t *testing.T) {
	all, err := fuzzTargets(root, "")
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []target{{"./importers", "FuzzParseNumber"}, {"./importers", "FuzzOpen"}, {"./importers/cells", "FuzzReadODS"}, {"./exports/opcsign", "FuzzCanonical"}} {
		if !slices.Contains(all, want) {
			t.Errorf("got %v, want %v among them", all, want)
		}
	}
	some, err := fuzzTargets(root, "parsenumber")
	if err != nil || len(some) != 1 {
		t.Errorf("got %v, %v, want FuzzParseNumber alone", some, err)
	}
	for _, args := range [][]string{{"--minutes", "0"}, {"--minutes", "x"}, {"a", "b"}, {"NoSuchTarget"}} {
		var out bytes.Buffer
		if err := fuzz(&dev{root: root, stdout: &out, stderr: &out}, args); err == nil || strings.Contains(out.String(), "$ ") {
			t.Errorf("%v: got %v, %q, want it refused before anything runs", args, err, out.String())
		}
	}
}
