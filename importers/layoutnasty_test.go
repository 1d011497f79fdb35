package importers

import (
	"fmt"
	"slices"
	"strings"

	"lotpair/qa"
)

// nastyCases are the nasty layouts that ask how lots and parts are told apart.
func nastyCases() []layoutCase {
	one := func(rows [][]any, merged ...string) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows, merged: merged}}}}
	}
	bySheet := planOf("lot = \"REF-0417\"\nfile = \"own.xlsx\"\nsheet = \"REF-0417\"", "lot = \"CAND-0931\"\nfile = \"own.xlsx\"\nsheet = \"CAND-0931\"", "", "")
	plain := planFor("own.xlsx", "", "")
	var block [][]any
	for range 7 {
		block = append(block, nil)
	}
	block[0], block[1], block[3] = []any{"Inspection report"}, []any{"Part no", "4711-B"}, []any{"Gauge no", num("14")}
	n01 := append(block, nil)
	for _, r := range long() {
		n01 = append(n01, append([]any{nil, nil, nil}, r...))
	}
	feet := func(rows [][]any) [][]any {
		rows = append(rows, nil)
		for _, l := range []string{"Mean", "s", "Min", "Max", "Range", "Cpk"} {
			rows = append(rows, []any{l, formula{"AVERAGE(B2:B13)", "12.0039"}, formula{"AVERAGE(C2:C13)", "12.0082"}})
		}
		return rows
	}
	labelled := [][]any{{"No", "REF-0417", "CAND-0931"}, {nil, "mm", "mm"}, {"Nominal", num("12"), num("12")}, {"USL", num("12.05"), num("12.05")}, {"LSL", num("11.95"), num("11.95")}}
	for i := range d1Reference {
		labelled = append(labelled, []any{num(fmt.Sprint(i + 1)), num(d1Reference[i]), num(d1Candidate[i])})
	}
	copied := wide()
	for i := range d1Reference {
		copied[i+1][1] = copied[i+1][0]
	}
	unlabelled := append(wide(), []any{formula{"AVERAGE(A2:A13)", "12.0039166667"}, formula{"AVERAGE(B2:B13)", "12.0081666667"}})
	ragged := append(wide(), nil)
	ragged[13] = []any{nil, formula{"AVERAGE(B2:B8)", "12.009"}}
	for i := 8; i < 13; i++ {
		ragged[i] = []any{ragged[i][0], nil}
	}
	ragged = slices.Insert(ragged, 5, nil) // a blank row is not the end
	unequal := wide()
	for i := 8; i < 13; i++ {
		unequal[i] = []any{unequal[i][0], nil}
	}
	unequal[8] = []any{unequal[8][0], formula{"AVERAGE(B2:B8)", "12.009"}}
	merged := long()
	for i := range merged {
		if i > 1 && i != 13 {
			merged[i][0] = nil
		}
	}
	limitSheet := func(name string, values []string, usl string) sheetOf {
		s := perLot(name, values)
		s.rows = append([][]any{s.rows[0], {"USL", num(usl)}, {"LSL", num("11.95")}}, s.rows[1:]...)
		return s
	}
	shuffled := [][]any{{"REF-0417", nil, nil, "CAND-0931"}, {"Part", "Bore dia", nil, "Part", "Bore dia"}}
	for i := range d1Reference {
		j := (i*5 + 3) % 12
		shuffled = append(shuffled, []any{num(fmt.Sprint(i + 1)), num(d1Reference[i]), nil, num(fmt.Sprint(j + 1)), num(d1Candidate[j])})
	}
	stacked := append([][]any{{"REF-0417"}}, perLot("", d1Reference).rows...)
	stacked = append(append(append(stacked, nil), []any{"CAND-0931"}), perLot("", d1Candidate).rows...)
	lotTwice := append(long(), long()[13:]...)
	third := append(long(), []any{"OLD-1", num("1"), num("99")}, []any{"OLD-1", num("2"), num("98")})
	half := func(rows [][]any) [][]any { return append([][]any{long()[0]}, rows...) }
	other := [][]any{{"Lot", "Part", "Flange"}, {"REF-0417", num("1"), num("3.1")}, {"REF-0417", num("2"), num("3.2")}, {"CAND-0931", num("1"), num("3.3")}, {"CAND-0931", num("2"), num("3.4")}}
	repeats := [][]any{{"Lot", "Part", "Bore dia"}}
	columns := [][]any{{"Lot", "Part", "Bore dia", nil, nil}, {nil, nil, num("1"), num("2"), num("3")}}
	thrice(func(lot string, part int, v [3]string) {
		for _, x := range v {
			repeats = append(repeats, []any{lot, num(fmt.Sprint(part)), num(x)})
		}
		columns = append(columns, []any{lot, num(fmt.Sprint(part)), num(v[0]), num(v[1]), num(v[2])})
	})
	groups := nestedD2()
	for i, r := range groups[1:] {
		if i%15 > 0 {
			r[0] = nil
		}
		if i%5 > 0 {
			r[1] = nil
		}
	}
	var odd [][]any
	for i, r := range long() {
		odd = append(odd, []any{r[0], r[2], r[1], shifted("7.001", i)})
	}
	odd[0] = []any{"Series", "Bore dia", "Part", "Length"}
	fields := func(s sheetOf, lot string) sheetOf {
		s.rows = append([][]any{{"Inspection report"}, {"Lot", lot}, {"Revision", "C"}, {"Quantity", num("800")}, nil}, s.rows...)
		return s
	}
	free := planOf("lot = \"the old foundry\"\nfile = \"own.xlsx\"\nsheet = \"Sheet1\"", "lot = \"the new one\"\nfile = \"own.xlsx\"\nsheet = \"Sheet2\"", "", "")
	averaged := d1.with(func(w *layoutWant) { w.repeats = 24 })
	return []layoutCase{
		{name: "n01", shows: "the table begins at D9", files: one(n01), plan: plain, want: d1},
		{name: "n01-fields", shows: "a block of fields above, the lot among them", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{fields(perLot("Sheet1", d1Reference), "R"), fields(perLot("Sheet2", d1Candidate), "C")}}}, plan: free, want: d1},
		{
			name: "n01-form", shows: "the same above rows of characteristics", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{fields(inspection("Sheet1", d1Reference, 2), "R"), fields(inspection("Sheet2", d1Candidate, 2), "C")}}}, plan: free,
			want: d1.with(func(w *layoutWant) { w.count, w.step, w.limits = 2, 1, [3]float64{11.95, 12, 12.05} }),
		},
		{name: "n01-lots", shows: "both lots named in the block above, and again in a column under an odd heading", files: one(append([][]any{{"Compared", "REF-0417", "with", "CAND-0931"}, nil}, odd...)), plan: planFor("own.xlsx", "", characteristicOf(`name = "Bore dia"`)), want: d1},
		{name: "n02-wide", shows: "unit and limit rows above lots side by side: n 12, not 15", files: one(labelled), plan: plain, want: d1.with(func(w *layoutWant) { w.limits = [3]float64{11.95, 12, 12.05} })},
		{name: "n03-wide", shows: "labelled foot rows: not 0.009575", files: one(feet(labelled)), plan: plain, want: d1.with(func(w *layoutWant) { w.limits = [3]float64{11.95, 12, 12.05} })},
		{name: "n04-wide", shows: "a mean without a label under the last reading", files: one(unlabelled), plan: plain, want: d1},
		{name: "n04-unequal", shows: "the same under the shorter lot, beside a reading of the other", files: one(unequal), plan: plain, want: layoutWant{n: [2]int{12, 7}, mean: [2]float64{d1MeanReference, 84.044 / 7}}},
		{name: "n09", shows: "the lot in the first of merged cells", files: one(merged, "A2:A13", "A14:A25"), plan: plain, want: d1.with(func(w *layoutWant) { w.warnings = []string{"lot-filled-down"} })},
		{
			name: "n09-groups", shows: "the supplier and the lot within it each in the first of merged cells", files: one(groups, "A2:A16", "A17:A31", "B2:B6", "B7:B11", "B12:B16", "B17:B21", "B22:B26", "B27:B31"),
			plan: planOf("lot = \"S1\"\nfile = \"own.xlsx\"", "lot = \"S2\"\nfile = \"own.xlsx\"", "lot_column = \"Supplier\"\ngroup_column = \"Lot\"", ""),
			want: layoutWant{n: [2]int{15, 15}, mean: [2]float64{180.063 / 15, 180.205 / 15}, groups: []string{"L1", "L2", "L3"}, upper: 0.01521395},
		},
		{name: "n10-wide", shows: "one lot in mm, the other in inch: stop", files: one(append([][]any{{"REF-0417 [mm]", "CAND-0931 [in]"}}, wide()[1:]...)), plan: planOf("lot = \"REF-0417 [mm]\"\nfile = \"own.xlsx\"", "lot = \"CAND-0931 [in]\"\nfile = \"own.xlsx\"", "", ""), want: layoutWant{fault: []string{`"in"`, `"mm"`}}},
		{name: "n16", shows: "the candidate twice: not 0.009091", files: one(lotTwice), plan: plain, want: layoutWant{fault: []string{"12 part ids more than once", "part_column"}}},
		{name: "n17", shows: "the candidate's column is a copy: read as it is, the comparison warns", files: one(copied), plan: plain, want: layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, d1MeanReference}, finding: qa.WarnIdentical}},
		{name: "n20-rows", shows: "three readings a part in rows, averaged: n 12, not 36", files: one(repeats), plan: planFor("own.xlsx", `part_column = "Part"`, ""), want: averaged},
		{name: "n20-unnamed", shows: "the same without part_column: stop", files: one(repeats), plan: plain, want: layoutWant{fault: []string{"part_column", "more than once"}}},
		{name: "n20-columns", shows: "three readings a part in columns, averaged", files: one(columns, "C1:E1", "A1:A2", "B1:B2"), plan: planFor("own.xlsx", `part_column = "Part"`, characteristicOf(`name = "Bore dia"`)), want: averaged},
		{name: "n22", shows: "the same parts in both lots in another order: each reading keeps its part", files: one(shuffled), plan: plain, want: d1},
		{
			name: "n22-paired", shows: "and is paired by it", files: one(shuffled), plan: strings.Replace(planFor("own.xlsx", `pair_column = "Part"`, ""), "margin", "method = \"paired\"\nmargin", 1),
			want: d1.with(func(w *layoutWant) { w.upper = 0.009638 }),
		},
		{name: "n25", shows: "the lots' sheets state other limits: stop", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{limitSheet("REF-0417", d1Reference, "12.05"), limitSheet("CAND-0931", d1Candidate, "12.04")}}}, plan: bySheet, want: layoutWant{fault: []string{"12.04", "12.05", "upper limit"}}},
		{name: "n31-beside", shows: "two named tables side by side", files: one(abreast(append([][]any{{"REF-0417", nil}}, perLot("", d1Reference).rows...), append([][]any{{"CAND-0931", nil}}, perLot("", d1Candidate).rows...), 1)), plan: plain, want: d1},
		{name: "n31-stacked", shows: "two named tables below each other", files: one(stacked), plan: plain, want: d1},
		{name: "n31-halves", shows: "a long table in two halves side by side", files: one(abreast(long()[:13], half(long()[13:]), 1)), plan: plain, want: d1.with(func(w *layoutWant) { w.warnings = []string{"second-table"} })},
		{name: "n31-other", shows: "another table beside: the one with the characteristic is taken", files: one(abreast(long(), other, 1)), plan: planFor("own.xlsx", "", characteristicOf(`name = "Bore dia"`)), want: d1.with(func(w *layoutWant) { w.warnings = []string{"second-table"} })},
		{name: "n31-below", shows: "another table below: stop and list", files: one(append(append(long(), nil), other...)), plan: plain, want: layoutWant{fault: []string{"row 27", "header_row = 1 or 27"}}},
		{name: "n31-picked", shows: "the same with header_row", files: one(append(append(long(), nil), other...)), plan: planFor("own.xlsx", "header_row = 1", ""), want: d1.with(func(w *layoutWant) { w.warnings = []string{"second-table"} })},
		{name: "n33", shows: "a third lot takes no part and is named", files: one(third), plan: plain, want: d1.with(func(w *layoutWant) { w.said = []string{`"OLD-1" (2 rows) takes no part`} })},
		{name: "n34", shows: "12 and 7 readings, a blank row between, a mean under the shorter", files: one(ragged), plan: plain, want: layoutWant{n: [2]int{12, 7}, mean: [2]float64{d1MeanReference, 84.044 / 7}}},
	}
}

