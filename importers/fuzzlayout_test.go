package importers

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// csvOf is a sheet as a text file.
func csvOf(rows [][]any) string {
	var b strings.Builder
	for _, row := range rows {
		for j, c := range row {
			if j > 0 {
				b.WriteByte(';')
			}
			switch v := c.(type) {
			case string:
				b.WriteString(v)
			case num:
				b.WriteString(string(v))
			}
		}
		b.WriteByte('\n')
	}
	return b.String()
}

// lineOf is a workbook as lines that a fuzzer can change: "@", the sheet's name, whether it is hidden, its merged cells and its
// hidden columns; then a line a row, cells between tabs: n and a number, f and a formula, an equals sign and its value, d a
// date, p a percentage, w a number shown with two decimals, e an error value, b a truth value, anything else a text; "-" in front hides the row.
func lineOf(sheets []sheetOf) string {
	var b strings.Builder
	for _, s := range sheets {
		hidden := ""
		if s.hidden || s.very {
			hidden = "h"
		}
		fmt.Fprintf(&b, "@%s\t%s\t%s\t%s\n", s.name, hidden, strings.Join(s.merged, ","), strings.Trim(fmt.Sprint(s.cols), "[]"))
		for i, row := range s.rows {
			if i == fuzzRows {
				break
			}
			if s.hide[i+1] {
				b.WriteByte('-')
			}
			for j, cell := range row {
				if j > 0 {
					b.WriteByte('\t')
				}
				switch c := cell.(type) {
				case string:
					b.WriteString("t" + strings.NewReplacer("\t", " ", "\n", " ").Replace(c))
				case num:
					b.WriteString("n" + string(c))
				case styled:
					b.WriteString(" dpw"[c.style:c.style+1] + c.value)
				case formula:
					b.WriteString("f" + c.text + "=" + c.value)
				case failed:
					b.WriteString("e" + string(c))
				case truth:
					b.WriteByte('b')
				}
			}
			b.WriteByte('\n')
		}
	}
	return b.String()
}

// How much of a case a seed holds, and how much of a text is made a workbook.
const fuzzRows, fuzzCols, fuzzSheets = 60, 40, 4

// bookOf makes the workbook of such lines.
func bookOf(text string) []sheetOf {
	var out []sheetOf
	for _, line := range strings.Split(strings.TrimSuffix(text, "\n"), "\n") {
		if rest, ok := strings.CutPrefix(line, "@"); ok {
			if len(out) == fuzzSheets {
				break
			}
			field := strings.Split(rest+"\t\t\t", "\t")
			s := sheetOf{name: field[0], hidden: field[1] != "", hide: map[int]bool{}}
			for _, m := range strings.Split(field[2], ",") {
				a, b, _ := strings.Cut(m, ":")
				_, _, first := cells.Parse(a)
				if _, _, last := cells.Parse(b); first && last {
					s.merged = append(s.merged, m)
				}
			}
			for _, c := range strings.Fields(field[3]) {
				col := 0
				if _, err := fmt.Sscan(c, &col); err == nil && col > 0 && col <= fuzzCols {
					s.cols = append(s.cols, col)
				}
			}
			out = append(out, s)
			continue
		}
		if len(out) == 0 || len(out[len(out)-1].rows) == fuzzRows {
			continue
		}
		s := &out[len(out)-1]
		line, hide := strings.CutPrefix(line, "-")
		if hide {
			s.hide[len(s.rows)+1] = true
		}
		var row []any
		for _, c := range strings.Split(line, "\t") {
			if len(row) == fuzzCols {
				break
			}
			row = append(row, cellOf(c))
		}
		s.rows = append(s.rows, row)
	}
	return out
}

func cellOf(c string) any {
	if c == "" {
		return nil
	}
	number := func(s string) bool { return isNumber(s) && !strings.ContainsAny(s, "<&, ") }
	switch rest := c[1:]; c[0] {
	case 'n':
		if number(rest) {
			return num(rest)
		}
	case 'd', 'p', 'w':
		if number(rest) {
			return styled{rest, strings.IndexByte(" dpw", c[0])}
		}
	case 'f':
		if i := strings.LastIndexByte(rest, '='); i >= 0 && (number(rest[i+1:]) || rest[i+1:] == "") {
			return formula{rest[:i], rest[i+1:]}
		}
	case 'e':
		return failed("#DIV/0!")
	case 'b':
		return truth(true)
	case 't':
		return rest
	}
	return c
}

