package importers

import (
	"strings"
	"testing"

	"lotpair/qa"
)

// planOfInspect is the plan that inspect prints of a workbook, its blanks filled in.
func planOfInspect(t *testing.T, data []byte) qa.Plan {
	t.Helper()
	in, err := Inspect("d1.xlsx", data, "", "")
	if err != nil {
		t.Fatal(err)
	}
	p, err := LoadPlan("plan.toml", []byte(strings.Replace(in.Plan(), "absolute = 0 ", "absolute = 0.01 ", 1)))
	if err != nil {
		t.Fatalf("got %v for\n%s", err, in.Plan())
	}
	return p
}

// nextLot is a sheet with each reading 1 more: the next delivery.
func nextLot(rows [][]any) [][]any {
	var out [][]any
	for _, r := range rows {
		var row []any
		for _, c := range r {
			if v, ok := c.(num); ok && strings.HasPrefix(string(v), "1") && strings.Contains(string(v), ".") {
				c = shifted(string(v), 1)
			}
			row = append(row, c)
		}
		out = append(out, row)
	}
	return out
}

// A plan made of one file reads the next of the same shape, and names what no longer fits.
func TestNextFile(t *testing.T) {
	headed := append([][]any{{"REF-0417", nil, nil, "CAND-0931"}, {"Part", "Bore dia", nil, "Part", "Bore dia"}}, abreast(perLot("", d1Reference).rows[1:], perLot("", d1Candidate).rows[1:], 1)...)
	for _, tt := range []struct {
		name   string
		sheets []sheetOf
		row    int // of the heading that is changed, from 0
		column int
		word   string // of the error, where "Bore dia" is renamed
	}{
		{"column-per-lot", []sheetOf{{name: "Data", rows: headed}}, 1, 4, `"Bore dia"`},
		{"sheet-per-lot", []sheetOf{perLot("REF-0417", d1Reference), perLot("CAND-0931", d1Candidate)}, 0, 1, `the nearest is "Bore diam"`},
		{"row-per-characteristic", []sheetOf{inspection("REF-0417", d1Reference, 2), inspection("CAND-0931", d1Candidate, 2)}, 1, 1, `"Bore diam"`},
	} {
		p := planOfInspect(t, xlsx(t, tt.sheets...))
		var next []sheetOf
		for _, s := range tt.sheets {
			next = append(next, sheetOf{name: s.name, rows: nextLot(s.rows)})
		}
		if p.Characteristics[0].Upper != nil { // of the next part of the family
			p.Characteristics[0].Lower, p.Characteristics[0].Target, p.Characteristics[0].Upper = nil, nil, nil
		}
		r, err := Read(p, files(map[string][]byte{"d1.xlsx": xlsx(t, next...)}))
		if err != nil {
			t.Errorf("%s: got the error %v", tt.name, err)
			continue
		}
		wantLots(t, r, 12, d1MeanReference+1, 12, d1MeanCandidate+1)
		last := next[len(next)-1]
		last.rows[tt.row][tt.column] = "Bore diam"
		_, err = Read(p, files(map[string][]byte{"d1.xlsx": xlsx(t, next...)}))
		wantPlanError(t, err, tt.word)
		last.rows[tt.row][tt.column] = "Bore dia"
		if len(next) > 1 {
			_, err = Read(p, files(map[string][]byte{"d1.xlsx": xlsx(t, next[0])}))
			wantPlanError(t, err, "candidate.sheet", `"CAND-0931"`)
		}
		p.Reading.HeaderRow = 12
		_, err = Read(p, files(map[string][]byte{"d1.xlsx": xlsx(t, next...)}))
		wantPlanError(t, err, "d1.xlsx!")
	}
}

// A cell of a turned table is left out by its address like any other.
func TestExcludeInTurnedTables(t *testing.T) {
	for _, tt := range []struct {
		cell  string
		sheet sheetOf
	}{
		{"Data!B12", sheetOf{name: "Data", rows: wide()}},
		{"Data!AD3", sheetOf{name: "Data", rows: transposedLots()}},
	} {
		p := xlsxPlan(func(p *qa.Plan) { p.Reading.Exclude = []qa.Exclusion{{Cell: tt.cell, Reason: "NCR-77"}} })
		r := mustRead(t, p, xlsx(t, tt.sheet))
		s := r.Candidate.Series[0]
		if s.Excluded() != 1 || len(s.Values()) != 11 || s.Readings[10].LeftOut != "NCR-77" || s.Readings[10].Source.Text != "12.022" {
			t.Errorf("%s: got %d left out of %+v", tt.cell, s.Excluded(), s.Readings)
		}
		p.Reading.Exclude[0].Cell = "Data!A1"
		_, err := read(t, p, xlsx(t, tt.sheet))
		wantPlanError(t, err, "reading.exclude 1", "no reading of either lot")
	}
}

// Keys that a layout has no use for are refused, not passed over.
func TestUselessKeys(t *testing.T) {
	for _, tt := range []struct {
		rows   [][]any
		change func(*qa.Plan)
		words  []string
	}{
		{wide(), func(p *qa.Plan) { p.Reading.Layout, p.Reading.LotColumn = ColumnPerLot, "Lot" }, []string{"reading.lot_column", "column-per-lot"}},
		{wide(), func(p *qa.Plan) { p.Reading.PartColumn = "No" }, []string{"reading.part_column", `want "No"`}},
		{transposedLots(), func(p *qa.Plan) { p.Reading.GroupColumn = "Heat" }, []string{"reading.group_column", "row-per-characteristic"}},
		{transposedLots(), func(p *qa.Plan) { p.Reading.PartColumn = "Part" }, []string{"reading.part_column"}},
		{long(), func(p *qa.Plan) { p.Reading.Layout = RowPerCharacteristic }, []string{"reading.layout"}},
		{long(), func(p *qa.Plan) { p.Reading.Layout = ColumnPerLot }, []string{"reading.layout"}},
		{long(), func(p *qa.Plan) { p.Reading.Layout = SheetPerLot }, []string{"reading.layout", "one lot a sheet"}},
		{wide(), func(p *qa.Plan) { p.Reading.Layout = RowPerPart }, []string{"want one"}},
		{transposedLots(), func(p *qa.Plan) { p.Candidate.Lot = "CAND-0932" }, []string{`"CAND-0932"`}},
	} {
		_, err := read(t, xlsxPlan(tt.change), xlsx(t, sheetOf{name: "Data", rows: tt.rows}))
		wantPlanError(t, err, tt.words...)
	}
}
