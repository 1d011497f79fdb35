package importers

import (
	"strings"
	"testing"

	"lotpair/qa"
)

func TestTakeBound(t *testing.T) { // N12
	for _, tt := range []struct {
		text    string
		decimal byte
		limit   float64 // 0 for none
		above   bool
	}{
		{"<0.05", '.', 0.05, false},
		{"< 0,05", '.', 0.05, false},
		{"< 0,05", ',', 0.05, false},
		{"≤0.05", '.', 0.05, false},
		{"<= 0.05", '.', 0.05, false},
		{">100", '.', 100, true},
		{"≥ 1,250.5", '.', 1250.5, true},
		{"<0.05 mm", '.', 0.05, false},
		{"BDL", '.', 0, false},
		{"n.n.", '.', 0, false},
		{"<LOD", '.', 0, false},
	} {
		if !nonDetect(tt.text) {
			t.Errorf("%s: got no non-detect", tt.text)
		}
		got := takeBound(tt.text, "mm", tt.decimal, "a number")
		if !got.isBelow || got.above != tt.above || (got.limit == nil) != (tt.limit == 0) || got.limit != nil && *got.limit != tt.limit {
			t.Errorf("%s: got %+v, want the limit %v, above %v", tt.text, got, tt.limit, tt.above)
		}
	}
	for text, code := range map[string]string{"<0.05 in": OtherUnit} {
		if got := takeBound(text, "mm", '.', "a number"); got.problem == nil || got.problem.Code != code {
			t.Errorf("%s: got %+v, want %s", text, got, code)
		}
	}
	for _, text := range []string{"<", "<x", ">>1", "< >1", "= 5"} {
		if nonDetect(text) {
			t.Errorf("%s: got a non-detect", text)
		}
	}
}

// D5 of the catalogue: with non-detects in both lots.
var (
	d5Reference = strings.Fields("0.08 0.06 <0.05 0.07 <0.05 0.09 0.06 0.08")
	d5Candidate = strings.Fields("0.07 <0.05 <0.05 0.09 0.08 0.06 0.10 <0.05")
)

func TestReadNonDetectRules(t *testing.T) {
	margin := 0.03
	for _, tt := range []struct {
		rule        string
		n, open     int
		first       float64 // what the third reading of the reference counts as
		verdict     qa.Verdict
		code        string
		listedValue bool
	}{
		{"", 6, 2, 0.07, qa.Undecided, qa.WarnNonDetects, false},
		{"exclude", 6, 2, 0.07, qa.Equivalent, qa.WarnFlips, false},
		{"limit", 8, 0, 0.05, qa.Equivalent, qa.WarnFlips, true},
		{"half-limit", 8, 0, 0.025, qa.Equivalent, qa.WarnFlips, true},
		{"zero", 8, 0, 0, qa.Undecided, qa.WarnNonDetects, true},
	} {
		p, r, err := readTwo(t, lotFile("x", d5Reference), lotFile("x", d5Candidate), func(p *qa.Plan) {
			p.Reading.NonDetect = tt.rule
			p.Criterion.Margin = &qa.Margin{Absolute: &margin}
		})
		if err != nil {
			t.Fatal(err)
		}
		s := r.Reference.Series[0]
		if len(s.Values()) != tt.n || s.NonDetects != tt.open || len(s.NonDetected) != 2 || s.Values()[2] != tt.first {
			t.Errorf("%q: got %v, %d open, %d non-detects, want n = %d, %d open, 2, third %v", tt.rule, s.Values(), s.NonDetects, len(s.NonDetected), tt.n, tt.open, tt.first)
		}
		if n := s.NonDetected[0]; *n.Limit != 0.05 || n.Above || n.Source.Cell != "B4" || n.Part != "3" {
			t.Errorf("%q: got %+v, want 0.05 from B4 of part 3", tt.rule, n)
		}
		l := entries(r, qa.TakenNonDetect)
		if len(l) != 5 || (l[0].Value != nil) != tt.listedValue || tt.rule != "" && !strings.Contains(l[0].Reason, "non_detect") {
			t.Errorf("%q: got the ledger %+v", tt.rule, l)
		}
		result, err := qa.Compare(p, r, qa.Run{})
		if err != nil {
			t.Fatal(err)
		}
		c := result.Characteristics[0]
		if c.Verdict != tt.verdict || !qa.Has(c.Warnings, tt.code) {
			t.Errorf("%q: got %s, %v, want %s and %s", tt.rule, c.Verdict, c.Warnings, tt.verdict, tt.code)
		}
	}
}

func TestReadNonDetectMarks(t *testing.T) { // a limit with a comma that may group is asked for like any other number
	rows := "No;x\n1;<1,234\n2;<1,234\n3;<1,234\n"
	_, _, err := readTwo(t, []byte(rows), []byte(rows), func(*qa.Plan) {})
	wantPlanError(t, err, "ref.csv!B2", `"<1,234"`, "decimal")
	_, r, err := readTwo(t, []byte(rows), []byte(strings.ReplaceAll(rows, "<1,234", ">1,234")), func(p *qa.Plan) { p.Reading.Decimal = "," })
	if err != nil || *r.Reference.Series[0].NonDetected[0].Limit != 1.234 || !r.Candidate.Series[0].NonDetected[0].Above {
		t.Errorf("got %v, %+v, want below 1.234 and above it", err, r)
	}
	p, r, err := readTwo(t, []byte("No;x\n1;<0.05\n2;0.5\n3;0.6\n"), []byte("No;x\n1;0.5\n2;0.6\n3;0.4\n"), func(p *qa.Plan) {
		p.Reading.Exclude = []qa.Exclusion{{File: "ref.csv", Cell: "B2", Reason: "probe not in contact"}}
	})
	if err != nil || r.Reference.Series[0].ExcludedUnread != 1 || len(r.Reference.Series[0].NonDetected) != 0 {
		t.Errorf("got %v, %+v of %v, want it left out", err, r.Reference.Series, p.Reading)
	}
}
