package importers

import (
	"math"
	"testing"

	"lotpair/qa"
)

// D1 with a margin of 0.010 mm misses equivalence by a hair: every way of misreading it that is known (foot rows taken as
// readings, the candidate pasted twice) makes it equivalent. Values computed in R 4.2.2: 90 % interval -0.00156020125 to
// 0.01006020125, p 0.0516733832.
func TestReadCompare(t *testing.T) {
	foot := append(append(long(), []any{}), []any{"Mean", nil, formula{"AVERAGE(C2:C25)", "12.006"}}, []any{"s", nil, formula{"STDEV(C2:C25)", "0.008"}})
	for name, rows := range map[string][][]any{"long": long(), "limits": withSpecs(), "foot rows": foot} {
		p := xlsxPlan()
		r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
		result, err := qa.Compare(p, r, qa.Run{})
		if err != nil {
			t.Fatal(err)
		}
		e := result.Characteristics[0].Equivalence
		if result.Verdict != qa.Undecided || math.Abs(*e.Lower+0.00156020125) > 1e-11 || math.Abs(*e.Upper-0.01006020125) > 1e-11 || math.Abs(*e.P-0.0516733832) > 1e-10 {
			t.Errorf("%s: got %s, %v to %v, p %v, want undecided, -0.00156020125 to 0.01006020125, p 0.0516733832", name, result.Verdict, *e.Lower, *e.Upper, *e.P)
		}
	}
	p := xlsxPlan()
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: withCandidate3("n/a#")}))
	result, err := qa.Compare(p, r, qa.Run{})
	if err != nil || result.Verdict != qa.Undecided || !qa.Has(result.Characteristics[0].Warnings, qa.WarnUnread) {
		t.Errorf("with an unread cell: got %s, %v, want undecided", result.Verdict, err)
	}
}
