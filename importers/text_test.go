package importers

import (
	"encoding/binary"
	"fmt"
	"strings"
	"testing"
	"unicode/utf16"

	"lotpair/importers/cells"
	"lotpair/qa"
)

func utf16Of(s string, order binary.ByteOrder, mark bool) []byte {
	units := utf16.Encode([]rune(s))
	if mark {
		units = append([]uint16{0xfeff}, units...)
	}
	b := make([]byte, 2*len(units))
	for i, u := range units {
		order.PutUint16(b[2*i:], u)
	}
	return b
}

func TestReadText(t *testing.T) { // N27: all the same readings
	comma := func(p *qa.Plan) { p.Reading.Decimal = "," }
	for _, tt := range []struct {
		name   string
		file   string
		data   string
		change func(*qa.Plan)
	}{
		{"comma", "d1.csv", longCSV(",", "."), nil},
		{"semicolon and decimal comma", "d1.csv", longCSV(";", ","), comma},
		{"tab", "d1.txt", longCSV("\t", "."), nil},
		{"CR LF", "d1.csv", strings.ReplaceAll(longCSV(",", "."), "\n", "\r\n"), nil},
		{"CR", "d1.csv", strings.ReplaceAll(longCSV(",", "."), "\n", "\r"), nil},
		{"no last line end", "d1.csv", strings.TrimSuffix(longCSV(",", "."), "\n"), nil},
		{"trailing delimiter", "d1.csv", strings.ReplaceAll(longCSV(";", "."), "\n", ";\n"), nil},
		{"byte order mark", "d1.csv", "\ufeff" + longCSV(",", "."), nil},
		{"UTF-16 little", "d1.csv", string(utf16Of(longCSV(",", "."), binary.LittleEndian, true)), nil},
		{"UTF-16 big", "d1.csv", string(utf16Of(longCSV(",", "."), binary.BigEndian, true)), nil},
		{"UTF-16 as stated", "d1.csv", string(utf16Of(longCSV(",", "."), binary.LittleEndian, false)), func(p *qa.Plan) { p.Reading.Encoding = "utf-16" }},
		{"Windows-1252", "d1.csv", strings.Replace(longCSV(",", "."), "Bore dia", "\xd8 \xb5", 1), nil},
		{"Windows-1252 as stated", "d1.csv", strings.Replace(longCSV(",", "."), "Bore dia", "\xd8 \xb5", 1), func(p *qa.Plan) { p.Reading.Encoding = "windows-1252" }},
		{"quoted heading", "d1.csv", strings.Replace(longCSV(",", "."), "Bore dia [mm]", `"Bore ""dia"", mm"`, 1), nil},
		{"line break in the heading", "d1.csv", strings.Replace(longCSV(",", "."), "Bore dia [mm]", "\"Bore\ndia [mm]\"", 1), nil},
		{"comments", "d1.csv", "# made by hand, 2026\n# \"a;b\n" + longCSV(",", "."), nil},
		{"number sign as heading", "d1.csv", strings.Replace(strings.Replace(longCSV(",", "."), "Lot,Part", "Part,#", 1), "Part,#", "Lot,#", 1), nil},
		{"sep line", "d1.csv", "sep=;\n" + longCSV(";", "."), nil},
		{"title and blank lines", "d1.csv", "Report\n\n" + longCSV(";", "."), nil},
	} {
		change := tt.change
		if change == nil {
			change = func(*qa.Plan) {}
		}
		r, err := read(t, plan(tt.file, change), []byte(tt.data))
		if err != nil {
			t.Errorf("%s: got the error %v", tt.name, err)
			continue
		}
		wantLots(t, r, 12, d1MeanReference, 12, d1MeanCandidate)
		if len(r.Ledger) != 0 {
			t.Errorf("%s: got the ledger %v, want none", tt.name, r.Ledger)
		}
		if t.Failed() {
			t.Fatalf("in the case %q", tt.name)
		}
	}
}

// Cells marked with § stand at the address that follows it.
func TestReadTextPositions(t *testing.T) {
	for _, text := range []string{
		"§A1,§B1\n§A2,§B2\n",
		"# comment\n§A2,§B2\n\n§A4,§B4",
		"§A1;§B1;\r\n\"§A2\";\"§B2\nx;y\"\r\n§A3;§B3\r\n",
		"sep=;\n§A2;§B2,x\n",
		"§A1\t§B1\n\t§B2\n\n\n§A5\t\t§C5\n",
		"§A1,\"§B1 \"\"q\"\"\",§C1\n",
	} {
		b, err := Open("x.csv", []byte(text), "")
		if err != nil {
			t.Errorf("%q: got the error %v", text, err)
			continue
		}
		n := 0
		for _, row := range b.Sheets[0].Rows {
			for _, c := range row.Cells {
				at, marked := strings.CutPrefix(c.Text, "§")
				if !marked {
					continue
				}
				n++
				if !strings.HasPrefix(at, c.Name()) {
					t.Errorf("%q: got %s in %s", text, c.Text, c.Name())
				}
			}
		}
		if want := strings.Count(text, "§"); n != want {
			t.Errorf("%q: got %d marked cells, want %d", text, n, want)
		}
	}
}

