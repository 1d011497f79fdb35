package importers

import (
	"encoding/binary"
	"fmt"
	"math"
	"strings"
	"testing"

	"lotpair/qa"
)

// normal are n readings spaced as those of a normal distribution, to so many decimals; those beyond the limits are left out.
func normal(n int, mean, sd float64, decimals int, lower, upper float64) []string {
	var out []string
	for i := range n {
		v := mean + sd*math.Sqrt2*math.Erfinv(2*(float64(i)+0.5)/float64(n)-1)
		if v >= lower && v <= upper {
			out = append(out, fmt.Sprintf("%.*f", decimals, v))
		}
	}
	return out
}

// lotsOf is a row a part of two lots with a measurement.
func lotsOf(heading string, reference, candidate []string) [][]any {
	rows := [][]any{{"Lot", "Part", heading}}
	for i, v := range reference {
		rows = append(rows, []any{"REF-0417", num(itoa(i + 1)), num(v)})
	}
	for i, v := range candidate {
		rows = append(rows, []any{"CAND-0931", num(itoa(i + 1)), num(v)})
	}
	return rows
}

func meanText(values []string) float64 {
	sum := 0.0
	for _, v := range values {
		sum += mustFloat(v)
	}
	return sum / float64(len(values))
}

// D4: equal means and twice the spread, 10.000 ±0.040 (computed in R 4: difference 0.001, ratio of standard deviations 1.9953, p of the
// two one-sided tests at ±0.008 0.04676).
var (
	d4Reference = strings.Fields("9.9786 9.9835 9.9861 9.988 9.9896 9.9909 9.9921 9.9932 9.9942 9.9952 9.9961 9.997 9.9979 9.9987 9.9996 " +
		"10.0004 10.0013 10.0021 10.003 10.0039 10.0048 10.0058 10.0068 10.0079 10.0091 10.0104 10.012 10.0139 10.0165 10.0214")
	d4Candidate = strings.Fields("9.9583 9.968 9.9732 9.9771 9.9802 9.9829 9.9853 9.9875 9.9895 9.9914 9.9933 9.995 9.9968 9.9985 10.0002 " +
		"10.0018 10.0035 10.0052 10.007 10.0087 10.0106 10.0125 10.0145 10.0167 10.0191 10.0218 10.0249 10.0288 10.034 10.0437")
)

