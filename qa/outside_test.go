//go:build outside

package qa_test

import (
	"bufio"
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa"
)

// generated is one data set made at random: two lots and what is asked of them.
type generated struct {
	id           string
	attribute    bool // readings are 0 and 1
	decimals     int  // 16: not rounded
	lower, upper *float64
	margin       float64
	alpha        float64
	ref, cand    []float64
}

// generate makes n data sets: 2 to 300 readings, standard deviations from 1e-6 to 1e6, means up to 1e4 standard deviations from
// 0, four shapes, rounding that ties readings, far readings and constant lots.
func generate(n int) []generated {
	r := rand.New(rand.NewPCG(1947, 1987))
	size := func() int { return int(math.Round(math.Exp(math.Log(2) + r.Float64()*math.Log(150)))) }
	out := make([]generated, 0, n)
	for i := range n {
		g := generated{id: strconv.Itoa(i), decimals: 16, alpha: []float64{0.05, 0.05, 0.025, 0.1}[r.IntN(4)]}
		a, b := size(), size()
		if r.IntN(3) == 0 {
			b = a
		}
		if g.attribute = i%6 == 5; g.attribute {
			p := r.Float64() * r.Float64()
			q := min(1, p*(0.5+r.Float64()))
			g.margin = 0.02 + 0.3*r.Float64()
			for _, lot := range []struct {
				n  int
				p  float64
				to *[]float64
			}{{a, p, &g.ref}, {b, q, &g.cand}} {
				for range lot.n {
					v := 0.0
					if r.Float64() < lot.p {
						v = 1
					}
					*lot.to = append(*lot.to, v)
				}
			}
			out = append(out, g)
			continue
		}
		sd := math.Pow(10, 12*r.Float64()-6)
		offset := 0.0
		switch r.IntN(4) {
		case 0:
			offset = sd * math.Pow(10, 1+3*r.Float64())
		case 1:
			offset = -sd * 20 * r.Float64()
		case 2:
			offset = sd * (4 + 20*r.Float64())
		}
		unit := 0.0
		if r.IntN(2) == 0 { // written with few digits
			unit = math.Pow(10, math.Round(math.Log10(sd)-1.5*r.Float64()))
			g.decimals = max(0, int(-math.Round(math.Log10(unit))))
		}
		shape, ratio := r.IntN(4), 0.3+2*r.Float64()
		shift := sd * r.NormFloat64() * []float64{0, 0.5, 3}[r.IntN(3)]
		lot := func(n int, at, sd float64) []float64 {
			x := make([]float64, n)
			constant := r.IntN(40) == 0
			for j := range x {
				e := r.NormFloat64()
				switch shape {
				case 1:
					e = math.Exp(e) - 1
				case 2:
					e = 3 * (r.Float64() - 0.5)
				case 3:
					e = r.ExpFloat64()
				}
				if x[j] = at + sd*e; constant {
					x[j] = at
				}
			}
			if r.IntN(6) == 0 && !constant {
				x[r.IntN(n)] += 12 * sd * r.NormFloat64()
			}
			if unit > 0 {
				for j := range x { // as if read from text
					x[j], _ = strconv.ParseFloat(strconv.FormatFloat(math.Round(x[j]/unit)*unit, 'f', g.decimals, 64), 64)
				}
			}
			return x
		}
		g.ref, g.cand = lot(a, offset, sd), lot(b, offset+shift, sd*ratio)
		g.margin = sd * (0.2 + 2*r.Float64())
		if k := r.IntN(5); k > 0 {
			if k != 1 {
				g.lower = ptr(offset - sd*(1+4*r.Float64()))
			}
			if k != 2 {
				g.upper = ptr(offset + sd*(1+4*r.Float64()))
			}
		}
		out = append(out, g)
	}
	return out
}

