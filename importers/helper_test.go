package importers

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// The readings of D1: 12 parts a lot, bore diameter in mm, nominal 12.000, limits 11.950 and 12.050. Means and standard
// deviations computed in R 4.2.2.
var (
	d1Reference = strings.Fields("12.003 11.994 12.011 12.007 11.998 12.015 12.002 12.009 11.989 12.006 12.012 12.001")
	d1Candidate = strings.Fields("12.008 12.013 11.997 12.019 12.004 12.011 11.992 12.016 12.006 12.001 12.022 12.009")
)

const (
	d1MeanReference = 12.0039166667
	d1MeanCandidate = 12.0081666667
)

// The kinds of cells that a test sheet is made of, beside string (inline text) and num.
type (
	num     string                       // a number as stored
	formula struct{ text, value string } // a formula with a stored number; none where the value is empty
	styled  struct {                     // a number under a number format
		value string
		style int // 1 date, 2 percent, 3 two decimals
	}
	failed string // an error value
	truth  bool
)

// sheetOf is one sheet of a test workbook.
type sheetOf struct {
	name     string
	rows     [][]any
	hidden   bool
	very     bool   // very hidden: no menu shows it
	cols     []int  // hidden columns
	dim      string // the dimension that the sheet declares; the largest there is where empty
	filter   string // of the rows, such as A1:D25
	merged   []string
	date1904 bool         // of the workbook, on its first sheet
	rowsAt   int          // number of the first row; 1 where 0
	hide     map[int]bool // rows by number
}

// xlsx writes a workbook with nothing but what the test needs.
func xlsx(t testing.TB, sheets ...sheetOf) []byte {
	t.Helper()
	const (
		head     = `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + "\n"
		main     = `xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"`
		relation = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
		packages = "http://schemas.openxmlformats.org/package/2006"
		types    = "application/vnd.openxmlformats-officedocument.spreadsheetml."
	)
	var book, rels, content strings.Builder
	parts := map[string]string{
		"_rels/.rels": head + `<Relationships xmlns="` + packages + `/relationships"><Relationship Id="r1" Type="` + relation + `/officeDocument" Target="xl/workbook.xml"/></Relationships>`,
		"xl/styles.xml": head + `<styleSheet ` + main + `><numFmts count="1"><numFmt numFmtId="170" formatCode="0.00"/></numFmts>` +
			`<fonts count="1"><font/></fonts><fills count="2"><fill><patternFill patternType="none"/></fill><fill><patternFill patternType="gray125"/></fill></fills>` +
			`<borders count="1"><border/></borders><cellStyleXfs count="1"><xf numFmtId="0"/></cellStyleXfs>` +
			`<cellXfs count="4"><xf numFmtId="0"/><xf numFmtId="16"/><xf numFmtId="10"/><xf numFmtId="170"/></cellXfs></styleSheet>`,
	}
	from1904 := ""
	for i, s := range sheets {
		if s.date1904 {
			from1904 = `<workbookPr date1904="1"/>`
		}
		state := ""
		if s.hidden {
			state = ` state="hidden"`
		}
		if s.very {
			state = ` state="veryHidden"`
		}
		fmt.Fprintf(&book, `<sheet name="%s" sheetId="%d"%s r:id="s%d"/>`, escape(s.name), i+1, state, i)
		fmt.Fprintf(&rels, `<Relationship Id="s%d" Type="%s/worksheet" Target="worksheets/sheet%d.xml"/>`, i, relation, i+1)
		fmt.Fprintf(&content, `<Override PartName="/xl/worksheets/sheet%d.xml" ContentType="%sworksheet+xml"/>`, i+1, types)
		parts[fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1)] = head + strings.Replace(sheetXML(s), "<worksheet>", "<worksheet "+main+">", 1)
	}
	fmt.Fprintf(&rels, `<Relationship Id="st" Type="%s/styles" Target="styles.xml"/>`, relation)
	parts["[Content_Types].xml"] = head + `<Types xmlns="` + packages + `/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>` +
		`<Override PartName="/xl/workbook.xml" ContentType="` + types + `sheet.main+xml"/><Override PartName="/xl/styles.xml" ContentType="` + types + `styles+xml"/>` + content.String() + `</Types>`
	parts["xl/workbook.xml"] = head + `<workbook ` + main + ` xmlns:r="` + relation + `">` + from1904 + `<sheets>` + book.String() + `</sheets></workbook>`
	parts["xl/_rels/workbook.xml.rels"] = head + `<Relationships xmlns="` + packages + `/relationships">` + rels.String() + `</Relationships>`
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for _, name := range []string{"[Content_Types].xml", "_rels/.rels", "xl/workbook.xml", "xl/_rels/workbook.xml.rels", "xl/styles.xml"} {
		write(t, z, name, parts[name])
	}
	for i := range sheets {
		name := fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1)
		write(t, z, name, parts[name])
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func write(t testing.TB, z *zip.Writer, name, text string) {
	t.Helper()
	w, err := z.CreateHeader(&zip.FileHeader{Name: name, Method: zip.Store}) // the same bytes with every version of the compressor
	if err != nil {
		t.Fatal(err)
	}
	if _, err := w.Write([]byte(text)); err != nil {
		t.Fatal(err)
	}
}

