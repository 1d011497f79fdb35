package importers

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// cellsDir is beside the directory of the layouts, which the cases' names are relative to.
const cellsDir = "../cells/"

// cellCases are the cases of the catalogue that turn on what stands in the cells and in which file: L8 and those of N05 to N44.
// Means without the candidate's third reading: (12 · 12.0081666667 − 11.997) / 11 = 12.0091818182.
func cellCases() []layoutCase {
	const without3 = 12.0091818181818
	one := func(rows [][]any) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows}}}}
	}
	plain, comma := planFor("own.xlsx", "", ""), planFor("own.xlsx", `decimal = ","`, "")
	missing := layoutWant{n: [2]int{12, 11}, mean: [2]float64{d1MeanReference, without3}}
	unread := missing.with(func(w *layoutWant) { w.finding = "unread-cells" })
	var cases []layoutCase
	add := func(name, shows string, files []layoutFile, plan string, want layoutWant) {
		cases = append(cases, layoutCase{name: cellsDir + name, shows: shows, files: files, plan: plan, want: want})
	}
	report := coordinateReport("REF-0417", d1Reference, true) + coordinateReport("CAND-0931", d1Candidate, true)
	add("l8", "a coordinate-measuring report, one part after another", []layoutFile{{name: "own.txt", text: report}}, planFor("own.txt", "", characteristicOf(`name = "Bore dia"`)), d1)

	texts := func(from int, change func(string) string) [][]any {
		rows := long()
		for _, row := range rows[from:] {
			row[2] = change(fmt.Sprint(row[2]))
		}
		return rows
	}
	toComma := func(s string) string { return strings.Replace(s, ".", ",", 1) }
	add("n05", "every value text with a decimal comma", one(texts(1, toComma)), comma, d1)
	add("n05-ask", "the same without a word on the decimal mark", one(texts(1, toComma)), plain, layoutWant{fault: []string{"Data!C2", `"12,003"`, "decimal"}})
	add("n06", "the reference as numbers, the candidate as text", one(texts(13, toComma)), comma, d1.with(func(w *layoutWant) { w.warnings = []string{"mixed-types"} }))
	hundredfold := layoutWant{n: [2]int{12, 12}, mean: [2]float64{1200.39166666667, 1200.81666666667}}
	for i, group := range []string{".", "\u00a0"} {
		add([]string{"n07-dot", "n07-space"}[i], "thousands and decimal marks", one(texts(1, func(s string) string { return s[:1] + group + s[1:2] + s[3:5] + "," + s[5:] })), plain, hundredfold)
	}

	dates := long()
	dates[13][2], dates[14][2] = styled{"45303", 1}, styled{"31898", 1}
	add("n08-dates", "two readings that a spreadsheet made dates", one(dates), plain, layoutWant{
		n: [2]int{12, 10}, mean: [2]float64{d1MeanReference, 12.0077}, warnings: []string{"dates"}, finding: "unread-cells",
	})
	slip := long()
	slip[13][2] = num("12008")
	add("n08-thousand", "12.008 typed where the point groups digits", one(slip), plain, layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, 1011.67416666667}, warnings: []string{"factor"}})

	inches := []layoutFile{{name: "ref.csv", text: string(lotFile("Bore dia [mm]", d1Reference))}, {name: "cand.csv", text: string(lotFile("Bore dia [in]", d1CandidateInch))}}
	two := func(unit string) string {
		return planOf("lot = \"REF-0417\"\nfile = \"ref.csv\"", "lot = \"CAND-0931\"\nfile = \"cand.csv\""+unit, "", characteristicOf(`name = "Bore dia"`, `unit = "mm"`, "target = 12"))
	}
	add("n10", "the candidate in inches", inches, two("\nunit = \"in\""), layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, 12.0081886666667}, upper: 0.010080, warnings: []string{"converted"}})
	for i, naked := range [][2]string{{"Bore dia mm", "Bore dia, inch"}, {"Bore dia in mm", "Bore dia/in"}} {
		add("n10-naked-"+itoa(i+1), "the same with units without brackets: "+naked[0]+", "+naked[1],
			[]layoutFile{{name: "ref.csv", text: string(lotFile(naked[0], d1Reference))}, {name: "cand.csv", text: string(lotFile(naked[1], d1CandidateInch))}},
			two(""), layoutWant{fault: []string{"cand.csv!B1", "25.4", "[candidate]"}})
	}
	add("n10-ask", "the same without a word on the unit", inches, two(""), layoutWant{fault: []string{"cand.csv!B1", `"in"`, "25.4", "[candidate]"}})

	for i, text := range []string{"", "N/A", "n.d.", "-", "—", ".", "?", " ", "#N/A"} {
		var cell any = text
		if text == "" {
			cell = nil
		}
		add(fmt.Sprintf("n11-%d", i+1), fmt.Sprintf("missing as %q", text), one(withCandidate3(cell)), plain, missing)
	}
	add("n11-broken", "a word in the place of a reading", one(withCandidate3("broken")), plain, unread)

	d5 := [][]any{{"Lot", "x"}}
	for _, v := range d5Reference {
		d5 = append(d5, []any{"REF-0417", v})
	}
	bounds := []string{"", "< 0,05", "≤0.05", "", "", "", "", "<0.05"}
	for i, v := range d5Candidate {
		if bounds[i] != "" {
			v = bounds[i]
		}
		d5 = append(d5, []any{"CAND-0931", v})
	}
	margin := func(rule string) string {
		reading := ""
		if rule != "" {
			reading = "non_detect = \"" + rule + "\""
		}
		return strings.Replace(planFor("own.xlsx", reading, ""), "absolute = 0.010", "absolute = 0.030", 1)
	}
	add("n12", "non-detects without a rule", one(d5), margin(""), layoutWant{n: [2]int{6, 5}, mean: [2]float64{0.44 / 6, 0.08}, finding: "non-detects"})
	add("n12-limit", "non-detects at their limit", one(d5), margin("limit"), layoutWant{n: [2]int{8, 8}, mean: [2]float64{0.0675, 0.06875}, finding: "verdict-flips"})

	for i, cell := range []any{num("0"), num("9999"), num("-999"), num("119.97")} {
		code := "sentinel"
		if i == 3 {
			code = "factor"
		}
		v := []float64{0, 9999, -999, 119.97}[i]
		add(fmt.Sprintf("n13-%d", i+1), "a code or a slip among the readings", one(withCandidate3(cell)), plain, layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, (11*without3 + v) / 12}, warnings: []string{code}})
	}
	add("n13-valid", "a number in exponent form", one(withCandidate3("1.1997E+01")), plain, d1)

	formulas := withCandidate3(failed("#DIV/0!"))
	formulas[16][2], formulas[17][2] = formula{"C17+0.005", ""}, formula{"C5+0.005", "12.004"}
	add("n14", "an error, a formula without a value and a computed reading", one(formulas), plain, layoutWant{
		n: [2]int{12, 10}, mean: [2]float64{d1MeanReference, 12.0082}, warnings: []string{"formula-cells"}, finding: "unread-cells",
	})
	hidden := []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: long(), hide: map[int]bool{5: true, 9: true}}, {name: "raw", hidden: true, rows: long()}}}}
	add("n15", "hidden rows and a hidden sheet", hidden, plain, d1.with(func(w *layoutWant) { w.warnings = []string{"hidden-rows", "hidden-sheets"} }))

	marked := long()
	for i := range marked {
		marked[i] = append(marked[i], nil, "")
		marked[i][3], marked[i][4] = "ok", "ab"
	}
	marked[0][3], marked[0][4] = "Status", "Operator"
	marked[4][3], marked[8][3] = "reject", "reject"
	fifteen := long()
	for i := range 3 {
		fifteen = append(fifteen, []any{"REF-0417", num(fmt.Sprint(13 + i)), num("12.2")}, []any{"CAND-0931", num(fmt.Sprint(13 + i)), num("12.2")})
	}
	rejects := []layoutFile{{name: "own.xlsx", sheets: []sheetOf{
		{name: "Data", rows: marked, hide: map[int]bool{5: true, 9: true}, cols: []int{4}, filter: "A1:E25"}, {name: "raw", very: true, rows: fifteen},
	}}}
	told := []string{"hidden-rows", "hidden-columns", "hidden-sheets", "reject-marks"}
	add("n15-rejects", "rows hidden by a filter, a hidden column of reject marks, a very hidden sheet with 15 values a lot: n 12, all told", rejects, plain, d1.with(func(w *layoutWant) {
		w.warnings = told
		w.texts = []string{"(5, 9)", "(C5, C9)", `D "Status"`, `"reject" in D5, "reject" in D9`, `"raw" (93 cells)`, "exclude"}
	}))
	add("n15-decided", "the same with the decision of the user: the two readings left out", rejects, planFor("own.xlsx", "exclude = [{ cell = \"Data!C5\", reason = \"reject\" }, { cell = \"Data!C9\", reason = \"reject\" }]", ""), layoutWant{
		n: [2]int{10, 12}, mean: [2]float64{(12*d1MeanReference - 12.007 - 12.009) / 10, d1MeanCandidate}, texts: []string{"no reading in them is used"},
	})
	add("n15-raw", "and with the very hidden sheet picked", rejects, planFor("own.xlsx", "sheet = \"raw\"", ""), layoutWant{
		n: [2]int{15, 15}, mean: [2]float64{(12*d1MeanReference + 36.6) / 15, (12*d1MeanCandidate + 36.6) / 15}, warnings: []string{"hidden-sheets"},
	})

	microns := []layoutFile{{name: "ref.csv", text: string(lotFile("Bore dia [mm]", d1Reference))}, {name: "cand.csv", text: string(lotFile("Bore dia [µm]", d1CandidateMicron))}}
	add("n19", "the candidate as deviations in micrometres", microns, two("\nunit = \"µm\"\nvalues = \"deviation\""), d1.with(func(w *layoutWant) { w.warnings = []string{"converted"} }))
	add("n19-ask", "the same without a word on it", microns, two(""), layoutWant{fault: []string{"cand.csv!B1", `"µm"`, "0.001"}})

	for name, text := range map[string]string{"full-width": "１１．９９７", "arabic": "11٫997", "brackets": "(11.997)", "hidden": "11.9\u200b97"} {
		add("n28-"+name, "a number in other characters", one(withCandidate3(text)), plain, unread)
	}
	rounded := long()
	for _, row := range rounded[1:] {
		row[2] = styled{string(row[2].(num)), 3}
	}
	add("n35", "shown with two decimals, stored with three", one(rounded), plain, d1.with(func(w *layoutWant) { w.said = []string{"12 cells hold more decimals than the number format shows"} }))
	percent := long()
	for _, row := range percent[1:] {
		row[2] = styled{string(row[2].(num)), 2}
	}
	add("n36", "shown in percent", one(percent), plain, d1.with(func(w *layoutWant) { w.warnings = []string{"percent-format"} }))
	like := withCandidate3("=HYPERLINK(\"http://127.0.0.1\")")
	like[16][2] = "+12.019"
	add("n44", "texts that look like formulas", one(like), plain, unread)
	return append(append(append(cases, textCases()...), otherCases()...), footCases()...)
}

