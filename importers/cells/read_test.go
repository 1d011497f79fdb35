package cells

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"errors"
	"maps"
	"slices"
	"strings"
	"testing"
)

// parts is a package as text by part name.
type parts map[string]string

const (
	rootRels = `<Relationships><Relationship Id="r1" Type="x/officeDocument" Target="/xl/workbook.xml"/></Relationships>`
	bookRels = `<Relationships><Relationship Id="s1" Type="x/worksheet" Target="worksheets/sheet1.xml"/><Relationship Id="s2" Type="x/worksheet" Target="/xl/worksheets/sheet2.xml"/>` +
		`<Relationship Id="s3" Type="x/chartsheet" Target="chartsheets/sheet1.xml"/><Relationship Id="st" Type="x/styles" Target="styles.xml"/>` +
		`<Relationship Id="ss" Type="x/sharedStrings" Target="sharedStrings.xml"/><Relationship Id="e" Type="x/externalLink" Target="http://127.0.0.1/x" TargetMode="External"/></Relationships>`
	book = `<workbook xmlns:r="r"><workbookPr date1904="1"/><sheets><sheet name="Data &amp; more" sheetId="1" r:id="s1"/><sheet name="Chart" sheetId="3" r:id="s3"/>` +
		`<sheet name="raw" sheetId="2" state="veryHidden" r:id="s2"/></sheets></workbook>`
	styles = `<styleSheet><numFmts><numFmt numFmtId="164" formatCode="0.000&quot; mm&quot;"/><numFmt numFmtId="165" formatCode="yyyy\-mm\-dd"/></numFmts>` +
		`<cellStyleXfs><xf numFmtId="14"/></cellStyleXfs><cellXfs><xf numFmtId="0"/><xf numFmtId="16"/><xf numFmtId="164"/><xf numFmtId="165"/><xf numFmtId="10"/><xf/></cellXfs>` +
		`<dxfs><dxf><numFmt numFmtId="164" formatCode="yyyy"/></dxf></dxfs></styleSheet>`
	shared = `<sst><si><t>plain</t></si><si><r><t>ri</t></r><r><rPr><b/></rPr><t xml:space="preserve">ch </t></r><rPh sb="0" eb="1"><t>phonetic</t></rPh></si><si><t>a_x000D_b_x005F_x0041_</t></si></sst>`
)

func sheet(data string) string {
	return `<?xml version="1.0"?><worksheet><dimension ref="A1:XFD1048576"/><cols><col min="3" max="4" hidden="1"/><col min="5" max="5"/></cols><sheetData>` + data +
		`</sheetData><mergeCells count="1"><mergeCell ref="A2:A13"/></mergeCells></worksheet>`
}

