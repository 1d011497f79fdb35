package opcsign

import (
	"bytes"
	"encoding/binary"
	"slices"
	"strings"
	"testing"
)

// contentCases change what is signed.
var contentCases = []fault{
	{name: "cell", edit: func(p *pack) { p.swap(sheet, "<v>1.25</v>", "<v>1.26</v>") }, code: codeDigest},
	{name: "white space only", edit: func(p *pack) { p.swap(sheet, "<sheetData>", "<sheetData> ") }, code: codeDigest},
	{name: "shared string", edit: func(p *pack) { p.swap("xl/sharedStrings.xml", "47-B", "48-B") }, code: codeDigest},
	{name: "picture", edit: func(p *pack) { p.data["xl/media/image1.png"] += "x" }, code: codeDigest},
	{name: "chart", edit: func(p *pack) { p.swap("xl/charts/chart1.xml", "A$20", "A$19") }, code: codeDigest},
	{name: "custom properties", edit: func(p *pack) { p.swap("docProps/custom.xml", "47-B", "48-B") }, code: codeDigest},
	{name: "part removed", edit: func(p *pack) { p.remove("xl/styles.xml") }, code: codePartMissing},
	{name: "rels part removed", edit: func(p *pack) { p.remove("xl/worksheets/_rels/sheet1.xml.rels") }, code: codePartMissing},
	{name: "part renamed", edit: func(p *pack) {
		p.set("xl/theme/theme2.xml", p.get("xl/theme/theme1.xml"))
		p.remove("xl/theme/theme1.xml")
		p.swap(typesEntry, "/xl/theme/theme1.xml", "/xl/theme/theme2.xml")
	}, code: codeUnsigned},
	{name: "manifest digest and cell", edit: func(p *pack) {
		p.swap(sheet, "<v>1.25</v>", "<v>1.26</v>")
		p.swapAll(sig1, `(/xl/worksheets/sheet2.xml\?[^"]*">)(<DigestMethod [^>]*/><DigestValue>)[^<]*`, "${1}${2}47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU=")
	}, code: codeDigest},
	{name: "manifest reference and cell removed", edit: func(p *pack) {
		p.swap(sheet, "<v>1.25</v>", "<v>1.26</v>")
		p.swapAll(sig1, `<Reference URI="/xl/worksheets/sheet2.xml\?.*?</Reference>`, "")
	}, code: codeUnsigned},
	{name: "packed bytes damaged", raw: func(t testing.TB, b []byte) []byte {
		i := bytes.Index(b, []byte("xl/styles.xml")) + 40
		b = bytes.Clone(b)
		b[i] ^= 0x55
		return b
	}, code: codeDamaged},
}

