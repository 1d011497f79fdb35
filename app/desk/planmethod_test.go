package desk_test

import (
	"fmt"
	"strings"
	"testing"

	"lotpair/app/desk"
	"lotpair/qa"
)

// The parts needed are those of the plan's own test, and a study planned by hand begins with it; for pairs the number is a bound,
// because the plan states the spread of readings.
func TestPlanMethod(t *testing.T) {
	low, high := -0.02, 0.02
	for method, want := range map[string]struct{ study, design, test string }{
		"":       {qa.StudyWelch, desk.Designs[0], desk.StudyMethods[1]},
		"welch":  {qa.StudyWelch, desk.Designs[0], desk.StudyMethods[1]},
		"pooled": {qa.StudyPooled, desk.Designs[0], desk.StudyMethods[0]},
		"paired": {qa.StudyPaired, desk.Designs[1], desk.StudyMethods[0]},
	} {
		s := drafted(1)
		s.Record.Plan.Criterion.Method = method
		st := qa.Study{Objective: qa.Equivalence, Method: want.study, SD: 0.02, SDCandidate: 0.02, MarginLower: &low, MarginUpper: &high, Alpha: 0.05, Power: 0.9, Ratio: 1, Characteristics: 1}
		if method == "paired" {
			st.SD = 0.0282842712474619 // 0.02 times the root of 2
		}
		n, err := st.Size()
		if err != nil {
			t.Fatal(err)
		}
		v := s.Draft(0, nil)
		if says := fmt.Sprintf("%d pa", n.NReference); !strings.Contains(v.Headline+"\n"+strings.Join(v.Paragraphs, "\n"), says) {
			t.Errorf("%q: got %q and %q, want %q in it", method, v.Headline, v.Paragraphs, says)
		}
		if parts := v.Rows[0].Parts; (parts == "") != (method == "paired") {
			t.Errorf("%q: got %q parts", method, parts)
		}
		s.Open = true
		if z := s.SizingOf(desk.Point); z.Design != want.design || z.Method != want.test || (z.SD == "") != (method == "paired") {
			t.Errorf("%q: got %+v, want the plan's method", method, z)
		}
	}
}
