//go:build outside

package exports_test

import (
	"bytes"
	"encoding/csv"
	"flag"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/qa"
)

var generated = flag.Int("generated", 100, "how many generated records LibreOffice computes again")

// TestOutsideWorkings has LibreOffice compute every formula of Workings again (hard), on the fixture, a published data set of
// 480 readings, a small one and generated records, and holds what it gives against what the records state.
//
// A figure in the unit must agree to 1e-12 of itself or of the largest reading: means of readings near 40 are rounded at 1e-14,
// and their difference carries that. What divides by the standard error carries it on: t to that over the standard error, p to
// that times the slope of its logarithm, at most |t| + 1. Everything else agrees to 1e-12 of itself.
func TestOutsideWorkings(t *testing.T) {
	dir := t.TempDir()
	records := map[string]qa.Record{"fixture.xlsx": record(t), "jahanmi2.xlsx": strength(t), "d1.xlsx": small(t)}
	for _, c := range []struct {
		name, unit string
		margin     float64
		grouped    bool // by its second column
	}{{"d2", "mm", 0.02, false}, {"d2", "mm", 0.02, true}, {"d3", "mm", 0.03, false}, {"d3", "mm", 0.03, true}, {"d4", "mm", 0.008, false}} {
		plan, r := study(c.name, c.unit, column(t, "testdata/needs/"+c.name+".csv"), c.margin, qa.Equivalence, "welch")
		name := c.name + ".xlsx"
		if c.grouped {
			name = c.name + " in groups.xlsx"
			plan.Criterion.Groups = "random"
			for i, s := range []qa.Series{r.Reference.Series[0], r.Candidate.Series[0]} {
				for j, g := range groups(t, "testdata/needs/"+c.name+".csv")[i] {
					s.Readings[j].Group = g
				}
			}
		}
		records[name] = outcome(t, plan, r)
	}
	for i := range *generated {
		records[fmt.Sprintf("generated%03d.xlsx", i)] = generate(t, uint64(i))
	}
	var files []string
	for name, rec := range records {
		pkg, err := exports.Workbook(rec)
		if err != nil {
			t.Fatal(err)
		}
		files = append(files, filepath.Join(dir, name))
		// What is stored as computed is not what LibreOffice may give back: it has to compute.
		workings := sheetFile(t, pkg, exports.SheetWorkings)
		pkg = rezip(t, pkg, func(part string, b []byte) []byte {
			if part != workings {
				return b
			}
			for _, f := range []string{"<f>AVERAGE", "<f>STDEV", "<f>SQRT", "<f>IF(", "<f>BETADIST"} {
				b = spoil(b, f)
			}
			return b
		})
		if err := os.WriteFile(files[len(files)-1], pkg, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	out := command(t, "/usr/bin/python3", append([]string{"testdata/outside/recalculate.py"}, files...)...)
	figures, worst, worstAt, file := map[string]int{}, 0.0, "", ""
	total := 0
	largest, se, tAbs := 0.0, 0.0, 0.0
	for _, line := range strings.Split(strings.TrimSpace(string(out)), "\n") {
		f := strings.Split(line, "\t")
		if f[3] == "" { // a quantile, not stated
			continue
		}
		got, stated := hexFloat(t, f[2]), hexFloat(t, f[3])
		if f[0] != file {
			file = f[0]
		}
		switch f[1] {
		case "reference.n":
			largest, se, tAbs = 0, 0, 0
		case "reference.max", "reference.min", "candidate.min", "candidate.max":
			largest = math.Max(largest, math.Abs(stated))
		case "difference.se":
			se = stated
		}
		allowed := 1e-12 * math.Abs(stated)
		last := f[1][strings.LastIndex(f[1], ".")+1:]
		switch {
		case strings.HasSuffix(f[1], ".t"), strings.HasPrefix(last, "t_"):
			tAbs = math.Abs(stated)
			allowed += 1e-14 * largest / se
		case last == "p" || last == "p_lower" || last == "p_upper" || last == "p_two_sided":
			allowed = math.Abs(stated) * (1e-12 + (tAbs+1)*(1e-12*tAbs+1e-14*largest/math.Max(se, 1e-300)))
		case last == "mean", last == "estimate", last == "lower", last == "upper", last == "smallest_margin":
			allowed = math.Max(allowed, 1e-12*largest)
		case last == "outside_estimated": // slope of its logarithm: the room, some 3·Ppk standard deviations
			allowed *= 100
		}
		figures[f[0]]++
		total++
		if e := math.Abs(got-stated) / math.Abs(stated); stated != 0 && e > worst {
			worst, worstAt = e, f[0]+" "+f[1]
		}
		if !(math.Abs(got-stated) <= allowed) {
			t.Errorf("%s, %s in %s: LibreOffice gives %v, the record states %v (allowed %g)", f[0], f[1], f[4], got, stated, allowed)
		}
	}
	for name, rec := range records {
		least := 30
		if rec.Plan.Criterion.Groups != "" { // the test rests on the means of the groups, which have no line of their own
			least = 20
		}
		if figures[name] < least {
			t.Errorf("%s: got %d figures, want at least %d", name, figures[name], least)
		}
		if !strings.HasPrefix(name, "generated") {
			t.Logf("%s: %d figures", name, figures[name])
		}
	}
	t.Logf("%d records, %d figures; the farthest apart by %.2g relative: %s", len(records), total, worst, worstAt)
}

// spoil puts 7 in the place of what is stored as the value of every formula of the kind.
func spoil(b []byte, formula string) []byte {
	parts := bytes.Split(b, []byte(formula))
	for i := 1; i < len(parts); i++ {
		from, to := bytes.Index(parts[i], []byte("<v>")), bytes.Index(parts[i], []byte("</v>"))
		parts[i] = append(append(append([]byte{}, parts[i][:from+3]...), '7'), parts[i][to:]...)
	}
	return bytes.Join(parts, []byte(formula))
}

func hexFloat(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// strength is the comparison of batches 1 and 2 of NIST's ceramic strength data (JAHANMI2), 240 readings each.
func strength(t *testing.T) qa.Record {
	return compared(t, "Strength", "MPa", column(t, "../qa/stats/testdata/nist_jahanmi2_strength_batch.csv"), 20, qa.Equivalence, "welch")
}

// small is the case D1 of the project's needs: 12 readings each.
func small(t *testing.T) qa.Record {
	return compared(t, "Bore", "mm", column(t, "../qa/stats/testdata/d1.csv"), 0.01, qa.Equivalence, "welch")
}

// column reads a csv of two columns, a group and a value.
func column(t *testing.T, file string) [2][]float64 {
	t.Helper()
	var out [2][]float64
	first := ""
	for _, l := range csvLines(t, file) {
		x, err := strconv.ParseFloat(strings.TrimSpace(l[len(l)-1]), 64)
		group := l[0]
		if err != nil {
			if x, err = strconv.ParseFloat(strings.TrimSpace(l[0]), 64); err != nil {
				continue
			}
			group = l[len(l)-1]
		}
		if first == "" {
			first = group
		}
		i := 0
		if group != first {
			i = 1
		}
		out[i] = append(out[i], x)
	}
	if len(out[0]) < 2 || len(out[1]) < 2 {
		t.Fatalf("%s: found %d and %d readings", file, len(out[0]), len(out[1]))
	}
	return out
}

func csvLines(t *testing.T, file string) [][]string {
	t.Helper()
	b, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(b))
	r.Comment, r.FieldsPerRecord = '#', -1
	lines, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return lines
}

// groups reads the second column, of each lot of the first one.
func groups(t *testing.T, file string) (out [2][]string) {
	t.Helper()
	lines := csvLines(t, file)[1:]
	for _, l := range lines {
		i := 0
		if l[0] != lines[0][0] {
			i = 1
		}
		out[i] = append(out[i], l[1])
	}
	return out
}

// generate is a record of one characteristic: sizes, level, spread, objective and margin by chance.
func generate(t *testing.T, seed uint64) qa.Record {
	rng := rand.New(rand.NewPCG(seed, 4))
	level := math.Pow(10, float64(rng.IntN(6)-2)) * (rng.Float64() - 0.3)
	sd := (math.Abs(level) + 0.01) * math.Pow(10, -1-2*rng.Float64())
	var x [2][]float64
	for i := range x {
		for range 2 + rng.IntN(60) {
			v := level + sd*(1+0.5*float64(i))*rng.NormFloat64()
			x[i] = append(x[i], math.Round(v/sd*200)*sd/200)
		}
	}
	objective := []qa.Objective{qa.Equivalence, qa.NotLower, qa.NotHigher, qa.Difference, qa.Lower, qa.Higher}[rng.IntN(6)]
	method := []string{"welch", "pooled"}[rng.IntN(2)]
	return compared(t, "Made up", "mm", x, sd*(0.2+2*rng.Float64()), objective, method)
}

func compared(t *testing.T, name, unit string, x [2][]float64, margin float64, objective qa.Objective, method string) qa.Record {
	t.Helper()
	plan, r := study(name, unit, x, margin, objective, method)
	return outcome(t, plan, r)
}

func study(name, unit string, x [2][]float64, margin float64, objective qa.Objective, method string) (qa.Plan, qa.Readings) {
	low, high := x[0][0]-10*margin, x[0][0]+12*margin
	plan := qa.Plan{
		Format: qa.PlanFormat, Title: name, Supports: "DEV-1", Record: qa.Particulars{Part: "A", Revision: "B"},
		Reference: qa.LotPlan{Lot: "R", File: "a.csv"}, Candidate: qa.LotPlan{Lot: "C", File: "a.csv"},
		Criterion:       qa.Criterion{Objective: objective, Method: method, Margin: &qa.Margin{Absolute: &margin}},
		Characteristics: []qa.Characteristic{{Name: name, Unit: unit, Lower: &low, Upper: &high}},
	}
	r := qa.Readings{Characteristics: plan.Characteristics}
	for i, values := range x {
		s := qa.Series{Characteristic: name, Rows: len(values)}
		for j, v := range values {
			s.Readings = append(s.Readings, qa.Reading{Value: v, Decimals: 6, Source: qa.Source{File: "a.csv", Cell: "B" + strconv.Itoa(j+2), Text: strconv.FormatFloat(v, 'g', -1, 64)}})
		}
		lot := qa.Lot{Name: []string{"R", "C"}[i], Rows: len(values), Series: []qa.Series{s}}
		if i == 0 {
			r.Reference = lot
		} else {
			r.Candidate = lot
		}
	}
	return plan, r
}

func outcome(t *testing.T, plan qa.Plan, r qa.Readings) qa.Record {
	t.Helper()
	result, err := qa.Compare(plan, r, qa.Run{Software: qa.Software{Version: "test"}, Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: "not counted"}})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(plan, qa.File{Name: "plan.toml", SHA256: "aa"}, r, result, "tester", when)
}