// packageCases add to a package or change how its parts hang together.
var packageCases = []fault{
	{name: "sheet added in full", edit: func(p *pack) {
		p.set("xl/worksheets/sheet9.xml", p.get(sheet))
		p.swap(typesEntry, "</Types>", `<Override PartName="/xl/worksheets/sheet9.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/></Types>`)
		p.swap(book, "</Relationships>", `<Relationship Id="rId99" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/worksheet" Target="worksheets/sheet9.xml"/></Relationships>`)
	}, code: codeRelUnsigned},
	{name: "stray part", edit: func(p *pack) { p.set("xl/stray.xml", "<a/>") }, code: codeUnsigned},
	{name: "stray part without type", edit: func(p *pack) { p.set("xl/stray.bin", "a") }, code: codeContentMissing},
	{name: "rels added to a part without", edit: func(p *pack) {
		p.set("xl/_rels/styles.xml.rels", relElements+`<Relationship Id="rId1" Type="t" Target="x.xml"/></Relationships>`)
	}, code: codeUnsigned},
	{name: "empty rels added", edit: func(p *pack) { p.set("xl/_rels/styles.xml.rels", relElements+`</Relationships>`) }, code: codeUnsigned},
	{name: "rels of no part", edit: func(p *pack) { p.set("xl/_rels/none.xml.rels", relElements+`</Relationships>`) }, code: codeRelOrphan},
	{name: "second workbook in front", edit: func(p *pack) {
		p.swapAll("_rels/.rels", `(<Relationships [^>]*>)`, `$1<Relationship Id="rId0" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/officeDocument" Target="xl/evil.xml"/>`)
	}, code: codeRelUnsigned},
	{name: "core properties back", edit: func(p *pack) {
		p.set("docProps/core.xml", "<a/>")
		p.swap("_rels/.rels", "</Relationships>", `<Relationship Id="rId77" Type="`+coreRel+`" Target="docProps/core.xml"/></Relationships>`)
		p.swap(typesEntry, "</Types>", `<Override PartName="/docProps/core.xml" ContentType="`+coreType+`"/></Types>`)
	}, code: codeUnsigned},
	{name: "relationship removed", edit: func(p *pack) { p.swapAll(book, `<Relationship [^>]*styles.xml[^>]*>(</Relationship>)?`, "") }, code: codeRelMissing},
	{name: "relationship retargeted", edit: func(p *pack) { p.swap(book, "sheet2.xml", "sheet1.xml") }, code: codeDigest},
	{name: "hyperlink retargeted", edit: func(p *pack) { p.swap("xl/worksheets/_rels/sheet1.xml.rels", "example.org", "example.com") }, code: codeDigest},
	{name: "relationship made external", edit: func(p *pack) { p.swap(book, `Id="`, `TargetMode="External" Id="`) }, code: codeDigest},
	{name: "relationship Id twice", edit: func(p *pack) {
		p.swapAll(book, `(<Relationship Id="[^"]*")`, `$1`)
		p.swapAll(book, `(<Relationship [^>]*(/>|></Relationship>))(.*)$`, `$1$1$3`)
	}, code: codeRelDuplicate},
	{name: "relationship with more attributes", edit: func(p *pack) { p.swap(book, "<Relationship ", `<Relationship Title="x" `) }, code: codeRelForm},
	{name: "content type of a part", edit: func(p *pack) {
		p.swapAll(typesEntry, `(PartName="/xl/styles.xml" ContentType=")[^"]*`, "${1}application/xml")
	}, code: codeType},
	{name: "content type made macro", edit: func(p *pack) {
		p.swap(typesEntry, "spreadsheetml.sheet.main+xml", "ms-excel.sheet.macroEnabled.main+xml")
	}, code: codeType},
	{name: "content type of an ending", edit: func(p *pack) { p.swap(typesEntry, "image/png", "image/gif") }, code: codeType},
	{name: "content type twice", edit: func(p *pack) {
		p.swap(typesEntry, "</Types>", `<Override PartName="/XL/styles.xml" ContentType="application/xml"/></Types>`)
	}, code: codeContentDuplicate},
	{name: "content type of no part", edit: func(p *pack) {
		p.swap(typesEntry, "</Types>", `<Override PartName="/xl/later.xml" ContentType="application/xml"/></Types>`)
	}, code: codeContentUnused},
	{name: "content types with a DTD", edit: func(p *pack) { p.swap(typesEntry, "<Types", "<!DOCTYPE Types><Types") }, code: codeContentForm},
	{name: "two origins", edit: func(p *pack) {
		p.swap("_rels/.rels", "</Relationships>", `<Relationship Id="rId88" Type="`+originRel+`" Target="_xmlsignatures/origin.sigs"/></Relationships>`)
	}, code: codeOrigin},
	{name: "origin filled", edit: func(p *pack) { p.set("_xmlsignatures/origin.sigs", "x") }, code: codeOrigin},
	{name: "signature relationship hidden", edit: func(p *pack) {
		p.swapAll("_xmlsignatures/_rels/origin.sigs.rels", `<Relationship [^>]*Target="sig2.xml"/>`, "")
	}, code: codeStray},
	{name: "other relationship of the origin", edit: func(p *pack) {
		p.swap("_xmlsignatures/_rels/origin.sigs.rels", "</Relationships>", `<Relationship Id="rId9" Type="t" Target="../xl/workbook.xml"/></Relationships>`)
	}, code: codeStray},
	{name: "file among the signatures", edit: func(p *pack) { p.set("_xmlsignatures/note.xml", "<a/>") }, code: codeStray},
	{name: "all signatures gone, origin left", signatures: 1, edit: func(p *pack) { removeSignature(p, "sig1.xml") }, code: codeNoSignature},
}