// headingCases are the nasty layouts that ask which rows are headings and what they say.
func headingCases() []layoutCase {
	one := func(rows [][]any, merged ...string) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows, merged: merged}}}}
	}
	cavities := [][]any{{"No", "Reference", nil, nil, "Candidate", nil, nil}, {nil, "Cav1", "Cav2", "Cav3", "Cav1", "Cav2", "Cav3"}, {nil, "mm", "mm", "mm", "mm", "mm", "mm"}}
	for i := range d1Reference {
		a, b := d1Reference[i], d1Candidate[i]
		cavities = append(cavities, []any{num(fmt.Sprint(i + 1)), num(a), shifted(a, 1), shifted(a, 2), num(b), shifted(b, 1), shifted(b, 2)})
	}
	paths := [][]any{{"Lot", "Part", "Bore", nil, "Remark"}, {nil, nil, "top", "bottom", nil}}
	for i, r := range long()[1:] {
		paths = append(paths, []any{r[0], r[1], r[2], shifted(string(r[2].(num)), 1), fmt.Sprintf("rack %d", i%3)})
	}
	twice := long()
	for i := range twice {
		twice[i] = append(twice[i], twice[i][2])
	}
	twice[0] = []any{"Lot", "Part", "Value", "Value"}
	blank := long()
	for i := range blank {
		blank[i] = append(blank[i], blank[i][2])
	}
	blank[0] = []any{"Lot", "Part", "Bore dia", nil}
	numbered := [][]any{{"Part", num("417"), num("931")}}
	for i := range d1Reference {
		numbered = append(numbered, []any{num(fmt.Sprint(i + 1)), num(d1Reference[i]), num(d1Candidate[i])})
	}
	requirements := [][]any{{"No", "Characteristic", "Requirement", num("1"), num("2"), num("3"), nil, num("1"), num("2"), num("3")}}
	for i, r := range []string{"12.000 ±0.050", "12 +0.05/-0.02", "12,0 +0,05 \u22120,02", "max 0.8", "≥ 45 HRC", "Ø12 H7", "0.2 A B", "REF (12)"} {
		requirements = append(requirements, []any{num(fmt.Sprint(i + 1)), fmt.Sprintf("Feature %c", 'A'+i), r, num("12.01"), num("12.02"), num("12.00"), nil, num("12.01"), num("12.03"), num("12.02")})
	}
	requirements = append([][]any{{nil, nil, nil, "REF-0417", nil, nil, nil, "CAND-0931"}}, requirements...)
	first := func(k int, more ...string) string {
		var b strings.Builder
		for i := range k {
			b.WriteString(characteristicOf(append([]string{fmt.Sprintf("name = \"Feature %c\"", 'A'+i)}, more...)...))
		}
		return b.String()
	}
	three := layoutWant{n: [2]int{3, 3}, mean: [2]float64{12.01, 12.02}, limits: [3]float64{11.95, 12, 12.05}}
	signs := inspection("", d1Reference, 3)
	signs.rows[2][4] = num("0.05")
	return []layoutCase{
		{
			name: "n24-read", shows: "five kinds of requirement are read", files: one(requirements), plan: planFor("own.xlsx", "", first(5)),
			want: three.with(func(w *layoutWant) {
				w.count = 5
				w.said = []string{"lower limit 11.98, nominal 12, upper limit 12.05", "read as upper limit 0.8", "read as lower limit 45"}
			}),
		},
		{name: "n24-fit", shows: "a fit, a geometrical tolerance and a reference dimension are asked for", files: one(requirements), plan: planFor("own.xlsx", "", ""), want: layoutWant{fault: []string{`"Ø12 H7"`, `"0.2 A B"`, `"REF (12)"`, "Data!C8", "state lower, upper or target"}}},
		{
			name: "n24-stated", shows: "the plan says what the fit asks", files: one(requirements),
			plan: planFor("own.xlsx", "", characteristicOf(`name = "Feature F"`, "lower = 12", "target = 12", "upper = 12.018")),
			want: three.with(func(w *layoutWant) { w.limits = [3]float64{12, 12, 12.018}; w.warnings = []string{"limits-unread"} }),
		},
		{name: "signs", shows: "lower tolerances with and without a sign in one column: stop", files: []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "REF-0417", rows: signs.rows}, inspection("CAND-0931", d1Candidate, 3)}}}, plan: planFor("own.xlsx", "", ""), want: layoutWant{fault: []string{"lower tolerance", "E3", "E2"}}},
		{
			name: "n32", shows: "each lot's name merged over its cavities, units below", files: one(cavities, "B1:D1", "E1:G1"),
			plan: planOf("lot = \"Reference\"\nfile = \"own.xlsx\"", "lot = \"Candidate\"\nfile = \"own.xlsx\"", "", ""), want: d1.with(func(w *layoutWant) { w.count, w.step = 3, 1 }),
		},
		{name: "n32-paths", shows: "a heading merged over two: Bore top, Bore bottom", files: one(paths, "C1:D1", "A1:A2", "B1:B2", "E1:E2"), plan: planFor("own.xlsx", "", characteristicOf(`name = "Bore top"`)+characteristicOf(`name = "Bore bottom"`)), want: d1.with(func(w *layoutWant) { w.count, w.step = 2, 1 })},
		{name: "n42-twice", shows: "a heading twice: stop", files: one(twice), plan: planFor("own.xlsx", "", ""), want: layoutWant{fault: []string{`"Value"`, "twice"}}},
		{name: "n42-blank", shows: "numbers without a heading are told", files: one(blank), plan: planFor("own.xlsx", "", ""), want: d1.with(func(w *layoutWant) { w.warnings = []string{"column-without-heading"} })},
		{
			name: "n42-numbers", shows: "lots called by numbers as headings", files: one(numbered),
			plan: planOf("lot = \"417\"\nfile = \"own.xlsx\"", "lot = \"931\"\nfile = \"own.xlsx\"", "", ""), want: d1,
		},
	}
}
