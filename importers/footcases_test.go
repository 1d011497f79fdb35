package importers

import "strings"

// footCases are foot rows as people write them: in other languages, in phrases, with the lot's name beside them, with the label
// in another column or with none; and lots whose names are one to a person's eye.
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
