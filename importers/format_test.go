package importers

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"runtime"
	"strings"
	"testing"
	"time"

	"lotpair/qa"
)

// zipOf is a zip package of empty parts with the names given.
func zipOf(t testing.TB, names ...string) []byte {
	t.Helper()
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for _, n := range names {
		write(t, z, n, "x")
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// inUTF16 is a text in UTF-16 as compound files name their streams.
func inUTF16(s string) string { return string(utf16Of(s, binary.LittleEndian, false)) }

func TestOpenRefusesByContent(t *testing.T) { // N38
	const ole = "\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
	book := string(xlsx(t, sheetOf{name: "Data", rows: long()}))
	for _, tt := range []struct {
		name, data string
		words      []string
	}{
		{"a.xlsx", ole + inUTF16("Workbook"), []string{"old .xls", "save it as .xlsx"}},
		{"a.xls", ole + inUTF16("Workbook"), []string{"old .xls", "save it as .xlsx"}},
		{"a.xlsx", ole + inUTF16("EncryptedPackage"), []string{"encrypted with a password", "without a password"}},
		{"a.doc", ole + inUTF16("WordDocument"), []string{".doc"}},
		{"a.xls", "\x09\x08\x10\x00\x00\x06", []string{"old .xls", "save it as .xlsx"}},
		{"a.xls", "<html><table><tr><td>12.003</td></tr></table></html>", []string{"a web page", "save it as .xlsx"}},
		{"a.xlsx", "\ufeff\n<TABLE>", []string{"a web page"}},
		{"a.xls", "MIME-Version: 1.0\nX-Document-Type: Workbook\n", []string{"a web archive"}},
		{"a.xls", `<?xml version="1.0"?><Workbook xmlns="urn:schemas-microsoft-com:office:spreadsheet">`, []string{"XML spreadsheet of 2003", "save it as .xlsx"}},
		{"a.fods", `<?xml version="1.0"?><office:document office:mimetype="x">`, []string{".fods", "save it as .ods"}},
		{"a.csv", `<?xml version="1.0"?><data/>`, []string{"an XML file"}},
		{"a.csv", "%PDF-1.7\n", []string{"a PDF file", ".csv"}},
		{"readings", "%PDF-1.7\n", []string{"a PDF file"}},
		{"a.xlsx", "Lot,Bore\nA,12.003\n", []string{"a text file", "an .xlsx workbook as its name says", ".csv"}},
		{"a.ods", book, []string{"workbook (.xlsx)", "an .ods spreadsheet as its name says", "name it .xlsx"}},
		{"a.xlsx", string(zipOf(t, "mimetype", "content.xml", "META-INF/manifest.xml")), []string{".ods", "as its name says"}},
		{"a.csv", book, []string{"zip file or workbook", "text as its name says", "name it .xlsx"}},
		{"a.xls", book, []string{"workbook (.xlsx) named .xls", "name it .xlsx"}},
		{"a.xls", "Lot\tBore\nA\t12.003\n", []string{"a text file named .xls", ".csv"}},
		{"a.xlsb", string(zipOf(t, "xl/workbook.bin")), []string{"binary workbook", "save it as .xlsx"}},
		{"a.xlsx", string(zipOf(t, "xl/workbook.bin")), []string{"binary workbook", "save it as .xlsx"}},
		{"a.xlsx", string(zipOf(t, "word/document.xml")), []string{".docx"}},
		{"a.zip", string(zipOf(t, "a.csv")), []string{".zip"}},
		{"a.numbers", string(zipOf(t, "Index/Document.iwa")), []string{"Numbers", "export it as .xlsx"}},
		{"a.xlsx", string(zipOf(t, "a.csv")), []string{"without a workbook"}},
		{"a.xlsx", book[:len(book)/2], []string{"damaged or cut-off"}},
		{"a.gz", "\x1f\x8b\x08\x00", []string{"gzip", "unpack"}},
		{"a.csv", "\x89PNG\r\n\x1a\n", []string{"picture"}},
		{"a.dat", "MZ\x00\x00", []string{"a program"}},
		{"a.dat", "abc\x00\x01", []string{"binary file"}},
		{"a.dat", "", []string{"an empty file"}},
	} {
		_, err := Open(tt.name, []byte(tt.data), "")
		if err == nil {
			t.Errorf("%s %.20q: got it opened, want it refused", tt.name, tt.data)
			continue
		}
		wantFileError(t, err, append(tt.words, tt.name)...)
		if n := strings.Count(err.Error(), "\n"); n > 0 {
			t.Errorf("%s %.20q: got %d lines, want one refusal", tt.name, tt.data, n+1)
		}
	}
}

// The same readings under names that claim nothing: what the file holds decides.
func TestOpenByContent(t *testing.T) {
	book := xlsx(t, sheetOf{name: "Data", rows: long()})
	for name, data := range map[string][]byte{
		"readings":  book,
		"a.tmp":     book,
		"a.xlsm":    book,
		"A.XLSX":    book,
		"a.dat":     []byte(longCSV(";", ".")),
		"no ending": []byte(longCSV("\t", ".")),
		"mz.csv":    []byte(strings.Replace(longCSV(",", "."), "Lot,Part", "MZ,Part", 1)),
		"u.csv":     utf16Of(longCSV(";", "."), binary.LittleEndian, false),
		"v.csv":     utf16Of(longCSV(";", "."), binary.BigEndian, false),
	} {
		p := plan(name)
		if name == "mz.csv" {
			p.Reading.LotColumn = "MZ"
		}
		r, err := read(t, p, data)
		if err != nil {
			t.Errorf("%s: got %v", name, err)
			continue
		}
		wantD1(t, r)
	}
}

func TestOpenMacros(t *testing.T) { // they are neither run nor read
	r := mustRead(t, plan("d1.xlsm"), withPart(t, xlsx(t, sheetOf{name: "Data", rows: long()}), "xl/vbaProject.bin", "Sub Auto_Open()"))
	wantD1(t, r)
	wantWords(t, strings.Join(r.Said, "\n"), "macros; they are neither run nor read")
}

// Bombs and endless texts end in words, fast and without much memory.
func TestOpenBombs(t *testing.T) {
	var bomb bytes.Buffer
	z := zip.NewWriter(&bomb)
	for _, part := range []string{"[Content_Types].xml", "_rels/.rels", "xl/workbook.xml", "xl/_rels/workbook.xml.rels"} {
		whole, err := zip.NewReader(bytes.NewReader(xlsx(t, sheetOf{name: "Data"})), int64(len(xlsx(t, sheetOf{name: "Data"}))))
		if err != nil {
			t.Fatal(err)
		}
		f, err := whole.Open(part)
		if err != nil {
			t.Fatal(err)
		}
		var text bytes.Buffer
		if _, err := text.ReadFrom(f); err != nil {
			t.Fatal(err)
		}
		write(t, z, part, text.String())
	}
	w, err := z.Create("xl/worksheets/sheet1.xml")
	if err != nil {
		t.Fatal(err)
	}
	zeros := bytes.Repeat([]byte(" "), 1<<20)
	for range 100 {
		if _, err := w.Write(zeros); err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	begun := time.Now()
	_, err = Open("bomb.xlsx", bomb.Bytes(), "")
	runtime.ReadMemStats(&after)
	wantFileError(t, err, "xl/worksheets/sheet1.xml", "200 times", "use a smaller file")
	if took := time.Since(begun); took > 5*time.Second {
		t.Errorf("got %v, want the bomb refused in seconds", took)
	}
	if grown := after.TotalAlloc - before.TotalAlloc; grown > 64<<20 {
		t.Errorf("got %d bytes of memory, want at most 64 MiB", grown)
	}
	entity := repacked(t, xlsx(t, sheetOf{name: "Data", rows: long()}), "xl/worksheets/sheet1.xml", func(s string) string {
		return strings.Replace(s, "<worksheet ", `<!DOCTYPE x [<!ENTITY e SYSTEM "file:///etc/passwd">]><worksheet `, 1)
	})
	_, err = Open("entity.xlsx", entity, "")
	wantFileError(t, err, "document type declaration", "save it again as .xlsx")
}

func TestOpenText(t *testing.T) {
	text := longCSV("\t", ".")
	b, err := OpenText("clipboard", text)
	if err != nil {
		t.Fatal(err)
	}
	if b.File != qa.FileOf("clipboard", []byte(text)) || b.Delimiter != "\t" || len(b.Sheets[0].Rows) != 25 {
		t.Errorf("got %+v, want 25 rows split at tabs", b.File)
	}
	wantWords(t, strings.Join(b.Said, "\n"), "what the cells showed")
	wantD1(t, mustRead(t, plan("clipboard"), []byte(text)))
	quoted := strings.Replace(text, "Bore dia [mm]", "\"Bore\ndia\t[mm]\"", 1)
	wantD1(t, mustRead(t, plan("clipboard"), []byte(quoted)))
	one, err := OpenText("clipboard", "Bore\n12.003\n11.994\n")
	if err != nil || one.Delimiter != "" || len(one.Sheets[0].Rows) != 3 {
		t.Errorf("got %+v, %v, want one column", one, err)
	}
	if _, err := OpenText("clipboard", ""); err == nil {
		t.Error("got an empty clipboard opened, want it refused")
	}
	if _, err := OpenText("clipboard", "%PDF-1.7"); err == nil {
		t.Error("got a PDF opened, want it refused")
	}
}

// repacked is a package with one part changed.
func repacked(t testing.TB, data []byte, part string, change func(string) string) []byte {
	t.Helper()
	whole, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for _, f := range whole.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		var text bytes.Buffer
		if _, err := text.ReadFrom(r); err != nil {
			t.Fatal(err)
		}
		s := text.String()
		if f.Name == part {
			if s = change(s); s == text.String() {
				t.Fatalf("%s: got nothing changed", part)
			}
		}
		write(t, z, f.Name, s)
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// withPart is a package with one part more.
func withPart(t testing.TB, data []byte, part, text string) []byte {
	t.Helper()
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	old, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range old.File {
		if err := z.Copy(f); err != nil {
			t.Fatal(err)
		}
	}
	write(t, z, part, text)
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}
