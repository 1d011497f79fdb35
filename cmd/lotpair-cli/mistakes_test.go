package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/qa"
)

// planHead asks for equivalence of one column of lots.csv; a mistake's own lines follow, still inside [criterion].
const planHead = `format = "lotpair.plan/1"
[reference]
lot = "R"
source = "Existing foundry"
file = "lots.csv"
[candidate]
lot = "C"
source = "Second foundry"
file = "lots.csv"
[criterion]
`

// even are n readings at the middles of n equal shares of a distribution, given by its quantile function, in an order that looks
// like chance.
func even(n int, quantile func(p float64) float64) []float64 {
	x := make([]float64, n)
	step := int(0.618*float64(n)) | 1
	for gcd(step, n) != 1 {
		step += 2
	}
	for i := range x {
		x[i*step%n] = quantile((float64(i) + 0.5) / float64(n))
	}
	return x
}

func gcd(a, b int) int {
	for b > 0 {
		a, b = b, a%b
	}
	return a
}

func normal(mean, sd float64) func(float64) float64 {
	return func(p float64) float64 { return mean + sd*math.Sqrt2*math.Erfinv(2*p-1) }
}

func exponential(mean float64) func(float64) float64 {
	return func(p float64) float64 { return -mean * math.Log1p(-p) }
}

// table writes two lots as text, a row a part, ids counting up within each lot.
func table(decimals int, ref, cand []float64) string {
	var b strings.Builder
	b.WriteString("Lot,Part,Bore\n")
	for _, lot := range []struct {
		name string
		x    []float64
	}{{"R", ref}, {"C", cand}} {
		for i, v := range lot.x {
			fmt.Fprintf(&b, "%s,%s%d,%.*f\n", lot.name, lot.name, i+1, decimals, v)
		}
	}
	return b.String()
}

// grouped is table with a column of groups: so many rows of each group in each lot.
func grouped(column string, rows map[string][2]int, of func(lot, group string, i int) float64) string {
	var b strings.Builder
	fmt.Fprintf(&b, "Lot,Part,%s,Bore\n", column)
	for side, lot := range []string{"R", "C"} {
		n := 0
		for _, g := range []string{"1", "2", "3", "4"} {
			for i := range rows[g][side] {
				n++
				fmt.Fprintf(&b, "%s,%s%d,%s,%.3f\n", lot, lot, n, g, of(lot, g, i))
			}
		}
	}
	return b.String()
}

// A mistake is one of those that are made in practice when lots are compared, and what the tool does about it.
type mistake struct {
	name   string
	plan   string // after planHead
	csv    string
	args   []string // beside compare plan.toml --json
	code   int
	codes  []string // of warnings, of the characteristic or of the comparison
	says   string   // in the message, where the call is refused
	differ func(t *testing.T, r qa.Result)
}

func verdict(want qa.Verdict) func(*testing.T, qa.Result) {
	return func(t *testing.T, r qa.Result) {
		if r.Verdict != want {
			t.Errorf("verdict: got %q, want %q", r.Verdict, want)
		}
	}
}

