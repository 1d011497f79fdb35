package qa_test

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa"
)

// D5: readings of two lots with a detection limit of 0.05, margin 0.030. Bounds computed in R 4.2.2 with t.test(): reference
// at 0 and candidate at the limit, upper end 0.03949; the reverse, lower end -0.04719. Text dropped: n 6 and 5, upper 0.02287.
var (
	d5Reference = strings.Fields("0.08 0.06 <0.05 0.07 <0.05 0.09 0.06 0.08")
	d5Candidate = strings.Fields("0.07 <0.05 <0.05 0.09 0.08 0.06 0.10 <0.05")
)

// censored makes a series with non-detects, substituted by a rule.
func censored(rule string, texts []string) qa.Series {
	s := qa.Series{Characteristic: "x", Rows: len(texts)}
	for i, text := range texts {
		source := qa.Source{File: "lots.xlsx", Cell: "C" + strconv.Itoa(i+2), Text: text}
		number, above := strings.CutPrefix(text, ">")
		number, below := strings.CutPrefix(number, "<")
		v, err := strconv.ParseFloat(number, 64)
		n := qa.NonDetect{Source: source, Part: strconv.Itoa(i), Above: above, Decimals: 2}
		if err == nil {
			n.Limit = &v
		}
		if !above && !below && err == nil {
			s.Readings = append(s.Readings, qa.Reading{Value: v, Source: source, Part: n.Part, Decimals: 2})
			continue
		}
		if n.Substitute = n.SubstituteFor(rule); n.Substitute != nil {
			s.Readings = append(s.Readings, qa.Reading{Value: *n.Substitute, Source: source, Part: n.Part, Decimals: 2})
		} else {
			s.NonDetects++
		}
		s.NonDetected = append(s.NonDetected, n)
	}
	return s
}

func nonDetectPlan(rule string, margin float64) qa.Plan {
	p := plan(qa.Equivalence, absolute(margin))
	p.Reading.NonDetect = rule
	return p
}

func TestNonDetectsDecide(t *testing.T) {
	more := append(strings.Fields("0.101 0.102 0.100 0.099 0.101 0.098 0.102 0.100 0.101 0.099 0.100"), "<0.05")
	for _, tt := range []struct {
		name      string
		rule      string
		ref, cand []string
		margin    float64
		verdict   qa.Verdict
		codes     []string
		n         int
	}{
		{"D5 is not decidable without a rule", "", d5Reference, d5Candidate, 0.03, qa.Undecided, []string{qa.WarnNonDetects}, 6},
		{"D5 with the limit", "limit", d5Reference, d5Candidate, 0.03, qa.Equivalent, []string{qa.WarnFlips}, 8},
		{"D5 with half the limit", "half-limit", d5Reference, d5Candidate, 0.03, qa.Equivalent, []string{qa.WarnFlips}, 8},
		{"D5 with zero", "zero", d5Reference, d5Candidate, 0.03, qa.Undecided, []string{qa.WarnNonDetects}, 8},
		{"D5 with the text dropped", "exclude", d5Reference, d5Candidate, 0.03, qa.Equivalent, []string{qa.WarnFlips}, 6},
		{"a margin that holds at both bounds", "", d5Reference, d5Candidate, 0.06, qa.Equivalent, []string{qa.WarnNonDetects}, 6},
		{"refuted at both bounds", "", more, strings.Fields("1.1 1.2 1.15 1.12 <1.1 1.2"), 0.03, qa.NotEquivalent, []string{qa.WarnNonDetects}, 11},
		{"above has no high end", "", more, strings.Fields("0.1 0.1 0.11 0.09 >0.12 0.1"), 0.5, qa.Undecided, []string{qa.WarnNonDetects}, 11},
		{"above with its limit", "limit", more[:11], strings.Fields("0.1 0.1 0.11 0.09 >0.12 0.1"), 0.5, qa.Equivalent, []string{qa.WarnNonDetects}, 11},
		{"above has no half", "half-limit", more[:11], strings.Fields("0.1 0.1 0.11 0.09 >0.12 0.1"), 0.5, qa.Undecided, []string{qa.WarnNonDetects}, 11},
		{"a word states no limit", "", more[:11], strings.Fields("0.1 0.1 0.11 0.09 BDL 0.1"), 0.5, qa.Undecided, []string{qa.WarnNonDetects}, 11},
		{"a word has no limit to take", "limit", more[:11], strings.Fields("0.1 0.1 0.11 0.09 BDL 0.1"), 0.5, qa.Undecided, []string{qa.WarnNonDetects}, 11},
		{"a word as zero", "zero", more[:11], strings.Fields("0.1 0.1 0.11 0.09 BDL 0.1"), 0.5, qa.Equivalent, []string{qa.WarnNonDetects}, 11},
	} {
		c := one(t, nonDetectPlan(tt.rule, tt.margin), lots(qa.Characteristic{Name: "x"}, censored(tt.rule, tt.ref), censored(tt.rule, tt.cand)))
		if c.Verdict != tt.verdict || c.Reference.N != tt.n {
			t.Errorf("%s: got %q with n = %d, want %q and %d: %v", tt.name, c.Verdict, c.Reference.N, tt.verdict, tt.n, c.Warnings)
		}
		for _, code := range tt.codes {
			if !qa.Has(c.Warnings, code) {
				t.Errorf("%s: got the warnings %v, want one with the code %q", tt.name, c.Warnings, code)
			}
		}
		if c.Equivalence.Verdict != c.Verdict {
			t.Errorf("%s: got the verdict %q on the mean beside %q", tt.name, c.Equivalence.Verdict, c.Verdict)
		}
	}
}

