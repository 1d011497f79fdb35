package importers

import (
	"fmt"
	"math"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa"
)

// The candidate of D1 in inches, to five decimals (N10). In R 4.2.2: mean in mm times 25.4 gives a difference of 0.004272 and
// an upper 90 % limit of 0.010080; unconverted the mean difference is -11.531.
var d1CandidateInch = strings.Fields("0.47276 0.47295 0.47232 0.47319 0.47260 0.47287 0.47213 0.47307 0.47268 0.47248 0.47331 0.47280")

// lotFile is one lot of D1 as text with a heading.
func lotFile(heading string, values []string) []byte {
	var b strings.Builder
	b.WriteString("No;" + heading + "\n")
	for i, v := range values {
		fmt.Fprintf(&b, "%d;%s\n", i+1, v)
	}
	return []byte(b.String())
}

// readTwo reads a file for each lot.
func readTwo(t *testing.T, ref, cand []byte, change func(*qa.Plan)) (qa.Plan, qa.Readings, error) {
	t.Helper()
	p := plan("ref.csv", func(p *qa.Plan) { p.Candidate.File = "cand.csv" }, change)
	if faults := p.Validate(); len(faults) > 0 {
		t.Fatalf("the test's plan: %v", faults)
	}
	data := map[string][]byte{"ref.csv": ref, "cand.csv": cand}
	r, err := Read(p, files(data))
	if err == nil {
		reconcile(t, r, data, "")
	}
	return p, r, err
}

func unitOfCandidate(unit string) func(*qa.Plan) {
	return func(p *qa.Plan) { p.Candidate.Unit = unit }
}

func TestReadInches(t *testing.T) { // N10
	ref := lotFile("Bore [mm]", d1Reference)
	_, _, err := readTwo(t, ref, lotFile("Bore [in]", d1CandidateInch), func(*qa.Plan) {})
	wantPlanError(t, err, "cand.csv!B1", `"in"`, `"mm"`, `state unit = "in" under [candidate]`, "multiplied by 25.4")
	for _, unit := range []string{"in", "inch", `"`} {
		for _, heading := range []string{"Bore [in]", "Bore"} {
			p, r, err := readTwo(t, ref, lotFile(heading, d1CandidateInch), unitOfCandidate(unit))
			if err != nil {
				t.Fatalf("%s, %s: got %v", unit, heading, err)
			}
			result, err := qa.Compare(p, r, qa.Run{})
			if err != nil {
				t.Fatal(err)
			}
			e := result.Characteristics[0].Equivalence
			if result.Verdict != qa.Undecided || math.Abs(*e.Upper-0.010080) > 5e-7 || math.Abs(*e.Estimate-0.004272) > 5e-7 {
				t.Errorf("%s, %s: got %s, %v, upper %v, want undecided, 0.004272, upper 0.010080", unit, heading, result.Verdict, *e.Estimate, *e.Upper)
			}
			x := r.Candidate.Series[0].Readings[0]
			if x.Value != 12.008104 || x.Decimals != 6 || x.Source.Text != "0.47276" {
				t.Errorf("got %+v, want 12.008104 of 0.47276", x)
			}
			l := entries(r, qa.TakenNumber)
			if len(l) != 12 || *l[0].Value != 12.008104 || !strings.Contains(l[0].Reason, "× 25.4") {
				t.Errorf("got the ledger %+v, want 12 conversions with the factor", l)
			}
			wantWarning(t, r, "converted", "12 readings", "25.4", "from "+unit+" to mm", "0.000254 mm", "half of that")
		}
	}
	_, _, err = readTwo(t, ref, lotFile("Bore [in]", d1CandidateInch), unitOfCandidate("mm"))
	wantPlanError(t, err, "cand.csv!B1", `"in"`, "candidate.unit")
	_, _, err = readTwo(t, ref, lotFile("Bore [kg]", d1Candidate), unitOfCandidate("kg"))
	wantPlanError(t, err, "cannot be converted")
	_, _, err = readTwo(t, lotFile("Temperature [°C]", d1Reference), lotFile("Temperature [°F]", d1Candidate), func(p *qa.Plan) { p.Candidate.Unit = "°F" })
	wantPlanError(t, err, "cannot be converted")
}

func TestReadUnitOfOneQuantity(t *testing.T) { // a lot's unit speaks of the columns of its quantity only
	two := func(length, force string, values []string) []byte {
		text := "No;" + length + ";" + force + "\n"
		for i, v := range values {
			text += fmt.Sprintf("%d;%s;%d\n", i+1, v, 100+3*i)
		}
		return []byte(text)
	}
	_, r, err := readTwo(t, two("Bore [mm]", "Force [N]", d1Reference), two("Bore [in]", "Force [N]", d1CandidateInch), unitOfCandidate("in"))
	if err != nil {
		t.Fatal(err)
	}
	if a, b := r.Candidate.Series[0].Values()[0], r.Candidate.Series[1].Values()[0]; a != 12.008104 || b != 100 {
		t.Errorf("got %v and %v, want 12.008104 mm and 100 N", a, b)
	}
	wantWords(t, strings.Join(r.Said, "\n"), `candidate.unit = "in" is not for it`)
}

func TestReadConvertedLimits(t *testing.T) {
	withLimits := "No;Bore [in]\nNominal;0.5\nUSL;0.6\nLSL;0.4\n" + strings.TrimPrefix(string(lotFile("", d1CandidateInch)), "No;\n")
	_, r, err := readTwo(t, lotFile("Bore [mm]", d1Reference), []byte(withLimits), unitOfCandidate("in"))
	if err != nil {
		t.Fatal(err)
	}
	if c := r.Characteristics[0]; *c.Lower != 10.16 || *c.Target != 12.7 || *c.Upper != 15.24 {
		t.Errorf("got %v, %v, %v, want 10.16, 12.7, 15.24 mm", *c.Lower, *c.Target, *c.Upper)
	}
}