// TestMistakes shows what the tool does about each mistake that is known from practice: a warning with a stable code, another
// verdict, a figure that is always there, or a refusal.
func TestMistakes(t *testing.T) {
	const within1 = "margin = { absolute = 1 }\n"
	alike := table(3, even(12, normal(10, 1)), even(12, normal(10.1, 1)))
	far := append(even(19, normal(10, 0.6)), 25)
	limits := "[[characteristic]]\nname = \"Bore\"\nlower = 5\nupper = 15\n"
	for _, m := range append([]mistake{
		{name: "01 no difference taken for sameness", plan: "objective = \"difference\"\n", csv: table(3, even(3, normal(10, 1)), even(3, normal(11, 1))), args: []string{"--gate"}, code: 1, codes: []string{"absence-of-evidence"}, differ: verdict(qa.NoDifference)},
		{name: "02 a detectable difference taken for a harmful one", plan: within1, csv: table(3, even(500, normal(10, 1)), even(500, normal(10.2, 1))), differ: func(t *testing.T, r qa.Result) {
			if c := r.Characteristics[0]; c.Verdict != qa.Equivalent || !c.Detectable {
				t.Errorf("got %q, detectable %v; want equivalent though detectable", c.Verdict, c.Detectable)
			}
		}},
		{name: "04 a margin from the sample itself", plan: "margin = { sd_multiple = 1.5 }\n", csv: alike, codes: []string{"margin-from-sample"}, differ: verdict(qa.Undecided)},
		{name: "05 pooled by default", plan: within1, csv: table(3, even(30, normal(10, 1)), even(8, normal(10, 3))), differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			i := -1
			for k, s := range c.Sensitivity {
				if s.Method == "pooled" {
					i = k
				}
			}
			if c.Method != "welch" || i < 0 || !(*c.Sensitivity[i].Upper < *c.Equivalence.Upper) {
				t.Errorf("got method %s and %+v; want Welch, and beside it the pooled interval, narrower here", c.Method, c.Sensitivity)
			}
		}},
		{name: "06 a test of the shape chooses the method", plan: within1, csv: table(3, even(40, exponential(2)), even(40, exponential(2))), codes: []string{"not-normal"}, differ: func(t *testing.T, r qa.Result) {
			if c := r.Characteristics[0]; c.Method != "welch" {
				t.Errorf("method: got %s, want the one planned", c.Method)
			}
		}},
		{name: "07 normal, said of a few readings", plan: within1, csv: table(3, even(4, normal(10, 1)), even(4, normal(10, 1))), codes: []string{"few-readings"}, differ: func(t *testing.T, r qa.Result) {
			for _, w := range r.Characteristics[0].Warnings {
				if w.Code == qa.WarnFew && !strings.Contains(w.Text, "cannot show") {
					t.Errorf("got %q, want that so few cannot show the shape", w.Text)
				}
			}
		}},
		{name: "08 skewed readings and unequal lots", plan: within1, csv: table(3, even(30, exponential(2)), even(8, exponential(2))), codes: []string{"not-normal", "skewed-and-unequal"}},
		{name: "09 a far reading dropped in silence", plan: within1 + "[reading]\nexclude = [ { cell = \"C2\" } ]\n", csv: alike, code: 2, says: "reason"},
		{name: "09 a far reading left out with a reason", plan: within1 + "[reading]\nexclude = [ { cell = \"C21\", reason = \"dropped part, NCR-77\" } ]\n", csv: table(3, far, even(20, normal(10, 0.6))), codes: []string{"verdict-flips"}, differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if c.Reference.Excluded != 1 || !strings.Contains(fmt.Sprint(c.Sensitivity), "exclusions-put-back") {
				t.Errorf("got %d left out, %v; want 1 and the verdict with it put back", c.Reference.Excluded, c.Sensitivity)
			}
		}},
		{name: "09 a far reading kept", plan: within1, csv: table(3, far, even(20, normal(10, 0.6))), codes: []string{"far-reading"}},
		{name: "10 many parts of one lot for a claim about the source", plan: within1 + "claim = \"sources\"\n[reading]\ngroup_column = \"Heat\"\n", csv: grouped("Heat", map[string][2]int{"1": {30, 0}, "2": {0, 30}}, func(_, _ string, i int) float64 { return 10 + float64(i%7)/10 }), codes: []string{"one-group"}, differ: verdict(qa.Undecided)},
		{name: "11 repeat readings counted as parts", plan: within1, csv: strings.Replace(alike, "R,R2,", "R,R1,", 1), code: 2, says: "part_column"},
		{name: "11 repeat readings averaged", plan: within1 + "[reading]\npart_column = \"Part\"\n", csv: strings.Replace(alike, "R,R2,", "R,R1,", 1), differ: func(t *testing.T, r qa.Result) {
			if s := r.Characteristics[0].Reference; s.N != 11 || s.Repeats != 1 {
				t.Errorf("got n %d and %d repeats, want 11 and 1", s.N, s.Repeats)
			}
		}},
		{name: "12 readings that follow each other", plan: within1, csv: table(3, slow(30, 10), even(30, normal(10, 1))), codes: []string{"neighbours-alike", "not-in-random-order"}},
		{name: "13 the same parts compared as independent", plan: within1, csv: twice(12, 0.05), codes: []string{"looks-paired"}},
		{name: "14 pairs made by row", plan: within1 + "method = \"paired\"\n", csv: alike, code: 2, says: "pair_column"},
		{name: "15 means only", plan: within1 + "spread_ratio = 1.5\n", csv: table(3, even(30, normal(10, 0.5)), even(30, normal(10, 1.5))), differ: func(t *testing.T, r qa.Result) {
			if c := r.Characteristics[0]; c.Equivalence.Verdict != qa.Equivalent || c.Spread.Verdict != qa.SpreadNotAcceptable || c.Verdict != qa.NotEquivalent {
				t.Errorf("got %q, spread %q, together %q; want equivalent means, a spread not acceptable, together not equivalent", c.Equivalence.Verdict, c.Spread.Verdict, c.Verdict)
			}
		}},
		{name: "16 too few readings for the margin", plan: within1, csv: table(3, even(6, normal(10, 1)), even(6, normal(10, 1))), differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if c.Verdict != qa.Undecided || c.NewStudy == nil || c.NewStudy.AtZero == nil || c.NewStudy.AtZero.Reference < 10 {
				t.Errorf("got %q, %+v; want undecided and what a new study would need", c.Verdict, c.NewStudy)
			}
		}},
		{name: "18 one interval taken for the other", plan: within1, csv: alike, differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if *c.Equivalence.Level != 0.9 || *c.Difference.Level != 0.95 {
				t.Errorf("levels: got %v and %v, want 0.9 of the decision and 0.95 of the difference", *c.Equivalence.Level, *c.Difference.Level)
			}
		}},
		{name: "19 the worst of many looked at later", plan: "objective = \"difference\"\n", csv: "Lot,A,B,D\nR,10.1,9.8,1.02\nR,10.4,9.9,1.11\nR,10.2,9.7,1.04\nR,10.3,9.6,1.07\nC,10.5,9.8,1.03\nC,10.6,9.7,1.09\nC,10.4,9.9,1.06\nC,10.3,9.8,1.05\n", differ: func(t *testing.T, r qa.Result) {
			a := r.Characteristics[0]
			if !(*a.Difference.P < 0.1 && a.Difference.PHolm != nil && *a.Difference.PHolm > 2.9**a.Difference.P && !a.Verdict.Shown()) {
				t.Errorf("got p %v, adjusted %v, %q; want it adjusted for all three", *a.Difference.P, a.Difference.PHolm, a.Verdict)
			}
		}},
		{name: "20 the error of the gauges", plan: within1 + "[record]\ngauge_reference = \"gauge 14\"\ngauge_candidate = \"gauge 15\"\n[[characteristic]]\nname = \"Bore\"\nuncertainty = { reference = 0.4, candidate = 0.4 }\n", csv: alike, codes: []string{"different-gauges", "margin-near-uncertainty"}},
		{name: "21 coarse readings", plan: within1, csv: table(0, even(20, normal(10, 0.4)), even(20, normal(10, 0.4))), codes: []string{"coarse-resolution"}},
		{name: "22 a sorted lot", plan: within1 + "[[characteristic]]\nname = \"Bore\"\nlower = 92\nupper = 108\n", csv: table(2, even(200, func(p float64) float64 {
			return normal(100, 5)(0.0548 + p*(1-2*0.0548))
		}), even(200, normal(100, 5))), codes: []string{"cut-off"}},
		{name: "23 non-detects", plan: within1, csv: strings.Replace(alike, "R,R3,", "R,R3,<", 1), codes: []string{"non-detects"}},
		{name: "24 mixed cavities", plan: within1, csv: grouped("Cavity", map[string][2]int{"1": {24, 6}, "2": {6, 24}}, func(_, g string, i int) float64 {
			return 10 + float64(i%7)/10 + map[string]float64{"1": 0, "2": 0.5}[g]
		}), codes: []string{"group-mix"}},
		{name: "25 rules of range for few lots", plan: within1 + "method = \"min-max\"\n", csv: alike, code: 2, says: "min-max"},
		{name: "27 performance compared as bare numbers", plan: within1 + limits, csv: table(3, even(20, normal(10, 1)), even(20, normal(10.2, 1.1))), codes: []string{"few-for-performance"}, differ: func(t *testing.T, r qa.Result) {
			p := r.Characteristics[0].Performance
			if !(*p.Reference.PpkLower < *p.Candidate.Ppk && *p.Candidate.Ppk < *p.Reference.PpkUpper) {
				t.Errorf("got %+v, want an interval of either index that holds the other", p)
			}
		}},
		{name: "28 a second sample until it passes", plan: within1 + "second_sample = \"one\"\n", csv: alike, codes: []string{"second-sample"}, differ: func(t *testing.T, r qa.Result) {
			if c := r.Characteristics[0]; c.Alpha != 0.025 || *c.Equivalence.Level != 0.95 {
				t.Errorf("got alpha %v, level %v; want half of 0.05 for each look", c.Alpha, *c.Equivalence.Level)
			}
		}},
		{name: "29 rounding before calculating", plan: within1, csv: "Lot,Bore\nR,12.0034\nR,12.0021\nR,12.0012\nC,12.0049\nC,12.0038\nC,12.0029\n", differ: func(t *testing.T, r qa.Result) {
			if got := *r.Characteristics[0].Difference.Estimate; math.Abs(got-0.00163333333333) > 1e-13 {
				t.Errorf("difference: got %v, want it from the readings as stored", got)
			}
		}},
		{name: "32 capability judged where equivalence is asked", plan: "margin = { absolute = 0.5 }\n" + limits, csv: table(3, even(30, normal(9.4, 0.6)), even(30, normal(10.6, 0.6))), differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if p := c.Performance; !(*p.Reference.Ppk > 2 && *p.Candidate.Ppk > 2) || c.Verdict != qa.NotEquivalent {
				t.Errorf("got Ppk %v and %v, %q; want both good and yet not equivalent", *p.Reference.Ppk, *p.Candidate.Ppk, c.Verdict)
			}
		}},
		{name: "33 all parts of one lot and a few of the other", plan: within1, csv: table(3, even(300, normal(10, 1)), even(7, normal(10, 1))), differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if c.Reference.N != 300 || c.Candidate.N != 7 || r.Reference.Source == "" || r.Candidate.Source == "" {
				t.Errorf("got n %d of %q and %d of %q, want number and origin of both", c.Reference.N, r.Reference.Source, c.Candidate.N, r.Candidate.Source)
			}
		}},
		{name: "34 one of several analyses kept", plan: within1, csv: alike, differ: func(t *testing.T, r qa.Result) {
			if r.Attempts.Known != 1 || r.Attempts.KeptBy != "not counted" {
				t.Errorf("attempts: got %+v, want said that nobody counts them here", r.Attempts)
			}
		}},
	}, mixedUp(within1)...) {
		t.Run(m.name, func(t *testing.T) { m.run(t) })
	}
}

