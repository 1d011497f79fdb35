package stats_test

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa/stats"
)

// TestGroupsAgainstR holds analysis of variance and stratified differences to R.
func TestGroupsAgainstR(t *testing.T) {
	answers(t, "groups.txt", 45, func(ref, cand []float64, name string) (float64, float64) {
		r, c := ungrouped(ref), ungrouped(cand)
		lot, what, _ := strings.Cut(name, ".")
		if lot == "strata" {
			s := must[stats.Stratified](t)(stats.StratifiedDifference(r, c))
			return ofEstimate(t, s.Estimate, what)
		}
		if lot == "cand" {
			r = c
		}
		a := must[stats.Anova](t)(stats.OneWay(r))
		return map[string]float64{"ssbetween": a.SSBetween, "sswithin": a.SSWithin, "f": a.F, "p": a.P, "sdwithin": a.SDWithin, "sdbetween": a.SDBetween}[what], 0
	})
}

// ungrouped reads k, the k sizes and the readings.
func ungrouped(x []float64) [][]float64 {
	k := int(x[0])
	rest := x[1+k:]
	var groups [][]float64
	for _, n := range x[1 : 1+k] {
		groups = append(groups, rest[:int(n)])
		rest = rest[int(n):]
	}
	return groups
}

// TestStRDAnova holds F and the sums of squares to the certified values of NIST, as
// far as readings rounded to float64 allow, and to the exact values of the rounded
// readings (rational arithmetic). SmLs01 to SmLs09 are made from their pattern:
// each treatment is its first reading, then pairs a tenth below and above it.
func TestStRDAnova(t *testing.T) {
	type certified struct {
		name                       string
		groups                     [][]float64
		between, within, f, digits float64
		exactF                     float64
	}
	cases := []certified{
		{"SiRstv", strdGroups(t, "SiRstv.dat"), 5.11462616e-02, 2.1663656e-01, 1.18046237440255, 1e-12, 1.1804623744024467},
		{"AtmWtAg", strdGroups(t, "AtmWtAg.dat"), 3.638341875e-09, 1.04951729166667e-08, 15.946733567793, 1e-9, 15.946733566676926},
	}
	exact := []float64{21, 201.00000000000003, 2001.0000000000002, 21.000000000776101, 201.00000001241764, 2001.0000001288329, 21.00081188781877, 201.01300409594845, 2001.1349262209505}
	for i, f := range exact {
		replicates := []int{21, 201, 2001}[i%3]
		prefix, digits := []string{"1.", "1000000.", "1000000000000."}[i/3], []float64{1e-14, 1e-9, 1e-3}[i/3]
		var groups [][]float64
		for _, first := range []int{4, 3, 5, 3, 5, 3, 5, 3, 5} {
			var g []float64
			for j := range replicates {
				digit := first
				if j > 0 {
					digit += 1 - 2*(j%2) // below, above, below, ...
				}
				g = append(g, number(t, fmt.Sprint(prefix, digit)))
			}
			groups = append(groups, g)
		}
		half := float64(replicates-1) / 2
		cases = append(cases, certified{fmt.Sprint("SmLs0", i+1), groups, 0.08 * float64(replicates), 9 * half * 0.02, float64(replicates-1) + 1, digits, f})
	}
	for _, c := range cases {
		a := must[stats.Anova](t)(stats.OneWay(c.groups))
		near(t, c.name+" between", a.SSBetween, c.between, c.digits)
		near(t, c.name+" within", a.SSWithin, c.within, c.digits)
		near(t, c.name+" F", a.F, c.f, c.digits)
		near(t, c.name+" F of the float64 readings", a.F, c.exactF, 3e-16)
	}
}

// strdGroups reads the readings of a NIST StRD file of one-way analysis, by group.
func strdGroups(t *testing.T, name string) [][]float64 {
	t.Helper()
	var groups [][]float64
	index := map[string]int{}
	begun := false
	for _, line := range lines(t, filepath.Join("strd", "anova", name)) {
		f := strings.Fields(line)
		if strings.HasPrefix(line, "Data:") && len(groups) == 0 && !strings.Contains(line, "Factor") {
			begun = len(f) == 3 && f[1] != "1"
			continue
		}
		if !begun || len(f) != 2 {
			continue
		}
		i, found := index[f[0]]
		if !found {
			i = len(groups)
			index[f[0]] = i
			groups = append(groups, nil)
		}
		groups[i] = append(groups[i], number(t, f[1]))
	}
	return groups
}

