package importers

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/importers/cells"
	"lotpair/qa"
)

func TestReadDates(t *testing.T) { // N08: two dates among the readings stop the verdict and are listed; a slip by 1000 is told
	rows := long()
	rows[13][2], rows[14][2] = styled{"45303", 1}, styled{"31898", 1}
	p := xlsxPlan()
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantWarning(t, r, "dates", "2 cells", "C14, C15")
	result, err := qa.Compare(p, r, qa.Run{})
	if err != nil || result.Verdict != qa.Undecided || !qa.Has(result.Characteristics[0].Warnings, qa.WarnUnread) || result.Characteristics[0].Candidate.N != 10 {
		t.Errorf("got %s, %v, want undecided on 10 readings", result.Verdict, err)
	}
	rows = long()
	rows[13][2] = num("12008")
	r = mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantWarning(t, r, "factor", "12008 in Data!C14", "1000 times")
	if got := r.Candidate.Series[0].Values()[0]; got != 12008 {
		t.Errorf("got %v, want 12008 used as it stands", got)
	}
}

func TestDateText(t *testing.T) {
	for _, s := range []string{"12-Jan", "12. Jan", "Jan 87", "Jan-1987", "Mai 87", "1. Mai 1987", "5/1/1987", "12.01.2026", "1.5.87", "2026-01-12", "2026-01-12T10:05:00", "10:05", "00:12:01"} {
		if !dateText(s) {
			t.Errorf("%q: got no date", s)
		}
	}
	for _, s := range []string{"12.003", "12,003", "1.200.300", "12", "-3", "1-2", "1-2-3", "broken", "12 mm", "Marker 5", "n/a", "1e-5", "A-12-B", "3 of 5", "", "12:", "10:99"} {
		if dateText(s) {
			t.Errorf("%q: got a date", s)
		}
	}
}

func TestReadOddNumbers(t *testing.T) { // N13
	for _, tt := range []struct {
		cell  any
		code  string
		words []string
	}{
		{num("0"), "sentinel", []string{"0 in Data!C16"}},
		{num("9999"), "sentinel", []string{"9999 in Data!C16", "exclude"}},
		{num("-999"), "sentinel", []string{"-999 in Data!C16"}},
		{num("9.9E37"), "sentinel", []string{"C16"}},
		{num("119.97"), "factor", []string{"119.97 in Data!C16", "10 times"}},
		{num("1.1997"), "factor", []string{"a tenth"}},
		{num("0.4723"), "factor", []string{"inch"}},
	} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(tt.cell)}))
		wantWarning(t, r, tt.code, tt.words...)
		if s := r.Candidate.Series[0]; len(s.Values()) != 12 {
			t.Errorf("%v: got n = %d, want 12: nothing is dropped", tt.cell, len(s.Values()))
		}
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(num("1.1997E+01"))}))
	wantD1(t, r)
	if len(r.Warnings) != 0 {
		t.Errorf("got the warnings %v for 1.1997E+01, want none", r.Warnings)
	}
	p := xlsxPlan(func(p *qa.Plan) { p.Reading.Exclude = []qa.Exclusion{{Cell: "Data!C16", Reason: "not measured"}} })
	if r = mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: withCandidate3(num("9999"))})); len(r.Warnings) != 0 {
		t.Errorf("got the warnings %v once it is left out, want none", r.Warnings)
	}
}

func TestOddReadings(t *testing.T) {
	for name, values := range map[string][]float64{
		"around 0":           {0, 0.01, -0.02, 0.03, -1.3, 0.01, 0.02},
		"few":                {1, 1, 1, 1000},
		"two populations":    {1, 1.1, 1.05, 10, 10.1, 11, 1.02, 10.3},
		"wide":               {1, 3, 10, 30, 100, 300, 1000},
		"constant":           {5, 5, 5, 5, 5, 5},
		"far, but no factor": {12.003, 12.001, 12.002, 12.004, 12.005, 12.9},
		"counts with zeros":  {0, 1, 0, 2, 1, 0, 3, 0},
	} {
		if got := oddReadings(values); len(got) > 0 {
			t.Errorf("%s: got %v, want none", name, got)
		}
	}
	if got := oddReadings([]float64{5, 5, 5, 5, 5, 50}); len(got) != 1 || got[0].at != 5 {
		t.Errorf("got %v, want the last of a constant lot", got)
	}
}

