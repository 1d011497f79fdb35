package desk_test

import (
	"encoding/json"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/app/desk"
	"lotpair/qa"
)

func number(v float64) *float64 { return &v }

// someMargin draws a margin of any kind.
func someMargin(t *rapid.T) *qa.Margin {
	v := rapid.Float64Range(1e-6, 1e6).Draw(t, "v")
	m := qa.Margin{Reason: rapid.SampledFrom([]string{"", "note FN-12"}).Draw(t, "reason"), ApprovedBy: rapid.SampledFrom([]string{"", "design"}).Draw(t, "by")}
	switch rapid.IntRange(0, 7).Draw(t, "kind") {
	case 0:
		m.Absolute = &v
	case 1:
		m.Lower, m.Upper = number(-v), number(2*v)
	case 2:
		m.Lower = number(-v)
	case 3:
		m.ToleranceFraction, m.Of = &v, rapid.SampledFrom([]string{"", "full", "half"}).Draw(t, "of")
	case 4:
		m.ReferenceFraction = &v
	case 5:
		m.RatioLower, m.RatioUpper = &v, number(2*v)
	case 6:
		m.SDMultiple, m.SD = &v, number(v/3)
	default:
		m.KeepPpk, m.Mean, m.SD = &v, number(-v), number(v/7)
	}
	return &m
}

func someCriterion(t *rapid.T) qa.Criterion {
	one := func(values ...string) string { return rapid.SampledFrom(values).Draw(t, "word") }
	maybe := func() *float64 {
		if rapid.Bool().Draw(t, "stated") {
			return nil
		}
		return number(rapid.Float64Range(0.001, 3).Draw(t, "number"))
	}
	c := qa.Criterion{
		Objective: qa.Objective(one("", "equivalence", "not-lower", "not-higher", "difference", "lower", "higher")), Claim: one("", "lots", "sources"), Groups: one("", "none", "random"),
		Method: one("", "welch", "pooled", "paired", "log"), SecondSample: one("", "none", "one"), Overall: one("", "all"),
		Alpha: maybe(), SpreadRatio: maybe(), Guard: maybe(), Power: maybe(),
	}
	if rapid.Bool().Draw(t, "margin") {
		c.Margin = someMargin(t)
	}
	return c
}

// What is shown and not touched stays to the last digit, whatever the criterion.
func TestTermsChangeNothingByThemselves(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := qa.Plan{Criterion: someCriterion(t)}
		mark := rapid.SampledFrom([]desk.Decimal{desk.Point, desk.Comma}).Draw(t, "mark")
		got, err := desk.TermsOf(p, mark).Into(p)
		if err != nil || !reflect.DeepEqual(got, p) {
			t.Fatalf("got %s, %v, want %s", asJSON(got), err, asJSON(p))
		}
		c := qa.Characteristic{Name: "Bore", Unit: "mm", Lower: number(1.0 / 3), Objective: p.Criterion.Objective, Method: p.Criterion.Method, Alpha: p.Criterion.Alpha, Margin: p.Criterion.Margin}
		if rapid.Bool().Draw(t, "uncertain") {
			c.Uncertainty = &qa.Uncertainty{Reference: 1.0 / 3, Candidate: 0}
		}
		same, err := desk.OwnOf(c, mark).Into(c)
		if err != nil || !reflect.DeepEqual(same, c) {
			t.Fatalf("own: got %+v, %v, want %+v", same, err, c)
		}
		for _, x := range desk.Particulars(mark) {
			before := asJSON(p)
			if err := x.Set(&p, x.Get(p)); err != nil || asJSON(p) != before {
				t.Fatalf("%s: got %s, %v, want %s", x.Label, asJSON(p), err, before)
			}
		}
	})
}

func asJSON(v any) string {
	b, err := json.Marshal(v)
	if err != nil {
		return err.Error()
	}
	return string(b)
}

