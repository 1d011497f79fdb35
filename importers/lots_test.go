package importers

import (
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

func TestReadUnusedRowsOfAForm(t *testing.T) {
	rows := append(long(), []any{nil, num("13"), nil}, []any{nil, num("14")}, []any{nil, nil, nil}, []any{nil, nil, "checked by N. N."})
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), "3 rows without a lot and without readings not read: 26, 27, 29")
}

func TestReadLotsNamedLikeUnits(t *testing.T) {
	p := xlsxPlan(func(p *qa.Plan) { p.Reference.Lot, p.Candidate.Lot = "A", "s" })
	rows := [][]any{{"Lot", "x"}, {"A", "-"}, {"A", num("1")}, {"A", num("2")}, {"s", num("3")}, {"s", num("5")}, {"Mean", num("2.75")}}
	r := mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantLots(t, r, 2, 1.5, 2, 4)
	if r.Reference.Series[0].Missing != 1 {
		t.Errorf("got %d missing, want the first", r.Reference.Series[0].Missing)
	}
}

func TestReadLimitsOfTwoSheets(t *testing.T) { // N25
	file := func(lot, upper, value string) []byte {
		return []byte("lot,x\nUSL," + upper + "\n" + lot + "," + value + "\n" + lot + ",2\n")
	}
	p := plan("a.csv", func(p *qa.Plan) { p.Candidate.File = "b.csv" })
	data := files(map[string][]byte{"a.csv": file("REF-0417", "12.050", "1"), "b.csv": file("CAND-0931", "12.040", "3")})
	_, err := Read(p, data)
	wantPlanError(t, err, "b.csv", "12.04 here and 12.05 in the other lot's sheet", "state the limits")
	upper := 12.05
	p.Characteristics = []qa.Characteristic{{Name: "x", Upper: &upper}}
	r, err := Read(p, data)
	if err != nil {
		t.Fatal(err)
	}
	wantWarning(t, r, "limits-differ", "b.csv")
	wantLots(t, r, 2, 1.5, 2, 2.5)
}

func TestReadManyLotsAndComments(t *testing.T) {
	var b strings.Builder
	for range 500 {
		b.WriteString("# comment\n")
	}
	b.WriteString("Lot,x\nREF-0417,1\nREF-0417,3\nCAND-0931,1\nCAND-0931,3\n")
	for i := range 30000 {
		fmt.Fprintf(&b, "L%d,1\n", i)
	}
	r := mustRead(t, plan("d1.csv"), []byte(b.String()))
	wantLots(t, r, 2, 2, 2, 2)
	wantWords(t, strings.Join(r.Said, "\n"), "30000 other lots take no part", "500 lines before the heading")
	if _, err := Inspect("d1.csv", []byte(b.String()), "", ""); err != nil {
		t.Error(err)
	}
}

func TestReadLotColumn(t *testing.T) {
	rows := long()
	rows[0][0] = "Supplier"
	wantD1(t, mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))) // found by its content
	p := xlsxPlan(func(p *qa.Plan) { p.Reading.LotColumn = " Supplier" })
	wantD1(t, mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows})))
	p.Reading.LotColumn = "Suplier"
	_, err := read(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "reading.lot_column", `the nearest is "Supplier"`)
	for i := range rows { // two columns called lot
		rows[i] = []any{rows[i][0], "B7", rows[i][2]}
	}
	rows[0] = []any{"Lot", "Batch", "x"}
	wantD1(t, mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))) // only one holds both names
	for i := range rows[1:] {
		rows[i+1][1] = rows[i+1][0]
	}
	_, err = read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "lot_column", `column A "Lot", column B "Batch"`)
	for i := range rows[1:] { // lots called by numbers are never found in a column of another heading
		rows[i+1] = []any{num(fmt.Sprint(1 + i/12)), num(fmt.Sprint(i + 1)), rows[i+1][2]}
	}
	rows[0] = []any{"Machine", "Part", "x"}
	p = xlsxPlan(func(p *qa.Plan) { p.Reference.Lot, p.Candidate.Lot = "1", "2" })
	_, err = read(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "lot_column")
}

func TestReadHeaderRow(t *testing.T) {
	rows := append([][]any{{"Lot", "Part", "Bore dia [mm]"}, {"see", num("3"), num("9")}, {}}, long()...)
	p := xlsxPlan(func(p *qa.Plan) { p.Reading.HeaderRow = 4 })
	wantD1(t, mustRead(t, p, xlsx(t, sheetOf{name: "Data", rows: rows})))
	p.Reading.HeaderRow = 3
	_, err := read(t, p, xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantPlanError(t, err, "reading.header_row", "row 3")
}

func TestReadSheetsThatCouldBothBeMeant(t *testing.T) {
	one := sheetOf{name: "REF-0417", rows: [][]any{{"No", "Bore"}, {num("1"), num("9")}, {num("2"), num("8.5")}}}
	_, err := read(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: long()}, one))
	wantPlanError(t, err, "reading.sheet", `"Data", "REF-0417"`)
}

func TestReadRepeatedBlockUnderOtherIDs(t *testing.T) {
	rows := long()
	for i := 19; i < 25; i++ {
		rows[i][2] = rows[i-6][2]
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows}))
	wantWarning(t, r, "repeated-block", "C14:C19 and C20:C25")
}

func TestReadOtherLayouts(t *testing.T) {
	rows := [][]any{{"REF-0417", "CAND-0931"}} // L2
	for i := range d1Reference {
		rows = append(rows, []any{num(d1Reference[i]), num(d1Candidate[i])})
	}
	wantD1(t, mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: rows})))
	side := [][]any{} // N31: two tables side by side
	for i, row := range long()[:13] {
		other := long()[0]
		if i > 0 {
			other = long()[12+i]
		}
		side = append(side, append(append(append([]any{}, row...), nil), other...))
	}
	r := mustRead(t, xlsxPlan(), xlsx(t, sheetOf{name: "Data", rows: side}))
	wantD1(t, r)
	wantWarning(t, r, "second-table", "A to C, E to G")
}
