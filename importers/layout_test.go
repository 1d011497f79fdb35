package importers

import (
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

func xlsxPlan(change ...func(*qa.Plan)) qa.Plan { return plan("d1.xlsx", change...) }

func TestReadLong(t *testing.T) {
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: long()}))
	wantD1(t, r)
	if len(r.Ledger) != 0 || len(r.Warnings) != 0 {
		t.Errorf("got the ledger %v and the warnings %v, want none", r.Ledger, r.Warnings)
	}
	c := r.Characteristics
	if len(c) != 1 || c[0].Name != "Bore dia" || c[0].Unit != "mm" {
		t.Errorf("got the characteristics %+v, want Bore dia in mm", c)
	}
	x := r.Candidate.Series[0].Readings[2]
	if want := "d1.xlsx!Data!C16"; x.Source.String() != want || x.Source.Text != "11.997" || x.Part != "3" || x.Decimals != 3 {
		t.Errorf("got %+v, want 11.997 of part 3 with 3 decimals from %s", x, want)
	}
	if f := r.Reference.Files; len(f) != 1 || f[0].Name != "d1.xlsx" || len(f[0].SHA256) != 64 {
		t.Errorf("got the files %+v, want d1.xlsx with its digest", f)
	}
}

func TestReadHeaderBlock(t *testing.T) { // N01
	block := [][]any{{"Inspection report"}, {"Part no", "4711-B"}, {"Revision", "C"}, {"Gauge no", num("14")}, {}, {}, {}}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: append(block, long()...)}))
	wantD1(t, r)
	if cell := r.Reference.Series[0].Readings[0].Source.Cell; cell != "C9" {
		t.Errorf("got the first reading in %s, want C9", cell)
	}
}

// withSpecs puts the unit row and the limit rows of N02 under the headings.
func withSpecs() [][]any {
	rows := long()
	rows[0][2] = "Bore dia"
	specs := [][]any{{nil, nil, "mm"}, {"Nominal", nil, num("12")}, {"USL", nil, num("12.05")}, {"LSL", nil, num("11.95")}}
	return append(append(append([][]any{}, rows[0]), specs...), rows[1:]...)
}

func TestReadUnitAndLimitRows(t *testing.T) { // N02: n stays 12, not 15
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: withSpecs()}))
	wantD1(t, r)
	c := r.Characteristics[0]
	if c.Unit != "mm" || c.Lower == nil || *c.Lower != 11.95 || c.Target == nil || *c.Target != 12 || c.Upper == nil || *c.Upper != 12.05 {
		t.Errorf("got %+v, want mm, 11.95, 12, 12.05", c)
	}
}

func TestReadToleranceRows(t *testing.T) {
	for _, tt := range []struct {
		lower any
		want  float64
	}{{num("-0.05"), 11.95}, {num("0.05"), 11.95}, {"+0.01", 12.01}} {
		rows := long()
		specs := [][]any{{"Nominal", nil, num("12")}, {"Upper tol", nil, num("0.05")}, {"Lower tol", nil, tt.lower}}
		rows = append(append(append([][]any{}, rows[0]), specs...), rows[1:]...)
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
		wantD1(t, r)
		c := r.Characteristics[0]
		if *c.Lower != tt.want || *c.Upper != 12.05 {
			t.Errorf("%v: got %v to %v, want %v to 12.05", tt.lower, *c.Lower, *c.Upper, tt.want)
		}
	}
}

func TestReadLimitsDiffer(t *testing.T) {
	lower, upper := 11.95, 12.04
	p := xlsxPlan(func(p *qa.Plan) {
		p.Characteristics = []qa.Characteristic{{Name: "Bore dia", Unit: "mm", Lower: &lower, Upper: &upper}}
	})
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: withSpecs()}))
	wantWarning(t, r, "limits-differ", "12.04 in the plan", "12.05 in the sheet")
	if got := *r.Characteristics[0].Upper; got != 12.04 {
		t.Errorf("got the upper limit %v, want the plan's 12.04", got)
	}
	if *p.Characteristics[0].Upper != 12.04 {
		t.Error("the plan was changed")
	}
}

func foot(col int, label string, f formula) []any {
	row := make([]any, 3)
	if col >= 0 {
		row[col] = label
	}
	row[2] = f
	return row
}

