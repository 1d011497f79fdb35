package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
)

// accuracyOutsiders are the programs that say what they have for the same points: a script gets a table and prints a line for
// each of its points: a number, or - where the program has no such function.
func accuracyOutsiders() []outsider {
	all := outsiders()
	for i := range all {
		all[i].script = strings.Replace(all[i].script, "bench", "accuracy", 1)
	}
	return all
}

// theirValues are what a program gives for every point of a table.
func (d *dev) theirValues(o outsider, file string, points int) ([]float64, error) {
	file, err := filepath.Abs(file) // the script runs in its own folder
	if err != nil {
		return nil, err
	}
	c := exec.Command(o.command, o.script, file)
	c.Dir, c.Stderr = d.path("cmd", "dev", "testdata"), d.stderr
	c.Env = append(os.Environ(), "LC_ALL=C.UTF-8")
	out, err := c.Output()
	if err != nil {
		return nil, fmt.Errorf("%s %s: %w", filepath.Join("cmd/dev/testdata", o.script), file, err)
	}
	return readValues(o.script, string(out), points)
}

// readValues reads what a script printed.
func readValues(script, out string, points int) ([]float64, error) {
	var values []float64
	for _, text := range strings.Fields(out) {
		if text == "-" {
			values = append(values, missingValue)
			continue
		}
		v, err := strconv.ParseFloat(text, 64)
		if err != nil {
			return nil, fmt.Errorf("%s: found %q, want a number or -", script, text)
		}
		values = append(values, v)
	}
	if len(values) != points {
		return nil, fmt.Errorf("%s: found %d values, want one for each of %d points", script, len(values), points)
	}
	return values, nil
}
