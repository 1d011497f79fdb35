package main

import (
	"fmt"
	"math"
	"runtime"
	"slices"
	"time"
)

// How long is measured: every way of doing a piece of work is called for at least oneSlice, in turn with the others, so often
// that a row takes about oneRow: a machine that grows busy then slows all of them. Times are the processor's, which a busy
// machine changes less, but where the work goes over several processors or processes.
const (
	oneSlice = 15 * time.Millisecond
	oneRow   = 1500 * time.Millisecond
	leastRun = 3
	mostRun  = 15
)

// timed is one way of doing a piece of work and its time in seconds; a time of 0 is none.
type timed struct {
	name    string
	seconds float64
}

// benchLine is one line of the table.
type benchLine struct {
	name        string
	goal        goal
	ours, floor timed
	peers       []timed           // in Go, under the library's name
	outside     map[string]string // program -> why there is no time
	theirs      map[string][]timed
}

// goal is what the work is to take at most: a time, or so many times its floor. Zero is no goal.
type goal struct {
	seconds float64
	ofFloor float64
}

// measureRow times the ways of a row in turn.
func measureRow(r benchRow) benchLine {
	w := r.build()
	ways := append([]rival{{"ours", w.ours}, w.floor}, w.peers...)
	found := inTurn(ways, w.clock())
	for i := range found {
		found[i].seconds /= float64(max(1, w.per))
	}
	return benchLine{
		name: r.name, goal: w.goal, ours: found[0], floor: found[1], peers: found[2:],
		outside: map[string]string{}, theirs: map[string][]timed{},
	}
}

// clock is what the work is timed with.
func (w work) clock() func() time.Duration {
	if w.wall {
		return wallClock
	}
	return processorTime
}

var started = time.Now()

func wallClock() time.Duration { return time.Since(started) }

// inTurn times the ways in turn and gives each the median of its times.
func inTurn(ways []rival, clock func() time.Duration) []timed {
	out := make([]timed, len(ways))
	calls, times := make([]int, len(ways)), make([][]float64, len(ways))
	once := 0.0 // seconds that a turn of all takes
	for i, w := range ways {
		out[i].name = w.name
		if w.do == nil {
			continue
		}
		first := seconds(clock, w.do, 1) // also warms
		if first < oneSlice.Seconds() {
			first = seconds(clock, w.do, 1)
		}
		calls[i] = 1 + int(oneSlice.Seconds()/max(first, 1e-9))
		once += first * float64(calls[i])
	}
	turns := max(leastRun, min(mostRun, int(oneRow.Seconds()/max(once, 1e-9))))
	for range turns {
		runtime.GC()
		for i, w := range ways {
			if w.do != nil {
				times[i] = append(times[i], seconds(clock, w.do, calls[i]))
			}
		}
	}
	for i := range ways {
		if len(times[i]) > 0 {
			out[i].seconds = median(times[i])
		}
	}
	return out
}

// seconds is what one call takes, of so many.
func seconds(clock func() time.Duration, do func(), calls int) float64 {
	begun := clock()
	for range calls {
		do()
	}
	return (clock() - begun).Seconds() / float64(calls)
}

func median(x []float64) float64 {
	s := slices.Sorted(slices.Values(x))
	if n := len(s); n%2 == 0 {
		return (s[n/2-1] + s[n/2]) / 2
	}
	return s[len(s)/2]
}

// growthLines is the table of the rows that have a growth.
func growthLines(d *dev, rows []benchRow) [][]string {
	out := [][]string{{"workload", "sizes", "times", "power"}}
	for _, r := range rows {
		if r.growth == nil {
			continue
		}
		fmt.Fprintf(d.stderr, "growth of %s …\n", r.name)
		g := r.growth
		var ways []rival
		for _, n := range g.sizes {
			ways = append(ways, rival{grouped(n), g.build(n)})
		}
		out = append(out, growthLine(r.name, g, inTurn(ways, processorTime)))
	}
	if len(out) == 1 {
		return nil
	}
	return out
}

func growthLine(name string, g *growth, found []timed) []string {
	var sizes, times, powers []string
	for i, f := range found {
		sizes = append(sizes, f.name)
		times = append(times, duration(f.seconds))
		if i > 0 {
			power := math.Log(f.seconds/found[i-1].seconds) / math.Log(float64(g.sizes[i])/float64(g.sizes[i-1]))
			powers = append(powers, fmt.Sprintf("%.2f", power))
		}
	}
	return []string{name, joined(sizes) + " " + g.of, joined(times), joined(powers)}
}