// mixedUp are the mistakes of units, and of lots made close in time.
func mixedUp(within1 string) []mistake {
	sources := grouped("Heat", map[string][2]int{"1": {5, 5}, "2": {5, 5}, "3": {5, 5}}, func(_, g string, i int) float64 {
		return 10 + float64(i%5)/10 + map[string]float64{"1": 0, "2": 0.2, "3": 0.1}[g]
	})
	return []mistake{
		{name: "30 units that differ", plan: within1 + "[[characteristic]]\nname = \"Bore\"\nunit = \"in\"\n", csv: "Lot,Bore [mm]\nR,10.1\nR,10.2\nR,10.4\nC,10.2\nC,10.3\nC,10.2\n", code: 2, says: "mm"},
		{name: "31 reference lots made close in time", plan: within1 + "claim = \"sources\"\n[reading]\ngroup_column = \"Heat\"\n", csv: sources, codes: []string{"lots-in-time", "assumes-independence"}},
	}
}

// run makes the mistake in a folder of its own.
func (m mistake) run(t *testing.T) {
	t.Helper()
	dir := t.TempDir()
	write(t, dir, map[string]string{"plan.toml": planHead + m.plan, "lots.csv": m.csv})
	code, out, errText := run(t, dir, append([]string{"compare", "plan.toml", "--json"}, m.args...)...)
	if code != m.code {
		t.Fatalf("exit code: got %d, want %d\n%s", code, m.code, errText)
	}
	if !strings.Contains(errText, m.says) {
		t.Errorf("message: got %q, want it to say %q", errText, m.says)
	}
	if out == "" && m.says != "" {
		return
	}
	var r qa.Result
	if err := json.Unmarshal([]byte(out), &r); err != nil {
		t.Fatal(err)
	}
	all := append([]qa.Warning{}, r.Warnings...)
	for _, c := range r.Characteristics {
		all = append(all, c.Warnings...)
	}
	for _, want := range m.codes {
		if !qa.Has(all, want) {
			t.Errorf("warnings: got %v, want %s among them", all, want)
		}
	}
	if m.differ != nil {
		m.differ(t, r)
	}
}