func escape(s string) string {
	var b bytes.Buffer
	if err := xml.EscapeText(&b, []byte(s)); err != nil {
		panic(err)
	}
	return b.String()
}

func sheetXML(s sheetOf) string {
	var b strings.Builder
	dim := "A1:XFD1048576" // wrong, as some programs write it
	if s.dim != "" {
		dim = s.dim
	}
	b.WriteString(`<worksheet><dimension ref="` + dim + `"/>`)
	if len(s.cols) > 0 {
		b.WriteString(`<cols>`)
		for _, c := range s.cols {
			fmt.Fprintf(&b, `<col min="%d" max="%d" width="9" hidden="1"/>`, c, c)
		}
		b.WriteString(`</cols>`)
	}
	b.WriteString(`<sheetData>`)
	for i, row := range s.rows {
		n := i + max(1, s.rowsAt)
		hidden := ""
		if s.hide[n] {
			hidden = ` hidden="1"`
		}
		fmt.Fprintf(&b, `<row r="%d"%s>`, n, hidden)
		for j, cell := range row {
			at := cells.Name(j+1, n)
			switch c := cell.(type) {
			case nil:
			case string:
				fmt.Fprintf(&b, `<c r="%s" t="inlineStr"><is><t xml:space="preserve">%s</t></is></c>`, at, escape(c))
			case num:
				fmt.Fprintf(&b, `<c r="%s"><v>%s</v></c>`, at, c)
			case styled:
				fmt.Fprintf(&b, `<c r="%s" s="%d"><v>%s</v></c>`, at, c.style, c.value)
			case formula:
				value := ""
				if c.value != "" {
					value = "<v>" + c.value + "</v>"
				}
				fmt.Fprintf(&b, `<c r="%s"><f>%s</f>%s</c>`, at, escape(c.text), value)
			case failed:
				fmt.Fprintf(&b, `<c r="%s" t="e"><v>%s</v></c>`, at, c)
			case truth:
				fmt.Fprintf(&b, `<c r="%s" t="b"><v>1</v></c>`, at)
			}
		}
		b.WriteString(`</row>`)
	}
	b.WriteString(`</sheetData>`)
	if s.filter != "" {
		fmt.Fprintf(&b, `<autoFilter ref="%s"/>`, s.filter)
	}
	if len(s.merged) > 0 {
		b.WriteString(`<mergeCells>`)
		for _, m := range s.merged {
			fmt.Fprintf(&b, `<mergeCell ref="%s"/>`, m)
		}
		b.WriteString(`</mergeCells>`)
	}
	b.WriteString(`</worksheet>`)
	return b.String()
}

// long is D1 a row a part: lot, part, bore.
func long() [][]any {
	rows := [][]any{{"Lot", "Part", "Bore dia [mm]"}}
	for i, v := range d1Reference {
		rows = append(rows, []any{"REF-0417", num(fmt.Sprint(i + 1)), num(v)})
	}
	for i, v := range d1Candidate {
		rows = append(rows, []any{"CAND-0931", num(fmt.Sprint(i + 1)), num(v)})
	}
	return rows
}

// longCSV is the same as text.
func longCSV(delimiter, decimal string) string {
	var b strings.Builder
	for _, row := range long() {
		for j, c := range row {
			if j > 0 {
				b.WriteString(delimiter)
			}
			text := fmt.Sprint(c)
			if _, ok := c.(num); ok {
				text = strings.Replace(text, ".", decimal, 1)
			}
			b.WriteString(text)
		}
		b.WriteByte('\n')
	}
	return b.String()
}

// plan is a plan for D1 in one file; change may change it.
func plan(file string, change ...func(*qa.Plan)) qa.Plan {
	m := 0.01
	p := qa.Plan{
		Format:    qa.PlanFormat,
		Reference: qa.LotPlan{Lot: "REF-0417", File: file},
		Candidate: qa.LotPlan{Lot: "CAND-0931", File: file},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &m}},
	}
	for _, f := range change {
		f(&p)
	}
	return p
}

func files(all map[string][]byte) func(string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		data, ok := all[name]
		if !ok {
			return nil, os.ErrNotExist
		}
		return data, nil
	}
}

// read reads one file for both lots.
func read(t testing.TB, p qa.Plan, data []byte) (qa.Readings, error) {
	t.Helper()
	if faults := p.Validate(); len(faults) > 0 {
		t.Fatalf("the test's plan: %v", faults)
	}
	r, err := Read(p, files(map[string][]byte{p.Reference.File: data}))
	if err == nil {
		reconcile(t, r, map[string][]byte{p.Reference.File: data}, p.Reading.Encoding)
	}
	return r, err
}