func TestReadFootRows(t *testing.T) { // N03, N04: foot rows never change n
	for _, tt := range []struct {
		name  string
		rows  func() [][]any
		count int
	}{
		{"labelled in the lot column after a blank row", func() [][]any {
			rows := append(long(), []any{})
			for _, l := range []string{"Mean", "s", "Min", "Max", "Range", "Cpk"} {
				rows = append(rows, foot(0, l, formula{"AVERAGE(C2:C25)", "12.006"}))
			}
			return rows
		}, 6},
		{"labelled in the part column", func() [][]any {
			return append(long(), foot(1, "Mittelwert:", formula{"AVERAGE(C2:C25)", ""}), foot(1, "n", formula{"COUNT(C2:C25)", "24"}))
		}, 2},
		{"a mean for each lot, under the lot's name", func() [][]any {
			rows := append([][]any{}, long()[:13]...)
			rows = append(rows, []any{"REF-0417", "Mean", num("12.0039")})
			rows = append(rows, long()[13:]...)
			return append(rows, []any{"CAND-0931", "Mean", num("12.0082")})
		}, 2},
		{"a formula without a label or blank row", func() [][]any {
			return append(long(), foot(-1, "", formula{"AVERAGE(C14:C25)", "12.0081666666667"}), foot(-1, "", formula{"STDEV(C14:C25)", "0.0088"}))
		}, 2},
	} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: tt.rows()}))
		wantD1(t, r)
		if n := len(entries(r, qa.TakenSummary)); n != tt.count {
			t.Errorf("%s: got %d summaries in the ledger, want %d", tt.name, n, tt.count)
		}
	}
}

func TestReadShortPartIDsAreNoLabels(t *testing.T) {
	rows := long()
	for i := 1; i < len(rows); i++ { // parts A to L and M to X: N, R and S are parts
		rows[i][1] = string(rune('A' + i - 1))
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
}

func TestReadRowWithoutLot(t *testing.T) {
	rows := append(long(), []any{nil, nil, num("12.008")})
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "rows without a lot's name", "A26")
}

func TestReadThirdLot(t *testing.T) { // N33
	rows := append(long(), []any{"OLD-1", num("1"), num("99")}, []any{"OLD-1", num("2"), num("98")})
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), `the lot "OLD-1" (2 rows) takes no part`)
}

func TestReadLotThatTheFileLacks(t *testing.T) {
	_, err := read(t, xlsxPlan(func(p *qa.Plan) { p.Candidate.Lot = "cand\u20110931" }), xlsx(t, sheetOf{name: "Data", rows: long()}))
	wantPlanError(t, err, "candidate.lot", `"REF-0417", "CAND-0931"`, "near spelling", "A14")
}

func TestReadSpellings(t *testing.T) { // N18: white space is joined, other spellings are told
	rows := long()
	rows[2][0], rows[3][0] = "REF-0417 ", "REF-0417\u00a0"
	wantD1(t, mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows})))
	rows[4][0], rows[5][0] = "REF\u20110417", "REF-0147"
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantWarning(t, r, "lot-spellings", "REF\u20110417", "REF-0147", "A5", "A6")
	if r.Reference.Rows != 10 {
		t.Errorf("got %d reference rows, want 10", r.Reference.Rows)
	}
}

func TestReadFillDown(t *testing.T) { // N09, and the name in the first row of a block
	rows := long()
	for i := 2; i < len(rows); i++ {
		if i != 13 {
			rows[i][0] = nil
		}
	}
	for _, merged := range [][]string{nil, {"A2:A13", "A14:A25"}} {
		r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows, merged: merged}))
		wantD1(t, r)
		wantWarning(t, r, "lot-filled-down", "22 rows")
	}
	titled := [][]any{rows[0], {"REF-0417"}}
	for i, row := range rows[1:] {
		if i == 12 {
			titled = append(titled, []any{"CAND-0931"})
		}
		titled = append(titled, []any{nil, row[1], row[2]})
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: titled}))
	wantD1(t, r)
}

func TestReadMergedReadings(t *testing.T) {
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: long(), merged: []string{"C3:C4"}}))
	wantPlanError(t, err, "C3:C4", "split them")
}

