package importers

import (
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

// tidyRows is D1 and a length 1 more, a row a reading: lot, part, characteristic, value, and what more says of each.
func tidyRows(head []any, more func(lot string, k int) []any) [][]any {
	rows := [][]any{append([]any{"Lot", "Part", "Characteristic", "Value"}, head...)}
	for i := range d1Reference {
		for k, name := range []string{"Bore dia", "Length"} {
			for _, l := range []struct {
				name   string
				values []string
			}{{"REF-0417", d1Reference}, {"CAND-0931", d1Candidate}} {
				row := []any{l.name, num(fmt.Sprint(i + 1)), name, shifted(l.values[i], k)}
				if more != nil {
					row = append(row, more(l.name, k)...)
				}
				rows = append(rows, row)
			}
		}
	}
	return rows
}

// across is the same with a row for each characteristic of each lot and a column a part; one row may lack its name.
func across(nameless int) [][]any {
	rows := [][]any{{"No", "Characteristic", "Lot", "LSL", "USL"}}
	for i := range d1Reference {
		rows[0] = append(rows[0], num(fmt.Sprint(i+1)))
	}
	rows[0] = append(rows[0], "Mean", "Min", "Max", "OK/NG")
	for k, name := range []string{"Bore dia", "Length"} {
		for _, l := range []struct {
			name   string
			values []string
		}{{"REF-0417", d1Reference}, {"CAND-0931", d1Candidate}} {
			row := []any{num(fmt.Sprint(k + 1)), name, l.name, num(fmt.Sprint(11+k) + ".95"), num(fmt.Sprint(12+k) + ".05")}
			if len(rows) == nameless {
				row[1] = nil
			}
			for _, v := range l.values {
				row = append(row, shifted(v, k))
			}
			rows = append(rows, append(row, shifted("12.006", k), shifted("11.989", k), shifted("12.022", k), "OK"))
		}
	}
	return rows
}

// tidyCases are sheets with a row a reading.
func tidyCases() []layoutCase {
	one := func(rows [][]any, merged ...string) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows, merged: merged}}}}
	}
	both := d1.with(func(w *layoutWant) { w.count, w.step = 2, 1 })
	limited := both.with(func(w *layoutWant) { w.limits = [3]float64{11.95, 12, 12.05} })
	head := []any{"Unit", "Nominal", "Plus", "Minus"}
	asked := func(_ string, k int) []any { return []any{"mm", num(fmt.Sprint(12 + k)), num("0.05"), num("-0.05")} }
	other := tidyRows([]any{"Unit", "USL", "LSL"}, func(lot string, k int) []any {
		usl := fmt.Sprint(12+k) + ".05"
		if lot == "CAND-0931" && k == 1 {
			usl = "13.04"
		}
		return []any{"mm", num(usl), num(fmt.Sprint(11+k) + ".95")}
	})
	inches := tidyRows([]any{"Unit"}, func(lot string, k int) []any {
		return []any{map[string]string{"REF-0417": "mm", "CAND-0931": "in"}[lot]}
	})
	units := tidyRows([]any{"Unit"}, func(string, int) []any { return []any{"mm"} })
	units[20][4] = "in"
	requirement := tidyRows([]any{"Requirement"}, func(_ string, k int) []any { return []any{fmt.Sprintf("%d.000 ±0.050", 12+k)} })
	ofLot := func(rows [][]any, lot string) [][]any {
		var out [][]any
		for i, r := range rows {
			if i == 0 || r[0] == lot {
				out = append(out, r[1:])
			}
		}
		return out
	}
	// a row a part and characteristic, sorted by part: the first rows all differ
	long := [][]any{{"Part", "Characteristic", "Nominal", "Actual"}}
	for i := range d1Reference {
		for k := range 20 {
			long = append(long, []any{num(fmt.Sprint(i + 1)), fmt.Sprintf("Length %02d", k), num(fmt.Sprint(12 + k)), shifted(d1Reference[i], k)})
		}
	}
	candidate := [][]any{long[0]}
	for i := range d1Candidate {
		for k := range 20 {
			candidate = append(candidate, []any{num(fmt.Sprint(i + 1)), fmt.Sprintf("Length %02d", k), num(fmt.Sprint(12 + k)), shifted(d1Candidate[i], k)})
		}
	}
	sheets := func(a, b [][]any) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "REF-0417", rows: a}, {name: "CAND-0931", rows: b}}}}
	}
	bySheet := planOf("lot = \"REF-0417\"\nfile = \"own.xlsx\"\nsheet = \"REF-0417\"", "lot = \"CAND-0931\"\nfile = \"own.xlsx\"\nsheet = \"CAND-0931\"", "", "")
	repeats := [][]any{{"Lot", "Part", "Characteristic", "Value"}}
	thrice(func(lot string, part int, v [3]string) {
		for _, x := range v {
			repeats = append(repeats, []any{lot, num(fmt.Sprint(part)), "Bore dia", num(x)}, []any{lot, num(fmt.Sprint(part)), "Length", shifted(x, 1)})
		}
	})
	shuffled := tidyRows(nil, nil)
	for i, j := 2, len(shuffled)-2; i < j; i, j = i+4, j-4 { // the candidate's parts in another order
		shuffled[i], shuffled[j] = shuffled[j], shuffled[i]
	}
	odd := tidyRows([]any{"Humidity"}, func(string, int) []any { return []any{num("41.5")} })
	odd[0] = []any{"Series", "Piece", "What", "Number", "Humidity"}
	gaps := tidyRows(nil, nil)
	gaps = append(gaps[:12], gaps[13:]...) // the candidate's length of part 3
	nameless := tidyRows(nil, nil)
	nameless[5][2] = nil
	counted := tidyRows(nil, nil) // a column that counts the rows is no part
	for i := range counted {
		counted[i] = append([]any{num(fmt.Sprint(i))}, counted[i]...)
	}
	counted[0][0] = "No"
	merged := [][]any{{"Lot", "Part", "Characteristic", "Value"}}
	var areas []string
	for _, lot := range []struct {
		name   string
		values []string
	}{{"REF-0417", d1Reference}, {"CAND-0931", d1Candidate}} {
		areas = append(areas, fmt.Sprintf("A%d:A%d", len(merged)+1, len(merged)+24))
		for i, v := range lot.values {
			areas = append(areas, fmt.Sprintf("B%d:B%d", len(merged)+1, len(merged)+2))
			name := any(nil)
			if i == 0 {
				name = lot.name
			}
			merged = append(merged, []any{name, num(fmt.Sprint(i + 1)), "Bore dia", num(v)}, []any{nil, nil, "Length", shifted(v, 1)})
		}
	}
	values := tidyRows([]any{"Result"}, func(_ string, k int) []any { return []any{num("12.5")} })
	plain := planFor("own.xlsx", "", "")
	return []layoutCase{
		{name: "tidy", shows: "a row a reading: lot, part, characteristic, value", files: one(tidyRows(nil, nil)), plan: planFor("own.xlsx", `part_column = "Part"`, ""), want: both},
		{name: "tidy-limits", shows: "with unit, nominal value, plus and minus in each row", files: one(tidyRows(head, asked)), plan: plain, want: limited},
		{name: "tidy-sheets", shows: "a sheet a lot of such rows, the readings under an odd heading, stated", files: sheets(ofLot(tidyRows(head, asked), "REF-0417"), ofLot(tidyRows(head, asked), "CAND-0931")), plan: strings.Replace(bySheet, "\n[criterion]", "\n[reading]\nlayout = \"sheet-per-lot\"\n\n[criterion]", 1), want: limited},
		{name: "tidy-many", shows: "20 characteristics a part, sorted by part, nominal beside: no row a characteristic", files: sheets(long, candidate), plan: bySheet, want: both.with(func(w *layoutWant) { w.count = 20 })},
		{name: "tidy-conflict", shows: "the rows of the candidate state another upper limit: stop", files: one(other), plan: plain, want: layoutWant{fault: []string{"Data!F5", `"13.04"`, "13.05", "upper"}}},
		{name: "tidy-inches", shows: "the lots' rows state other units: stop", files: one(inches), plan: plain, want: layoutWant{fault: []string{`"in"`, `"mm"`}}},
		{name: "tidy-units", shows: "two units in one lot: stop", files: one(units), plan: plain, want: layoutWant{fault: []string{"Data!E21", `"in"`, `"mm" as in E5`}}},
		{name: "tidy-repeats", shows: "three readings of each part and characteristic, averaged: n 12, not 36", files: one(repeats), plan: planFor("own.xlsx", `part_column = "Part"`, ""), want: both.with(func(w *layoutWant) { w.repeats = 24 })},
		{name: "tidy-unnamed", shows: "the same without part_column: stop", files: one(repeats), plan: plain, want: layoutWant{fault: []string{"12 part ids more than once", "part_column"}}},
		{
			name: "tidy-paired", shows: "paired by the part, whatever the order of the rows", files: one(shuffled), plan: strings.Replace(planFor("own.xlsx", `pair_column = "Part"`, ""), "margin", "method = \"paired\"\nmargin", 1),
			want: both.with(func(w *layoutWant) { w.upper = 0.009638 }),
		},
		{name: "tidy-named", shows: "no heading says so, the plan's characteristics do", files: one(odd), plan: planFor("own.xlsx", "lot_column = \"Series\"\npart_column = \"Piece\"", characteristicOf(`name = "Bore dia"`)+characteristicOf(`name = "Length"`)), want: layoutWant{fault: []string{"column D", "column E", "one column of readings"}}},
		{name: "tidy-gaps", shows: "a part without a row of a characteristic: told, nothing invented", files: one(gaps), plan: planFor("own.xlsx", "", characteristicOf(`name = "Length"`)), want: layoutWant{n: [2]int{12, 11}, mean: [2]float64{d1MeanReference + 1, 13.0091818181818}, warnings: []string{"parts-without-row"}}},
		{name: "tidy-nameless", shows: "a reading that does not say what was measured: stop", files: one(nameless), plan: plain, want: layoutWant{fault: []string{"D6", "what was measured"}}},
		{name: "tidy-counted", shows: "a column that counts the rows is not taken for the parts", files: one(counted), plan: plain, want: both.with(func(w *layoutWant) { w.said = []string{`ids stand in column C "Part"`} })},
		{name: "tidy-merged", shows: "lot and part merged down", files: one(merged, areas...), plan: plain, want: both.with(func(w *layoutWant) { w.warnings = []string{"lot-filled-down"} })},
		{name: "tidy-values", shows: "two columns of readings: stop", files: one(values), plan: plain, want: layoutWant{fault: []string{`column D "Value"`, `column E "Result"`, "one column of readings"}}},
		{name: "tidy-as-characteristics", shows: "stated as a row a characteristic: stop and say which layout reads it", files: one(tidyRows(head, asked)), plan: planFor("own.xlsx", `layout = "row-per-characteristic"`, ""), want: layoutWant{fault: []string{"reading.layout", "row-per-part"}}},
		{name: "across", shows: "a row for each characteristic of each lot, a column a part, Min and Max of the readings behind", files: one(across(0)), plan: plain, want: both.with(func(w *layoutWant) {
			w.said = []string{"lower limit 11.95, upper limit 12.05", "12 columns of parts: F to Q"}
		})},
		{name: "across-nameless", shows: "one of its rows says not what was measured: stop", files: one(across(2)), plan: plain, want: layoutWant{fault: []string{"B3", "what was measured"}}},
		{name: "across-stated", shows: "stated as a row a characteristic: stop and say which layout reads it", files: one(across(0)), plan: planFor("own.xlsx", `layout = "row-per-characteristic"`, ""), want: layoutWant{fault: []string{"reading.layout", "row-per-part"}}},
		{name: "tidy-requirements", shows: "the requirement of each row as text", files: one(requirement), plan: plain, want: limited},
	}
}

