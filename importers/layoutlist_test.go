package importers

import (
	"fmt"
	"strings"
)

// layoutCases are the base layouts L1 to L10 and the layouts among the nasty ones, N01 to N42.
func layoutCases() []layoutCase {
	book := func(sheets ...sheetOf) []layoutFile { return []layoutFile{{name: "own.xlsx", sheets: sheets}} }
	one := func(rows [][]any, merged ...string) []layoutFile {
		return book(sheetOf{name: "Data", rows: rows, merged: merged})
	}
	bySheet := planOf("lot = \"REF-0417\"\nfile = \"own.xlsx\"\nsheet = \"REF-0417\"", "lot = \"CAND-0931\"\nfile = \"own.xlsx\"\nsheet = \"CAND-0931\"", "", "")
	stated := func(plan, layout string) string {
		return strings.Replace(plan, "\n[criterion]", "\n[reading]\nlayout = \""+layout+"\"\n\n[criterion]", 1)
	}
	bore := characteristicOf(`name = "Bore dia"`, `unit = "mm"`)
	limited := d1.with(func(w *layoutWant) { w.limits = [3]float64{11.95, 12, 12.05} })
	several := func(k int) layoutWant {
		return limited.with(func(w *layoutWant) { w.count, w.step = k, 1 })
	}
	cases := []layoutCase{
		{name: "l1", shows: "a row a part", files: one(long()), plan: planFor("own.xlsx", "", ""), want: d1},
		{name: "l2", shows: "a column a lot, found", files: one(wide()), plan: planFor("own.xlsx", "", bore), want: d1},
		{name: "l2-stated", shows: "a column a lot, stated; named after the sheet", files: one(wide()), plan: planFor("own.xlsx", "layout = \"column-per-lot\"\nheader_row = 1", ""), want: d1},
		{name: "l3", shows: "a sheet a lot, found by the lots' names", files: book(perLot("REF-0417", d1Reference), perLot("CAND-0931", d1Candidate)), plan: planFor("own.xlsx", "", ""), want: d1},
		{
			name: "l3-free", shows: "a sheet a lot under other names, stated", files: book(perLot("Sheet1", d1Reference), perLot("Sheet2", d1Candidate)),
			plan: planOf("lot = \"the old foundry\"\nfile = \"own.xlsx\"\nsheet = \"Sheet1\"", "lot = \"the new one\"\nfile = \"own.xlsx\"\nsheet = \"Sheet2\"", `layout = "sheet-per-lot"`, ""), want: d1,
		},
		{
			name: "l4", shows: "a file a lot", files: []layoutFile{{name: "REF-0417.csv", text: valuesCSV(d1Reference)}, {name: "CAND-0931.csv", text: valuesCSV(d1Candidate)}},
			plan: planOf("lot = \"REF-0417\"\nfile = \"REF-0417.csv\"", "lot = \"CAND-0931\"\nfile = \"CAND-0931.csv\"", `layout = "sheet-per-lot"`, ""), want: d1,
		},
		{name: "l5-1", shows: "a row a characteristic, one of them", files: book(inspection("REF-0417", d1Reference, 1), inspection("CAND-0931", d1Candidate, 1)), plan: bySheet, want: several(1)},
		{name: "l5-5", shows: "a row a characteristic, five", files: book(inspection("REF-0417", d1Reference, 5), inspection("CAND-0931", d1Candidate, 5)), plan: stated(bySheet, "row-per-characteristic"), want: several(5)},
		{name: "l5-64", shows: "a row a characteristic, 64", files: book(inspection("REF-0417", d1Reference, 64), inspection("CAND-0931", d1Candidate, 64)), plan: bySheet, want: several(64)},
		{name: "l6", shows: "a row a characteristic, the lots merged above", files: one(transposedLots(), "G1:R1", "T1:AE1"), plan: planFor("own.xlsx", "", ""), want: several(5)},
		{name: "l6-below", shows: "the lots' names beside the headings, the parts' numbers below", files: one(transposedBelow(), "A1:A2", "B1:B2", "C1:C2", "D1:D2", "E1:E2", "F1:F2", "G1:R1", "T1:AE1"), plan: planFor("own.xlsx", "", ""), want: several(5)},
		{
			name: "l6-prefix", shows: "the lots told apart by the letters before the parts' numbers", files: one(transposedLots()[1:]),
			plan: planOf("lot = \"R\"\nfile = \"own.xlsx\"", "lot = \"C\"\nfile = \"own.xlsx\"", "", ""), want: several(5),
		},
		{
			name: "l7-d2", shows: "lots within suppliers: the supplier is the lot, the lot the group (N21)", files: one(nestedD2()),
			plan: planOf("lot = \"S1\"\nfile = \"own.xlsx\"", "lot = \"S2\"\nfile = \"own.xlsx\"", "lot_column = \"Supplier\"\ngroup_column = \"Lot\"\npart_column = \"Part\"\norder_column = \"Date\"", ""),
			want: layoutWant{n: [2]int{15, 15}, mean: [2]float64{180.063 / 15, 180.205 / 15}, groups: []string{"L1", "L2", "L3"}, upper: 0.01521395},
		},
		{
			name: "l7-d2-sources", shows: "the same for the claim on sources: the lots' means decide, not 15 against 15", files: one(nestedD2()),
			plan: strings.Replace(planOf("lot = \"S1\"\nfile = \"own.xlsx\"", "lot = \"S2\"\nfile = \"own.xlsx\"", "lot_column = \"Supplier\"\ngroup_column = \"Lot\"", ""), "margin", "claim = \"sources\"\nmargin", 1),
			want: layoutWant{n: [2]int{15, 15}, mean: [2]float64{180.063 / 15, 180.205 / 15}, groups: []string{"L1", "L2", "L3"}, upper: 0.02690429},
		},
		{
			name: "l7-d3", shows: "cavities in another mix are told (D3)", files: one(nestedD3()),
			plan: planOf("lot = \"REF\"\nfile = \"own.xlsx\"", "lot = \"CAND\"\nfile = \"own.xlsx\"", `group_column = "Cavity"`, ""),
			want: layoutWant{n: [2]int{12, 12}, mean: [2]float64{60.53 / 12, 60.93 / 12}, groups: []string{"1", "2"}, upper: 0.068295, warnings: []string{"group-mix"}},
		},
		{
			name: "l7-d3-unnamed", shows: "the same without a group column", files: one(nestedD3()),
			plan: planOf("lot = \"REF\"\nfile = \"own.xlsx\"", "lot = \"CAND\"\nfile = \"own.xlsx\"", "", ""),
			want: layoutWant{n: [2]int{12, 12}, mean: [2]float64{60.53 / 12, 60.93 / 12}, upper: 0.068295, warnings: []string{"group-mix"}, said: []string{"it holds groups; name it as group_column"}},
		},
		{
			name: "l9", shows: "a form with the readings in one cell and the requirement as text", files: book(form("REF-0417", d1Reference), form("CAND-0931", d1Candidate)), plan: bySheet,
			want: limited.with(func(w *layoutWant) { w.warnings = []string{"several-readings-in-a-cell"} }),
		},
		{
			name: "l10", shows: "dimensional results, six samples, limits as text", files: book(results("REF-0417", d1Reference[:6]), results("CAND-0931", d1Candidate[:6])), plan: bySheet,
			want: layoutWant{n: [2]int{6, 6}, mean: [2]float64{72.028 / 6, 72.052 / 6}, limits: [3]float64{11.95, 0, 12.05}},
		},
	}
	return append(append(append(append(cases, nastyCases()...), headingCases()...), tidyCases()...), toleranceCases()...)
}