func write(t *testing.T, dir string, files map[string]string) {
	t.Helper()
	for name, text := range files {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
}

// slow are readings that wander: each half of them on one side.
func slow(n int, mean float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = mean + math.Sin(2*math.Pi*float64(i)/float64(n)) + 0.1*float64(i%3)
	}
	return x
}

// twice are the same parts in both lots, the second time a little higher.
func twice(n int, noise float64) string {
	var b strings.Builder
	b.WriteString("Lot,Part,Bore\n")
	x := even(n, normal(10, 1))
	for side, lot := range []string{"R", "C"} {
		for i, v := range x {
			fmt.Fprintf(&b, "%s,S%d,%.3f\n", lot, i+1, v+float64(side)*(0.1+noise*float64(i%3)))
		}
	}
	return b.String()
}

// 03: a margin stated after the readings were seen. A sealed criterion stands: a plan that departs from it is refused.
func TestMistake03MarginAfterTheReadings(t *testing.T) {
	dir := t.TempDir()
	text := planHead + "margin = { absolute = 1 }\n"
	write(t, dir, map[string]string{"plan.toml": text, "lots.csv": table(3, even(12, normal(10, 1)), even(12, normal(10.4, 1)))})
	if code, _, e := run(t, dir, "seal", "plan.toml", "--out", "plan.seal.xlsx"); code != 0 {
		t.Fatal(e)
	}
	if code, _, e := run(t, dir, "compare", "plan.toml", "--seal", "plan.seal.xlsx"); code != 0 {
		t.Fatalf("the plan that was sealed: got exit code %d, %s", code, e)
	}
	write(t, dir, map[string]string{"plan.toml": strings.Replace(text, "absolute = 1", "absolute = 2", 1)})
	if code, _, e := run(t, dir, "compare", "plan.toml", "--seal", "plan.seal.xlsx"); code != 2 || !strings.Contains(e, "margin") {
		t.Errorf("a wider margin: got exit code %d, %q; want 2 and the margin named", code, e)
	}
}

