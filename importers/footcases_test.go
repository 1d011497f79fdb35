package importers

import (
	"fmt"
	"slices"
	"strings"
)

// footCases are foot rows as people write them: in other languages, in phrases, with the lot's name beside them, with the label
// in another column or with none; headings in two languages; and lots whose names are one to a person's eye.
func footCases() []layoutCase {
	one := func(rows [][]any) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows}}}}
	}
	plain := planFor("own.xlsx", "", "")
	var cases []layoutCase
	add := func(name, shows string, rows [][]any, plan string, want layoutWant) {
		cases = append(cases, layoutCase{name: cellsDir + name, shows: shows, files: one(rows), plan: plan, want: want})
	}
	// feet are rows of one lot's summaries below its readings
	feet := func(foot func(lot string) [][]any) [][]any {
		rows := long()
		out := append([][]any{}, rows[:13]...)
		out = append(out, foot("REF-0417")...)
		out = append(out, rows[13:]...)
		return append(out, foot("CAND-0931")...)
	}
	summaries := d1.with(func(w *layoutWant) { w.said = []string{"not taken as readings"} })
	for name, labels := range map[string]string{
		"french": "Moyenne|Écart-type|Mini|Maxi|Étendue", "signs": "X̄|s|σ|R|n", "japanese": "平均|最大|最小|標準偏差", "spanish": "Media|Desv. est.|Mínimo|Máximo|Promedio",
		"german": "Mittelwert x̄|Stabw.|kleinster Wert|größter Wert", "phrases": "Average of lot|Lot mean|Overall mean|Max. value|Min. value|Mean ± SD|3s",
	} {
		add("feet-"+name, "foot rows with the lot's name: "+labels, feet(func(lot string) (rows [][]any) {
			for _, l := range strings.Split(labels, "|") {
				rows = append(rows, []any{lot, l, num("12.006")})
			}
			return rows
		}), plain, summaries)
	}
	add("feet-remark", "foot rows named in the column of remarks", feet(func(lot string) [][]any {
		return [][]any{{lot, nil, num("12.006"), "average"}, {lot, nil, num("11.99"), "min"}, {lot, nil, num("1.33"), "Cpk"}}
	}), plain, summaries)
	add("feet-unnamed", "a mean under each block with neither label nor id: told", feet(func(lot string) [][]any {
		return [][]any{{lot, nil, num("12.006")}}
	}), plain, layoutWant{
		n: [2]int{13, 13}, mean: [2]float64{(12*d1MeanReference + 12.006) / 13, (12*d1MeanCandidate + 12.006) / 13},
		warnings: []string{"rows-without-id"}, texts: []string{": 14, 27.", "name their cells under exclude"},
	})
	left := feet(func(lot string) [][]any {
		return [][]any{{lot, nil, num("12.006")}, {lot, nil, num("11.99")}, {lot, nil, num("1.33")}}
	})
	for i, row := range left {
		label := any(nil)
		if i > 0 && row[1] == nil {
			label = map[any]string{num("12.006"): "Average", num("11.99"): "Min", num("1.33"): "Ppk"}[row[2]]
		}
		left[i] = append([]any{label}, row...)
	}
	add("feet-left", "foot rows named left of the table", left, plain, summaries)

	add("feet-numbered", "foot rows that are numbered on, named in the column of remarks", feet(func(lot string) [][]any {
		return [][]any{{lot, num("13"), num("12.006"), "Average"}, {lot, num("14"), num("11.99"), "Min"}}
	}), plain, summaries)
	dated := feet(func(lot string) [][]any {
		return [][]any{{lot, "Average", num("12.006")}, {lot, "Min", num("11.99")}}
	})
	typed := feet(func(lot string) [][]any {
		return [][]any{{lot, nil, num("12.006"), "mean"}, {lot, nil, num("0.007"), "sd"}}
	})
	dated[0][1], typed[0] = "Date", append([]any{"Lot", "Cavity", "Bore dia [mm]"}, "Type")
	for i := range dated[1:] {
		if _, ok := dated[i+1][1].(num); ok {
			dated[i+1][1] = fmt.Sprintf("2026-03-%02d", i%13+1)
			typed[i+1][1], typed[i+1] = num(itoa(1+i%2)), append(typed[i+1], "single")
		}
	}
	add("feet-dated", "foot rows named in the column of dates", dated, plain, summaries)
	add("feet-typed", "foot rows told by a column of types", typed, planFor("own.xlsx", "", characteristicOf(`name = "Bore dia"`)), summaries)

	below := [][]any{{"Lot", "Bore dia [mm]"}}
	for _, r := range long()[1:] {
		below = append(below, []any{r[0], r[2]})
	}
	below = append(below, nil, []any{"Group", "Mean"}, []any{"REF-0417", num("12.0039")}, []any{"CAND-0931", num("12.0082")})
	second := []string{"row 27", "second table", "header_row = 1 or 27"}
	add("feet-table-ask", "a table of means below, under other headings: stop", below, plain, layoutWant{fault: second})
	add("feet-table", "the same with the row of the headings stated: not read", below, planFor("own.xlsx", "header_row = 1", ""), d1.with(func(w *layoutWant) { w.warnings = []string{"second-table"} }))

	sides := [][]any{{"No", "REF-0417", "CAND-0931"}}
	for i := range d1Reference {
		sides = append(sides, []any{num(itoa(i + 1)), num(d1Reference[i]), num(d1Candidate[i])})
	}
	sides = append(sides, []any{nil, num("12.006"), num("12.006")})
	add("feet-unnamed-wide", "a column a lot with a mean below that has neither label nor id: told", sides, planFor("own.xlsx", "", characteristicOf(`name = "Bore dia"`)), layoutWant{
		n: [2]int{13, 13}, mean: [2]float64{(12*d1MeanReference + 12.006) / 13, (12*d1MeanCandidate + 12.006) / 13}, warnings: []string{"rows-without-id"}, texts: []string{": 14."},
	})
	above := append(slices.Clone(sides[:13]), nil, []any{"Average"}, []any{nil, num("12.006"), num("12.006")}, []any{nil, "Max.", "Max."}, []any{nil, num("12.015"), num("12.022")})
	bore := planFor("own.xlsx", "", characteristicOf(`name = "Bore dia"`))
	add("feet-label-above", "a column a lot, each summary's name in a row of its own above the numbers", above, bore, d1.with(func(w *layoutWant) {
		w.warnings, w.texts = []string{"label-above"}, []string{`row 15 says "Average" and nothing else; 1 row of numbers is under it (16)`, "(18)"}
	}))
	bare := [][]any{{"REF-0417", "CAND-0931"}}
	for i := range d1Reference {
		bare = append(bare, []any{num(d1Reference[i]), num(d1Candidate[i])})
	}
	add("feet-label-bare", "the same without a column of ids", append(slices.Clone(bare), nil, []any{"Average"}, []any{num("12.006"), num("12.006")}), bore, d1.with(func(w *layoutWant) { w.warnings = []string{"label-above"} }))
	add("feet-label-ask", "the name of a summary above two rows of numbers: stop", append(slices.Clone(bare), nil, []any{"Statistics"}, []any{num("12.006"), num("12.006")}, []any{num("12.01"), num("12.01")}), bore,
		layoutWant{fault: []string{`row 15: found "Statistics" alone above the numbers of rows 16 to 17`}})
	add("feet-label-lots", "the name of a summary above its number in each lot", feet(func(lot string) [][]any {
		return [][]any{{lot, "Average"}, {lot, nil, num("12.006")}, {nil, "Max."}, {lot, nil, num("12.022")}}
	}), plain, d1.with(func(w *layoutWant) { w.warnings = []string{"label-above"} }))
	var lots []sheetOf
	for name, values := range map[string][]string{"REF-0417": d1Reference, "CAND-0931": d1Candidate} {
		rows := [][]any{{"No", "Characteristic", "LSL", "USL"}, {num("1"), "Bore dia", num("11.95"), num("12.05")}}
		for i, v := range values {
			rows[0], rows[1] = append(rows[0], num(itoa(i+1))), append(rows[1], num(v))
		}
		rows[0], rows[1] = append(rows[0], "Mean of 12", "Max 12"), append(rows[1], num("12.006"), num("12.022"))
		lots = append(lots, sheetOf{name: name, rows: rows})
	}
	slices.SortFunc(lots, func(a, b sheetOf) int { return strings.Compare(b.name, a.name) })
	cases = append(cases, layoutCase{
		name: cellsDir + "feet-counted", shows: "a row a characteristic, and behind the parts a column called Mean of 12: no part", files: []layoutFile{{name: "own.xlsx", sheets: lots}},
		plan: planOf("lot = \"REF-0417\"\nfile = \"own.xlsx\"\nsheet = \"REF-0417\"", "lot = \"CAND-0931\"\nfile = \"own.xlsx\"\nsheet = \"CAND-0931\"", "", ""), want: d1.with(func(w *layoutWant) { w.said = []string{`"Mean of 12", "Max 12"`} }),
	})

	beside := long()
	for i, x := range [][]any{{"Average", num("12.0039")}, {"Min", num("11.989")}, {"Max", num("12.015")}, {"Cpk", num("1.33")}} {
		beside[i] = append(beside[i], nil, nil, x[0], x[1])
	}
	add("feet-beside", "statistics to the right of the table without headings: the first of them is no heading", beside, plain, d1.with(func(w *layoutWant) {
		w.warnings, w.texts = []string{"number-as-heading"}, []string{`column G "12.0039" is not taken`}
	}))
	limits := append([][]any{{"Characteristic", nil, "Bore dia"}, {"USL", nil, num("12.05")}, {"LSL", nil, num("11.95")}, nil}, long()...)
	add("limits-above", "limits above the headings are told", limits, plain, d1.with(func(w *layoutWant) {
		w.warnings, w.texts = []string{"limits-above"}, []string{`row 2 says "USL" above the headings`, `row 3 says "LSL"`}
	}))
	spec := slices.Insert(long(), 1, []any{"Spec", nil, "12.000 ±0.050"})
	add("limits-spec", "a row of requirements called Spec in the column of lots is told", spec, plain, d1.with(func(w *layoutWant) {
		w.warnings, w.texts = []string{"limits-above"}, []string{`row 2 says "Spec" in the place of a lot`}
	}))
	spoken := long()
	spoken[0][0], spoken[0][1] = "Lot / Charge", "Sample #"
	add("headings-twice", "headings in two languages, and with a #", spoken, plain, d1.with(func(w *layoutWant) { w.said = []string{`column A "Lot / Charge"`, `column B "Sample #"`} }))

	days := long()
	for i := range days[1:] {
		days[i+1][0] = styled{map[bool]string{true: "46085", false: "46092"}[i < 12], 1}
	}
	dayPlan := func(reference, candidate string) string {
		return planOf("lot = \""+reference+"\"\nfile = \"own.xlsx\"", "lot = \""+candidate+"\"\nfile = \"own.xlsx\"", "", "")
	}
	add("lots-dates-ask", "lots named by dates, asked for as people write them: stop", days, dayPlan("2026-03-04", "2026-03-11"), layoutWant{fault: []string{`"46085", "46092"`, "day numbers", "as text"}})
	add("lots-dates", "the same by the day numbers", days, dayPlan("46085", "46092"), d1)
	spelt := long()
	for i := range 12 {
		spelt[i+1][0] = map[int]any{0: "118", 1: "118.0", 2: "0118"}[i%3]
		spelt[i+13][0] = "L0T-22"
	}
	spelt[13][0], spelt[14][0] = "LOT 22", "LOT22"
	add("lots-alike", "118, 118.0 and 0118, L0T and LOT: told", spelt, planOf(`lot = "118"`+"\n"+`file = "own.xlsx"`, `lot = "L0T-22"`+"\n"+`file = "own.xlsx"`, "", ""), layoutWant{
		n: [2]int{4, 10}, mean: [2]float64{meanText([]string{d1Reference[0], d1Reference[3], d1Reference[6], d1Reference[9]}), meanText(d1Candidate[2:])},
		warnings: []string{"lot-spellings"}, texts: []string{`"118.0" beside "118" (4 rows from A3)`, `"0118" beside "118"`, `"LOT 22" beside "L0T-22"`, `"LOT22" beside`},
	})
	return cases
}