func valuesCSV(values []string) string {
	var b strings.Builder
	b.WriteString("no;value\n")
	for i, v := range values {
		fmt.Fprintf(&b, "%d;%s\n", i+1, v)
	}
	return b.String()
}

// transposedLots is L6: five characteristics, both lots in one sheet with a blank column between, their names above.
func transposedLots() [][]any {
	r, c := inspection("", d1Reference, 5).rows, inspection("", d1Candidate, 5).rows
	var out [][]any
	for i := range r {
		row := append(append(append([]any{}, r[i]...), nil), c[i][6:]...)
		for j := range d1Reference {
			if i == 0 {
				row[6+j], row[19+j] = fmt.Sprintf("R%d", j+1), fmt.Sprintf("C%d", j+1)
			}
		}
		out = append(out, row)
	}
	names := make([]any, len(out[0]))
	names[6], names[19] = "REF-0417", "CAND-0931"
	return append([][]any{names}, out...)
}

// transposedBelow is L6 with the headings in the row of the lots' names.
func transposedBelow() [][]any {
	rows := transposedLots()
	for i := range 6 {
		rows[0][i], rows[1][i] = rows[1][i], nil
	}
	for i := range d1Reference {
		rows[1][6+i], rows[1][19+i] = num(fmt.Sprint(i+1)), num(fmt.Sprint(i+1))
	}
	return rows
}

// form is L9.
func form(name string, values []string) sheetOf {
	return sheetOf{name: name, rows: [][]any{
		{"1 Part number", "4711-B"},
		{"2 Part name", "Hub shell"},
		{"3 Serial number", "12 parts"},
		{"4 Report number", "FAI-118"},
		{},
		{"Characteristic accountability"},
		{},
		{"5 Char No", "6 Ref location", "7 Designator", "8 Requirement", "9 Results", "10 Tooling", "11 NC no"},
		{num("1"), "B3", "key", "Ø12.000 ±0.050", strings.Join(values, " / "), "bore gauge 14"},
		{num("2"), "C4", "", "no burrs", "ok", ""},
	}}
}

// results is L10.
func results(name string, values []string) sheetOf {
	head := []any{"Item", "Dimension/specification", "Spec limits", "Test date", "Qty"}
	row := []any{num("1"), "Bore dia", "11.950 - 12.050", "2026-03-02", num("6")}
	for i, v := range values {
		head = append(head, fmt.Sprintf("S%d", i+1))
		row = append(row, num(v))
	}
	return sheetOf{name: name, rows: [][]any{{"Dimensional results"}, {}, append(head, "OK", "Not OK"), append(row, "X", nil)}}
}