func TestReadScales(t *testing.T) { // N10 and N19 without a word on the unit
	ref := lotFile("Bore", d1Reference)
	_, _, err := readTwo(t, ref, lotFile("Bore", d1CandidateInch), func(*qa.Plan) {})
	wantPlanError(t, err, "25.4", "unit or values under [", "medians")
	_, _, err = readTwo(t, ref, lotFile("Bore", d1CandidateMicron), func(*qa.Plan) {})
	wantPlanError(t, err, "deviations", "candidate lot")
	thousand := make([]string, len(d1Candidate))
	for i, v := range d1Candidate {
		thousand[i] = strings.Replace(v, ".", "", 1)
	}
	_, _, err = readTwo(t, ref, lotFile("Bore", thousand), func(*qa.Plan) {})
	wantPlanError(t, err, "1000", "another unit")
	if _, _, err = readTwo(t, ref, lotFile("Bore", thousand), func(p *qa.Plan) { p.Candidate.Values = "absolute" }); err != nil {
		t.Errorf("got %v though the plan says that they are absolute", err)
	}
}

func TestReadFormats(t *testing.T) { // N35, N36
	rows := long()
	rows[15][2] = styled{"11.997", 3}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), "1 cell holds more decimals than the number format shows", "C16")
	for format, want := range map[string]struct {
		code  string
		words []string
	}{
		`#,##0.000 [$€-407]`: {"currency-format", []string{"C16", "money"}},
		`0.000,`:             {"scaled-format", []string{"C16", "thousands"}},
		`0.000%`:             {"percent-format", []string{"C16"}},
	} {
		r := mustRead(t, xlsxPlan(), formatted(t, format))
		wantD1(t, r)
		wantWarning(t, r, want.code, want.words...)
	}
	r = mustRead(t, xlsxPlan(), formatted(t, `0.000" mm"`))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), "shows the unit mm", "C16")
	r = mustRead(t, xlsxPlan(), formatted(t, `0.000" in"`))
	e := entries(r, qa.TakenNotANumber)
	if len(e) != 1 || e[0].Reason != OtherUnit || !strings.Contains(e[0].Want, "its number format shows in") {
		t.Errorf("got %+v, want the cell unread: its format shows another unit", e)
	}
}

// formatted is D1 with one candidate cell under a number format.
func formatted(t *testing.T, format string) []byte {
	t.Helper()
	rows := long()
	rows[15][2] = styled{"11.997", 3}
	whole := xlsx(t, sheetOf{name: "Data", rows: rows})
	return repacked(t, whole, "xl/styles.xml", func(s string) string {
		return strings.Replace(s, `formatCode="0.00"`, `formatCode="`+escape(format)+`"`, 1)
	})
}

func TestReadMarkedCells(t *testing.T) { // N30: values used, formatting told
	for _, name := range []string{"marked.xlsx", "marked.ods"} {
		data, err := os.ReadFile(filepath.Join("testdata", "formats", name))
		if err != nil {
			t.Fatal(err)
		}
		r := mustRead(t, plan(name), data)
		wantD1(t, r)
		wantWarning(t, r, "struck-through", "2 cells", "C15, C17")
		wantWarning(t, r, "filled-cells", "1 cell", "C18")
		wantWarning(t, r, "commented-cells", "1 cell", "C19")
	}
}

func TestReadMixedTypes(t *testing.T) { // N06
	rows := long()
	for _, row := range rows[13:] {
		row[2] = replaceMark(row[2])
	}
	r := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.Decimal = "," }), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWarning(t, r, "mixed-types", "12 readings of the reference and 0 of the candidate", "as text 0 and 12")
	if len(entries(r, qa.TakenNumber)) != 12 {
		t.Errorf("got %d texts in the ledger, want 12", len(entries(r, qa.TakenNumber)))
	}
}

