package stats_test

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode"

	"lotpair/qa/stats"
)

// A quantityAccuracy is what a test saw of one quantity: how many points, lots of which
// sizes, the worst error and the largest that was allowed.
type quantityAccuracy struct {
	points, least, most int
	worst, bound        float64
	parts               map[string]bool // of the quantity, where it has any
}

func (q *quantityAccuracy) add(off, allowed float64, sizes ...int) {
	if q.points == 0 {
		q.least = math.MaxInt
	}
	q.points++
	q.worst, q.bound = max(q.worst, off), max(q.bound, allowed)
	for _, n := range sizes {
		if n == 0 {
			continue // one lot only
		}
		q.least, q.most = min(q.least, n), max(q.most, n)
	}
}

// say hands the line to the accuracy table of cmd/dev, fields between bars.
func (q *quantityAccuracy) say(t *testing.T, reference, madeBy, quantity string) {
	t.Helper()
	sizes := "-"
	if q.most > 0 {
		sizes = fmt.Sprintf("%d to %d", q.least, q.most)
	}
	t.Attr("accuracy", strings.Join([]string{
		reference, madeBy, quantity, strconv.Itoa(q.points), sizes, fmt.Sprintf("%.1e", q.worst), fmt.Sprintf("%.0e", q.bound),
	}, " | "))
}

// maker is what the heading of a table says made it: "# Made by X (date, maker)."
func maker(heading string) string {
	_, rest, _ := strings.Cut(heading, "(")
	if i := strings.LastIndex(rest, ")."); i >= 0 {
		rest = rest[:i]
	}
	_, made, ok := strings.Cut(rest, ", ")
	if !ok {
		return "-"
	}
	return strings.ReplaceAll(made, "|", "/")
}

// answers holds every line of a table that another program made to what compute
// gives for it, and says the worst error of each quantity. A line is a set, a
// quantity, a value and an allowed relative error; a value near 0 may have an
// absolute error of that size times scale, which compute returns.
func answers(t *testing.T, name string, least int, compute func(ref, cand []float64, what string) (got, scale float64)) {
	t.Helper()
	lots := map[string][]float64{}
	found := map[string]*quantityAccuracy{}
	rows := 0
	all := lines(t, name)
	for _, line := range all {
		f := strings.Fields(line)
		switch {
		case strings.HasPrefix(line, "#"):
		case f[0] == "readings":
			x := make([]float64, 0, len(f)-3)
			for _, text := range f[3:] {
				x = append(x, number(t, text))
			}
			lots[f[1]+"."+f[2]] = x
		default:
			rows++
			got, scale := compute(lots[f[0]+".ref"], lots[f[0]+".cand"], f[1])
			want, allowed := number(t, f[2]), number(t, f[3])
			off := 0.0
			if got != want {
				off = math.Abs(got-want) / max(math.Abs(want), scale)
			}
			if !(off <= allowed) {
				t.Errorf("%s %s %s: got %.17g, want %.17g, relative error %.2g, allowed %.2g", name, f[0], f[1], got, want, off, allowed)
			}
			method, part, _ := strings.Cut(f[1], ".")
			if found[method] == nil {
				found[method] = &quantityAccuracy{parts: map[string]bool{}}
			}
			found[method].add(off, allowed, len(lots[f[0]+".ref"]), len(lots[f[0]+".cand"]))
			if part, _, _ = strings.Cut(part, "."); strings.ContainsFunc(part, unicode.IsLetter) {
				found[method].parts[part] = true
			}
		}
	}
	if rows < least {
		t.Errorf("%s: got %d answers, want at least %d", name, rows, least)
	}
	for _, what := range slices.Sorted(maps.Keys(found)) {
		quantity := what
		if parts := slices.Sorted(maps.Keys(found[what].parts)); len(parts) > 0 {
			quantity += ": " + strings.Join(parts, ", ")
		}
		found[what].say(t, name, maker(all[0]), quantity)
	}
}

// must is a value whose error ends the test.
func must[T any](t *testing.T) func(v T, err error) T {
	t.Helper()
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// ofEstimate is a quantity of an estimate, with its interval at 90 %.
func ofEstimate(t *testing.T, e stats.Estimate, what string) (got, scale float64) {
	t.Helper()
	tee, p := e.TwoSided(0)
	i := e.Interval(0.90)
	v, found := map[string]float64{"value": e.Value, "se": e.SE, "df": e.DF, "t": tee, "p": p, "lower": i.Lower, "upper": i.Upper}[what]
	if !found {
		t.Fatalf("found quantity %q, want a known one", what)
	}
	if what == "lower" || what == "upper" || what == "value" {
		return v, e.SE
	}
	return v, 0
}
