package main

import (
	"bufio"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
)

// exactTables are the reference tables made in 50 digits by another formula than the code's; each names its program in its
// first line. A line is a function, its arguments, the value and the relative error that is claimed there.
var exactTables = []string{
	"qa/stats/dist/testdata/exact.txt",
	"qa/stats/dist/testdata/owen.txt",
	"qa/stats/dist/testdata/noncentral.txt",
	"qa/stats/testdata/exact.txt",
}

// An exactPoint is one line of such a table.
type exactPoint struct {
	function string
	args     []float64
	want     float64
	allowed  float64
}

// accuracy prints the worst relative error of every function by region, beside that of gonum, R and SciPy on the same points,
// and then that of every method, from its tests. It fails where a claim does not hold.
func accuracy(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	programs := accuracyOutsiders()
	for _, o := range programs {
		d.say("%s", o.describe())
	}
	regions, err := d.measured(programs)
	if err != nil {
		return err
	}
	d.say("\nWorst relative error of each function by region, against values of 50 digits; beside it that of others on the same points.\n\n%s",
		accuracyTable(regions, programs))
	methods, failed := d.methodAccuracy()
	d.say("\nThe methods, from their tests; a reference that is another program's has no more digits than the bound.\n\n%s", table(methods))
	faults := []error{failed}
	for _, r := range regions {
		if !r.holds {
			faults = append(faults, fmt.Errorf("%s, %s: found a relative error of %.2g, want what its table allows, at most %.2g", r.function, r.said(), r.worst["ours"], r.allowed))
		}
	}
	return errors.Join(faults...)
}

// measured holds every point of the exact tables against ours and theirs.
func (d *dev) measured(programs []outsider) ([]*region, error) {
	var regions []*region
	for _, name := range exactTables {
		file := d.path(filepath.FromSlash(name))
		points, err := exactPoints(file)
		if err != nil {
			return nil, err
		}
		values := map[string][]float64{"ours": nil, "gonum": nil}
		for _, p := range points {
			f, ok := accuracyFunctions[p.function]
			if !ok {
				return nil, fmt.Errorf("%s: found function %q, want one of cmd/dev/accuracyfunctions.go; add it there", name, p.function)
			}
			values["ours"] = append(values["ours"], f.ours(p.args))
			values["gonum"] = append(values["gonum"], safely(f.gonum, p.args))
		}
		for _, o := range programs {
			if o.found == "" {
				continue
			}
			if values[o.name], err = d.theirValues(o, file, len(points)); err != nil {
				return nil, err
			}
		}
		regions = append(regions, inRegions(points, values)...)
	}
	return regions, nil
}

// exactPoints reads a table.
func exactPoints(file string) ([]exactPoint, error) {
	f, err := os.Open(file)
	if err != nil {
		return nil, err
	}
	defer func() { _ = f.Close() }() // only read
	var out []exactPoint
	lines := bufio.NewScanner(f)
	for n := 1; lines.Scan(); n++ {
		fields := strings.Fields(lines.Text())
		if len(fields) == 0 || strings.HasPrefix(fields[0], "#") {
			continue
		}
		if len(fields) < 4 {
			return nil, fmt.Errorf("%s:%d: found %d fields, want a function, arguments, a value and the error allowed", file, n, len(fields))
		}
		numbers := make([]float64, len(fields)-1)
		for i, text := range fields[1:] {
			if numbers[i], err = strconv.ParseFloat(text, 64); err != nil {
				return nil, fmt.Errorf("%s:%d: found %q, want a number", file, n, text)
			}
		}
		k := len(numbers)
		out = append(out, exactPoint{fields[0], numbers[:k-2], numbers[k-2], numbers[k-1]})
	}
	return out, lines.Err()
}

// safely is a value of a peer, NaN where it has none and where it gives up.
func safely(of func(a []float64) float64, a []float64) (v float64) {
	if of == nil {
		return missingValue
	}
	defer func() {
		if recover() != nil {
			v = math.NaN()
		}
	}()
	return of(a)
}

// missingValue stands for a function that a peer has not: no function gives it.
const missingValue = -math.MaxFloat64

// relative is the relative error of got.
func relative(got, want float64) float64 {
	if got == want {
		return 0
	}
	return math.Abs(got-want) / math.Abs(want)
}