// archiveCases are faults of the archive that part of the readers do not see.
var archiveCases = []fault{
	{name: "name twice, other content first", raw: func(t testing.TB, b []byte) []byte {
		p := takeApart(t, b)
		p.names = slices.Insert(p.names, 0, "xl/worksheets/sheetX.xml")
		p.data["xl/worksheets/sheetX.xml"] = "<evil/>"
		return bytes.ReplaceAll(p.bytes(), []byte("sheetX.xml"), []byte("sheet2.xml"))
	}, code: codeZipDuplicate},
	{name: "name twice, other content last", raw: func(t testing.TB, b []byte) []byte {
		p := takeApart(t, b)
		p.set("xl/worksheets/sheetX.xml", "<evil/>")
		return bytes.ReplaceAll(p.bytes(), []byte("sheetX.xml"), []byte("sheet2.xml"))
	}, code: codeZipDuplicate},
	{name: "name twice, case apart", edit: func(p *pack) { p.set("xl/worksheets/SHEET2.xml", "<evil/>") }, code: codeZipDuplicate},
	{name: "bytes after the end", raw: func(_ testing.TB, b []byte) []byte { return append(bytes.Clone(b), "tail"...) }, code: codeZipTrailing},
	{name: "bytes before the start", raw: func(_ testing.TB, b []byte) []byte { return append([]byte("head"), b...) }, code: codeZipGap},
	{name: "bytes before the start, offsets moved", raw: func(_ testing.TB, b []byte) []byte { return insert(b, 0, []byte("head")) }, code: codeZipGap},
	{name: "archive comment", raw: func(_ testing.TB, b []byte) []byte {
		b = append(bytes.Clone(b), "hi"...)
		b[len(b)-4] = 2
		return b
	}, code: codeZipComment},
	{name: "hidden local entry", raw: func(t testing.TB, b []byte) []byte {
		dir := int(binary.LittleEndian.Uint32(b[len(b)-6:]))
		return insert(b, dir, entryBytes(t, sheet, "<evil/>"))
	}, code: codeZipGap},
	{name: "hidden local entry in front", raw: func(t testing.TB, b []byte) []byte { return insert(b, 0, entryBytes(t, sheet, "<evil/>")) }, code: codeZipGap},
	{name: "local name differs", raw: func(_ testing.TB, b []byte) []byte {
		return bytes.Replace(b, []byte("xl/styles.xml"), []byte("xl/stylez.xml"), 1)
	}, code: codeZipMismatch},
	{name: "folder entry", edit: func(p *pack) { p.set("xl/", "") }, code: codeZipName},
	{name: "name upwards", edit: func(p *pack) { p.set("xl/../evil.xml", "<a/>") }, code: codeZipName},
	{name: "name with a backslash", edit: func(p *pack) { p.set(`xl\evil.xml`, "<a/>") }, code: codeZipName},
	{name: "bytes behind the packed content", raw: func(t testing.TB, b []byte) []byte {
		return padPacked(t, b, "xl/styles.xml", "hidden")
	}, code: codeDamaged},
}

// padPacked adds bytes to the packed content of an entry, with all sizes right.
func padPacked(t testing.TB, b []byte, name, extra string) []byte {
	t.Helper()
	p := takeApart(t, b)
	var out []byte
	{
		whole := p.bytes()
		a, err := openArchive(whole)
		if err != nil {
			t.Fatal(err)
		}
		e := a.byName[name]
		at := e.offset + localSize + len(e.name) + e.packSize
		out = insert(whole, at, []byte(extra))
		grown := uint32(e.packSize + len(extra))
		le := binary.LittleEndian
		le.PutUint32(out[at+len(extra)+8:], grown) // the descriptor: mark, check sum, packed size
		dir := int(le.Uint32(out[len(out)-6:]))
		i := dir + bytes.Index(out[dir:], []byte(name)) - directorySize
		le.PutUint32(out[i+20:], grown)
	}
	if strings.Count(string(out), extra) != 1 {
		t.Fatal("padding went wrong")
	}
	return out
}