// line hands the set over, every number to the last digit.
func (g generated) line() string {
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', 17, 64) }
	limit := func(v *float64) string {
		if v == nil {
			return "-"
		}
		return number(*v)
	}
	all := func(x []float64) string {
		var s []string
		if g.attribute {
			failed := 0
			for _, v := range x {
				failed += int(v)
			}
			return fmt.Sprint(len(x), " ", failed)
		}
		for _, v := range x {
			s = append(s, number(v))
		}
		return strings.Join(s, " ")
	}
	kind := "numeric"
	if g.attribute {
		kind = "attribute"
	}
	return strings.Join([]string{g.id, kind, strconv.Itoa(g.decimals), limit(g.lower), limit(g.upper), number(g.margin), number(g.alpha), all(g.ref), all(g.cand)}, "\t") + "\n"
}

// figures are all that Compare says of the set, under the names of the other programs.
func (g generated) figures(t *testing.T) map[string]*float64 {
	t.Helper()
	out := map[string]*float64{}
	ch := qa.Characteristic{Name: "X", Lower: g.lower, Upper: g.upper}
	readings := func() qa.Readings {
		x, y := series("X", g.decimals, g.ref...), series("X", g.decimals, g.cand...)
		for _, s := range []qa.Series{x, y} {
			for i := range s.Readings {
				s.Readings[i].Pair = s.Readings[i].Part
			}
		}
		return lots(ch, x, y)
	}
	asked := plan(qa.Equivalence, absolute(g.margin))
	asked.Criterion.Alpha = &g.alpha
	if g.attribute {
		ch.Kind, ch.Failed = "attribute", []string{"1"}
		attributeFigures(out, one(t, asked, readings()))
		return out
	}
	for _, method := range []string{"welch", "pooled", "paired", "log"} {
		asked.Criterion.Method = method
		switch {
		case method == "paired" && len(g.ref) != len(g.cand):
			continue
		case method == "log":
			asked.Criterion.Margin = &qa.Margin{RatioLower: ptr(0.8), RatioUpper: ptr(1.25)}
		}
		c := one(t, asked, readings())
		e, d := c.Equivalence, c.Difference
		if method == "log" {
			out["log estimate"], out["log df"], out["log lower"], out["log upper"] = e.Estimate, e.DF, e.Lower, e.Upper
			out["log p lower"], out["log p upper"], out["log t lower"], out["log t upper"], out["log se"] = e.PLower, e.PUpper, e.TLower, e.TUpper, e.SE
			continue
		}
		for name, v := range map[string]*float64{
			"difference": d.Estimate, "se": d.SE, "df": d.DF, "t": d.T, "p two-sided": d.PTwoSided, "difference lower": d.Lower, "difference upper": d.Upper,
			"p lower": e.PLower, "p upper": e.PUpper, "t lower": e.TLower, "t upper": e.TUpper, "interval lower": e.Lower, "interval upper": e.Upper,
		} {
			out[method+" "+name] = v
		}
		switch {
		case method == "paired" && c.Ranks != nil:
			out["signed v"], out["signed p"], out["signed shift"] = c.Ranks.V, &c.Ranks.P, &c.Ranks.Shift
			out["signed lower"], out["signed upper"] = c.Ranks.Lower, c.Ranks.Upper
		case method == "welch":
			otherFigures(out, c)
		}
	}
	return out
}