// Every kind of margin, every objective and every other term can be typed.
func TestTermsAreTyped(t *testing.T) {
	type term func(*desk.Terms)
	margin := func(kind, first, second string) term {
		return func(t *desk.Terms) { t.Margin, t.First, t.Second = kind, first, second }
	}
	for _, tt := range []struct {
		name string
		set  term
		want string // of the criterion's JSON
	}{
		{"part", margin(desk.Margins[0], "10", ""), `"margin":{"tolerance_fraction":0.1}`},
		{"half", func(t *desk.Terms) { t.Margin, t.First, t.Of = desk.Margins[0], "7,5", "half width" }, `"margin":{"tolerance_fraction":0.075,"of":"half"}`},
		{"absolute", margin(desk.Margins[1], "0,02", ""), `"margin":{"absolute":0.02}`},
		{"bounds", margin(desk.Margins[2], "−0.01", "0.03"), `"margin":{"lower":-0.01,"upper":0.03}`},
		{"one bound", margin(desk.Margins[2], "", "0.03"), `"margin":{"upper":0.03}`},
		{"ratio", margin(desk.Margins[3], "5", ""), `"margin":{"reference_fraction":0.05}`},
		{"geometric", margin(desk.Margins[4], "0.8", "1.25"), `"margin":{"ratio_lower":0.8,"ratio_upper":1.25}`},
		{"Ppk", func(t *desk.Terms) { t.Margin, t.First, t.Mean, t.SD = desk.Margins[5], "1.33", "4", "0.01" }, `"margin":{"keep_ppk":1.33,"mean":4,"sd":0.01}`},
		{"multiple", func(t *desk.Terms) {
			t.Margin, t.First, t.SD, t.Reason, t.ApprovedBy = desk.Margins[6], "1.5", "0.01", "why", "who"
		}, `"margin":{"sd_multiple":1.5,"sd":0.01,"reason":"why","approved_by":"who"}`},
		{"lower", func(t *desk.Terms) { t.Objective = "lower than" }, `"objective":"lower"`},
		{"higher", func(t *desk.Terms) { t.Objective = "higher than" }, `"objective":"higher"`},
		{"difference", func(t *desk.Terms) { t.Objective = "different from" }, `"objective":"difference"`},
		{"not lower", func(t *desk.Terms) { t.Objective = "not lower than" }, `"objective":"not-lower"`},
		{"not higher", func(t *desk.Terms) { t.Objective = "not higher than" }, `"objective":"not-higher"`},
		{"sources", func(t *desk.Terms) { t.Claim = desk.Claims[1] }, `"claim":"sources"`},
		{"groups", func(t *desk.Terms) { t.Claim = desk.Claims[2] }, `"claim":"lots","groups":"random"`},
		{"paired", func(t *desk.Terms) { t.Method = "paired" }, `"method":"paired"`},
		{"log", func(t *desk.Terms) { t.Method = "log" }, `"method":"log"`},
		{"rest", func(t *desk.Terms) {
			t.Alpha, t.Spread, t.Guard, t.Power, t.Look = "0,01", "1.5", "0.001", "0.8", desk.Looks[1]
		}, `"alpha":0.01,"spread_ratio":1.5,"guard":0.001,"power":0.8,"second_sample":"one"`},
	} {
		p := qa.Plan{}
		terms := desk.TermsOf(p, desk.Point)
		tt.set(&terms)
		got, err := terms.Into(p)
		if text := asJSON(got.Criterion); err != nil || text != "{"+tt.want+"}" {
			t.Errorf("%s: got %s, %v, want {%s}", tt.name, text, err, tt.want)
		}
	}
	for _, bad := range []term{margin(desk.Margins[1], "", ""), margin(desk.Margins[1], "wide", ""), func(t *desk.Terms) { t.Alpha = "5 %" }} {
		terms := desk.TermsOf(qa.Plan{}, desk.Point)
		bad(&terms)
		if _, err := terms.Into(qa.Plan{}); err == nil || !strings.Contains(err.Error(), "found") {
			t.Errorf("got %v, want it refused", err)
		}
	}
}

