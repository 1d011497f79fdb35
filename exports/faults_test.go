package exports_test

import (
	"bytes"
	"encoding/binary"
	"hash/crc32"
	"slices"
	"strings"
	"testing"

	"lotpair/exports"
)

// The sheets of the record of the tests.
const (
	summary  = "xl/worksheets/sheet1.xml"
	results  = "xl/worksheets/sheet2.xml"
	findings = "xl/worksheets/sheet4.xml"
	readings = "xl/worksheets/sheet5.xml"
	ledger   = "xl/worksheets/sheet6.xml"
	workings = "xl/worksheets/sheet7.xml"
	trail    = "xl/worksheets/sheet9.xml"
	method   = "xl/worksheets/sheet10.xml"
)

func swap(part, old, by string) func(*kit) {
	return func(k *kit) { k.t.Helper(); k.swap(part, old, by) }
}

func match(part, pattern, by string) func(*kit) {
	return func(k *kit) { k.t.Helper(); k.match(part, pattern, by) }
}

// cellFaults change what a cell holds or shows.
var cellFaults = []fault{
	{name: "verdict in the summary", edit: swap(summary, "Equivalent.", "Not equivalent.")},
	{name: "lot in the summary", edit: swap(summary, "<t>C</t>", "<t>D</t>")},
	{name: "caution taken out of the summary", edit: match(summary, `(<row r="4[0-9]"[^>]*>)<c .*?</c>`, "$1")},
	{name: "figure in the results", edit: match(results, `<v>0\.0`, "<v>0.1")},
	{name: "last digit of a figure", edit: match(results, `(<v>\d+\.\d{14,})(\d)</v>`, "${1}</v>")},
	{name: "figures swapped", edit: match(results, `<v>0.05</v>`, "<v>0.01</v>")},
	{name: "finding taken out", edit: match(findings, `<is><t>[^<]*</t></is>`, "<is><t>none</t></is>")},
	{name: "reading", edit: swap(readings, "<v>9.9", "<v>9.8")},
	{name: "reading as text", edit: match(readings, `(<c r="D4" s="\d+")><v>([^<]*)</v>`, `$1 t="inlineStr"><is><t>$2</t></is>`)},
	{name: "address of a reading", edit: swap(readings, "C2<", "C3<")},
	{name: "text as found", edit: swap(readings, "HYPERLINK", "hyperlink")},
	{name: "reason of an exclusion", edit: swap(readings, "@dropped", "@outlier")},
	{name: "row of a reading gone", edit: match(readings, `<row r="4">.*?</row>`, "")},
	{name: "row of a reading twice", edit: match(readings, `(<row r="75">.*?</row>)`, "$1$1")},
	{name: "row too many", edit: swap(readings, "</sheetData>", `<row r="900"><c r="A900"><v>1</v></c></row></sheetData>`)},
	{name: "cell too many", edit: match(readings, `(<row r="4">.*?)</row>`, `$1<c r="Z4"><v>1</v></c></row>`)},
	{name: "formula for a value", edit: match(readings, `(<c r="D4" s="\d+">)<v>`, `$1<f>1+1</f><v>`)},
	{name: "entry of the ledger", edit: swap(ledger, "missing", "summary")},
	{name: "value of a formula", edit: match(workings, `(</f><v>)[^<]*`, "${1}1")},
	{name: "formula of the workings", edit: swap(workings, "<f>AVERAGE", "<f>MEDIAN")},
	{name: "formula taken out", edit: match(workings, `<f>[^<]*</f>`, "")},
	{name: "time in the trail", edit: swap(trail, "2026", "2025")},
	{name: "method", edit: swap(method, "Welch", "welch")},
	{name: "row hidden", edit: swap(readings, `<row r="4"`, `<row r="4" hidden="1"`)},
	{name: "columns hidden", edit: swap(readings, `<col `, `<col hidden="1" `)},
	{name: "sheet hidden", edit: swap("xl/workbook.xml", `<sheet name="Findings"`, `<sheet state="hidden" name="Findings"`)},
	{name: "sheet well hidden", edit: swap("xl/workbook.xml", `<sheet name="Ledger"`, `<sheet state="veryHidden" name="Ledger"`)},
	{name: "sheet renamed", edit: swap("xl/workbook.xml", `name="Trail"`, `name="trail"`)},
	{name: "sheets swapped", edit: func(k *kit) {
		a, b := k.get(readings), k.get(ledger)
		k.data[readings], k.data[ledger] = b, a
	}},
}