// otherFigures are those that do not depend on the method.
func otherFigures(out map[string]*float64, c qa.Comparison) {
	for _, s := range []struct {
		side string
		of   qa.SampleResult
		qa.SampleChecks
	}{{"reference", c.Reference, c.Checks.Reference}, {"candidate", c.Candidate, c.Checks.Candidate}} {
		for name, v := range map[string]*float64{"mean": s.of.Mean, "sd": s.of.SD, "min": s.of.Min, "q1": s.of.Q1, "median": s.of.Median, "q3": s.of.Q3, "max": s.of.Max, "lag1": s.Lag1} {
			out[s.side+" "+name] = v
		}
		if w := s.ShapiroWilk; w != nil {
			out[s.side+" shapiro w"], out[s.side+" shapiro p"] = &w.W, &w.P
		}
		if g := s.Grubbs; g != nil {
			out[s.side+" grubbs g"], out[s.side+" grubbs p"] = &g.G, &g.P
		}
		if r := s.Runs; r != nil {
			out[s.side+" runs"], out[s.side+" runs p"] = ptr(float64(r.Runs)), &r.P
		}
	}
	if p := c.Performance; p != nil {
		for side, l := range map[string]qa.LotPerformance{"reference": p.Reference, "candidate": p.Candidate} {
			for name, v := range map[string]*float64{"pp": l.Pp, "ppk": l.Ppk, "ppk lower": l.PpkLower, "ppk upper": l.PpkUpper, "outside estimated": l.OutsideEstimated} {
				out[side+" "+name] = v
			}
			if l.Tolerance != nil {
				out[side+" k"] = &l.Tolerance.K
			}
		}
	}
	if s := c.Spread; s != nil {
		out["spread ratio"], out["spread lower"], out["spread upper"] = s.SDRatio, s.Lower, s.Upper
		if s.F != nil {
			out["spread f"], out["spread p"] = &s.F.Statistic, &s.F.P
		}
		if b := s.Bonett; b != nil {
			out["bonett lower"], out["bonett upper"] = &b.Lower, &b.Upper
		}
	}
	if r := c.Ranks; r != nil {
		out["ranks u"], out["ranks p"], out["ranks shift"], out["ranks lower"], out["ranks upper"] = r.U, &r.P, &r.Shift, r.Lower, r.Upper
	}
}

// attributeFigures are those of two fractions.
func attributeFigures(out map[string]*float64, c qa.Comparison) {
	e, d := c.Equivalence, c.Difference
	out["score p two-sided"], out["score difference lower"], out["score difference upper"] = d.PTwoSided, d.Lower, d.Upper
	out["score p lower"], out["score p upper"], out["score interval lower"], out["score interval upper"] = e.PLower, e.PUpper, e.Lower, e.Upper
	if c.Fisher != nil {
		out["fisher"] = &c.Fisher.P
	}
	for _, s := range c.Sensitivity {
		if s.Method == "newcombe" {
			out["newcombe lower"], out["newcombe upper"] = s.Lower, s.Upper
		}
	}
}

// off is how far got is from want: relative, for what has the unit of the readings to the larger of want and the lots' own
// spread, for a t or an index near 0 to 1. Free is what a last digit of the largest reading makes of it.
func (g generated) off(name string, got, want float64, all map[string]*float64) (off, free float64) {
	if got == want || got == 1e-300 && want < 1e-300 {
		return 0, 0
	}
	largest, logs := 0.0, 0.0
	for _, v := range slices.Concat(g.ref, g.cand) {
		largest = max(largest, math.Abs(v))
	}
	scale, rest := math.Abs(want), 0.0
	spread := func(key string) float64 {
		if v := all[key]; v != nil {
			return *v
		}
		return 0
	}
	const ulps = 4 * 0x1p-53
	method, what, _ := strings.Cut(name, " ")
	if method == "log" {
		for _, v := range slices.Concat(g.ref, g.cand) {
			logs = max(logs, math.Abs(math.Log(v)))
		}
		largest = logs
	}
	switch se := spread(method + " se"); {
	case g.attribute && !strings.Contains(name, "p ") && name != "fisher", strings.HasSuffix(name, "lag1"):
		scale = max(scale, 0.01)
	case se > 0 && strings.HasPrefix(what, "p "):
		t := spread(method + " t" + strings.TrimPrefix(strings.TrimPrefix(what, "p"), " two-sided"))
		df := spread(method + " df")
		rest = ulps * scale * min(math.Abs(t)+1, df+1) * (largest/se + 16)
	case se > 0 && (what == "t" || strings.HasPrefix(what, "t ")):
		scale = max(scale, 1)
		rest = ulps * largest / se * max(1, scale)
	case se > 0 && what != "df" && what != "se":
		scale, rest = max(scale, se), ulps*largest
	case strings.HasSuffix(what, "outside estimated"), strings.HasPrefix(what, "ppk"), strings.HasPrefix(what, "grubbs"):
		if sd := spread(method + " sd"); sd > 0 {
			rest = ulps * max(scale, 1e-300) * largest / sd * 40
		}
		if strings.HasPrefix(what, "ppk") {
			scale = max(scale, 1)
		}
	case (method == "ranks" || method == "signed") && (what == "shift" || what == "lower" || what == "upper"):
		scale = max(scale, spread("reference sd"), spread("candidate sd"))
		rest = ulps * largest
	case what == "mean", what == "median", what == "q1", what == "q3":
		scale = max(scale, spread(method+" sd"))
	}
	return math.Abs(got-want) / scale, rest / scale
}