// What a case is written as for the fuzzer gives the case's workbook again.
func TestFuzzBook(t *testing.T) {
	for _, c := range layoutCases() {
		for _, f := range c.files {
			if f.sheets == nil || len(f.sheets) > fuzzSheets || strings.Contains(fmt.Sprint(f.sheets), "\n") {
				continue
			}
			again := bookOf(lineOf(f.sheets))
			if text := lineOf(again); text != lineOf(f.sheets) {
				t.Errorf("%s: got\n%s\nwant\n%s", c.name, text, lineOf(f.sheets))
			}
		}
	}
}

// FuzzLayouts reads workbooks and texts in every layout: nothing panics, every cell is accounted for, and every error is one of ours.
func FuzzLayouts(f *testing.F) {
	for i, c := range append(layoutCases(), cellCases()...) {
		for _, file := range c.files {
			switch {
			case file.sheets == nil:
				f.Add(uint8(i), file.text)
			case c.want.count < 64:
				f.Add(uint8(0), lineOf(file.sheets))
				f.Add(uint8(128+i%10), lineOf(file.sheets))
				f.Add(uint8(0), csvOf(file.sheets[0].rows))
			}
		}
	}
	for i, rows := range [][][]any{long()[:4], wide()[:5], inspection("", d1Reference[:3], 2).rows, form("", d1Reference[:3]).rows, results("", d1Reference[:3]).rows, tidyRows(nil, nil)[:9]} {
		f.Add(uint8(i), csvOf(rows))
		f.Add(uint8(i), lineOf([]sheetOf{{name: "Data", rows: rows}}))
	}
	f.Fuzz(func(t *testing.T, which uint8, text string) {
		layout := append([]string{""}, Layouts...)[int(which)%5]
		name, data := "d1.csv", []byte(text)
		if strings.HasPrefix(text, "@") {
			name, data = "d1.xlsx", xlsx(t, bookOf(text)...)
		}
		in, err := Inspect(name, data, "", layout)
		if err != nil {
			wantOurs(t, err)
			return
		}
		if _, err := LoadPlan("plan.toml", []byte(in.Plan())); err != nil {
			wantOurs(t, err)
		}
		if len(in.Lots) < 2 {
			return
		}
		p := plan(name, func(p *qa.Plan) {
			p.Reference.Lot, p.Candidate.Lot, p.Reading.Layout = in.Lots[0].Lot, in.Lots[1].Lot, in.Layout
			if len(in.mapping.tables) > 1 {
				p.Reference.Sheet, p.Candidate.Sheet = in.mapping.Lots[0].Sheet, in.mapping.Lots[1].Sheet
			}
			if int(which) >= 128 {
				p.Reading.PartColumn, p.Reading.HeaderRow = "Part", in.HeaderRow
			}
		})
		r, err := Read(p, files(map[string][]byte{name: data}))
		if err != nil {
			wantOurs(t, err)
			return
		}
		reconcile(t, r, map[string][]byte{name: data}, "")
		for i, l := range []qa.Lot{r.Reference, r.Candidate} { // what inspect counted is what is read
			for _, s := range l.Series {
				if n := len(s.Values()) + s.Repeats; which < 128 && s.NonDetects == 0 && n > l.Rows {
					t.Errorf("lot %d, %s: got %d readings of %d rows", i, s.Characteristic, n, l.Rows)
				}
			}
		}
	})
}

// wantOurs checks that an error is a *PlanError or a *FileError with a place and words in each fault.
func wantOurs(t *testing.T, err error) {
	t.Helper()
	_, plan := errors.AsType[*PlanError](err)
	_, file := errors.AsType[*FileError](err)
	if !plan && !file {
		t.Fatalf("got %T %v, want a *PlanError or a *FileError", err, err)
	}
	for _, f := range faultsOf(err) {
		if f.Place == "" || f.Text == "" {
			t.Fatalf("got the fault %+v, want a place and words", f)
		}
	}
}