// pageFaults change what is seen beside the cells: pages, widths, looks and pictures.
var pageFaults = []fault{
	{name: "foot of the pages", edit: match(summary, `Record [0-9a-f]{12}`, "Record 000000000000")},
	{name: "a head of the pages more", edit: match(summary, `<oddFooter>`, "<oddHeader>&amp;CApproved</oddHeader><oddFooter>")},
	{name: "foot taken away", edit: match(summary, `<headerFooter.*?</headerFooter>`, "")},
	{name: "column too narrow", edit: match(summary, `width="23"`, `width="1"`)},
	{name: "row too low", edit: match(summary, `<row r="10" ht="[^"]*"`, `<row r="10" ht="1"`)},
	{name: "print area", edit: swap("xl/workbook.xml", "<definedNames>", `<definedNames><definedName localSheetId="0" name="_xlnm.Print_Area">'Summary'!$A$1:$B$2</definedName>`)},
	{name: "repeated rows", edit: swap("xl/workbook.xml", "Findings&#39;!$3:$3", "Findings&#39;!$1:$1")},
	{name: "conditional format", edit: swap(summary, "</sheetData>", `</sheetData><conditionalFormatting sqref="A10"><cfRule type="expression" priority="1"><formula>TRUE</formula></cfRule></conditionalFormatting>`)},
	{name: "ink made paper", edit: swap("xl/styles.xml", "1E2A32", "FFFFFF")},
	{name: "font struck through", edit: match("xl/styles.xml", `<sz `, "<strike/><sz ")},
	{name: "theme", edit: match("xl/theme/theme1.xml", `lastClr="[^"]*"`, `lastClr="FF0000"`)},
	{name: "picture, a bit", raw: func(t testing.TB, pkg []byte) []byte {
		k := takeApart(t, pkg)
		b := []byte(k.get("xl/media/image2.png"))
		palette := bytes.Index(b, []byte("PLTE"))
		size := int(binary.BigEndian.Uint32(b[palette-4:]))
		for i := range 3 { // the first colour that is not clear becomes black
			b[palette+4+3+i] ^= 0xFF
		}
		binary.BigEndian.PutUint32(b[palette+4+size:], crc32.ChecksumIEEE(b[palette:palette+4+size]))
		k.data["xl/media/image2.png"] = string(b)
		return k.bytes()
	}},
	{name: "picture of another", edit: func(k *kit) { k.data["xl/media/image1.png"] = k.get("xl/media/image2.png") }},
	{name: "text in a picture file", raw: func(t testing.TB, pkg []byte) []byte {
		k := takeApart(t, pkg)
		b := []byte(k.get("xl/media/image2.png"))
		at := bytes.Index(b, []byte("IEND")) - 4
		chunk := binary.BigEndian.AppendUint32(nil, 5)
		chunk = append(chunk, "tEXta\x00bcd"...)
		chunk = binary.BigEndian.AppendUint32(chunk, crc32.ChecksumIEEE(chunk[4:]))
		k.data["xl/media/image2.png"] = string(slices.Concat(b[:at], chunk, b[at:]))
		return k.bytes()
	}},
	{name: "bytes after a picture", edit: func(k *kit) { k.data["xl/media/image2.png"] += "x" }},
	{name: "picture moved", edit: match("xl/drawings/drawing1.xml", `<xdr:row>\d+`, "<xdr:row>1")},
	{name: "picture described otherwise", edit: match("xl/drawings/drawing1.xml", `descr="[^"]*"`, `descr="none"`)},
	{name: "pictures swapped", edit: func(k *kit) {
		a, b := "xl/drawings/_rels/drawing1.xml.rels", "xl/drawings/_rels/drawing2.xml.rels"
		k.data[a], k.data[b] = k.get(b), k.get(a)
	}},
	{name: "picture taken away", edit: match(summary, `<drawing [^>]*>(</drawing>)?`, "")},
	{name: "program that wrote it", edit: swap("docProps/app.xml", "Lotpair", "Other")},
}

// signedFaults are for a record that is signed afterwards.
var signedFaults = []fault{
	{name: "content besides the record", edit: swap(item, "</record>", "<more>1</more></record>")},
	{name: "comment in the record", edit: swap(item, "<layout>", "<!-- --><layout>")},
	{name: "a part more", edit: func(k *kit) { k.typed("xl/notes.xml", "<a/>", "application/xml") }},
	{name: "a sheet more", edit: func(k *kit) { addSheet(k) }},
	{name: "a relationship of the package more", edit: swap("_rels/.rels", "</Relationships>", `<Relationship Id="rId9" Type="`+office+`officeDocument" Target="xl/styles.xml"/></Relationships>`)},
	{name: "another content type", edit: swap(typesEntry, "spreadsheetml.sheet.main+xml", "spreadsheetml.template.main+xml")},
	{name: "schema of the record", edit: swap("customXml/itemProps1.xml", "record:1", "record:2")},
	{name: "a number format", edit: match("xl/styles.xml", `<xf numFmtId="0"`, `<xf numFmtId="1"`)},
}