// textCases are the variants of text files of N27, all with the same readings.
func textCases() []layoutCase {
	var cases []layoutCase
	for name, text := range map[string]string{
		"semicolon": longCSV(";", "."), "tab": longCSV("\t", "."), "comma": strings.Replace(longCSV(",", "."), "Bore dia [mm]", `"Bore dia, mm"`, 1),
		"line-break": strings.Replace(longCSV(",", "."), "Bore dia [mm]", "\"Bore\ndia [mm]\"", 1), "mark": "\ufeff" + longCSV(";", "."),
		"windows": strings.Replace(longCSV(";", "."), "Bore dia [mm]", "\xd8 [\xb5m]", 1), "trailing": strings.ReplaceAll(longCSV(";", "."), "\n", ";\r\n"),
		"last-line": strings.TrimSuffix(longCSV(";", "."), "\n"),
	} {
		want := d1
		if name == "semicolon" || name == "mark" || name == "trailing" || name == "last-line" { // 12.003 between semicolons
			want = d1.with(func(w *layoutWant) {
				w.warnings, w.texts = []string{"decimal-assumed"}, []string{`"12.003" in C2 as 12.003`}
			})
		}
		cases = append(cases, layoutCase{name: cellsDir + "n27-" + name, files: []layoutFile{{name: "own.csv", text: text}}, plan: planFor("own.csv", "", ""), want: want})
	}
	return cases
}