// allowed is how far a figure may be off: what the other programs' own quantile, root and tail functions leave.
func allowed(name string) float64 {
	if strings.Contains(name, "shapiro") {
		return 1e-8
	}
	return 1e-11
}

// sets is the number of data sets.
const sets = 600

// On data sets made at random, over the whole range of size, scale, ties and imbalance, every figure that another program or a
// definition written out anew also gives is the same.
func TestOutsideGenerated(t *testing.T) {
	all := generate(sets)
	file := filepath.Join(t.TempDir(), "lots.tsv")
	var text bytes.Buffer
	for _, g := range all {
		text.WriteString(g.line())
	}
	if err := os.WriteFile(file, text.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
	ours := make([]map[string]*float64, len(all))
	for i, g := range all {
		ours[i] = g.figures(t)
	}
	for _, program := range []struct {
		name    string
		command []string
		fewest  int // figures that it gives
	}{
		{"R", []string{"Rscript", "testdata/outside.R", file}, 27_000},
		{"SciPy", []string{"/usr/bin/python3", "testdata/outside.py", file}, 27_000},
	} {
		t.Run(program.name, func(t *testing.T) {
			c := exec.Command(program.command[0], program.command[1:]...)
			c.Stderr = os.Stderr
			out, err := c.Output()
			if err != nil {
				t.Fatal(err)
			}
			held, worst := map[string]int{}, map[string]float64{}
			total := 0
			for lines := bufio.NewScanner(bytes.NewReader(out)); lines.Scan(); {
				f := strings.Split(lines.Text(), "\t")
				i, err1 := strconv.Atoi(f[0])
				want, err2 := strconv.ParseFloat(f[len(f)-1], 64)
				if len(f) != 3 || err1 != nil || err2 != nil {
					t.Fatalf("got line %q, want number, quantity and value", lines.Text())
				}
				got := ours[i][f[1]]
				if got == nil {
					t.Errorf("set %d, %s: got none, want %v", i, f[1], want)
					continue
				}
				off, free := all[i].off(f[1], *got, want, ours[i])
				field := strings.NewReplacer("reference ", "", "candidate ", "", " lower", " limits", " upper", " limits").Replace(f[1])
				held[field]++
				total++
				worst[field] = max(worst[field], off)
				if !(off <= allowed(f[1])+free) {
					t.Errorf("set %d (%d, %d readings), %s: got %.17g, want %.17g, off by %.1e", i, len(all[i].ref), len(all[i].cand), f[1], *got, want, off)
				}
			}
			if total < program.fewest {
				t.Errorf("figures: got %d, want at least %d", total, program.fewest)
			}
			var names []string
			for name := range held {
				names = append(names, name)
			}
			slices.Sort(names)
			for _, name := range names {
				t.Logf("%-28s %6d held, worst relative error %.1e", name, held[name], worst[name])
			}
			t.Logf("%d figures of %d data sets held", total, len(all))
		})
	}
}