// 17: planned with a true difference of 0. At half the margin three times the readings are needed, and size asks.
func TestMistake17PlannedWithoutADifference(t *testing.T) {
	size := func(args ...string) qa.StudySize {
		code, out, e := run(t, t.TempDir(), append([]string{"size", "--sd", "1", "--margin", "1", "--json"}, args...)...)
		var s qa.StudySize
		if err := json.Unmarshal([]byte(out), &s); code != 0 || err != nil {
			t.Fatal(code, err, e)
		}
		return s
	}
	if zero, half := size(), size("--shift", "0.5"); zero.NReference != 23 || half.NReference != 70 {
		t.Errorf("got %d and %d readings a lot, want 23 at no difference and 70 at half the margin", zero.NReference, half.NReference)
	}
}

// 34: several analyses, one of them kept. A record that stands in the place of another names it and counts the attempts, and the
// result says what more than one means.
func TestMistake34OneOfSeveralKept(t *testing.T) {
	dir := t.TempDir()
	lots := table(3, even(12, normal(10, 1)), even(12, normal(10.1, 1)))
	write(t, dir, map[string]string{"plan.toml": "supports = \"DEV-1\"\n" + planHead + "margin = { absolute = 1 }\n[record]\npart = \"P\"\nrevision = \"A\"\n", "lots.csv": lots, "word": "a long passphrase\n"})
	for _, args := range [][]string{
		{"identity", "new", "--name", "Ada Quill", "--out", "ada.p12", "--passphrase-file", "word"},
		{"compare", "plan.toml", "--workbook", "one.xlsx", "--identity", "ada.p12", "--meaning", "prepared", "--passphrase-file", "word"},
	} {
		if code, _, e := run(t, dir, args...); code != 0 {
			t.Fatalf("%s: %s", args[0], e)
		}
	}
	if code, _, e := run(t, dir, "compare", "plan.toml", "--workbook", "one.xlsx", "--force"); code != 4 {
		t.Errorf("over a signed record: got exit code %d, %s; want 4", code, e)
	}
	code, out, e := run(t, dir, "compare", "plan.toml", "--json", "--workbook", "two.xlsx", "--supersedes", "one.xlsx", "--because", "a lot was named wrongly")
	var r qa.Result
	if err := json.Unmarshal([]byte(out), &r); code != 0 || err != nil {
		t.Fatal(code, err, e)
	}
	if r.Attempts.Known != 2 || !qa.Has(r.Warnings, qa.WarnAttempts) {
		t.Errorf("got %+v, %v; want two attempts and what that means", r.Attempts, r.Warnings)
	}
}

