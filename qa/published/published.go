// Package published holds check values that others published, with their sources and the data they were computed from, and
// runs them: the project's tests and the user's installation check run the same ones.
//
// Data and sources stand in data/; each check names where its value was read. What could only be quoted from memory says so.
package published

import (
	"embed"
	"fmt"
	"math"
	"strconv"
	"strings"
)

//go:embed data
var files embed.FS

// Check is one published value and how it is computed here.
type Check struct {
	ID       string  // stable: "TOST-1"
	Quantity string  // what is computed, of which data
	Source   string  // who published it, and where it was read
	Want     float64 // as published, or recomputed to more digits by the program named in Source
	Relative float64 // the largest relative difference that the digits of Want allow
	compute  func() (float64, error)
}

// Outcome is one check as run on this machine.
type Outcome struct {
	Check
	Got   float64
	Err   error   // the value could not be computed at all
	Error float64 // relative difference from Want; absolute where Want is 0
	Holds bool
}

// Run computes every check.
func Run() []Outcome {
	var out []Outcome
	for _, c := range checks() {
		o := Outcome{Check: c}
		o.Got, o.Err = c.compute()
		o.Error = math.Abs(o.Got - c.Want)
		if c.Want != 0 {
			o.Error /= math.Abs(c.Want)
		}
		o.Holds = o.Err == nil && o.Error <= c.Relative
		out = append(out, o)
	}
	return out
}

// table reads a commented csv file of data/: column names to texts.
func table(name string) (map[string][]string, error) {
	b, err := files.ReadFile("data/" + name)
	if err != nil {
		return nil, err
	}
	out := map[string][]string{}
	var head []string
	for _, line := range strings.Split(string(b), "\n") {
		line = strings.TrimSuffix(line, "\r")
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		cells := strings.Split(line, ",")
		if head == nil {
			head = cells
			continue
		}
		if len(cells) != len(head) {
			return nil, fmt.Errorf("%s: found %d cells in %q, want %d", name, len(cells), line, len(head))
		}
		for i, h := range head {
			out[h] = append(out[h], cells[i])
		}
	}
	return out, nil
}

// group takes the numbers of one column, in the rows where another column holds the value; all rows where by is empty.
func group(name, by, value, column string) ([]float64, error) {
	t, err := table(name)
	if err != nil {
		return nil, err
	}
	var out []float64
	for i, text := range t[column] {
		if by != "" && t[by][i] != value {
			continue
		}
		x, err := strconv.ParseFloat(text, 64)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", name, err)
		}
		out = append(out, x)
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("%s: found no rows with %s = %q, want some", name, by, value)
	}
	return out, nil
}

// certified reads a NIST StRD file: its readings stand below a line of hyphens after "Data:".
func certified(name string) ([]float64, error) {
	b, err := files.ReadFile("data/" + name)
	if err != nil {
		return nil, err
	}
	_, after, ok := strings.Cut(string(b), "\nData:")
	if !ok {
		return nil, fmt.Errorf("%s: found no data", name)
	}
	var out []float64
	for _, line := range strings.Split(after, "\n")[1:] {
		line = strings.TrimSpace(line)
		if x, err := strconv.ParseFloat(line, 64); err == nil {
			out = append(out, x)
		}
	}
	return out, nil
}
