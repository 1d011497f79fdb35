package main

import (
	"errors"
	"fmt"
	"math"
	"os"
	"runtime"
	"strings"
)

// A benchRow is one piece of work that the product does. build makes its data ready; nothing of that is timed.
type benchRow struct {
	name   string // what PART of `bench PART` is looked for in, and what bench.R and bench.py know the row by
	build  func() work
	growth *growth // how the time grows with the size, where that is asked
}

// work is one piece of work and what it is held against, all of it done in the same run: the floor, work that no way of
// doing it can leave out, and peers, other ways of doing it. Peers outside Go stand in testdata under the row's name.
type work struct {
	per   int  // of how many things a call consists; times are of one
	wall  bool // timed by the clock and not by the processor
	goal  goal
	ours  func()
	floor rival
	peers []rival
}

// rival is another way of doing a piece of work.
type rival struct {
	name string
	do   func()
}

// growth is the same work at several sizes, each about ten times the one before.
type growth struct {
	sizes []int
	of    string // of what the sizes are numbers
	build func(n int) func()
}

// benchRows are all rows, in the order of the table. A new row is an element of one of these.
func benchRows() []benchRow {
	var rows []benchRow
	for _, some := range [][]benchRow{meansRows, distributionRows, powerRows, resamplingRows, rankRows, fileRows, readingRows, compareRows, recordRows, startRows} {
		rows = append(rows, some...)
	}
	return rows
}

// bench times every row, or those whose name holds the one argument, beside floors and peers of the same run: machines
// differ, ratios less. Then come the pairs that are benchmarks of a package's own (see benchpairs.go). The
// real window is measured alone, by `bench window`.
func bench(d *dev, args []string) error {
	if len(args) > 1 {
		return usageError(fmt.Sprintf("found %q, want at most one part of a row's name", strings.Join(args, " ")))
	}
	part := strings.Join(args, "")
	if part == "window" {
		return benchWindow(d)
	}
	rows := chosen(benchRows(), part)
	pairs, err := d.pairedBenchmarks(part)
	if err != nil {
		return err
	}
	if len(rows) == 0 && len(pairs) == 0 {
		return usageError(fmt.Sprintf("found %q, want a part of one of these names: %s", part, strings.Join(names(benchRows()), "; ")))
	}
	if err := d.buildForStart(rows); err != nil {
		return err
	}
	d.say("%s, %d processors, load %s", runtime.Version(), runtime.NumCPU(), load())
	programs := outsiders()
	for _, o := range programs {
		d.say("%s", o.describe())
	}
	var lines []benchLine
	for _, r := range rows {
		fmt.Fprintf(d.stderr, "%s …\n", r.name)
		line := measureRow(r)
		if err := d.askOutsiders(programs, r.name, &line); err != nil {
			return err
		}
		lines = append(lines, line)
	}
	if len(lines) > 0 {
		d.say("\nMedians of processor time; rows of all cores and of whole processes by the clock. In brackets: a peer's time over ours.\n"+
			"Floor: work that no way can leave out.\n\n%s", benchTable(lines, programs))
	}
	if grown := growthLines(d, rows); len(grown) > 0 {
		d.say("\nGrowth: the time at each size, and the power of the size with which it grew from the one before.\n\n%s", table(grown))
	}
	if len(pairs) > 0 {
		if err := d.benchPairs(pairs); err != nil {
			return err
		}
	}
	d.say("\nload at the end %s", load())
	if math.IsNaN(kept) {
		return errors.New("found work that computes no number: its time means nothing")
	}
	return nil
}

// chosen are the rows whose name holds the part, in upper or lower case.
func chosen(rows []benchRow, part string) []benchRow {
	var out []benchRow
	for _, r := range rows {
		if strings.Contains(strings.ToLower(r.name), strings.ToLower(part)) {
			out = append(out, r)
		}
	}
	return out
}

func names(rows []benchRow) []string {
	var out []string
	for _, r := range rows {
		out = append(out, r.name)
	}
	return out
}

// load is the system's own figure of how busy it is, where it has one: a time taken on a busy machine is no time.
func load() string {
	text, err := os.ReadFile("/proc/loadavg")
	if f := strings.Fields(string(text)); err == nil && len(f) > 2 {
		return strings.Join(f[:3], " ")
	}
	return "unknown"
}

// must ends the run where work that always can be done is not.
func must[T any](v T, err error) T {
	if err != nil {
		panic(errors.New("bench: " + err.Error()))
	}
	return v
}
