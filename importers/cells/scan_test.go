package cells

import (
	"bytes"
	"encoding/binary"
	"errors"
	"strings"
	"testing"
	"unicode/utf16"
)

// wide writes a text as UTF-16 with its mark.
func wide(order binary.AppendByteOrder, s string) string {
	b := order.AppendUint16(nil, 0xfeff)
	for _, u := range utf16.Encode([]rune(s)) {
		b = order.AppendUint16(b, u)
	}
	return string(b)
}

// What XML allows and few programs write reads as what it means: text b in A1, or number 12.5 in B1.
func TestReadOddSyntax(t *testing.T) {
	const plain = `<worksheet><sheetData><row r="1"><c r="A1" t="str"><v>b</v></c><c r="B1"><v>12.5</v></c></row></sheetData></worksheet>`
	for _, tt := range []struct{ name, xml string }{
		{"plain", plain},
		{"prefix", `<x:worksheet xmlns:x="m"><x:sheetData><x:row r="1"><x:c r="A1" t="str"><x:v>b</x:v></x:c><x:c r="B1"><x:v>12.5</x:v></x:c></x:row></x:sheetData></x:worksheet>`},
		{"two prefixes", `<worksheet xmlns="m" xmlns:x="m"><x:sheetData><row r="1"><x:c r="A1" t="str"><v>b</v></x:c><c r="B1"><x:v>12.5</x:v></c></row></x:sheetData></worksheet>`},
		{"single quotes", strings.ReplaceAll(plain, `"`, `'`)},
		{"no addresses", `<worksheet><sheetData><row><c t="str"><v>b</v></c><c><v>12.5</v></c></row></sheetData></worksheet>`},
		{"other order of attributes", `<worksheet><sheetData><row hidden="0" r="1"><c t="str" s="0" r="A1"><v>b</v></c><c s="0" r="B1"><v>12.5</v></c></row></sheetData></worksheet>`},
		{"attributes of other name spaces", `<worksheet xmlns:x="y"><sheetData><row r="1" x:r="9"><c x:t="s" r="A1" t="str" x:r="Z9"><v>b</v></c><c x:s="7" r="B1"><v>12.5</v></c></row></sheetData></worksheet>`},
		{"white space in tags", "<worksheet ><sheetData\n><row\tr = '1' ><c\r\nr= \"A1\" t ='str'\n><v >b</v\n></c ><c r='B1'><v>12.5</v></c></row></sheetData></worksheet >\n"},
		{"white space between", strings.ReplaceAll(plain, "><", ">\r\n\t <")},
		{"white space around a number", strings.Replace(plain, "12.5", "\r\n 12.5\t", 1)},
		{"escapes", strings.NewReplacer("12.5", "1&#50;&#x2E;5", ">b<", ">&#98;<", `"B1"`, `"&#66;1"`).Replace(plain)},
		{"CDATA", strings.NewReplacer("12.5", "<![CDATA[12]]>.<![CDATA[5]]>", ">b<", "><![CDATA[b]]><").Replace(plain)},
		{"comments", strings.NewReplacer("12.5", "12<!-- 3 -->.5", "<c", "<!-- <c r='Z1'/> - --><c").Replace(plain)},
		{"processing instructions", strings.NewReplacer("12.5", "12<?x 3?>.5", "<c", "<?y <c r='Z1'> ?><c").Replace(plain)},
		{"declaration", "<?xml version='1.0' encoding='utf-8' standalone='yes'?>\r\n" + plain},
		{"byte order mark", "\xef\xbb\xbf<?xml version=\"1.0\" encoding=\"UTF-8\"?>" + plain},
		{"UTF-16 little end first", wide(binary.LittleEndian, `<?xml version="1.0" encoding="UTF-16"?>`+plain)},
		{"UTF-16 big end first", wide(binary.BigEndian, plain)},
		{"UTF-16 without a mark", wide(binary.LittleEndian, plain)[2:]},
		{"empty elements and extensions", strings.NewReplacer("<v>12.5", `<f/><extLst><c r="B1"><v>7</v></c></extLst><v>12.5`, "</row>", "<extLst><c/></extLst></row><row/>").Replace(plain)},
		{"preserved space", `<worksheet><sheetData><row r="1"><c r="A1" t="inlineStr"><is><t xml:space="preserve">b</t></is></c><c r="B1" xml:space="preserve"><v>12.5</v></c></row></sheetData></worksheet>`},
		{"rows and cells in another order", `<worksheet><sheetData><row r="2"/><row r="1"><c r="B1"><v>12.5</v></c><c r="A1" t="str"><v>b</v></c></row></sheetData></worksheet>`},
		{"far beyond one buffer", strings.Replace(plain, "<c", strings.Repeat("<!-- "+strings.Repeat("x", 5000)+" -->", 40)+"<c", 2)},
		{"wrong dimension", strings.Replace(plain, "<sheetData>", `<dimension ref="C3:D4"/><sheetData>`, 1)},
	} {
		s, err := ReadSheet(packOf(t, "", parts{"xl/worksheets/sheet1.xml": tt.xml}), "Data & more")
		if err != nil {
			t.Errorf("%s: got the error %v", tt.name, err)
			continue
		}
		a, b := s.At(1, 1), s.At(2, 1)
		if a.Kind != Text || a.Text != "b" || b.Kind != Number || b.Text != "12.5" || len(s.Rows[0].Cells) != 2 {
			t.Errorf("%s: got %+v and %+v, want the text b and the number 12.5", tt.name, a, b)
		}
	}
}