// otherCases are the rest of the nasty ones: spellings, orders, attributes, files that are not what they are called, plans.
func otherCases() []layoutCase {
	one := func(rows [][]any) []layoutFile {
		return []layoutFile{{name: "own.xlsx", sheets: []sheetOf{{name: "Data", rows: rows}}}}
	}
	plain := planFor("own.xlsx", "", "")
	var cases []layoutCase
	add := func(name, shows string, files []layoutFile, plan string, want layoutWant) {
		cases = append(cases, layoutCase{name: cellsDir + name, shows: shows, files: files, plan: plan, want: want})
	}

	spelt := long()
	for i, name := range map[int]string{5: "REF-0417\u00a0", 6: " REF-0417  ", 7: "ref-0417 ", 8: "ref-0417", 9: "REF\u20110417", 10: "REF-0147"} {
		spelt[i][0] = name
	}
	left := append(append([]string{}, d1Reference[:6]...), d1Reference[10:]...)
	add("n18", "a lot in several spellings: white space is joined, the others are told with their rows", one(spelt), plain, layoutWant{
		n: [2]int{8, 12}, mean: [2]float64{meanText(left), d1MeanCandidate}, warnings: []string{"lot-spellings"}, texts: []string{`"ref-0417" beside "REF-0417" (2 rows from A8)`, `"REF-0147" beside`, "1 row from A10"},
	})

	times := func(clock func(i int) any) [][]any {
		rows := long()
		rows[0] = append(rows[0], "Measured at")
		for i := range d1Reference {
			rows[i+1] = append(rows[i+1], clock(11-i))
			rows[i+13] = append(rows[i+13], clock(i))
		}
		return rows
	}
	stamps := times(func(i int) any { return fmt.Sprintf("2026-03-02 08:%02d:00", i) })
	byTime := d1.with(func(w *layoutWant) {
		w.first, w.said = [2]string{"12.001", "12.008"}, []string{"put in the order of"}
	})
	order := planFor("own.xlsx", `order_column = "Measured at"`, "")
	add("n23", "times downwards in one lot and upwards in the other: read in the order of time", one(stamps), order, byTime)
	add("n37", "times of day in a workbook that counts days from 1904", []layoutFile{{name: "own.xlsx", sheets: []sheetOf{
		{name: "Data", date1904: true, rows: times(func(i int) any { return styled{fmt.Sprintf("0.%04d", 83+i), 1} })},
	}}}, order, byTime)

	marks := [][]any{{"Lot", "Part", "Thread"}}
	for i := range 125 {
		marks = append(marks, []any{"REF-0417", num(itoa(i + 1)), "OK"})
	}
	for i := range 125 {
		marks = append(marks, []any{"CAND-0931", num(itoa(i + 1)), map[bool]string{false: "OK", true: "NOK"}[i == 60]})
	}
	add("n26", "OK and NOK counted (D6): 0 of 125 and 1 of 125", one(marks), planFor("own.xlsx", "", characteristicOf(`name = "Thread"`, `kind = "attribute"`, `failed = ["NOK"]`)), layoutWant{n: [2]int{125, 125}, mean: [2]float64{0, 0.008}})
	add("n26-ask", "the same without a word on it: no measurements", one(marks), plain, layoutWant{fault: []string{"no column of measurements", "attribute"}})
	add("n26-counts", "counts of parts and no parts: stop", one([][]any{{"Lot", "inspected", "nonconforming"}, {"REF-0417", num("125"), num("0")}, {"CAND-0931", num("125"), num("1")}}), plain, layoutWant{fault: []string{`"inspected"`, `"nonconforming"`, "a row a part"}})

	add("d4", "equal means, twice the spread: equivalent in the mean at 0.008, and the spread stands beside it", one(lotsOf("Bore dia", d4Reference, d4Candidate)), strings.Replace(plain, "0.010", "0.008", 1)+characteristicOf(`name = "Bore dia"`, "lower = 9.96", "target = 10", "upper = 10.04"), layoutWant{
		n: [2]int{30, 30}, mean: [2]float64{meanText(d4Reference), meanText(d4Candidate)}, spread: 1.9953, p: 0.04676,
	})
	add("n27-utf16", "UTF-16 with a mark", []layoutFile{{name: "own.csv", text: string(utf16Of(longCSV(";", "."), binary.LittleEndian, true))}}, planFor("own.csv", "", ""), d1)

	words := [][]any{{"Lot", "x"}}
	for i, v := range d5Reference {
		words = append(words, []any{"REF-0417", map[bool]any{false: v, true: "BDL"}[i == 2]})
	}
	for i, v := range d5Candidate {
		words = append(words, []any{"CAND-0931", map[bool]any{false: v, true: "n.n."}[i == 1]})
	}
	words = append(words, []any{"CAND-0931", ">100"})
	add("n12-words", "non-detects in words, and one above a limit: no verdict", one(words), strings.Replace(plain, "0.010", "0.030", 1), layoutWant{n: [2]int{6, 5}, mean: [2]float64{0.44 / 6, 0.08}, finding: qa.WarnNonDetects})

	file := func(name string, change func(testing.TB, []byte) []byte) []layoutFile {
		return []layoutFile{{name: name, sheets: []sheetOf{{name: "Data", rows: long()}}, change: change}}
	}
	refused := func(words ...string) layoutWant { return layoutWant{refused: true, fault: words} }
	const ole = "\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
	add("n38-old", "an old .xls called .xlsx", []layoutFile{{name: "own.xlsx", text: ole + inUTF16("Workbook")}}, plain, refused("old .xls", "save it as .xlsx"))
	add("n38-password", "a workbook under a password", []layoutFile{{name: "own.xlsx", text: ole + inUTF16("EncryptedPackage")}}, plain, refused("encrypted with a password", "without a password"))
	add("n38-text", "a text called .xlsx", []layoutFile{{name: "own.xlsx", text: longCSV(",", ".")}}, plain, refused("a text file", ".csv"))
	add("n38-cut", "a workbook cut off", file("own.xlsx", func(_ testing.TB, b []byte) []byte { return b[:len(b)/2] }), plain, refused("damaged or cut-off", "copy the file again"))
	add("n38-entity", "a sheet with an external entity: nothing is fetched", file("own.xlsx", func(t testing.TB, b []byte) []byte {
		return repacked(t, b, "xl/worksheets/sheet1.xml", func(s string) string {
			return strings.Replace(strings.Replace(s, "<worksheet ", `<!DOCTYPE worksheet [<!ENTITY x SYSTEM "file:///etc/hostname">]><worksheet `, 1), "<v>12.003</v>", "<v>&x;</v>", 1)
		})
	}), plain, refused("xl/worksheets/sheet1.xml"))
	add("n38-macros", "a workbook with macros: read, the macros are not run", file("own.xlsm", func(t testing.TB, b []byte) []byte { return withPart(t, b, "xl/vbaProject.bin", "Sub Auto_Open()") }), planFor("own.xlsm", "", ""), d1.with(func(w *layoutWant) { w.said = []string{"macros; they are neither run nor read"} }))

	none := math.Inf(1)
	// the ratio of standard deviations computed with SciPy and NumPy
	a, b := normal(30, 100, 1, 3, -none, none), normal(8, 100, 2, 3, -none, none)
	add("n39", "30 readings of spread 1 against 8 of spread 2: Welch, the ratio is shown", one(lotsOf("Length", a, b)), plain, layoutWant{n: [2]int{30, 8}, mean: [2]float64{meanText(a), meanText(b)}, spread: 1.98058})
	flat := []string{}
	for range d1Candidate {
		flat = append(flat, "12.01")
	}
	add("n40", "a lot of equal readings: no variation, no p-value of 0", one(lotsOf("Bore dia", d1Reference, flat)), plain, layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, 12.01}, finding: qa.WarnNoVariation})
	cut := normal(230, 100, 5, 2, 92, 108)
	add("n41", "lots that end at their limits: they may have been sorted", one(lotsOf("Length", normal(200, 100, 3, 2, -none, none), cut)), planFor("own.xlsx", "", characteristicOf(`name = "Length"`, "lower = 92", "upper = 108")), layoutWant{
		n: [2]int{200, len(cut)}, mean: [2]float64{100, meanText(cut)}, finding: qa.WarnCutOff,
	})

	margin := func(text string) string { return strings.Replace(plain, "absolute = 0.010", text, 1) }
	add("n43-negative", "a margin below 0", one(long()), margin("absolute = -0.02"), layoutWant{fault: []string{"criterion.margin.absolute", "above 0"}})
	add("n43-comma", "a margin with a decimal comma", one(long()), margin("absolute = 0,02"), layoutWant{fault: []string{"plan.toml:"}})
	add("n43-order", "a lower margin above the upper", one(long()), margin("lower = 0.02, upper = -0.02"), layoutWant{fault: []string{"below the upper"}})
	add("n43-wide", "a margin wider than the tolerance: told", one(long()), margin("absolute = 0.2")+characteristicOf(`name = "Bore dia"`, "lower = 11.95", "upper = 12.05"), d1.with(func(w *layoutWant) { w.finding = qa.WarnMarginTolerance }))
	return cases
}