// TestCells reads every case as it is committed, and every file that another program made of it.
func TestCells(t *testing.T) {
	for _, c := range cellCases() {
		t.Run(strings.TrimPrefix(c.name, cellsDir), func(t *testing.T) {
			dir := filepath.Join(layoutsDir, c.name)
			committed := map[string][]byte{"plan.toml": []byte(c.plan)}
			for _, f := range c.files {
				committed[f.name] = f.bytes(t)
			}
			for name, want := range committed {
				if *update {
					if err := os.MkdirAll(dir, 0o755); err != nil {
						t.Fatal(err)
					}
					if err := os.WriteFile(filepath.Join(dir, name), want, 0o644); err != nil {
						t.Fatal(err)
					}
				}
				if got, err := os.ReadFile(filepath.Join(dir, name)); err != nil || !bytes.Equal(got, want) {
					t.Errorf("%s is not what -update writes (%v)", name, err)
				}
			}
			c.check(t, "own.xlsx")
			for _, other := range []string{"openpyxl.xlsx", "libreoffice.xlsx", "libreoffice.ods", "openxlsx.xlsx"} {
				if _, err := os.Stat(filepath.Join(dir, other)); err != nil {
					continue
				}
				t.Run(other, func(t *testing.T) {
					made := c
					made.plan = strings.ReplaceAll(c.plan, "own.xlsx", other)
					for i, w := range made.want.fault {
						made.want.fault[i] = strings.ReplaceAll(w, "own.xlsx", other)
					}
					made.check(t, "own.xlsx")
				})
			}
		})
	}
}
