package importers

import (
	"fmt"
	"strings"
	"testing"
)

// layoutCase is one layout of the catalogue: its files, the plan and what must come of it. The first file is the one that the
// plan names unless it says otherwise.
type layoutCase struct {
	name  string // the directory under testdata/layouts
	shows string
	files []layoutFile
	plan  string // behind the heading that all share
	want  layoutWant
}

type layoutFile struct {
	name   string
	sheets []sheetOf                       // a workbook
	text   string                          // else a text file
	change func(testing.TB, []byte) []byte // of the workbook's bytes
}

// layoutWant is either an error or the readings' counts and means, and what else must hold.
type layoutWant struct {
	fault    []string // words of the error; empty where it must be read
	n        [2]int
	mean     [2]float64 // of the first characteristic
	step     float64    // what each further characteristic adds to the mean
	limits   [3]float64 // lower, target, upper of the first; not looked at where all are 0
	count    int        // characteristics; 1 where 0
	repeats  int
	groups   []string // of the reference, in order of appearance
	warnings []string
	finding  string  // a warning of the comparison
	upper    float64 // the upper 90 % limit of the comparison; 0 where it is not looked at
	said     []string
	texts    []string  // words of the warnings
	refused  bool      // the fault is of the file, not of the plan
	p        float64   // of both one-sided tests, to four digits; 0 where it is not looked at
	spread   float64   // ratio of the standard deviations, to three digits; 0 where it is not looked at
	first    [2]string // text of each lot's first reading; not looked at where empty
}

var d1 = layoutWant{n: [2]int{12, 12}, mean: [2]float64{d1MeanReference, d1MeanCandidate}, upper: 0.01006020125}

func (w layoutWant) with(change func(*layoutWant)) layoutWant {
	change(&w)
	return w
}

// planFor is a plan with the lots of D1 in one file.
func planFor(file, reading, rest string) string {
	return planOf(`lot = "REF-0417"`+"\n"+`file = "`+file+`"`, `lot = "CAND-0931"`+"\n"+`file = "`+file+`"`, reading, rest)
}

func planOf(reference, candidate, reading, rest string) string {
	text := "format = \"lotpair.plan/1\"\n\n[reference]\n" + reference + "\n\n[candidate]\n" + candidate + "\n"
	if reading != "" {
		text += "\n[reading]\n" + reading + "\n"
	}
	return text + "\n[criterion]\nmargin = { absolute = 0.010 }\n" + rest
}

func characteristicOf(lines ...string) string {
	return "\n[[characteristic]]\n" + strings.Join(lines, "\n") + "\n"
}

// wide is D1 a column a lot.
func wide() [][]any {
	rows := [][]any{{"REF-0417", "CAND-0931"}}
	for i := range d1Reference {
		rows = append(rows, []any{num(d1Reference[i]), num(d1Candidate[i])})
	}
	return rows
}

// perLot is one lot of D1 with a part's number.
func perLot(name string, values []string) sheetOf {
	rows := [][]any{{"No.", "Bore dia"}}
	for i, v := range values {
		rows = append(rows, []any{num(fmt.Sprint(i + 1)), num(v)})
	}
	return sheetOf{name: name, rows: rows}
}

// shifted adds a whole number to a reading as text.
func shifted(v string, add int) num {
	var whole int
	var fraction string
	_, _ = fmt.Sscanf(v, "%d.%s", &whole, &fraction)
	return num(fmt.Sprintf("%d.%s", whole+add, fraction))
}

// inspection is an inspection sheet of k characteristics, a row each: the first is D1, each further one 1 more.
func inspection(name string, values []string, k int) sheetOf {
	head := []any{"No", "Characteristic", "Nominal", "Upper tol", "Lower tol", "Gauge"}
	for i := range values {
		head = append(head, num(fmt.Sprint(i+1)))
	}
	rows := [][]any{head}
	for c := range k {
		label := "Bore dia"
		if c > 0 {
			label = fmt.Sprintf("Length %d", c)
		}
		row := []any{num(fmt.Sprint(c + 1)), label, num(fmt.Sprint(12 + c)), num("0.05"), num("-0.05"), "bore gauge 14"}
		for _, v := range values {
			row = append(row, shifted(v, c))
		}
		rows = append(rows, row)
	}
	return sheetOf{name: name, rows: rows}
}

// d2 are the readings of three lots a source; d3 those of two cavities in another mix.
var d2 = []struct{ supplier, lot, values string }{
	{"S1", "L1", "12.001 12.006 11.998 12.004 12.009"},
	{"S1", "L2", "12.013 12.018 12.010 12.015 12.021"},
	{"S1", "L3", "11.991 11.996 11.988 11.994 11.999"},
	{"S2", "L4", "12.012 12.017 12.009 12.014 12.020"},
	{"S2", "L5", "12.002 12.007 11.999 12.005 12.010"},
	{"S2", "L6", "12.020 12.025 12.016 12.022 12.027"},
}

var d3 = []struct{ lot, cavity, values string }{
	{"REF", "1", "5.01 5.02 5.00 5.01 5.02 5.01 5.00 5.02"},
	{"REF", "2", "5.11 5.10 5.12 5.11"},
	{"CAND", "1", "5.01 5.00 5.02 5.01"},
	{"CAND", "2", "5.11 5.12 5.10 5.11 5.12 5.10 5.11 5.12"},
}

func nestedHead() []any {
	return []any{"Supplier", "Lot", "Cavity", "Date", "Operator", "Part", "Value"}
}

func nestedD2() [][]any {
	rows := [][]any{nestedHead()}
	for i, l := range d2 {
		for j, v := range strings.Fields(l.values) {
			rows = append(rows, []any{l.supplier, l.lot, num("1"), fmt.Sprintf("2026-03-%02d", i+1), "ab", num(fmt.Sprint(j + 1)), num(v)})
		}
	}
	return rows
}

func nestedD3() [][]any {
	rows, part := [][]any{nestedHead()}, 0
	for i, l := range d3 {
		if i == 2 {
			part = 0
		}
		for _, v := range strings.Fields(l.values) {
			part++
			rows = append(rows, []any{"S", l.lot, num(l.cavity), "2026-03-01", "ab", num(fmt.Sprint(part)), num(v)})
		}
	}
	return rows
}

// thrice is D1 with three readings a part: the value, 0.001 more and 0.001 less.
func thrice(in func(lot string, part int, values [3]string)) {
	for _, l := range []struct {
		name   string
		values []string
	}{{"REF-0417", d1Reference}, {"CAND-0931", d1Candidate}} {
		for i, v := range l.values {
			x := mustFloat(v)
			in(l.name, i+1, [3]string{v, fmt.Sprintf("%.3f", x+0.001), fmt.Sprintf("%.3f", x-0.001)})
		}
	}
}

func abreast(left, right [][]any, gap int) [][]any {
	var out [][]any
	for i := range max(len(left), len(right)) {
		var row []any
		if i < len(left) {
			row = append(row, left[i]...)
		}
		for len(row) < len(left[0])+gap {
			row = append(row, nil)
		}
		if i < len(right) {
			row = append(row, right[i]...)
		}
		out = append(out, row)
	}
	return out
}