// The line ends of XML are LF; others must be escaped to last.
func TestReadLineEnds(t *testing.T) {
	for xml, want := range map[string]string{
		"a\nb\r\nc\rd\r\r\ne":  "a\nb\nc\nd\n\ne",
		"a&#13;&#10;b&#xD;":    "a\r\nb\r",
		"a_x000D_\r\nb":        "a\r\nb",
		"<![CDATA[a\r\nb\r]]>": "a\nb\n",
	} {
		s, err := ReadSheet(packOf(t, `<row><c t="str"><v>`+xml+`</v></c></row>`, nil), "Data & more")
		if err != nil || s.At(1, 1).Text != want {
			t.Errorf("%q: got %q, %v, want %q", xml, s.At(1, 1).Text, err, want)
		}
	}
}

func TestReadUnsoundXML(t *testing.T) {
	for xml, words := range map[string]string{
		``:                             "no element",
		`<a/><a/>`:                     "behind the end of the root",
		`<a/>x`:                        "text outside the root",
		`x<a/>`:                        "text outside the root",
		`<![CDATA[x]]><a/>`:            "text outside the root",
		`<a>`:                          "the end inside <a>",
		`<a`:                           "the end inside a tag",
		`<`:                            "the end inside a tag",
		`<a b="`:                       "the end inside a tag",
		`<a><!-- `:                     "the end inside a comment",
		`<a><![CDATA[ ]]`:              "the end inside a CDATA section",
		`<a><? `:                       "the end inside a processing instruction",
		`</a>`:                         "without its beginning",
		`<a></b>`:                      "without its beginning",
		`<x:a></y:a>`:                  "without its beginning",
		`<a></a b>`:                    "without its beginning",
		`<a b=1/>`:                     "without quotes",
		`<a b/>`:                       "without a value",
		`<a b="1"c="2"/>`:              "no space",
		`<a b="1" b="2"/>`:             "twice",
		`<a b="<"/>`:                   "a < inside a tag",
		`<a b="&x;"/>`:                 "the escape",
		`<a>&x;</a>`:                   "the escape",
		`<a>&amp</a>`:                  "the escape",
		`<a>& </a>`:                    "the escape",
		`<a>&#0;</a>`:                  "the escape",
		`<a>&#xD800;</a>`:              "the escape",
		`<a>&#1114112;</a>`:            "the escape",
		`<a>&#+65;</a>`:                "the escape",
		`<a>]]></a>`:                   "]]>",
		"<a>\x01</a>":                  "U+0001",
		"<a>\xff</a>":                  "not UTF-8",
		"<a>\uffff</a>":                "U+FFFF",
		"<a><!-- \x00 --></a>":         "0x0",
		`<a><!-- -- --></a>`:           "inside a comment",
		`<1/>`:                         "the name",
		`<a:/>`:                        "the name",
		`<a:b:c/>`:                     "the name",
		`< a/>`:                        "the name",
		`<a 1="2"/>`:                   "the attribute name",
		`<a><?xml version="1.0"?></a>`: "not at the beginning",
		` <?xml version="1.0"?><?xml version="1.0"?><a/>`: "not at the beginning",
		`<a><? x?></a>`:                                   "without a name",
		`<?xml version="1.1"?><a/>`:                       "version",
		`<?xml version="1.0" encoding="ISO-8859-1"?><a/>`: "the encoding",
		`<?xml version="1.0" encoding="UTF-16"?><a/>`:     "the encoding",
		"\xff\xfe<\x00a\x00/\x00>":                        "half a character",
		"\xff\xfe<\x00a\x00>\x00\x00\xd8<\x00":            "half a character",
		`<!ELEMENT a><a/>`:                                "document type",
		`<a><!DOCTYPE a></a>`:                             "document type",
		`<a ` + manyAttributes() + `/>`:                   "more than 256 attributes",
	} {
		if _, err := scanned([]byte(xml), 16); err == nil || !strings.Contains(err.Error(), words) {
			t.Errorf("%.60q: got %v, want %q", xml, err, words)
		}
	}
}

func manyAttributes() string {
	var b strings.Builder
	for i := range 257 {
		b.WriteString(Letters(i+1) + `="" `)
	}
	return b.String()
}