func TestNonDetectsBounds(t *testing.T) {
	c := one(t, nonDetectPlan("", 0.03), lots(qa.Characteristic{Name: "x"}, censored("", d5Reference), censored("", d5Candidate)))
	near(t, "upper of the readings with a value", c.Equivalence.Upper, 0.02287, 5e-4)
	var upper, lower float64
	ends := atEnds(c)
	for _, s := range ends {
		upper, lower = math.Max(upper, *s.Upper), math.Min(lower, *s.Lower)
		if s.Verdict != qa.Undecided {
			t.Errorf("%s: got %q, want undecided", s.Method, s.Verdict)
		}
	}
	near(t, "upper", &upper, 0.03949, 2e-4)
	near(t, "lower", &lower, -0.04719, 2e-4)
	if len(ends) != 2 || ends[0].Method != "non-detects-best" || ends[1].Method != "non-detects-worst" {
		t.Errorf("got %+v, want best and worst", ends)
	}
}

// atEnds are the comparisons with the non-detects at their ends.
func atEnds(c qa.Comparison) []qa.SensitivityResult {
	var out []qa.SensitivityResult
	for _, s := range c.Sensitivity {
		if strings.HasPrefix(s.Method, "non-detects") {
			out = append(out, s)
		}
	}
	return out
}

// A verdict that needs no non-detect to be decided must not depend on the rule's absence: with every rule the bounds are the same.
func TestNonDetectsBoundsWhateverTheRule(t *testing.T) {
	var first string
	for _, rule := range []string{"", "limit", "half-limit", "zero", "exclude"} {
		c := one(t, nonDetectPlan(rule, 0.03), lots(qa.Characteristic{Name: "x"}, censored(rule, d5Reference), censored(rule, d5Candidate)))
		got := ""
		for _, s := range atEnds(c) {
			got += fmt.Sprintf("%s %.12f %.12f %s;", s.Method, *s.Lower, *s.Upper, s.Verdict)
		}
		if first == "" {
			first = got
		}
		if got != first {
			t.Errorf("rule %q: got %s, want %s", rule, got, first)
		}
	}
}

func TestNonDetectsWithADifferenceAsked(t *testing.T) {
	for _, tt := range []struct {
		ref, cand []string
		want      qa.Verdict
	}{
		{d5Reference, d5Candidate, qa.NoDifference},
		{strings.Fields("1.1 1.2 1.15 1.12 1.1"), strings.Fields("1.5 1.6 1.55 1.52 <1.6"), qa.Undecided},
		{strings.Fields("1.1 1.2 1.15 1.12 <1.1"), strings.Fields("15 16 15.5 15.2 15.1"), qa.Different},
	} {
		c := one(t, plan(qa.Difference, nil), lots(qa.Characteristic{Name: "x"}, censored("", tt.ref), censored("", tt.cand)))
		if c.Verdict != tt.want || qa.Has(c.Warnings, qa.WarnAbsence) != (tt.want == qa.NoDifference) {
			t.Errorf("%v: got %q, %v, want %q", tt.cand, c.Verdict, c.Warnings, tt.want)
		}
	}
}