func addSheet(k *kit) {
	k.t.Helper()
	k.typed("xl/worksheets/sheet99.xml", k.get(summary), sheetType)
	k.swap(bookRels, "</Relationships>", `<Relationship Id="rId99" Type="`+office+`worksheet" Target="worksheets/sheet99.xml"/></Relationships>`)
	k.swap("xl/workbook.xml", "</sheets>", `<sheet name="Approval" sheetId="99" r:id="rId99"></sheet></sheets>`)
}

// recordFaults change the record that the workbook carries.
var recordFaults = []fault{
	{name: "reading in the record", code: "digest-mismatch", edit: swap(item, `v="9.9`, `v="9.8`)},
	{name: "last digit of a reading in the record", code: "digest-mismatch", edit: match(item, `(<r v="[0-9.]{8,})[0-9]"`, `$1"`)},
	{name: "reading left out in the record", code: "digest-mismatch", edit: match(item, `<r v="[^"]*" c="C3"`, `$0 out="x"`)},
	{name: "reading taken out of the record", code: "digest-mismatch", edit: match(item, `<r v="[^>]*></r>`, "")},
	{name: "verdict in the record", code: "digest-mismatch", edit: match(item, "&#34;verdict&#34;:&#34;equivalent&#34;", "&#34;verdict&#34;:&#34;not equivalent&#34;")},
	{name: "margin in the record", code: "digest-mismatch", edit: match(item, "&#34;absolute&#34;:0.05", "&#34;absolute&#34;:0.5")},
	{name: "signer in the record", code: "digest-mismatch", edit: swap(item, "Ada Quill", "Eva Quill")},
	{name: "required meaning in the record", code: "digest-mismatch", edit: swap(item, "reviewed", "prepared")},
	{name: "trail in the record", code: "trail-broken", edit: swap(item, "opened the plan", "wrote the plan!")},
	{name: "calculation number in the record", code: "digest-mismatch", edit: match(item, `calculation="\d+"`, `calculation="0"`)},
	{name: "layout number in the record", code: "digest-mismatch", edit: match(item, `<layout>\d+`, `<layout>0`)},
	{name: "format of the record", code: "no-record", edit: swap(item, "lotpair.record/1", "lotpair.record/9")},
	{name: "record emptied", code: "no-record", edit: func(k *kit) { k.data[item] = "" }},
	{name: "bytes before the record", code: "digest-mismatch", edit: func(k *kit) { k.data[item] = "PK" + k.data[item] }},
	{name: "record gone", code: "part-missing", edit: func(k *kit) { k.remove(item) }},
	{name: "record of another", code: "digest-mismatch", edit: func(k *kit) { k.data[item] = takeApart(k.t, signed(k.t)).get(item) }},
	{name: "record made a seal", code: "digest-mismatch", edit: swap(item, "lotpair.record/1", "lotpair.seal/1")},
}

// stateFaults leave no trace in what is signed, or nothing that is signed.
var stateFaults = []fault{
	{name: "last signature removed", state: exports.Incomplete, edit: func(k *kit) { k.unsign("sig2.xml") }},
	{name: "all signatures removed", state: exports.Unsigned, edit: func(k *kit) { k.unsignAll() }},
	{name: "all signatures removed, and a reading changed", state: exports.Unsigned, code: "sheets-differ", edit: func(k *kit) {
		k.unsignAll()
		k.swap(readings, "<v>9.9", "<v>9.8")
	}},
	{name: "saved again by an office program", state: exports.Unreadable, code: "no-record", edit: func(k *kit) {
		k.unsignAll()
		k.remove(item)
		k.remove("customXml/itemProps1.xml")
		k.remove("customXml/_rels/item1.xml.rels")
		k.match(bookRels, `<Relationship Id="rIdRecord"[^>]*>`, "")
		k.match(typesEntry, `<Override PartName="/customXml[^>]*/>`, "")
	}},
	{name: "no archive", state: exports.Unreadable, code: "not-a-package", raw: func(testing.TB, []byte) []byte { return []byte("text") }},
	{name: "nothing", state: exports.Unreadable, code: "not-a-package", raw: func(testing.TB, []byte) []byte { return nil }},
	{name: "first half only", state: exports.Unreadable, code: "not-a-package", raw: func(_ testing.TB, b []byte) []byte { return b[:len(b)/2] }},
	{name: "another archive", state: exports.Unreadable, code: "not-a-package", edit: func(k *kit) {
		k.names = slices.DeleteFunc(k.names, func(n string) bool { return strings.HasSuffix(n, ".rels") })
	}},
	{name: "a workbook without a record", state: exports.Unreadable, code: "no-record", raw: func(t testing.TB, _ []byte) []byte {
		b, err := exports.Note("x", nil, exports.Verification{}, record(t).Result.Software, when)
		if err != nil {
			t.Fatal(err)
		}
		return b
	}},
}