// deviations of the candidate of D1 from 12.000, in µm (N19).
var d1CandidateMicron = strings.Fields("+8 +13 -3 +19 +4 +11 -8 +16 +6 +1 +22 +9")

func TestReadDeviations(t *testing.T) { // N19
	target := 12.0
	ref := lotFile("Bore [mm]", d1Reference)
	deviation := func(unit string) func(*qa.Plan) {
		return func(p *qa.Plan) {
			p.Candidate.Unit, p.Candidate.Values = unit, "deviation"
			p.Characteristics = []qa.Characteristic{{Name: "Bore", Unit: "mm", Target: &target}}
		}
	}
	_, r, err := readTwo(t, ref, lotFile("Bore [µm]", d1CandidateMicron), deviation("µm"))
	if err != nil {
		t.Fatal(err)
	}
	wantD1(t, r)
	x := r.Candidate.Series[0].Readings[2]
	if x.Value != 11.997 || x.Decimals != 3 || x.Source.Text != "-3" {
		t.Errorf("got %+v, want 11.997 of -3", x)
	}
	l := entries(r, qa.TakenNumber)
	if len(l) != 12 || !strings.Contains(l[2].Reason, "12 mm + -3 µm × 0.001 (deviation)") {
		t.Errorf("got the ledger %+v, want 12 conversions with nominal value and factor", l)
	}
	wantWarning(t, r, "converted", "0.001", "nominal value 12")
	thousandths := make([]string, len(d1CandidateMicron))
	for i, v := range d1CandidateMicron {
		n, _, _ := ParseNumber(v, '.')
		thousandths[i] = fmt.Sprintf("%.3f", n/1000)
	}
	_, r, err = readTwo(t, ref, lotFile("Bore [mm]", thousandths), deviation(""))
	if err != nil {
		t.Fatal(err)
	}
	wantD1(t, r)
	_, _, err = readTwo(t, ref, lotFile("Bore [µm]", d1CandidateMicron), func(p *qa.Plan) { p.Candidate.Unit, p.Candidate.Values = "µm", "deviation" })
	wantPlanError(t, err, "candidate.values", "no nominal value", "target")
	_, _, err = readTwo(t, ref, lotFile("Bore [µm]", d1CandidateMicron), func(*qa.Plan) {})
	wantPlanError(t, err, `state unit = "µm"`)
	_, r, err = readTwo(t, ref, lotFile("Bore [µm]", append([]string{"<5"}, d1CandidateMicron[1:]...)), deviation("µm"))
	if err != nil || r.Candidate.Series[0].Unread != 1 {
		t.Errorf("got %v, %+v, want a bound of a deviation unread", err, r.Candidate.Series)
	}
}

func TestUnitFactor(t *testing.T) {
	for _, tt := range []struct{ from, to, want string }{
		{"in", "mm", "25.4"},
		{"mm", "in", "1/25.4"},
		{"µm", "mm", "0.001"},
		{"um", "mm", "0.001"},
		{"\u03bcm", "mm", "0.001"},
		{"cm", "mm", "10"},
		{"m", "mm", "1000"},
		{"inch", "µm", "25400"},
		{"thou", "mm", "0.0254"},
		{"ft", "in", "12"},
		{"kg", "g", "1000"},
		{"mg", "g", "0.001"},
		{"lb", "g", "453.59237"},
		{"oz", "lb", "0.0625"},
		{"kN", "N", "1000"},
		{"lbf", "N", "4.4482216152605"},
		{"N/mm²", "MPa", "1"},
		{"bar", "kPa", "100"},
		{"%", "ppm", "10000"},
		{"psi", "MPa", "8896443230521/1290320000000000"},
	} {
		f, ok := unitFactor(tt.from, tt.to)
		if !ok || factorText(f) != tt.want {
			t.Errorf("%s to %s: got %v, %v, want %s", tt.from, tt.to, f, ok, tt.want)
		}
	}
	for _, pair := range [][2]string{{"°C", "°F"}, {"mm", "g"}, {"", "mm"}, {"HRC", "HB"}} {
		if f, ok := unitFactor(pair[0], pair[1]); ok {
			t.Errorf("%s to %s: got %v, want none", pair[0], pair[1], f)
		}
	}
}

// There and back is the same number, and what is converted is the nearest double to the exact product.
func TestConversionIsExact(t *testing.T) {
	units := []string{"mm", "µm", "cm", "m", "in", "thou"}
	rapid.Check(t, func(t *rapid.T) {
		from, to := rapid.SampledFrom(units).Draw(t, "from"), rapid.SampledFrom(units).Draw(t, "to")
		whole, places := rapid.Int64Range(-1e12, 1e12).Draw(t, "digits"), rapid.IntRange(0, 9).Draw(t, "places")
		x := new(big.Rat).SetFrac64(whole, int64(math.Pow10(places)))
		v, _, err := ParseNumber(x.FloatString(places), '.')
		if err != nil {
			t.Fatal(err)
		}
		f, _ := unitFactor(from, to)
		got, decimals := (&conversion{from: from, to: to, factor: f}).value(v, places)
		want, _ := new(big.Rat).Mul(x, f).Float64()
		if got != want || decimals < 0 {
			t.Fatalf("%s %s to %s: got %v with %d decimals, want %v", x.FloatString(places), from, to, got, decimals, want)
		}
	})
}
