package main

import (
	"fmt"
	"strings"
)

// methodsHead is the heading of the methods' table.
var methodsHead = []string{"reference", "made by", "quantity", "points", "values a lot", "worst error", "claimed"}

// accuracyTests are the tests that hold the methods to tables.
const accuracyTests = "AgainstR|AgainstOthers|CountedOut|Table|Digits|PowerUnequal|StRD"

// methodAccuracy runs the tests of the methods and gathers what they say of their accuracy: each writes a line of attributes
// for every quantity of a table (see answers in qa/stats). It returns the table's rows, and an error where a test fails.
func (d *dev) methodAccuracy() ([][]string, error) {
	out, err := d.output(pure, "go", "test", "-count=1", "-v", "-run", accuracyTests, "./qa/stats/...")
	rows := append([][]string{methodsHead}, attributes(out)...)
	if err != nil {
		for line := range strings.Lines(out) {
			if strings.Contains(line, "_test.go:") {
				fmt.Fprint(d.stderr, line)
			}
		}
	}
	return rows, err
}

// attributes are the lines that the tests wrote under the key accuracy, each with its fields between bars.
func attributes(output string) [][]string {
	var rows [][]string
	for line := range strings.Lines(output) {
		_, rest, ok := strings.Cut(line, "=== ATTR ")
		if !ok {
			continue
		}
		_, value, ok := strings.Cut(rest, " accuracy ")
		if !ok {
			continue
		}
		row := strings.Split(strings.TrimSpace(value), " | ")
		if len(row) == len(methodsHead) {
			rows = append(rows, row)
		}
	}
	return rows
}
