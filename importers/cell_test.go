package importers

import (
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

// withCandidate3 is D1 with another cell in place of the candidate's third reading (Data!C16).
func withCandidate3(cell any) [][]any {
	rows := long()
	rows[15][2] = cell
	return rows
}

func TestReadMissingMarks(t *testing.T) { // N11: never 0
	for _, cell := range []any{nil, "N/A", "n/a", "n.d.", "-", "—", ".", "?", " ", "…", "...", "#N/A"} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(cell)}))
		s := r.Candidate.Series[0]
		if len(s.Values()) != 11 || s.Missing != 1 || s.Unread != 0 || s.Rows != 12 {
			t.Errorf("%#v: got %+v, want 11 readings and 1 missing", cell, s)
		}
		e := entries(r, qa.TakenMissing)
		text := ""
		if cell != nil {
			text = cell.(string)
		}
		if len(e) != 1 || e[0].Source.Place() != "Data!C16" || e[0].Source.Text != text || e[0].Side != qa.Candidate {
			t.Errorf("%#v: got the ledger %+v, want the cell", cell, e)
		}
	}
}

// problemCases has a cell for every code of the catalogue but decimal-ambiguous, which refuses the plan.
var problemCases = map[string][]any{
	NotANumber:          {"broken", "12.0O3", "0x1F", "1_000", "12.003.1", "(0.003)", "１２．００３", "12٫003", "12.0\u200b03", "--1", "12 003"},
	NotFinite:           {"NaN", "Infinity", "-inf", num("NaN"), num("INF")},
	OutOfRange:          {"1e400", "-1e400", "1e-400", num("1e999")},
	OtherUnit:           {"0.47 in", "12003 µm"},
	ErrorValue:          {failed("#DIV/0!"), failed("#N/A")},
	BooleanValue:        {truth(true)},
	DateValue:           {styled{"45303", 1}, "5/1/1987", "12.Jan", "Jan-87", "12.01.2026", "2026-01-12", "10:05"},
	FormulaWithoutValue: {formula{"A5+0.005", ""}},
}

func TestReadProblems(t *testing.T) { // N08, N14, N28
	for code, cases := range problemCases {
		for _, cell := range cases {
			r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(cell)}))
			s := r.Candidate.Series[0]
			if len(s.Values()) != 11 || s.Unread != 1 || s.Missing != 0 {
				t.Errorf("%s %#v: got %d readings, %d unread, want 11 and 1", code, cell, len(s.Values()), s.Unread)
				continue
			}
			e := entries(r, qa.TakenNotANumber)
			if len(e) != 1 || e[0].Reason != code || e[0].Want == "" || e[0].Do == "" || e[0].Source.Place() != "Data!C16" || e[0].Value != nil {
				t.Errorf("%s %#v: got %+v, want one entry with this code", code, cell, e)
			}
		}
	}
}

func TestCatalogue(t *testing.T) {
	for code, do := range catalogue {
		if do == "" {
			t.Errorf("%s: got no remedy", code)
		}
		if code != DecimalAmbiguous && len(problemCases[code]) == 0 {
			t.Errorf("%s: got no case, want one", code)
		}
	}
	for code := range problemCases {
		if catalogue[code] == "" {
			t.Errorf("the case %s has no code in the catalogue", code)
		}
	}
}

func TestReadConversions(t *testing.T) { // N06, N13, N36
	for _, tt := range []struct {
		cell   any
		value  float64
		reason string
	}{
		{"11.997", 11.997, "a number stored as text"},
		{"11.997 mm", 11.997, "the unit"},
		{"\u221211.997", -11.997, "text"},
		{"1.1997E+01", 11.997, "text"},
		{"1,011.997", 1011.997, "thousands marks"},
		{"+11.997", 11.997, "text"},
	} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(tt.cell)}))
		e := entries(r, qa.TakenNumber)
		if len(e) != 1 || e[0].Value == nil || *e[0].Value != tt.value {
			t.Errorf("%v: got %+v, want the value %v", tt.cell, e, tt.value)
			continue
		}
		wantWords(t, e[0].Reason, tt.reason)
		if got := r.Candidate.Series[0].Values()[2]; got != tt.value {
			t.Errorf("%v: got the reading %v, want %v", tt.cell, got, tt.value)
		}
	}
}