// A row a reading is told apart with its reason and how sure it is; the plan that inspect prints names the lots' column.
func TestProposeTidy(t *testing.T) {
	for _, tt := range []struct {
		rows [][]any
		sure Confidence
	}{
		{tidyRows(nil, nil), Clear},
		{append([][]any{{"Lot", "Part", "Characteristic", "Diameter"}}, tidyRows(nil, nil)[1:]...), Likely},
	} {
		b, err := Open("d1.xlsx", xlsx(t, sheetOf{name: "Data", rows: tt.rows}), "")
		if err != nil {
			t.Fatal(err)
		}
		m, err := Propose(b, qa.ReadingPlan{})
		if err != nil {
			t.Fatal(err)
		}
		if m.Reading.Layout != RowPerPart || m.Confidence != tt.sure || m.Reading.LotColumn != "Lot" || len(m.Lots) != 2 || m.Lots[0].Rows != 12 {
			t.Errorf("got %+v, want a row a part, %s", m, tt.sure)
		}
		wantWords(t, m.Reasons[0], `column C "Characteristic" names what was measured`, "column D")
	}
}

// A plan that asks for the column of readings by its heading would mix the characteristics: it is refused.
func TestReadTidyAsOne(t *testing.T) {
	_, err := read(t, xlsxPlan(func(p *qa.Plan) { p.Characteristics = []qa.Characteristic{{Name: "Value"}} }), xlsx(t, sheetOf{name: "Data", rows: tidyRows(nil, nil)}))
	wantPlanError(t, err, `"Value"`, `"Bore dia", "Length"`)
}
