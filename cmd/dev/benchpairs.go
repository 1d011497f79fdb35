package main

import (
	"bufio"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"sort"
	"strconv"
	"strings"
)

// A pair is a benchmark of a package's own that runs "ours" and "peer" side by side: what only the package itself can reach.
type pair struct{ pkg, name string }

var (
	benchmarkStart = regexp.MustCompile(`(?m)^func (Benchmark\w+)\(`)
	oursAndPeer    = []string{`b.Run("ours"`, `b.Run("peer"`}
)

// pairedBenchmarks finds the pairs whose name holds the part.
func (d *dev) pairedBenchmarks(part string) ([]pair, error) {
	var out []pair
	err := filepath.WalkDir(d.root, func(name string, entry fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case entry.IsDir() && name != d.root && (entry.Name() == "out" || entry.Name() == "app" || strings.HasPrefix(entry.Name(), ".")):
			return filepath.SkipDir
		case entry.IsDir() || !strings.HasSuffix(name, "_test.go"):
			return nil
		}
		text, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		folder, err := filepath.Rel(d.root, filepath.Dir(name))
		if err != nil {
			return err
		}
		for _, b := range pairsIn(string(text)) {
			if strings.Contains(strings.ToLower(b), strings.ToLower(part)) {
				out = append(out, pair{"./" + filepath.ToSlash(folder), b})
			}
		}
		return nil
	})
	return out, err
}

// pairsIn names the benchmarks of a file that hold both halves of a pair.
func pairsIn(text string) []string {
	var out []string
	starts := benchmarkStart.FindAllStringSubmatchIndex(text, -1)
	for i, at := range starts {
		end := len(text)
		if i+1 < len(starts) {
			end = starts[i+1][0]
		}
		body := text[at[0]:end]
		if strings.Contains(body, oursAndPeer[0]) && strings.Contains(body, oursAndPeer[1]) {
			out = append(out, text[at[2]:at[3]])
		}
	}
	return out
}

// benchPairs runs the pairs, package by package, and prints their table.
func (d *dev) benchPairs(pairs []pair) error {
	rows := [][]string{{"pair", "ours", "peer", "ours/peer"}}
	byPackage := map[string][]string{}
	for _, p := range pairs {
		byPackage[p.pkg] = append(byPackage[p.pkg], p.name)
	}
	packages := make([]string, 0, len(byPackage))
	for p := range byPackage {
		packages = append(packages, p)
	}
	slices.Sort(packages)
	for _, p := range packages {
		out, err := d.output(pure, "go", "test", "-run", "^$", "-bench", "^("+strings.Join(byPackage[p], "|")+")$", "-benchtime", "0.2s", "-count", "3", p)
		if err != nil {
			return fmt.Errorf("%w\n%s", err, out)
		}
		rows = append(rows, ratios(out)...)
	}
	d.say("\nPairs that packages measure themselves; what the peer is stands at the benchmark.\n\n%s", table(rows))
	return nil
}

// ratios holds the medians of X/ours and X/peer against each other.
func ratios(output string) [][]string {
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
		times[name] = append(times[name], ns/1e9)
	}
	var out [][]string
	for name := range times {
		base, ok := strings.CutSuffix(name, "/ours")
		if peer := times[base+"/peer"]; ok && len(peer) > 0 {
			a, b := median(times[name]), median(peer)
			out = append(out, []string{base, duration(a), duration(b), fmt.Sprintf("%.2f", a/b)})
		}
	}
	sort.Slice(out, func(i, j int) bool { return out[i][0] < out[j][0] })
	return out
}