func TestOpenTextRefuses(t *testing.T) {
	for _, tt := range []struct {
		name, data, enc string
		words           []string
	}{
		{"a.csv", "", "", []string{"empty file"}},
		{"a.csv", "\n\n", "", []string{"no records"}},
		{"a.csv", "# only\n", "", []string{"no records"}},
		{"a.csv", "lot,x\n\"A,1\n", "", []string{"line 2", "without its end"}},
		{"a.csv", "lot,x\n\"A\"b,1\n", "", []string{"line 2", "closing quote"}},
		{"a.csv", "PK\x03\x04", "", []string{"zip"}},
		{"a.csv", "%PDF-1.7", "", []string{"PDF"}},
		{"a.csv", "\xd0\xcf\x11\xe0\xa1\xb1", "", []string{"old .xls"}},
		{"a.csv", "lot\x00x", "", []string{"control character U+0000"}},
		{"a.csv", "lot,\xb5\n", "utf-8", []string{"line 1", "windows-1252"}},
		{"a.csv", "lot,\x81\n", "", []string{"0x81"}},
		{"a.csv", "\xff\xfel", "", []string{"odd number"}},
		{"a.csv", "\xff\xfe\x00\xd8x\x00", "", []string{"half a character"}},
		{"a.csv", "\xef\xbb\xbflot", "utf-16", []string{"byte order mark"}},
		{"a.csv", "lot", "ebcdic", []string{"ebcdic", "reading.encoding"}},
		{"a.xls", "x", "", []string{".xls", ".xlsx"}},
		{"a.ods", "x", "", []string{".ods"}},
	} {
		_, err := Open(tt.name, []byte(tt.data), tt.enc)
		wantFileError(t, err, append(tt.words, tt.name)...)
	}
}

func TestReadTextSplitDecimalComma(t *testing.T) {
	_, err := read(t, plan("d1.csv"), []byte(longCSV(",", ",")))
	wantFileError(t, err, "d1.csv!D2", `"003"`, "semicolons")
}

func TestOpenWorkbookRefuses(t *testing.T) { // N38
	whole := xlsx(t, sheetOf{name: "Data", rows: long()})
	for _, tt := range []struct {
		data  []byte
		words []string
	}{
		{[]byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"), []string{"this is an old .xls (or password-protected) file; save it as .xlsx"}},
		{[]byte("lot,x\nA,1\n"), []string{"a text file", ".csv"}},
		{[]byte("<!DOCTYPE html><html>"), []string{"a web page"}},
		{whole[:len(whole)/2], []string{"damaged or cut-off"}},
		{[]byte{}, []string{"empty file"}},
	} {
		_, err := Open("a.xlsx", tt.data, "")
		wantFileError(t, err, append(tt.words, "a.xlsx")...)
	}
}

func TestReadOpensASharedFileOnce(t *testing.T) {
	n := 0
	_, err := Read(plan("d1.csv"), func(string) ([]byte, error) { n++; return []byte(longCSV(",", ".")), nil })
	if err != nil || n != 1 {
		t.Errorf("got %v after %d openings, want one", err, n)
	}
	_, err = Read(plan("no.csv"), files(nil))
	wantFileError(t, err, "no.csv", "reference.file")
}

// What a table of texts holds comes back from its CSV, whatever the texts.
func FuzzText(f *testing.F) {
	f.Add("Lot", "a\"b", "x;y", "\n")
	f.Add("#", "", "1,5", "\r\n")
	f.Fuzz(func(t *testing.T, a, b, c, d string) {
		for _, delimiter := range []string{",", ";", "\t"} {
			var text strings.Builder
			fields := [][]string{{"Lot", "Bore"}, {a, b}, {c, d}}
			for _, row := range fields {
				for j, v := range row {
					if j > 0 {
						text.WriteString(delimiter)
					}
					fmt.Fprintf(&text, `"%s"`, strings.ReplaceAll(v, `"`, `""`))
				}
				text.WriteByte('\n')
			}
			got, err := readText(text.String(), Watched{}.records(""))
			if err != nil {
				t.Fatalf("%q: got %v", text.String(), err)
			}
			for _, row := range got.rows {
				for _, cell := range row.Cells {
					if row.Number > 3 || cell.Col > 2 || fields[row.Number-1][cell.Col-1] != cell.Text {
						t.Fatalf("%q: got %q in %s", text.String(), cell.Text, cells.Name(cell.Col, row.Number))
					}
				}
			}
		}
	})
}
