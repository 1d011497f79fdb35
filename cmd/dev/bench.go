package main

import (
	"bufio"
	"fmt"
	"sort"
	"strconv"
	"strings"
)

// bench runs the benchmarks. Where a benchmark has a peer, a plain way to do the same work in the same run, the ratio is
// printed: machines differ, ratios less. X/ours and X/peer are a pair.
func bench(d *dev, args []string) error {
	pattern := "."
	if len(args) > 0 {
		pattern = args[0]
	}
	out, err := d.output(pure, "go", "test", "-run", "^$", "-bench", pattern, "-benchmem", "-count", "5", "./qa/...", "./importers/...", "./exports/...", "./cmd/dev")
	fmt.Fprint(d.stdout, out)
	if err != nil {
		return err
	}
	for _, line := range ratios(out) {
		d.say("%s", line)
	}
	return nil
}

// ratios compares the medians of X/ours and X/peer.
func ratios(output string) []string {
	times := map[string][]float64{}
	for lines := bufio.NewScanner(strings.NewReader(output)); lines.Scan(); {
		f := strings.Fields(lines.Text())
		if len(f) < 4 || f[3] != "ns/op" || !strings.HasPrefix(f[0], "Benchmark") {
			continue
		}
		ns, err := strconv.ParseFloat(f[2], 64)
		if err != nil {
			continue
		}
		name := strings.TrimPrefix(f[0], "Benchmark")
		if i := strings.LastIndex(name, "-"); i > 0 { // the number of processors
			name = name[:i]
		}
		times[name] = append(times[name], ns)
	}
	var out []string
	for name := range times {
		base, ok := strings.CutSuffix(name, "/ours")
		if peer := times[base+"/peer"]; ok && len(peer) > 0 {
			out = append(out, fmt.Sprintf("%s: %.2f times its peer's time (medians of %d runs)", base, median(times[name])/median(peer), len(peer)))
		}
	}
	sort.Strings(out)
	return out
}

func median(x []float64) float64 {
	s := append([]float64{}, x...)
	sort.Float64s(s)
	if n := len(s); n%2 == 0 {
		return (s[n/2-1] + s[n/2]) / 2
	}
	return s[len(s)/2]
}