// The margin of each kind is said with what it means in the unit and what it lets through.
func TestConsequences(t *testing.T) {
	alpha := 0.05
	p := qa.Plan{
		Format: qa.PlanFormat, Criterion: qa.Criterion{Objective: qa.Equivalence, Alpha: &alpha, Method: "welch"},
		Characteristics: []qa.Characteristic{{Name: "Bore", Unit: "mm", Lower: number(9.9), Target: number(10), Upper: number(10.1), SD: number(0.02)}},
	}
	for _, tt := range []struct {
		method string
		margin qa.Margin
		want   []string
	}{
		{"welch", qa.Margin{ToleranceFraction: number(0.1)}, []string{"±0.02 mm", "10.0 % of the tolerance", "Ppk 1.33", "parts a lot"}},
		{"welch", qa.Margin{ToleranceFraction: number(0.1), Of: "half"}, []string{"±0.01 mm", "5.0 % of the tolerance", "Ppk 1.50"}},
		{"welch", qa.Margin{Absolute: number(0.02)}, []string{"±0.02 mm"}},
		{"welch", qa.Margin{Lower: number(-0.01), Upper: number(0.03)}, []string{"−0.01 to 0.03 mm", "Ppk 1.17"}},
		{"welch", qa.Margin{ReferenceFraction: number(0.002)}, []string{"0.998 to 1.002 times", "Ppk 1.33"}},
		{"log", qa.Margin{RatioLower: number(0.998), RatioUpper: number(1.002)}, []string{"0.998 to 1.002 times"}},
		{"welch", qa.Margin{KeepPpk: number(1.33)}, []string{"±0.02", "Ppk 1.33"}},
		{"welch", qa.Margin{SDMultiple: number(1.5)}, []string{"±0.03 mm", "Ppk 1.17"}},
		{"paired", qa.Margin{Absolute: number(0.02)}, []string{"±0.02 mm", "Ppk 1.33"}},
	} {
		x := p
		x.Criterion.Method, x.Criterion.Margin = tt.method, &tt.margin
		if tt.method == "paired" {
			x.Reading.PairColumn = "Serial"
		}
		got := strings.Join(desk.Consequences(x, 8), "\n")
		for _, want := range tt.want {
			if !strings.Contains(got, want) {
				t.Errorf("%s: got %q, want %q in it", asJSON(tt.margin), got, want)
			}
		}
	}
	if got := desk.Consequences(p, 8); len(got) != 1 || !strings.HasPrefix(got[0], "state the margin") {
		t.Errorf("without a margin: got %q", got)
	}
	guard := 0.03
	p.Criterion.Margin, p.Criterion.Guard = &qa.Margin{Absolute: number(0.02)}, &guard
	if got := strings.Join(desk.Consequences(p, 8), "\n"); !strings.Contains(got, "guard") {
		t.Errorf("a guard wider than the margin: got %q, want it said", got)
	}
}

// What is planned by hand is what the study says.
func TestSizing(t *testing.T) {
	usual := desk.State{}.SizingOf(desk.Point)
	for _, tt := range []struct {
		name string
		set  func(*desk.Sizing)
		want string
	}{
		{"nothing", func(*desk.Sizing) {}, "standard deviation: found none"},
		{"pooled", func(z *desk.Sizing) { z.SD, z.Margin = "0.01", "0.006" }, "61 reference and 61 candidate parts"},
		{"n", func(z *desk.Sizing) { z.SD, z.Margin, z.N = "0.008", "0.01", "12" }, "The narrowest margin shown"},
		{"pairs", func(z *desk.Sizing) { z.Design, z.SD, z.Margin = "pairs", "0.01", "0.006" }, "pairs show it"},
		{"fractions", func(z *desk.Sizing) {
			z.Design, z.FractionReference, z.FractionCandidate, z.Margin = "parts that pass or fail", "0.02", "0.02", "0.05"
		}, "Miettinen"},
		{"both margins", func(z *desk.Sizing) { z.SD, z.Margin, z.MarginUpper = "1", "1", "2" }, "want either"},
		{"half a characteristic", func(z *desk.Sizing) { z.SD, z.Margin, z.Characteristics = "1", "1", "1.5" }, "want a whole number"},
	} {
		z := usual
		tt.set(&z)
		if got := strings.Join(z.Answer(), "\n"); !strings.Contains(got, tt.want) {
			t.Errorf("%s: got %q, want %q in it", tt.name, got, tt.want)
		}
	}
}