func TestReadNonDetects(t *testing.T) { // N12
	for _, text := range []string{"<0.05", "< 0,05", "≤0.05", "BDL", ">100", "<0.05 mm", "<LOD"} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(text)}))
		if s := r.Candidate.Series[0]; s.NonDetects != 1 || len(s.Values()) != 11 || len(entries(r, qa.TakenNonDetect)) != 1 {
			t.Errorf("%s: got %+v, want one non-detect", text, s)
		}
	}
}

func TestReadFormulas(t *testing.T) {
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(formula{"A5+0.005", "11.997"})}))
	wantD1(t, r)
	wantWarning(t, r, "formula-cells", "C16")
}

func TestReadPercent(t *testing.T) {
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(styled{"11.997", 2})}))
	wantD1(t, r)
	wantWarning(t, r, "percent-format", "C16")
}

func TestReadDecimalComma(t *testing.T) { // N05
	rows := long()
	for _, row := range rows[1:] {
		row[2] = replaceMark(row[2])
	}
	data := xlsx(t, sheetOf{name: "Data", rows: rows})
	_, err := read(t, xlsxPlan(), data)
	wantPlanError(t, err, "Data!C2", `"12,003"`, "23 more", "decimal")
	r := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.Decimal = "," }), data)
	wantD1(t, r)
	lower, upper := 11.95, 12.05
	limits := func(p *qa.Plan) {
		p.Characteristics = []qa.Characteristic{{Name: "Bore dia", Lower: &lower, Upper: &upper}}
	}
	wantD1(t, mustRead(t, xlsxPlan(limits), data))
	r = mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.Decimal = "." }), data)
	if got := r.Reference.Series[0].Values()[0]; got != 12003 {
		t.Errorf("with decimal = \".\": got %v, want 12003", got)
	}
	wantWarning(t, r, "thousands-mark", "C2")
	lower, upper = 11950, 12050
	r = mustRead(t, xlsxPlan(limits), data)
	if got := r.Reference.Series[0].Values()[0]; got != 12003 {
		t.Errorf("with limits of thousands: got %v, want 12003", got)
	}
}

func replaceMark(c any) string {
	s := []byte(fmt.Sprint(c))
	for i := range s {
		if s[i] == '.' {
			s[i] = ','
		}
	}
	return string(s)
}

func TestReadDecimalCommaSettledByTexts(t *testing.T) {
	rows := [][]any{{"Lot", "x"}, {"REF-0417", "1,25"}, {"REF-0417", "1,3"}, {"CAND-0931", "0,125"}, {"CAND-0931", num("1.5")}}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantLots(t, r, 2, 1.275, 2, 0.8125)
	rows[2][1] = "1.3"
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "decimal")
	rows[2][1] = "1,300"
	_, err = read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "Data!B3", "decimal")
}

func TestReadThousands(t *testing.T) { // N07: 100 x D1 with the mark of thousands as dot or no-break space
	for _, group := range []string{".", "\u00a0", "\u202f"} {
		rows := long()
		for _, row := range rows[1:] {
			s := fmt.Sprint(row[2]) // 12.003 -> 1.200,3
			row[2] = s[:1] + group + s[1:2] + s[3:5] + "," + s[5:]
		}
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
		if len(entries(r, qa.TakenNumber)) != 24 {
			t.Errorf("got %d conversions, want 24", len(entries(r, qa.TakenNumber)))
		}
		if got := meanOf(r.Reference.Series[0].Values()); got < 1200.39166666 || got > 1200.39166668 {
			t.Errorf("%q: got the mean %v, want 1200.39166667", group, got)
		}
	}
}

