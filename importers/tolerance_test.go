package importers

import (
	"fmt"
	"testing"

	"lotpair/qa"
)

// withTolerances is an inspection sheet of two characteristics under other headings for the tolerances.
func withTolerances(name string, values []string, upper, lower string, plus, minus any) sheetOf {
	s := inspection(name, values, 2)
	for i, row := range s.rows {
		row[3], row[4] = plus, minus
		if i == 0 {
			row[3], row[4] = upper, lower
		}
	}
	return s
}

// splitTolerances has the tolerances' headings in two rows: Tolerance merged over + and the sign of minus.
func splitTolerances(name string, values []string) sheetOf {
	s := inspection(name, values, 2)
	s.rows[0][3], s.rows[0][4] = "Tolerance", nil
	s.rows = append([][]any{s.rows[0], {nil, nil, nil, "+", "\u2212"}}, s.rows[1:]...)
	s.merged = []string{"D1:E1", "A1:A2", "B1:B2", "C1:C2"}
	return s
}

// toleranceCases are sheets with tolerances as deviations under the words of the trade.
func toleranceCases() []layoutCase {
	sheets := func(a, b sheetOf) []layoutFile { return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{a, b}}} }
	bySheet := planOf("lot = \"REF-0417\"\nfile = \"own.xlsx\"\nsheet = \"REF-0417\"", "lot = \"CAND-0931\"\nfile = \"own.xlsx\"\nsheet = \"CAND-0931\"", "", "")
	two := d1.with(func(w *layoutWant) { w.limits, w.count, w.step = [3]float64{11.95, 12, 12.05}, 2, 1 })
	rows := [][]any{{"No", "REF-0417", "CAND-0931"}, {"Nominal", num("12"), num("12")}, {"Plus", num("0.05"), num("0.05")}, {"Minus", num("0.05"), num("0.05")}}
	for i := range d1Reference {
		rows = append(rows, []any{num(fmt.Sprint(i + 1)), num(d1Reference[i]), num(d1Candidate[i])})
	}
	alone := append([][]any{}, rows...)
	alone = append(alone[:1:1], alone[2:]...)
	return []layoutCase{
		{name: "l5-plus", shows: "tolerances under Plus and Minus, the minus without its sign", files: sheets(withTolerances("REF-0417", d1Reference, "Plus", "Minus", num("0.05"), num("0.05")), withTolerances("CAND-0931", d1Candidate, "Plus", "Minus", num("0.05"), num("0.05"))), plan: bySheet, want: two},
		{name: "l5-split", shows: "Tolerance merged over + and −", files: sheets(splitTolerances("REF-0417", d1Reference), splitTolerances("CAND-0931", d1Candidate)), plan: bySheet, want: two},
		{name: "l5-both", shows: "one tolerance, plus and minus", files: sheets(withTolerances("REF-0417", d1Reference, "Tol ±", "Gauge no", num("0.05"), nil), withTolerances("CAND-0931", d1Candidate, "Tol ±", "Gauge no", num("0.05"), nil)), plan: bySheet, want: two},
		{name: "n02-plus", shows: "rows for the nominal value, plus and minus above lots side by side", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows}}}}, plan: planFor("own.xlsx", "", ""), want: d1.with(func(w *layoutWant) { w.limits = two.limits })},
		{name: "n02-alone", shows: "plus and minus without a nominal value: no limits, told", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: alone}}}}, plan: planFor("own.xlsx", "", ""), want: d1.with(func(w *layoutWant) { w.warnings = []string{"limits-incomplete"} })},
	}
}

// The words for tolerances as deviations, as headings above rows of characteristics and as labels of rows above parts.
func TestReadToleranceWords(t *testing.T) {
	for _, w := range [][2]string{
		{"Upper tol", "Lower tol"},
		{"Plus", "Minus"},
		{"PLUS", "MINUS"},
		{"+Tol", "-Tol"},
		{"+ Tol.", "- Tol."},
		{"Tol +", "Tol -"},
		{"Tol. +", "Tol. \u2212"},
		{"Tol+", "Tol\u2212"},
		{"upper dev", "lower dev"},
		{"Upper deviation", "Lower deviation"},
		{"Tolerance +", "Tolerance -"},
		{"Tol. (+)", "Tol. (-)"},
		{"Oberes Abmaß", "Unteres Abmaß"},
		{"Obere Toleranz", "Untere Toleranz"},
		{"Upper tol [mm]", "Lower tol [mm]"},
		{"Plus tolerance", "Minus tolerance"},
	} {
		for _, minus := range []num{"-0.03", "0.03"} {
			rows := withTolerances("Data", d1Reference, w[0], w[1], num("0.05"), minus).rows
			candidate := withTolerances("Data", d1Candidate, w[0], w[1], num("0.05"), minus).rows
			r, err := Read(plan("ref.xlsx", func(p *qa.Plan) { p.Candidate.File = "cand.xlsx" }), files(map[string][]byte{
				"ref.xlsx": xlsx(t, sheetOf{name: "Data", rows: rows}), "cand.xlsx": xlsx(t, sheetOf{name: "Data", rows: candidate}),
			}))
			if err != nil {
				t.Errorf("%v, %s: got %v", w, minus, err)
				continue
			}
			wantD1(t, r)
			wantToleranced(t, r, fmt.Sprint(w, minus))
			if w[0][len(w[0])-1] == ']' { // rows are labelled without a unit
				continue
			}
			labelled := [][]any{{"Lot", "Part", "Bore dia"}, {nil, "Nominal", num("12")}, {nil, w[0], num("0.05")}, {nil, w[1], minus}}
			r, err = Read(xlsxPlan(), files(map[string][]byte{"d1.xlsx": xlsx(t, sheetOf{name: "Data", rows: append(labelled, long()[1:]...)})}))
			if err != nil {
				t.Errorf("%v, %s, as rows: got %v", w, minus, err)
				continue
			}
			wantD1(t, r)
			wantToleranced(t, r, fmt.Sprint(w, minus, " as rows"))
		}
	}
}

func wantToleranced(t *testing.T, r qa.Readings, what string) {
	t.Helper()
	c := r.Characteristics[0]
	if c.Lower == nil || c.Upper == nil || c.Target == nil || *c.Lower != 11.97 || *c.Target != 12 || *c.Upper != 12.05 {
		t.Errorf("%s: got the limits %v, %v, %v, want 11.97, 12, 12.05", what, c.Lower, c.Target, c.Upper)
	}
}
