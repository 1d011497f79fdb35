package main

import (
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"time"
)

// An outsider is a program of others that does some of the same work, in a script of ours that takes the times itself: its
// start does not count. The script prints a line a way and run: the row's name, a tab, what it used, a tab, seconds a thing;
// or the name, a tab, "not run" and a tab and the reason.
type outsider struct {
	name    string // over its column
	command string
	script  string
	version []string // arguments that make it print its version
	found   string   // the version; empty where it is not installed
}

// longestAsk is how long an outsider may take for one row.
const longestAsk = 3 * time.Minute

func outsiders() []outsider {
	all := []outsider{
		{name: "R", command: "Rscript", script: "bench.R", version: []string{"-e", "cat(R.version.string)"}},
		{name: "SciPy", command: python, script: "bench.py", version: []string{"-c", "import sys, numpy, scipy; print('SciPy', scipy.__version__ + ', NumPy', numpy.__version__ + ', Python', sys.version.split()[0])"}},
	}
	for i := range all {
		if out, err := exec.Command(all[i].command, all[i].version...).Output(); err == nil {
			all[i].found = strings.TrimSpace(string(out))
		}
	}
	return all
}

func (o outsider) describe() string {
	if o.found == "" {
		return o.name + ": not installed"
	}
	return o.found
}

// askOutsiders lets every program that is there do the row's work, where its script knows it.
func (d *dev) askOutsiders(programs []outsider, row string, line *benchLine) error {
	for _, o := range programs {
		if o.found == "" {
			line.outside[o.name] = "not installed"
			continue
		}
		limit, end := context.WithTimeout(context.Background(), longestAsk)
		c := exec.CommandContext(limit, o.command, o.script, row)
		c.Dir, c.Stderr = d.path("cmd", "dev", "testdata"), d.stderr
		c.Env = append(os.Environ(), "LC_ALL=C.UTF-8", "OMP_NUM_THREADS=1", "OPENBLAS_NUM_THREADS=1") // names of rows are not ASCII; one core
		out, err := c.Output()
		late := limit.Err() != nil
		end()
		switch {
		case late:
			line.outside[o.name] = fmt.Sprintf("stopped after %v", longestAsk)
			continue
		case err != nil:
			return fmt.Errorf("%s: row %q: %w", filepath.Join("cmd/dev/testdata", o.script), row, err)
		}
		times, why, err := outsideTimes(string(out), row)
		if err != nil {
			return fmt.Errorf("%s: %w", filepath.Join("cmd/dev/testdata", o.script), err)
		}
		line.theirs[o.name], line.outside[o.name] = times, why
	}
	return nil
}

// outsideTimes reads what a script printed: a median for every way, in the order of their first lines.
func outsideTimes(output, row string) (times []timed, why string, err error) {
	runs := map[string][]float64{}
	var order []string
	for line := range strings.Lines(output) {
		f := strings.Split(strings.TrimRight(line, "\r\n"), "\t")
		if len(f) != 3 || f[0] != row {
			return nil, "", fmt.Errorf("found line %q, want %q, a tab, what was used, a tab and seconds", strings.TrimSpace(line), row)
		}
		if f[1] == "not run" {
			why = "not run: " + f[2]
			continue
		}
		seconds, err := strconv.ParseFloat(f[2], 64)
		if err != nil || !(seconds > 0) {
			return nil, "", fmt.Errorf("row %q: found time %q, want seconds above 0", row, f[2])
		}
		if _, ok := runs[f[1]]; !ok {
			order = append(order, f[1])
		}
		runs[f[1]] = append(runs[f[1]], seconds)
	}
	for _, name := range order {
		times = append(times, timed{name, median(runs[name])})
	}
	return times, why, nil
}