func TestExclude(t *testing.T) {
	with := func(e ...qa.Exclusion) func(*qa.Plan) { return func(p *qa.Plan) { p.Reading.Exclude = e } }
	data := xlsx(t, sheetOf{name: "Data", rows: withCandidate3("broken")})
	r := mustRead(t, xlsxPlan(with(qa.Exclusion{Cell: "Data!C16", Reason: "dropped, NCR-77"}, qa.Exclusion{Cell: "$C$2", Reason: "burr"})), data)
	ref, cand := r.Reference.Series[0], r.Candidate.Series[0]
	if cand.ExcludedUnread != 1 || cand.Unread != 0 || len(cand.Values()) != 11 {
		t.Errorf("got %+v, want one left out without having been a number", cand)
	}
	if ref.Readings[0].LeftOut != "burr" || len(ref.Values()) != 11 {
		t.Errorf("got %+v, want the first left out", ref.Readings[0])
	}
	e := entries(r, qa.TakenExcluded)
	if len(e) != 2 || e[0].Source.Place() != "Data!C2" || *e[0].Value != 12.003 || e[1].Value != nil || e[1].Reason != "dropped, NCR-77" {
		t.Errorf("got the ledger %+v, want both cells with their reasons", e)
	}
	for _, tt := range []struct {
		e     []qa.Exclusion
		words []string
	}{
		{[]qa.Exclusion{{Cell: "Data!C1", Reason: "x"}}, []string{"reading.exclude 1", "no reading", "Bore dia"}},
		{[]qa.Exclusion{{Cell: "Data!C99", Reason: "x"}}, []string{"no reading"}},
		{[]qa.Exclusion{{Cell: "Other!C2", Reason: "x"}}, []string{"Other"}},
		{[]qa.Exclusion{{Cell: "Data!17", Reason: "x"}}, []string{"want one such as Data!D17"}},
		{[]qa.Exclusion{{Cell: "C2", File: "no.xlsx", Reason: "x"}}, []string{"no.xlsx"}},
		{[]qa.Exclusion{{Cell: "C2", Reason: "x"}, {Cell: "'Data'!C2", Reason: "x"}}, []string{"reading.exclude 2", "second time"}},
	} {
		_, err := read(t, xlsxPlan(with(tt.e...)), data)
		wantPlanError(t, err, tt.words...)
	}
}

func TestExcludeNeedsTheFile(t *testing.T) {
	p := plan("a.csv", func(p *qa.Plan) {
		p.Candidate.File = "b.csv"
		p.Reading.Exclude = []qa.Exclusion{{Cell: "B2", Reason: "x"}}
	})
	data := files(map[string][]byte{"a.csv": []byte("lot,x\nREF-0417,1\nREF-0417,2\n"), "b.csv": []byte("lot,x\nCAND-0931,1\nCAND-0931,2\n")})
	_, err := Read(p, data)
	wantPlanError(t, err, "a.csv or b.csv", "state its file")
	p.Reading.Exclude[0].File = "b.csv"
	r, err := Read(p, data)
	if err != nil || len(r.Candidate.Series[0].Values()) != 1 || len(r.Reference.Series[0].Values()) != 2 {
		t.Errorf("got %v, %+v, want one of two left out in b.csv", err, r.Candidate)
	}
}

func TestReadMarksOfTwoColumns(t *testing.T) {
	text := "Lot;x;y\nREF-0417;1.200;0,5\nREF-0417;1.300;0,7\nCAND-0931;1.250;0,6\nCAND-0931;1.350;0,9\n"
	_, err := read(t, plan("d1.csv"), []byte(text))
	wantPlanError(t, err, "d1.csv!B2", `"1.200"`, "decimal")
	r := mustRead(t, plan("d1.csv", func(p *qa.Plan) { p.Reading.Decimal = "," }), []byte(text))
	wantLots(t, r, 2, 1250, 2, 1300)
	if r = mustRead(t, plan("d1.csv"), []byte(strings.Replace(text, "1.300", "1.3", 1))); len(r.Reference.Series) != 2 {
		t.Errorf("got %+v, want both columns", r.Reference.Series)
	}
	wantLots(t, r, 2, 1.25, 2, 1.3)
}