// 26: a test of means taken for the acceptance of parts. Every record says that it is none, and parts beyond a limit are named
// beside whatever verdict.
func TestMistake26AcceptanceOfParts(t *testing.T) {
	mistake{
		name: "26", plan: "margin = { absolute = 1 }\n[[characteristic]]\nname = \"Bore\"\nlower = 5\nupper = 12.5\n",
		csv: table(3, even(100, normal(10, 1)), append(even(99, normal(10, 1)), 12.8)), codes: []string{"outside-limits"}, differ: func(t *testing.T, r qa.Result) {
			c := r.Characteristics[0]
			if c.Verdict != qa.Equivalent || *c.Performance.Candidate.OutsideEstimated <= 0 {
				t.Errorf("got %q, %+v; want equivalent lots, and the part beyond a limit said", c.Verdict, c.Performance.Candidate)
			}
			for _, w := range c.Warnings {
				if w.Code == qa.WarnOutside && w.Side == qa.Candidate && !(strings.Contains(w.Text, "C201") && strings.Contains(w.Text, "no verdict on the lots answers")) {
					t.Errorf("got %q, want the cell and whose question it is", w.Text)
				}
			}
		},
	}.run(t)
	for _, c := range qa.Cautions() {
		if strings.Contains(c, "neither accepts nor rejects parts") {
			return
		}
	}
	t.Error("cautions: got none, want one that says that no parts are accepted")
}
