package main

import (
	"slices"
	"strings"
	"testing"
	"time"
)

func TestRatios(t *testing.T) {
	const output = `goos: linux
BenchmarkRead/ours-2     	      10	 200 ns/op	 5 B/op
BenchmarkRead/peer-2     	      10	 100 ns/op	 5 B/op
BenchmarkRead/ours-2     	      10	 400 ns/op	 5 B/op
BenchmarkRead/peer-2     	      10	 100 ns/op	 5 B/op
BenchmarkAlone-2         	      10	 100 ns/op	 5 B/op
`
	got := ratios(output)
	if len(got) != 1 || !slices.Equal(got[0], []string{"Read", "300 ns", "100 ns", "3.00"}) {
		t.Errorf("got %v, want one line of 300 ns, 100 ns and 3.00", got)
	}
}

func TestPairsIn(t *testing.T) {
	const file = `package x

func BenchmarkAlone(b *testing.B) {}

func BenchmarkBoth(b *testing.B) {
	b.Run("ours", nil)
	b.Run("peer", nil)
}

func BenchmarkHalf(b *testing.B) { b.Run("ours", nil) }
`
	if got := pairsIn(file); !slices.Equal(got, []string{"BenchmarkBoth"}) {
		t.Errorf("got %v, want BenchmarkBoth alone", got)
	}
}

func TestDurations(t *testing.T) {
	for seconds, want := range map[float64]string{12.34: "12.3 s", 0.9996: "1 s", 0.0123: "12.3 ms", 4.567e-6: "4.57 µs", 5e-8: "50 ns", 0: "0 ns"} {
		if got := duration(seconds); got != want {
			t.Errorf("%v: got %s, want %s", seconds, got, want)
		}
	}
	for r, want := range map[float64]string{0.31: "0.3×", 9.94: "9.9×", 12.6: "13×", 12345.6: "12,346×"} {
		if got := ratio(r); got != want {
			t.Errorf("%v: got %s, want %s", r, got, want)
		}
	}
}

func TestGoal(t *testing.T) {
	for _, c := range []struct {
		g           goal
		ours, floor float64
		want        string
	}{
		{goal{}, 1, 1, "–"},
		{goal{seconds: 3e-6}, 2e-6, 0, "≤ 3 µs, met"},
		{goal{seconds: 3e-6}, 4e-6, 0, "≤ 3 µs, NOT MET"},
		{goal{ofFloor: 1.5}, 1.4, 1, "≤ 1.5 × floor, met"},
		{goal{ofFloor: 1.5}, 1.6, 1, "≤ 1.5 × floor, NOT MET"},
	} {
		if got := c.g.said(c.ours, c.floor); got != c.want {
			t.Errorf("%+v: got %q, want %q", c.g, got, c.want)
		}
	}
}

// A script's lines become a median for each way; anything else that it prints is a fault.
func TestOutsideTimes(t *testing.T) {
	times, why, err := outsideTimes("a row\tfirst\t1\na row\tfirst\t3\na row\tsecond, slower\t5\na row\tfirst\t2\n", "a row")
	if want := []timed{{"first", 2}, {"second, slower", 5}}; err != nil || why != "" || !slices.Equal(times, want) {
		t.Errorf("got %v %q %v, want %v", times, why, err, want)
	}
	if times, why, err := outsideTimes("a row\tnot run\ttoo long\n", "a row"); len(times) != 0 || why != "not run: too long" || err != nil {
		t.Errorf("got %v %q %v, want the reason alone", times, why, err)
	}
	for _, bad := range []string{"another\tfirst\t1\n", "a row\tfirst\n", "a row\tfirst\tsoon\n", "a row\tfirst\t0\n", "warning: odd\n"} {
		if _, _, err := outsideTimes(bad, "a row"); err == nil {
			t.Errorf("%q: got no error", bad)
		}
	}
}

// Who is not there is said in the table, and a row may bring a peer that no other has.
func TestBenchTable(t *testing.T) {
	lines := []benchLine{
		{name: "one", ours: timed{"ours", 2e-6}, floor: timed{"a sort", 1e-6}, goal: goal{seconds: 3e-6}, peers: []timed{{"gonum", 2.2e-5}}, outside: map[string]string{"R": "not installed"}},
		{name: "two", ours: timed{"ours", 1}, theirs: map[string][]timed{"R": {{"loop", 20}, {"at once", 5}}}},
	}
	got := benchTable(lines, []outsider{{name: "R"}})
	want := `| workload | ours | floor       | ours/floor | goal        | gonum         | R                            |
|----------|------|-------------|------------|-------------|---------------|------------------------------|
| one      | 2 µs | 1 µs a sort | 2.00       | ≤ 3 µs, met | 22 µs (11×)   | not installed                |
| two      | 1 s  | –           | –          | –           | –             | 20 s (20×) loop; 5 s (5.0×) at once |
`
	if strings.Join(strings.Fields(got), " ") != strings.Join(strings.Fields(want), " ") && squeezed(got) != squeezed(want) {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

// squeezed leaves out what only fills columns.
func squeezed(s string) string { return strings.NewReplacer(" ", "", "-", "").Replace(s) }

func TestGrowthLine(t *testing.T) {
	g := &growth{sizes: []int{10, 100, 1000}, of: "readings"}
	got := growthLine("sorting", g, []timed{{"10", 1e-6}, {"100", 1e-5}, {"1,000", 1e-3}})
	if want := []string{"sorting", "10 / 100 / 1,000 readings", "1 µs / 10 µs / 1 ms", "1.00 / 2.00"}; !slices.Equal(got, want) {
		t.Errorf("got %q, want %q", got, want)
	}
}

// Every way is called, also one that takes longer than a slice, and the times are of one call.
func TestInTurn(t *testing.T) {
	now := time.Duration(0)
	calls := [2]int{}
	ways := []rival{
		{"quick", func() { calls[0]++; now += time.Millisecond }},
		{name: "none"},
		{"slow", func() { calls[1]++; now += 3 * time.Second }},
	}
	got := inTurn(ways, func() time.Duration { return now })
	if got[0].seconds != 0.001 || got[1].seconds != 0 || got[2].seconds != 3 {
		t.Errorf("got %v, want 0.001, 0 and 3 seconds", got)
	}
	if calls[1] != 1+leastRun {
		t.Errorf("got %d calls of the slow one, want one to warm and %d timed", calls[1], leastRun)
	}
}

// Names are what rows are chosen and found by: each once, and every name that a script asks for is a row's.
func TestBenchRows(t *testing.T) {
	all := names(benchRows())
	for i, n := range all {
		if slices.Contains(all[:i], n) {
			t.Errorf("found row %q twice", n)
		}
	}
	if got := names(chosen(benchRows(), "T QUANT")); !slices.Equal(got, []string{"t quantile", "noncentral t quantile"}) {
		t.Errorf("got %v, want the two quantiles of t", got)
	}
	for _, script := range []string{"testdata/bench.R", "testdata/bench.py"} {
		for line := range strings.Lines(text(t, "cmd/dev/"+script)) {
			_, rest, ok := strings.Cut(line, `row == "`)
			if name, _, _ := strings.Cut(rest, `"`); ok && !slices.Contains(all, name) {
				t.Errorf("%s: found row %q, want the name of a row", script, name)
			}
		}
	}
}