func TestReadOddCharacters(t *testing.T) { // N28: whole or not at all, with the reason
	for text, character := range map[string]string{"１２．００３": "U+FF11", "12٫003": "U+066B", "12.0\u200b03": "U+200B", "\ufeff12.003": "U+FEFF", "१२": "U+0967"} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(text)}))
		e := entries(r, qa.TakenNotANumber)
		if len(e) != 1 || !strings.Contains(e[0].Want, character) {
			t.Errorf("%q: got %+v, want it unread with %s", text, e, character)
		}
	}
	for _, text := range []string{"(0.003)", "'12.003", "12.003x"} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3(text)}))
		if e := entries(r, qa.TakenNotANumber); len(e) != 1 {
			t.Errorf("%q: got %+v, want it unread", text, e)
		}
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withCandidate3("\u221211.997")}))
	if got := r.Candidate.Series[0].Values()[2]; got != -11.997 {
		t.Errorf("got %v, want -11.997 of the minus sign U+2212", got)
	}
}

func TestReadFormulaLikeTexts(t *testing.T) { // N44: texts stay texts
	rows := long()
	for i := range rows[13:] {
		rows[13+i][0] = "=cmd"
	}
	rows[15][2], rows[16][2], rows[17][2] = "=HYPERLINK(\"http://127.0.0.1\")", "+12.019", "@x"
	r := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Candidate.Lot = "=cmd" }), xlsx(t, sheetOf{name: "Data", rows: rows}))
	s := r.Candidate.Series[0]
	if r.Candidate.Name != "=cmd" || s.Unread != 2 || s.Values()[2] != 12.019 {
		t.Errorf("got %s, %+v, want +12.019 read and two texts unread", r.Candidate.Name, s)
	}
}

func TestOrderKey(t *testing.T) { // N37
	cell := func(kind cells.Kind, text string) cells.Cell { return cells.Cell{Kind: kind, Text: text} }
	for _, ascending := range [][]cells.Cell{
		{cell(cells.Date, "0.00834490740740741"), cell(cells.Date, "44562.5"), cell(cells.Number, "45000")},
		{cell(cells.Date, "PT00H12M01S"), cell(cells.Text, "00:12:02"), cell(cells.Text, "10:05"), cell(cells.Date, "PT100H00M00.5S")},
		{cell(cells.Text, "2026-03-02"), cell(cells.Date, "2026-03-02T00:00:01"), cell(cells.Text, "2.3.2026 10:05"), cell(cells.Text, "02.03.2026 10:05:30"), cell(cells.Text, "2026-03-02T11:05:30Z")},
	} {
		last, kind := orderKey(ascending[0])
		if kind == noOrder {
			t.Errorf("%+v: got no place in the order", ascending[0])
		}
		for _, c := range ascending[1:] {
			key, is := orderKey(c)
			if is != kind || key <= last {
				t.Errorf("%q: got %v of kind %d, want it behind %v of kind %d", c.Text, key, is, last, kind)
			}
			last = key
		}
	}
	for _, text := range []string{"", "03/04/2026", "monday", "10:99", "1:2:3:4", "PT1X", "PT", "2026-13-01", "NaN", "10:-1"} {
		if _, kind := orderKey(cell(cells.Text, text)); kind != noOrder && text != "PT" {
			t.Errorf("%q: got a place in the order", text)
		}
	}
}

func TestReadOrderOfTimes(t *testing.T) {
	rows := long()
	rows[0] = append(rows[0], "At")
	for i := 1; i < len(rows); i++ {
		rows[i] = append(rows[i], styled{fmt.Sprint(0.5 - float64(i)/1000), 1})
	}
	whole := xlsx(t, sheetOf{name: "Data", rows: rows})
	since1904 := repacked(t, whole, "xl/workbook.xml", func(s string) string { return strings.Replace(s, "<sheets>", `<workbookPr date1904="1"/><sheets>`, 1) })
	for _, data := range [][]byte{whole, since1904} {
		r := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.OrderColumn = "At" }), data)
		wantD1(t, r)
		if got := r.Reference.Series[0].Readings[0].Source.Text; got != "12.001" {
			t.Errorf("got %s first, want 12.001, the earliest", got)
		}
	}
}
