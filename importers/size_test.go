package importers

import (
	"archive/zip"
	"bytes"
	"fmt"
	"strconv"
	"strings"
	"testing"
	"time"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// within says when something that must finish in a test took longer than a person would wait.
const within = 60 * time.Second // on the slowest machine; a tenth of it on a usual one

// largeBook is a workbook whose only sheet is written as it is: too large to be kept as rows.
func largeBook(t testing.TB, sheet func(*bytes.Buffer)) []byte {
	t.Helper()
	small := xlsx(t, sheetOf{name: "Data"})
	whole, err := zip.NewReader(bytes.NewReader(small), int64(len(small)))
	if err != nil {
		t.Fatal(err)
	}
	var text, b bytes.Buffer
	sheet(&text)
	z := zip.NewWriter(&b)
	for _, f := range whole.File {
		if f.Name != "xl/worksheets/sheet1.xml" {
			if err := z.Copy(f); err != nil {
				t.Fatal(err)
			}
		}
	}
	w, err := z.Create("xl/worksheets/sheet1.xml")
	if err != nil {
		t.Fatal(err)
	}
	if _, err := w.Write(text.Bytes()); err != nil {
		t.Fatal(err)
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

const sheetHead = `<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><dimension ref="A1:B25"/><sheetData>`

// thousandths is a reading of a large book: 12 and some thousandths, other ones in each row and lot.
func thousandths(row, lot int) int { return (row*7919 + lot*13) % 997 }

// wantCells checks that all cells of the sheet are accounted for.
func wantCells(t *testing.T, r qa.Readings, want int) {
	t.Helper()
	n := 0
	for _, a := range r.Account {
		if a.As != asBlank {
			n += a.Cells
		}
	}
	if n != want {
		t.Errorf("got %d cells accounted for, want %d: %+v", n, want, r.Account)
	}
}

// All 16,384 columns: a row a characteristic and a column a part, both lots in one sheet (N29).
func TestReadFullColumns(t *testing.T) {
	const fixed, half = 2, (cells.MaxCol - 2) / 2
	text := func(b *bytes.Buffer, col, row int, s string) {
		fmt.Fprintf(b, `<c r="%s" t="inlineStr"><is><t>%s</t></is></c>`, cells.Name(col, row), s)
	}
	data := largeBook(t, func(b *bytes.Buffer) {
		b.WriteString(sheetHead + `<row r="1">`)
		text(b, fixed+1, 1, "REF-0417")
		text(b, fixed+half+1, 1, "CAND-0931")
		b.WriteString(`</row><row r="2">`)
		text(b, 1, 2, "Characteristic")
		text(b, 2, 2, "Nominal")
		for i := range 2 * half {
			fmt.Fprintf(b, `<c r="%s"><v>%d</v></c>`, cells.Name(fixed+1+i, 2), i%half+1)
		}
		b.WriteString(`</row>`)
		for k := range 3 {
			fmt.Fprintf(b, `<row r="%d">`, 3+k)
			text(b, 1, 3+k, []string{"Bore dia", "Length", "Depth"}[k])
			fmt.Fprintf(b, `<c r="B%d"><v>12</v></c>`, 3+k)
			for i := range 2 * half {
				fmt.Fprintf(b, `<c r="%s"><v>12.%03d</v></c>`, cells.Name(fixed+1+i, 3+k), thousandths(i, k))
			}
			b.WriteString(`</row>`)
		}
		b.WriteString(`</sheetData></worksheet>`)
	})
	begun := time.Now()
	r := mustRead(t, xlsxPlan(), data)
	if took := time.Since(begun); took > within {
		t.Errorf("got %v for all columns, want less than %v", took, within)
	}
	for _, l := range []qa.Lot{r.Reference, r.Candidate} {
		for _, s := range l.Series {
			if n := len(s.Values()); n != half || len(l.Series) != 3 {
				t.Errorf("%s, %s: got n %d of %d characteristics, want %d of 3", l.Name, s.Characteristic, n, len(l.Series), half)
			}
		}
	}
	if x := r.Candidate.Series[0].Readings[half-1]; x.Source.Cell != "XFD3" || x.Part != strconv.Itoa(half) {
		t.Errorf("got the last reading %+v, want it from XFD3", x)
	}
	wantCells(t, r, 2+2+2*half+3*(2+2*half))

	_, err := Open("wide.csv", []byte("Lot;x\nA"+strings.Repeat(";1", cells.MaxCol+1)+"\n"), "")
	wantFileError(t, err, "record 2", "16384", "split the file")
	_, err = Open("wide.xlsx", largeBook(t, func(b *bytes.Buffer) {
		b.WriteString(sheetHead + `<row r="1"><c r="XFE1"><v>1</v></c></row></sheetData></worksheet>`)
	}), "")
	wantFileError(t, err, "XFE1")
	_, err = Open("tall.xlsx", largeBook(t, func(b *bytes.Buffer) {
		b.WriteString(sheetHead + `<row r="1048577"><c r="A1048577"><v>1</v></c></row></sheetData></worksheet>`)
	}), "")
	wantFileError(t, err, "1048577")
}

// A text of as many records as a sheet has rows, and of one more (N29).
func TestReadFullText(t *testing.T) {
	begun := time.Now()
	_, err := Open("tall.csv", []byte("Lot;x\n"+strings.Repeat("A;1\n", cells.MaxRow)), "")
	wantFileError(t, err, "1048576 records", "split the file")
	if took := time.Since(begun); took > within {
		t.Errorf("got %v, want it refused in seconds", took)
	}
	b, err := Open("tall.csv", []byte("Lot;x\n"+strings.Repeat("A;1\n", cells.MaxRow-1)), "")
	if err != nil || len(b.Sheets[0].Rows) != cells.MaxRow {
		t.Errorf("got %v, want all 1048576 records", err)
	}
}

// More fields than cells are read are refused before room is made for them.
func TestReadManyFields(t *testing.T) {
	_, err := Open("many.csv", []byte("Lot;x\n"+strings.Repeat(strings.Repeat("1;", 16000)+"\n", 1+cells.MaxCells/16000)), "")
	wantFileError(t, err, "16784001 fields", "at most 16777216", "split the file")
}

// 64 characteristics of 300 parts in two lots, in each layout (N29).
func TestReadManyCharacteristics(t *testing.T) {
	const count, parts = 64, 300
	name := func(k int) string { return fmt.Sprintf("Length %02d", k+1) }
	value := func(lot, part, k int) num {
		return num(fmt.Sprintf("%d.%03d", 12+k, thousandths(part, lot+2*k)))
	}
	lots := []string{"REF-0417", "CAND-0931"}
	perPart := [][]any{{"Lot", "Part"}}
	tidy := [][]any{{"Lot", "Part", "Characteristic", "Value"}}
	var sheets []sheetOf
	for k := range count {
		perPart[0] = append(perPart[0], name(k))
	}
	for lot, l := range lots {
		head := []any{"No", "Characteristic", "Nominal", "Upper tol", "Lower tol"}
		turned := [][]any{head}
		for k := range count {
			turned = append(turned, []any{num(itoa(k + 1)), name(k), num(itoa(12 + k)), num("1"), num("-1")})
		}
		for i := range parts {
			row := []any{l, num(itoa(i + 1))}
			turned[0] = append(turned[0], num(itoa(i+1)))
			for k := range count {
				row = append(row, value(lot, i, k))
				tidy = append(tidy, []any{l, num(itoa(i + 1)), name(k), value(lot, i, k)})
				turned[k+1] = append(turned[k+1], value(lot, i, k))
			}
			perPart = append(perPart, row)
		}
		sheets = append(sheets, sheetOf{name: l, rows: turned})
	}
	for layout, book := range map[string][]sheetOf{
		"row-per-part": {{name: "Data", rows: perPart}}, "a row a reading": {{name: "Data", rows: tidy}}, "row-per-characteristic": sheets,
	} {
		data := xlsx(t, book...)
		begun := time.Now()
		r := mustRead(t, xlsxPlan(func(p *qa.Plan) {
			if len(book) == 2 {
				p.Reference.Sheet, p.Candidate.Sheet = lots[0], lots[1]
			}
		}), data)
		if took := time.Since(begun); took > within {
			t.Errorf("%s: got %v, want less than %v", layout, took, within)
		}
		if len(r.Characteristics) != count {
			t.Fatalf("%s: got %d characteristics, want %d", layout, len(r.Characteristics), count)
		}
		reconcile(t, r, map[string][]byte{"d1.xlsx": data}, "")
		for lot, l := range []qa.Lot{r.Reference, r.Candidate} {
			for k, s := range l.Series {
				if s.Characteristic != name(k) || len(s.Readings) != parts {
					t.Fatalf("%s, %s: got n %d of %s, want %d of %s", layout, l.Name, len(s.Readings), s.Characteristic, parts, name(k))
				}
				for i, x := range s.Readings {
					if x.Source.Text != string(value(lot, i, k)) || x.Part != itoa(i+1) {
						t.Fatalf("%s: got %+v, want %s of part %d", layout, x, value(lot, i, k), i+1)
					}
				}
			}
		}
	}
}