// TestPublishedAnova: NIST/SEMATECH e-Handbook 7.4.3.3, printed 27.897, 17.452, 9.59,
// .00325.
func TestPublishedAnova(t *testing.T) {
	lots := readings(t, "nist_prc433_anova.csv", 0, 1)
	a := must[stats.Anova](t)(stats.OneWay([][]float64{lots["1"], lots["2"], lots["3"]}))
	near(t, "between", a.SSBetween, 27.8973333, 2e-9)
	near(t, "within", a.SSWithin, 17.452, 1e-14)
	near(t, "F", a.F, 9.59111, 1e-6)
	near(t, "p", a.P, 0.0032482, 1e-5)
}

func TestGroupsEdges(t *testing.T) {
	anova := func(g ...[]float64) error { _, err := stats.OneWay(g); return err }
	strata := func(r, c [][]float64) error { _, err := stats.StratifiedDifference(r, c); return err }
	two, one := []float64{1, 2}, []float64{3}
	for _, c := range []struct {
		name      string
		got, want error
	}{
		{"one group", anova(two), stats.ErrTooFew},
		{"groups of one", anova(one, one), stats.ErrTooFew},
		{"an empty group", anova(two, nil), stats.ErrTooFew},
		{"no spread within", anova([]float64{1, 1}, []float64{2, 2}), stats.ErrConstant},
		{"two groups", anova(two, one), nil},
		{"no group in both", strata([][]float64{two, nil}, [][]float64{nil, two}), stats.ErrTooFew},
		{"no group of two", strata([][]float64{one}, [][]float64{two}), stats.ErrTooFew},
		{"no spread", strata([][]float64{{1, 1}}, [][]float64{{2, 2}}), stats.ErrConstant},
		{"unlike lengths", strata([][]float64{two}, [][]float64{two, two}), nil},
	} {
		if !errors.Is(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	if m := stats.GroupMeans([][]float64{{1, 3}, {5}, {0.1, 0.1, 0.1}}); !slices.Equal(m, []float64{2, 5, 0.1}) {
		t.Errorf("group means: got %v, want 2, 5, 0.1", m)
	}
	// Means of groups nearer to each other than chance: the component is 0, not less.
	a := must[stats.Anova](t)(stats.OneWay([][]float64{{1, 3}, {0, 4}, {2, 2}}))
	if a.SDBetween != 0 || a.F != 0 || a.P != 1 {
		t.Errorf("equal means: got %+v, want 0, 0 and p 1", a)
	}
	s, _ := stats.StratifiedDifference([][]float64{two, two}, [][]float64{two})
	if s.Groups != 1 || s.Left != 1 {
		t.Errorf("got %+v, want 1 group, 1 left", s)
	}
	// Unequal mix of two cavities: no difference within, 0.05 between the plain means.
	low, high := []float64{9.9, 10, 10.1}, []float64{10.1, 10.2, 10.3}
	ref, cand := [][]float64{slices.Concat(low, low, low), high}, [][]float64{low, slices.Concat(high, high, high)}
	s = must[stats.Stratified](t)(stats.StratifiedDifference(ref, cand))
	plain := welch(t, slices.Concat(ref...), slices.Concat(cand...))
	if math.Abs(s.Value) > 1e-15 || math.Abs(plain.Value-0.1) > 1e-12 {
		t.Errorf("unequal mix: got %v within and %v plain, want 0 and 0.1", s.Value, plain.Value)
	}
}

// One group is Welch; exchanging the lots turns the sign; two groups are pooled t
// squared.
func TestGroupsLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ref, cand := lot(t, "ref"), lot(t, "cand")
		w := estimate(t, ref, cand)
		s, err := stats.StratifiedDifference([][]float64{ref}, [][]float64{cand})
		if err != nil || math.Abs(s.Value-w.Value) > 1e-13 || !alike(s.SE, w.SE, 1e-14) || !alike(s.DF, w.DF, 1e-13) {
			t.Fatalf("got %+v %v, want %+v", s, err, w)
		}
		cut := rapid.IntRange(1, min(len(ref), len(cand))).Draw(t, "cut")
		a := [][]float64{ref[:cut], ref[cut:]}
		b := [][]float64{cand[:cut], cand[cut:]}
		s, err = stats.StratifiedDifference(a, b)
		u, err2 := stats.StratifiedDifference(b, a)
		if !errors.Is(err, err2) || s.Value != -u.Value || !alike(s.SE, u.SE, 1e-15) {
			t.Fatalf("got %+v %v, want %+v %v turned over", u, err2, s, err)
		}
		v, err := stats.OneWay([][]float64{ref, cand})
		p, err2 := stats.Pooled(stats.Summarize(ref), stats.Summarize(cand))
		tee, two := p.TwoSided(0)
		if err != nil || err2 != nil || math.Abs(math.Sqrt(v.F)-math.Abs(tee)) > 1e-14/p.SE+1e-11*math.Abs(tee) || math.Abs(v.P-two) > 1e-9 {
			t.Fatalf("got %+v, want F %v and p %v", v, tee*tee, two)
		}
	})
}
