package cells

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strings"
	"testing"
)

// FuzzRead puts rows into a sheet. Plain cells, cells by tokens and encoding/xml must come to the same cells, the first two
// to the same error.
func FuzzRead(f *testing.F) {
	f.Add([]byte(`<row r="1"><c r="A1"><v>1</v></c><c t="s"><v>1</v></c></row>`))
	f.Add([]byte(`<row r="7"><c r="B7" s="3" t="s"><v>0</v></c><c r="C7" t="n" s="1"><v>1E-5</v></c><c r="D7" s="2"/></row>`))
	f.Add([]byte(`<row><c t="inlineStr"><is><r><t>_xD83D__xDE00_</t></r></is></c></row>`))
	f.Add([]byte(`<row><c><f>1</f></c></row></sheetData>`))
	f.Add([]byte("<x:row  r='2'\n><x:c\tt='str' r='&#66;2'><!-- - --><x:v>a<![CDATA[<&]]>&amp;\r\n</x:v></x:c></x:row>"))
	f.Fuzz(func(t *testing.T, rows []byte) {
		data := packOf(t, string(rows)+strings.Repeat(" ", lookahead), nil) // room to try every cell as a plain one
		w, err := Read(data)
		slow, slowErr := slowly(data)
		if fmt.Sprint(err) != fmt.Sprint(slowErr) {
			t.Fatalf("got %v, by tokens %v", err, slowErr)
		}
		if err != nil {
			known(t, err)
			return
		}
		if d := different(w, slow); d != "" {
			t.Fatalf("read as it is and by tokens: %s", d)
		}
		for _, s := range w.Sheets {
			last := 0
			for _, r := range s.Rows {
				if r.Number <= last {
					t.Fatalf("row %d follows %d", r.Number, last)
				}
				last = r.Number
				for _, c := range r.Cells {
					if got := s.At(c.Col, c.Row); got != c {
						t.Fatalf("got %+v at %s, want %+v", got, c.Name(), c)
					}
				}
			}
		}
		if bytes.Contains(rows, []byte("extLst")) { // which the older reader does not pass over everywhere
			return
		}
		reference, err := byReference(data)
		if err != nil {
			t.Fatalf("encoding/xml: %v", err)
		}
		if d := different(w, reference); d != "" {
			t.Fatalf("read as it is and with encoding/xml: %s", d)
		}
	})
}

func known(t *testing.T, err error) {
	t.Helper()
	_, bound := errors.AsType[*BoundError](err)
	_, format := errors.AsType[*FormatError](err)
	if !bound && !format || err.Error() == "" {
		t.Fatalf("got %T %v, want a *BoundError or a *FormatError", err, err)
	}
}

// FuzzScan gives the scanner a part. A small buffer must make no difference, and what it takes encoding/xml must take too.
func FuzzScan(f *testing.F) {
	for _, s := range []string{
		`<?xml version="1.0" encoding="utf-8"?><a b='1' c:d="&lt;&#x41;&#66;"><!-- x --><?p q?>t&amp;<![CDATA[<]>]]]]></a>`,
		"\xef\xbb\xbf<a>\r\n\r<b/>]]&gt;</a >", "\xff\xfe<\x00a\x00/\x00>\x00", "\x00<\x00a\x00>\xd8\x3d\xde\x00\x00<\x00/\x00a\x00>", "<!DOCTYPE a><a/>",
	} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		got, err := scanned(data, 64<<10)
		small, smallErr := scanned(data, 16)
		if (err == nil) != (smallErr == nil) || got != small { // a large one may come to the fault behind first
			t.Fatalf("got %q, %v; with a small buffer %q, %v", got, err, small, smallErr)
		}
		if err != nil {
			known(t, err)
			return
		}
		if data[0] == 0 || data[1] == 0 || data[0] >= 0xfe { // UTF-16, which encoding/xml does not read
			return
		}
		want, err := tokens(data)
		if err != nil {
			if strings.Contains(err.Error(), "encoding") || strings.Contains(err.Error(), " name") && bytes.ContainsFunc(data, func(r rune) bool { return r >= 0x80 }) {
				return // US-ASCII, and names of characters beyond ASCII, which are not asked for their classes
			}
			t.Fatalf("encoding/xml: %v, got %q", err, got)
		}
		if got != want {
			t.Fatalf("got %q, encoding/xml %q", got, want)
		}
	})
}

// spaces makes white space in values the same: encoding/xml leaves it as it stands.
var spaces = strings.NewReplacer("\n", " ", "\t", " ")

// scanned writes out what the scanner finds.
func scanned(data []byte, buffer int) (string, error) {
	x := newScannerSize("part", bytes.NewReader(data), buffer)
	var b strings.Builder
	for {
		t, err := x.next()
		if err != nil {
			return "", err
		}
		switch t {
		case endOfPart:
			return b.String(), nil
		case startTag:
			fmt.Fprintf(&b, "<%s", x.local())
			for _, a := range x.attrs {
				fmt.Fprintf(&b, " %s=%q", a.name[bytes.IndexByte(a.name, ':')+1:], spaces.Replace(string(a.value)))
			}
			b.WriteByte('>')
		case endTag:
			b.WriteString("</>")
		case charData:
			b.Write(x.chars)
		}
	}
}

// tokens writes out what encoding/xml finds.
func tokens(data []byte) (string, error) {
	d := xml.NewDecoder(bytes.NewReader(bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))))
	var b strings.Builder
	for {
		t, err := d.RawToken()
		if err == io.EOF {
			return b.String(), nil
		}
		if err != nil {
			return "", err
		}
		switch t := t.(type) {
		case xml.StartElement:
			fmt.Fprintf(&b, "<%s", t.Name.Local)
			for _, a := range t.Attr {
				fmt.Fprintf(&b, " %s=%q", a.Name.Local, spaces.Replace(a.Value))
			}
			b.WriteByte('>')
		case xml.EndElement:
			b.WriteString("</>")
		case xml.CharData:
			b.Write(t)
		}
	}
}

// FuzzReadBytes gives whole files.
func FuzzReadBytes(f *testing.F) {
	f.Add(packOf(f, `<row r="1"><c r="A1"><v>1</v></c></row>`, nil))
	f.Add([]byte("PK\x05\x06"))
	f.Fuzz(func(t *testing.T, data []byte) {
		if _, err := Read(data); err != nil {
			known(t, err)
		}
	})
}

// FuzzReadParts changes the parts beside the sheet.
func FuzzReadParts(f *testing.F) {
	f.Add(rootRels, bookRels, book, styles, shared)
	f.Fuzz(func(t *testing.T, root, rels, workbook, style, texts string) {
		w, err := Read(packOf(t, `<row><c t="s" s="1"><v>1</v></c></row>`, parts{
			"_rels/.rels": root, "xl/_rels/workbook.xml.rels": rels, "xl/workbook.xml": workbook, "xl/styles.xml": style, "xl/sharedStrings.xml": texts,
		}))
		if err != nil {
			known(t, err)
		} else if len(w.Sheets) == 0 {
			t.Error("got a workbook without sheets and no error")
		}
	})
}