// Whatever could hold a reading and has no place in the format is refused, not passed over.
func TestReadMisplaced(t *testing.T) {
	for _, tt := range []struct{ rows, words string }{
		{`<c r="A1"><v>1</v></c>`, "<c>"},
		{`<row><row/></row>`, "<row>"},
		{`<row><x><c><v>1</v></c></x></row>`, "<x>"},
		{`<x><row/></x>`, "<x>"},
		{`<row><c><x><v>1</v></x></c></row>`, "<x>"},
		{`<row><c><v>1</v><v>2</v></c></row>`, "two values"},
		{`<row><c><is><t>1</t></is></c></row>`, "inline text"},
		{`<row><c t="b"><v>2</v></c></row>`, "truth value"},
		{`</sheetData><sheetData>`, "twice"},
		{`</sheetData><row/><sheetData>`, "<row>"},
	} {
		if _, err := Read(packOf(t, tt.rows, nil)); err == nil || !strings.Contains(err.Error(), tt.words) {
			t.Errorf("%s: got %v, want %s refused", tt.rows, err, tt.words)
		}
	}
	for part, xml := range map[string]string{
		"xl/worksheets/sheet1.xml": "<chartsheet/>", "xl/worksheets/sheet2.xml": "<worksheet/>", "xl/styles.xml": "<a/>", "xl/sharedStrings.xml": "<a/>", "xl/workbook.xml": "<a/>",
	} {
		if _, err := Read(packOf(t, "", parts{part: xml})); err == nil || !strings.Contains(err.Error(), part) {
			t.Errorf("%s %s: got %v, want it refused", part, xml, err)
		}
	}
}

// Each bound says what it is and what to do.
func TestReadBoundsInWords(t *testing.T) {
	long := strings.Repeat("x", MaxText/2)
	many := bytes.Repeat([]byte("PK\x01\x02"), MaxParts+1)
	counted := func(rows string, before int) error {
		o, err := openOutline(packOf(t, rows, nil), nil)
		if err != nil {
			t.Fatal(err)
		}
		o.counted = before
		_, err = o.read()
		return err
	}
	read := func(data []byte) error {
		_, err := Read(data)
		return err
	}
	for _, tt := range []struct {
		name  string
		err   error
		words []string
	}{
		{"text in one piece", read(packOf(t, `<row><c t="str"><v>`+long+long+`</v></c></row>`, nil)), []string{"1 MiB", "shorten the text"}},
		{"text in pieces", read(packOf(t, `<row><c t="str"><v>`+long+"<!-- -->"+long+`<!-- -->x</v></c></row>`, nil)), []string{"1 MiB", "shorten the text"}},
		{"rich text", read(packOf(t, `<row><c t="inlineStr"><is><r><t>`+long+`</t></r><r><t>`+long+`x</t></r></is></c></row>`, nil)), []string{"1 MiB", "shorten the text"}},
		{"attribute", read(packOf(t, `<row x="`+long+long+`"/>`, nil)), []string{"1 MiB", "shorten the text"}},
		{"nesting", read(packOf(t, strings.Repeat("<extLst>", 64), parts{"xl/styles.xml": "<styleSheet>" + strings.Repeat("<a>", 64)})), []string{"64", "save it again"}},
		{"parts", read(many), []string{"65537 parts", "at most 65536", "use a smaller file"}},
		{"cells", counted(`<row><c/><c/></row>`, MaxCells-2), []string{"16777216 cells", "split the file"}},
		{"plain cells", counted(`<row>`+strings.Repeat(`<c r="A1"/>`, 100)+`</row>`, MaxCells-2), []string{"16777216 cells", "split the file"}},
		{"rows", counted(`<row/><row/><row/>`, MaxCells-2), []string{"16777216 cells", "split the file"}},
	} {
		if _, ok := errors.AsType[*BoundError](tt.err); !ok {
			t.Errorf("%s: got %v, want a *BoundError", tt.name, tt.err)
			continue
		}
		for _, w := range tt.words {
			if !strings.Contains(tt.err.Error(), w) {
				t.Errorf("%s: got %v, want %q in it", tt.name, tt.err, w)
			}
		}
	}
	if s, err := ReadSheet(packOf(t, `<row><c t="str"><v>`+long+`</v></c></row>`, nil), "Data & more"); err != nil || len(s.At(1, 1).Text) != len(long) {
		t.Errorf("got %v, want a long text below the bound read", err)
	}
}

// Texts and rows handed out do not run into one another when a caller appends.
func TestReadRowsApart(t *testing.T) {
	s, err := ReadSheet(packOf(t, `<row><c><v>1</v></c></row><row><c><v>2</v></c></row>`, nil), "Data & more")
	if err != nil {
		t.Fatal(err)
	}
	_ = append(s.Rows[0].Cells, Cell{Row: 1, Col: 2, Text: "other"})
	if got := s.At(1, 2); got.Text != "2" || got.Row != 2 {
		t.Errorf("got %+v in A2 after row 1 was appended to", got)
	}
}