func TestReadUnequalLengthsAndBlankRows(t *testing.T) { // N34
	rows := append([][]any{}, long()[:13]...)
	rows = append(rows, []any{}, []any{})
	rows = append(rows, long()[13:20]...)
	rows[4] = []any{"REF-0417", num("4")}
	rows[16][2] = " "
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	if a, b := r.Reference.Series[0], r.Candidate.Series[0]; len(a.Values()) != 11 || a.Missing != 1 || len(b.Values()) != 6 || b.Missing != 1 {
		t.Errorf("got n %d and %d, missing %d and %d, want 11, 6, 1, 1", len(a.Values()), len(b.Values()), a.Missing, b.Missing)
	}
}

func TestReadStoredNotDisplayed(t *testing.T) { // N35
	rows := long()
	for i, row := range rows[1:] {
		rows[i+1] = []any{row[0], row[1], styled{string(row[2].(num)), 3}}
	}
	rows[1][2] = styled{"12.003000000000001", 3}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	if x := r.Reference.Series[0].Readings[0]; x.Value != 12.003000000000001 || x.Source.Text != "12.003000000000001" || x.Decimals != 3 {
		t.Errorf("got %+v, want the stored 12.003000000000001 with 3 decimals", x)
	}
}

func TestReadHeadings(t *testing.T) { // N42
	rows := long()
	for i := range rows {
		rows[i] = append(rows[i], rows[i][2])
	}
	rows[0] = []any{"Lot", "Part", "Value", "Value"}
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, `"Value"`, "twice")
	rows[0] = []any{"Lot", "Part", num("1"), nil}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWarning(t, r, "column-without-heading", "column D (24 numbers)")
	rows[0] = []any{"Lot", "Part", "Bore", "Remark"}
	for i := range rows[1:] {
		rows[i+1][3] = "ok"
	}
	r = mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), `column D "Remark" is not taken`)
}

func TestReadDoubledBlock(t *testing.T) { // N16: never n 24
	rows := append(long(), long()[13:]...)
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "part_column", `"1" in Data!C14 and Data!C26`, "12 part ids")
	for i := range rows {
		rows[i] = []any{rows[i][0], rows[i][2]}
	}
	_, err = read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "doubled block", "B14:B25 and B26:B37", "exclude")
	p := xlsxPlan(func(p *qa.Plan) {
		for i := 26; i <= 37; i++ {
			p.Reading.Exclude = append(p.Reading.Exclude, qa.Exclusion{Cell: fmt.Sprintf("Data!B%d", i), Reason: "pasted twice"})
		}
	})
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	if got := r.Candidate.Series[0].Excluded(); got != 12 {
		t.Errorf("got %d excluded, want 12", got)
	}
}

func TestReadPartColumnRepeats(t *testing.T) {
	rows := append(long(), []any{"CAND-0931", num("3"), num("11.998")})
	p := xlsxPlan(func(p *qa.Plan) { p.Reading.PartColumn = "Part" })
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	s := r.Candidate.Series[0]
	if x := s.Readings[2]; len(s.Values()) != 12 || s.Repeats != 1 || r.Candidate.Rows != 12 || x.Value != 11.9975 || x.Source.Cell != "C16, C26" || x.Source.Text != "11.997; 11.998" {
		t.Errorf("got %d values, %d repeats, %+v, want 12 with the mean of C16 and C26", len(s.Values()), s.Repeats, x)
	}
	wantWarning(t, r, "unequal-repeats", "1 to 2")
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "part_column", `"3" in Data!C16 and Data!C26`)
}

func TestReadUnitsMustAgree(t *testing.T) { // N10
	p := xlsxPlan(func(p *qa.Plan) { p.Characteristics = []qa.Characteristic{{Name: "Bore dia", Unit: "in"}} })
	_, err := read(t, p, xlsx(t, sheetOf{name: "Data", rows: long()}))
	wantPlanError(t, err, "Data!C1", `"mm"`, `"in"`)
	other := long()
	other[0][2] = "Bore dia [in]"
	p = xlsxPlan(func(p *qa.Plan) { p.Candidate.File = "other.xlsx" })
	_, err = Read(p, files(map[string][]byte{"d1.xlsx": xlsx(t, sheetOf{name: "Data", rows: long()}), "other.xlsx": xlsx(t, sheetOf{name: "Data", rows: other})}))
	wantPlanError(t, err, "other.xlsx!Data!C1", `state unit = "in" under [candidate]`, "25.4")
}

