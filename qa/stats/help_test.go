package stats_test

import (
	"bufio"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa/stats"
)

// near checks got against a published want to a relative error.
func near(t *testing.T, what string, got, want, allowed float64) {
	t.Helper()
	if got == want {
		return
	}
	if rel := math.Abs(got-want) / math.Abs(want); !(rel <= allowed) {
		t.Errorf("%s: got %.17g, want %.17g, relative error %.2g, allowed %.2g", what, got, want, rel, allowed)
	}
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(strings.TrimSpace(text), 64)
	if err != nil {
		t.Fatalf("found %q, want a number: %v", text, err)
	}
	return v
}

// readings returns the column value of a testdata file, by the text of the
// column group. Lines that start with # name the source.
func readings(t *testing.T, name string, group, value int) map[string][]float64 {
	t.Helper()
	file, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	lots := map[string][]float64{}
	for _, row := range rows[1:] {
		lots[row[group]] = append(lots[row[group]], number(t, row[value]))
	}
	return lots
}

func lines(t *testing.T, name string) []string {
	t.Helper()
	file, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	var all []string
	s := bufio.NewScanner(file)
	for s.Scan() {
		all = append(all, s.Text())
	}
	if err := s.Err(); err != nil {
		t.Fatal(err)
	}
	return all
}

func welch(t *testing.T, ref, cand []float64) stats.Estimate {
	t.Helper()
	e, err := stats.Welch(stats.Summarize(ref), stats.Summarize(cand))
	if err != nil {
		t.Fatal(err)
	}
	return e
}