func mustRead(t testing.TB, p qa.Plan, data []byte) qa.Readings {
	t.Helper()
	r, err := read(t, p, data)
	if err != nil {
		t.Fatalf("got the error %v, want readings", err)
	}
	return r
}

// reconcile checks that every cell of the files is accounted for and that each series adds up.
func reconcile(t testing.TB, r qa.Readings, data map[string][]byte, enc string) {
	t.Helper()
	blanks := 0
	for _, l := range []qa.Lot{r.Reference, r.Candidate} {
		for _, s := range l.Series {
			used := len(s.Values())
			if sum := used + s.Excluded() + s.Missing + s.NonDetects + s.Unread + s.Repeats; sum != s.Rows {
				t.Errorf("%s %s: got %d used + %d left out + %d missing + %d non-detects + %d unread + %d repeats, want %d rows", l.Name, s.Characteristic, used, s.Excluded(), s.Missing, s.NonDetects, s.Unread, s.Repeats, s.Rows)
			}
		}
	}
	for _, a := range r.Account {
		if a.As == asBlank {
			blanks += a.Cells
		}
	}
	counted := -blanks
	for _, a := range r.Account {
		counted += a.Cells
		if a.As == "" || a.Cells <= 0 {
			t.Errorf("account: got %+v, want a part and a count", a)
		}
	}
	want := 0
	emptyTexts := map[string]bool{} // stored cells that hold a text without a letter: they are no blank cells
	for name, d := range data {
		b, err := Open(name, d, enc)
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range b.Sheets {
			for _, row := range s.Rows {
				for _, c := range row.Cells {
					if stored(c) {
						want++
						emptyTexts[qa.Source{File: name, Sheet: s.Name, Cell: cells.Name(c.Col, c.Row)}.String()] = c.Text == ""
					}
				}
			}
		}
	}
	if counted != want {
		t.Errorf("account: got %d cells, want %d: %+v", counted, want, r.Account)
	}
	listed := 0
	for _, e := range r.Ledger {
		if e.TakenAs == qa.TakenMissing && e.Source.Text == "" && !emptyTexts[e.Source.String()] {
			listed++
		}
	}
	if listed != blanks {
		t.Errorf("ledger: got %d blank cells, want %d as in the account", listed, blanks)
	}
}

// wantLots checks counts and means of the first characteristic.
func wantLots(t testing.TB, r qa.Readings, nRef int, meanRef float64, nCand int, meanCand float64) {
	t.Helper()
	for _, w := range []struct {
		lot  qa.Lot
		n    int
		mean float64
	}{{r.Reference, nRef, meanRef}, {r.Candidate, nCand, meanCand}} {
		if len(w.lot.Series) == 0 {
			t.Fatalf("lot %s: got no series", w.lot.Name)
		}
		v := w.lot.Series[0].Values()
		if len(v) != w.n {
			t.Errorf("lot %s: got n = %d, want %d", w.lot.Name, len(v), w.n)
			continue
		}
		if m := meanOf(v); math.Abs(m-w.mean) > 1e-10 {
			t.Errorf("lot %s: got the mean %.12g, want %.12g", w.lot.Name, m, w.mean)
		}
	}
}

func wantD1(t testing.TB, r qa.Readings) {
	t.Helper()
	wantLots(t, r, 12, d1MeanReference, 12, d1MeanCandidate)
}

// wantPlanError checks that the error is a *PlanError whose text holds every one of the words.
func wantPlanError(t testing.TB, err error, words ...string) {
	t.Helper()
	if e, ok := errors.AsType[*PlanError](err); !ok {
		t.Fatalf("got the error %v (%T), want a *PlanError", err, e)
	}
	wantWords(t, err.Error(), words...)
}

func wantFileError(t testing.TB, err error, words ...string) {
	t.Helper()
	if _, ok := errors.AsType[*FileError](err); !ok {
		t.Fatalf("got the error %v (%T), want a *FileError", err, err)
	}
	wantWords(t, err.Error(), words...)
}

func wantWords(t testing.TB, text string, words ...string) {
	t.Helper()
	for _, w := range words {
		if !strings.Contains(text, w) {
			t.Errorf("got %q, want it to hold %q", text, w)
		}
	}
}

func wantWarning(t testing.TB, r qa.Readings, code string, words ...string) {
	t.Helper()
	for _, w := range r.Warnings {
		if w.Code == code {
			wantWords(t, w.Text, words...)
			return
		}
	}
	t.Errorf("got the warnings %v, want one with the code %q", r.Warnings, code)
}

// summaries counts the ledger's entries by what they were taken as.
func entries(r qa.Readings, as qa.TakenAs) []qa.Entry {
	var out []qa.Entry
	for _, e := range r.Ledger {
		if e.TakenAs == as {
			out = append(out, e)
		}
	}
	return out
}