// pack zips a workbook whose first sheet holds the rows given; replace changes or, with an empty text, removes parts.
func packOf(t testing.TB, rows string, replace parts) []byte {
	t.Helper()
	all := parts{
		"_rels/.rels": rootRels, "xl/workbook.xml": book, "xl/_rels/workbook.xml.rels": bookRels, "xl/styles.xml": styles, "xl/sharedStrings.xml": shared,
		"xl/worksheets/sheet1.xml": sheet(rows), "xl/worksheets/sheet2.xml": sheet(`<row><c><v>1</v></c></row>`),
	}
	for name, text := range replace {
		all[name] = text
	}
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for _, name := range slices.Sorted(maps.Keys(all)) { // in one order: fuzzing compares runs
		text := all[name]
		if text == "" {
			continue
		}
		w, err := z.Create(name)
		if err == nil {
			_, err = w.Write([]byte(text))
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestReadCells(t *testing.T) {
	for _, tt := range []struct {
		xml  string
		want Cell
	}{
		{`<c r="B7"><v>12.003000000000001</v></c>`, Cell{Kind: Number, Text: "12.003000000000001"}},
		{`<c r="B7" t="n"><v> 12 </v></c>`, Cell{Kind: Number, Text: "12"}},
		{`<c r="B7" t="s"><v>0</v></c>`, Cell{Kind: Text, Text: "plain"}},
		{`<c r="B7" t="s"><v>1</v></c>`, Cell{Kind: Text, Text: "rich "}},
		{`<c r="B7" t="s"><v>2</v></c>`, Cell{Kind: Text, Text: "a\rb_x0041_"}},
		{`<c r="B7" t="inlineStr"><is><t>12,003</t></is></c>`, Cell{Kind: Text, Text: "12,003"}},
		{`<c r="B7" t="inlineStr"><is><r><t>a</t></r><r><t>b</t></r></is></c>`, Cell{Kind: Text, Text: "ab"}},
		{`<c r="B7" t="str"><f>A1&amp;"x"</f><v>yx</v></c>`, Cell{Kind: Text, Text: "yx", Formula: true}},
		{`<c r="B7" t="b"><v>1</v></c>`, Cell{Kind: Bool, Text: "TRUE"}},
		{`<c r="B7" t="e"><f>1/0</f><v>#DIV/0!</v></c>`, Cell{Kind: Error, Text: "#DIV/0!", Formula: true}},
		{`<c r="B7"><f>A5+1</f><v>3</v></c>`, Cell{Kind: Number, Text: "3", Formula: true}},
		{`<c r="B7"><f>A5+1</f></c>`, Cell{Kind: FormulaNoValue, Formula: true}},
		{`<c r="B7"><f>A5+1</f><v></v></c>`, Cell{Kind: FormulaNoValue, Formula: true}},
		{`<c r="B7"><f t="shared" si="0"/><v>4</v></c>`, Cell{Kind: Number, Text: "4", Formula: true}},
		{`<c r="B7" s="1"><v>45303</v></c>`, Cell{Kind: Date, Text: "45303", Format: "d-mmm"}},
		{`<c r="B7" s="2"><v>12.5</v></c>`, Cell{Kind: Number, Text: "12.5", Format: `0.000" mm"`}},
		{`<c r="B7" s="3"><v>45303</v></c>`, Cell{Kind: Date, Text: "45303", Format: `yyyy\-mm\-dd`}},
		{`<c r="B7" s="4"><v>0.953</v></c>`, Cell{Kind: Number, Text: "0.953", Format: "0.00%"}},
		{`<c r="B7" s="5"><v>0.953</v></c>`, Cell{Kind: Number, Text: "0.953"}},
		{`<c r="B7" s="99"><v>0.953</v></c>`, Cell{Kind: Number, Text: "0.953"}},
		{`<c r="B7" t="d"><v>2026-03-02</v></c>`, Cell{Kind: Date, Text: "2026-03-02"}},
		{`<c r="B7" s="1"/>`, Cell{Kind: Blank, Format: "d-mmm"}},
		{`<c r="B7" t="s"><v></v></c>`, Cell{Kind: Blank}},
		{`<x:c xmlns:x="y" r="B7"><x:v>5</x:v><extLst><v>9</v></extLst></x:c>`, Cell{Kind: Number, Text: "5"}},
	} {
		data := packOf(t, `<row r="7">`+tt.xml+`</row>`, nil)
		w, err := Read(data)
		if err != nil {
			t.Errorf("%s: got the error %v", tt.xml, err)
			continue
		}
		tt.want.Row, tt.want.Col = 7, 2
		if got := w.Sheets[0].At(2, 7); got != tt.want {
			t.Errorf("%s: got %+v, want %+v", tt.xml, got, tt.want)
		}
		one, err := ReadSheet(data, "Data & more")
		if err != nil || one.At(2, 7) != tt.want {
			t.Errorf("%s: got %+v, %v from the one sheet", tt.xml, one.At(2, 7), err)
		}
	}
}

func TestReadSheets(t *testing.T) {
	w, err := Read(packOf(t, `<row><c><v>1</v></c><c r="D1"><v>2</v></c><c><v>3</v></c></row><row r="5" hidden="1"><c><v>4</v></c></row><row><c r="A6"><v>5</v></c></row>`, nil))
	if err != nil {
		t.Fatal(err)
	}
	if len(w.Sheets) != 2 || w.Sheets[0].Name != "Data & more" || w.Sheets[0].Hidden || w.Sheets[1].Name != "raw" || !w.Sheets[1].Hidden || !w.Date1904 {
		t.Fatalf("got %+v", w)
	}
	s := w.Sheets[0]
	for name, want := range map[string]string{"A1": "1", "D1": "2", "E1": "3", "A5": "4", "A6": "5", "B1": "", "A2": ""} {
		col, row, _ := Parse(name)
		if got := s.At(col, row).Text; got != want {
			t.Errorf("%s: got %q, want %q", name, got, want)
		}
	}
	if !s.Rows[1].Hidden || s.Rows[0].Hidden || !s.HiddenCol(4) || s.HiddenCol(5) || len(s.Merged) != 1 || s.Merged[0] != (Area{1, 2, 1, 13}) {
		t.Errorf("got %+v", s)
	}
	if _, err := ReadSheet(packOf(t, "", nil), "no"); err == nil || !strings.Contains(err.Error(), `"raw"`) {
		t.Errorf("got %v, want the sheets listed", err)
	}
	if _, ok := w.Sheet("raw"); !ok {
		t.Error("got no sheet raw")
	}
}

func TestReadRefuses(t *testing.T) {
	for _, tt := range []struct {
		name, rows string
		replace    parts
		words      string
	}{
		{"cell twice", `<row r="1"><c r="A1"><v>1</v></c><c r="A1"><v>2</v></c></row>`, nil, "the cell A1 twice"},
		{"row twice", `<row r="1"/><row r="1"/>`, nil, "row 1 twice"},
		{"cell in another row", `<row r="1"><c r="A2"><v>1</v></c></row>`, nil, `"A2"`},
		{"row number", `<row r="0"/>`, nil, "row number"},
		{"row beyond the sheet", `<row r="1048577"/>`, nil, "row number"},
		{"shared text that is not there", `<row><c t="s"><v>3</v></c></row>`, nil, "shared text"},
		{"cell type", `<row><c t="zz"><v>3</v></c></row>`, nil, `"zz"`},
		{"document type", "", parts{"xl/worksheets/sheet1.xml": `<!DOCTYPE x [<!ENTITY e SYSTEM "file:///etc/passwd">]><worksheet/>`}, "document type"},
		{"entity", `<row><c t="str"><v>&e;</v></c></row>`, nil, "unsound XML"},
		{"cut-off XML", "", parts{"xl/worksheets/sheet1.xml": `<worksheet><sheetData><row>`}, "the end inside"},
		{"crossed elements", "", parts{"xl/worksheets/sheet1.xml": `<worksheet><a><b></a></b></worksheet>`}, "without its beginning"},
		{"deep nesting", "", parts{"xl/worksheets/sheet1.xml": "<worksheet>" + strings.Repeat("<a>", 100)}, "nested"},
		{"no workbook", "", parts{"_rels/.rels": ""}, "without a workbook"},
		{"no sheet part", "", parts{"xl/worksheets/sheet1.xml": ""}, "no such part"},
		{"no sheets", "", parts{"xl/workbook.xml": `<workbook/>`}, "no worksheet"},
		{"sheet name twice", "", parts{"xl/workbook.xml": `<workbook xmlns:r="r"><sheets><sheet name="a" r:id="s1"/><sheet name="A" r:id="s2"/></sheets></workbook>`}, "twice"},
		{"merged cells", "", parts{"xl/worksheets/sheet1.xml": `<worksheet><mergeCells><mergeCell ref="B2:A1"/></mergeCells></worksheet>`}, "merged"},
		{"part twice", "", parts{"XL/workbook.xml": `<workbook/>`}, "the same part twice"},
	} {
		_, err := Read(packOf(t, tt.rows, tt.replace))
		_, format := errors.AsType[*FormatError](err)
		_, bound := errors.AsType[*BoundError](err)
		if !format && !bound || !strings.Contains(err.Error(), tt.words) {
			t.Errorf("%s: got %v, want a *FormatError or *BoundError with %q", tt.name, err, tt.words)
		}
	}
}

func TestReadNoWorkbook(t *testing.T) {
	whole := packOf(t, "", nil)
	for _, tt := range []struct{ data, words string }{
		{"", "an empty file"},
		{"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", "this is an old .xls (or password-protected) file; save it as .xlsx"},
		{"a;b\n1;2\n", "a text file"},
		{"\xef\xbb\xbfa;b\n", "a text file"},
		{"\r\n<HTML><body>", "a web page"},
		{"<?xml version=\"1.0\"?><Workbook/>", "an XML file"},
		{"\x89PNG\r\n\x1a\n\x00\x00", "a file of another kind"},
		{string(whole[:len(whole)-30]), "damaged or cut-off"},
		{"PK\x03\x04", "damaged or cut-off"},
	} {
		_, err := Read([]byte(tt.data))
		if _, ok := errors.AsType[*FormatError](err); !ok || !strings.Contains(err.Error(), tt.words) {
			t.Errorf("%.20q: got %v, want %q", tt.data, err, tt.words)
		}
	}
}

func TestReadBounds(t *testing.T) {
	bomb := packOf(t, "", parts{"xl/media/zeros.bin": strings.Repeat("\x00", DenseFrom+1)})
	_, err := Read(bomb)
	e, ok := errors.AsType[*BoundError](err)
	if !ok || e.Part != "xl/media/zeros.bin" || !strings.Contains(err.Error(), "64 MiB") {
		t.Errorf("got %v, want a *BoundError naming the part and the bound", err)
	}
	if _, err := Read(packOf(t, "", parts{"xl/media/zeros.bin": strings.Repeat("\x00", 1<<20)})); err != nil {
		t.Errorf("got %v, want a small dense part read", err)
	}
	_, err = Read(make([]byte, MaxFile+1))
	if e, ok := errors.AsType[*BoundError](err); !ok || e.Part != "" || !strings.Contains(err.Error(), "256 MiB") {
		t.Errorf("got %v, want a *BoundError for the file", err)
	}
	if err := dense("x", MaxPart+1, MaxPart); err == nil || !strings.Contains(err.Error(), "2 GiB") {
		t.Errorf("got %v, want the bound of 2 GiB", err)
	}
	if err := dense("x", DenseRatio*(DenseFrom/DenseRatio+1), DenseFrom/DenseRatio+1); err != nil {
		t.Errorf("got %v, want a part at the ratio read", err)
	}
}

// A zip directory that says less than the part unpacks to stops at the same bound, or at what the directory says.
func TestReadBoundsLie(t *testing.T) {
	data := packOf(t, "", parts{"xl/worksheets/sheet1.xml": "<worksheet>" + strings.Repeat(" ", DenseFrom+1) + "</worksheet>"})
	size := make([]byte, 4)
	binary.LittleEndian.PutUint32(size, DenseFrom+1+uint32(len("<worksheet></worksheet>")))
	lie := bytes.ReplaceAll(data, size, []byte{0, 1, 0, 0})
	if bytes.Equal(lie, data) {
		t.Fatal("the size stands nowhere")
	}
	if _, err := Read(lie); err == nil {
		t.Error("got no error, want one")
	}
}

func TestReadEncryptedPart(t *testing.T) {
	data := packOf(t, "", nil)
	i := bytes.Index(data, []byte("PK\x01\x02"))
	data[i+8] |= 1
	if _, err := Read(data); err == nil || !strings.Contains(err.Error(), "without a password") {
		t.Errorf("got %v, want the password named", err)
	}
}

func TestName(t *testing.T) {
	for name, at := range map[string][2]int{"A1": {1, 1}, "D17": {4, 17}, "Z9": {26, 9}, "AA10": {27, 10}, "XFD1048576": {MaxCol, MaxRow}} {
		if got := Name(at[0], at[1]); got != name {
			t.Errorf("Name(%v): got %s, want %s", at, got, name)
		}
		col, row, ok := Parse(name)
		if !ok || col != at[0] || row != at[1] {
			t.Errorf("Parse(%s): got %d, %d, %v", name, col, row, ok)
		}
	}
	for _, good := range []string{"$D$17", "d17", "D$17"} {
		if col, row, ok := Parse(good); !ok || col != 4 || row != 17 {
			t.Errorf("Parse(%s): got %d, %d, %v", good, col, row, ok)
		}
	}
	for _, bad := range []string{"", "A", "1", "A0", "A01", "XFE1", "A1048577", "A1:B2", "A1 ", "Ä1", "$", "A$", "AAAAAAAAAAAAAAA1", "A99999999999999999999"} {
		if col, row, ok := Parse(bad); ok {
			t.Errorf("Parse(%q): got %d, %d, want none", bad, col, row)
		}
	}
	for col := 1; col <= MaxCol; col++ {
		if got, _, ok := Parse(Name(col, 3)); !ok || got != col {
			t.Fatalf("got %d for the name of column %d", got, col)
		}
	}
}

func TestFormats(t *testing.T) {
	for code, want := range map[string]bool{
		"": false, "General": false, "0.00": false, "#,##0.00": false, "0.00E+00": false, "@": false, "0%": false, "# ?/?": false,
		`0.000" mm"`: false, `0.000\ \m\m`: false, "[Red]0.0;[Blue]-0.0": false, "[$€-407] #,##0.00": false, `General" d"`: false, "_-* #,##0.00_-": false,
		"d-mmm": true, "yyyy-mm-dd": true, "hh:mm": true, "[h]:mm:ss": true, "[ss]": true, "mm:ss.0": true, "[$-407]d. mmmm yyyy": true, "D.M.YYYY": true, "h:mm AM/PM": true,
	} {
		if got := isDate(code); got != want {
			t.Errorf("isDate(%q): got %v, want %v", code, got, want)
		}
	}
	for id, want := range map[int]bool{0: false, 1: false, 13: false, 14: true, 22: true, 27: true, 36: true, 37: false, 44: false, 45: true, 47: true, 48: false, 49: false, 50: true, 58: true, 59: false} {
		if got := styleOf(id, nil).date; got != want {
			t.Errorf("format %d: got date %v, want %v", id, got, want)
		}
	}
	if !Percent("0.0%") || Percent(`0.0" %"`) || Percent("0.0") {
		t.Error("percent formats are not told apart")
	}
}