func TestReadMissingColumn(t *testing.T) {
	p := xlsxPlan(func(p *qa.Plan) { p.Characteristics = []qa.Characteristic{{Name: "Bore diam"}, {Name: "Flange"}} })
	_, err := read(t, p, xlsx(t, sheetOf{name: "Data", rows: long()}))
	wantPlanError(t, err, `"Bore diam"`, `"Flange"`, `"Lot", "Part", "Bore dia [mm]"`, "nearest")
}

func TestReadFilePerLot(t *testing.T) { // L4
	file := func(values []string) []byte {
		text := "no;value\n"
		for i, v := range values {
			text += fmt.Sprintf("%d;%s\n", i+1, v)
		}
		return []byte(text)
	}
	p := plan("REF-0417.csv", func(p *qa.Plan) { p.Candidate.File = "CAND-0931.csv" })
	data := map[string][]byte{"REF-0417.csv": file(d1Reference), "CAND-0931.csv": file(d1Candidate)}
	r, err := Read(p, files(data))
	if err != nil {
		t.Fatal(err)
	}
	wantD1(t, r)
	reconcile(t, r, data, "")
	wantWords(t, strings.Join(r.Said, "\n"), "every row of the sheet is taken as the one lot")
	p.Candidate.File = "REF-0417.csv"
	_, err = Read(p, files(data))
	wantPlanError(t, err, "no column that names the lots", "lot_column")
}

func TestReadSheetPerLot(t *testing.T) { // L3
	sheet := func(name string, values []string) sheetOf {
		rows := [][]any{{"No.", "Bore dia"}}
		for i, v := range values {
			rows = append(rows, []any{num(fmt.Sprint(i + 1)), num(v)})
		}
		return sheetOf{name: name, rows: rows}
	}
	data := xlsx(t, sheet("REF-0417", d1Reference), sheet("CAND-0931", d1Candidate))
	wantD1(t, mustRead(t, xlsxPlan(), data))
}

func TestReadSheets(t *testing.T) {
	notes := sheetOf{name: "Notes", rows: [][]any{{"Remark"}, {"measured twice"}}}
	raw := sheetOf{name: "raw", hidden: true, rows: long()}
	data := xlsx(t, notes, sheetOf{name: "Data", rows: long()}, raw)
	r := mustRead(t, xlsxPlan(), data)
	wantD1(t, r)
	wantWarning(t, r, "hidden-sheets", `"raw"`)
	_, err := read(t, xlsxPlan(func(p *qa.Plan) { p.Reading.Sheet = "data" }), data)
	wantPlanError(t, err, "reading.sheet", `"Notes", "Data", "raw"`)
	_, err = read(t, xlsxPlan(), xlsx(t, sheetOf{name: "a", rows: long()}, sheetOf{name: "b", rows: long()}))
	wantPlanError(t, err, "reading.sheet", `"a", "b"`)
}

func TestReadHiddenRows(t *testing.T) { // N15
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: long(), hide: map[int]bool{5: true, 9: true}}))
	wantD1(t, r)
	wantWarning(t, r, "hidden-rows", "2 rows of the table are hidden")
}

func TestReadSecondTable(t *testing.T) {
	rows := append(append([][]any{}, long()[:13]...), []any{})
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: append(append(rows, long()[0]), long()[13:]...)}))
	wantD1(t, r)
	wantWarning(t, r, "second-table", "row 15")
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: append(append(rows, []any{"Lot", "Bore dia [mm]", "Part"}), long()[13:]...)}))
	wantPlanError(t, err, "row 15", "second table")
}

func TestReadOrder(t *testing.T) { // N23
	rows := long()
	rows[0] = append(rows[0], "Measured at")
	for i := 1; i < len(rows); i++ {
		rows[i] = append(rows[i], fmt.Sprintf("2026-03-02T10:%02d:00", 60-i))
	}
	r := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.OrderColumn = "Measured at" }), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	if got := r.Reference.Series[0].Readings[0].Source.Text; got != "12.001" {
		t.Errorf("got %s first, want 12.001, the earliest", got)
	}
}

func TestReadSameLotTwice(t *testing.T) {
	p := xlsxPlan(func(p *qa.Plan) { p.Candidate.Lot = "REF-0417 " })
	_, err := read(t, p, xlsx(t, sheetOf{name: "Data", rows: long()}))
	wantPlanError(t, err, "candidate.lot", "both lots")
}
