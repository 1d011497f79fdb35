package exports_test

import (
	"bytes"
	"encoding/binary"
	"slices"
	"strings"
	"testing"
)

// packageFaults add to the package or change how its parts hang together.
var packageFaults = []fault{
	{name: "sheet added in full", code: "relationship-unsigned", edit: addSheet},
	{name: "sheet added, part and relationship only", code: "relationship-unsigned", edit: func(k *kit) {
		k.typed("xl/worksheets/sheet99.xml", k.get(summary), sheetType)
		k.swap(bookRels, "</Relationships>", `<Relationship Id="rId99" Type="`+office+`worksheet" Target="worksheets/sheet99.xml"/></Relationships>`)
	}},
	{name: "stray part", code: "unsigned-part", edit: func(k *kit) { k.set("xl/stray.xml", "<a/>") }},
	{name: "stray picture", code: "unsigned-part", edit: func(k *kit) { k.set("xl/media/image9.png", "x") }},
	{name: "stray part without type", code: "content-type-missing", edit: func(k *kit) { k.set("xl/stray.bin", "a") }},
	{name: "macros", code: "unsigned-part", edit: func(k *kit) { k.typed("xl/vbaProject.bin", "x", "application/vnd.ms-office.vbaProject") }},
	{name: "comments on a sheet", code: "unsigned-part", edit: func(k *kit) {
		k.typed("xl/comments1.xml", `<comments xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"/>`, "application/vnd.openxmlformats-officedocument.spreadsheetml.comments+xml")
		k.set("xl/worksheets/_rels/sheet2.xml.rels", `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="`+office+`comments" Target="../comments1.xml"/></Relationships>`)
	}},
	{name: "comments beside a picture", code: "relationship-unsigned", edit: func(k *kit) {
		k.typed("xl/comments1.xml", `<comments xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"/>`, "application/vnd.openxmlformats-officedocument.spreadsheetml.comments+xml")
		k.swap("xl/worksheets/_rels/sheet1.xml.rels", "</Relationships>", `<Relationship Id="rId9" Type="`+office+`comments" Target="../comments1.xml"/></Relationships>`)
	}},
	{name: "second workbook in front", code: "relationship-unsigned", edit: match("_rels/.rels", `(<Relationships [^>]*>)`, `$1<Relationship Id="rId0" Type="`+office+`officeDocument" Target="xl/evil.xml"/>`)},
	{name: "core properties back", code: "unsigned-part", edit: func(k *kit) {
		k.typed("docProps/core.xml", "<a/>", "application/vnd.openxmlformats-package.core-properties+xml")
		k.swap("_rels/.rels", "</Relationships>", `<Relationship Id="rId77" Type="http://schemas.openxmlformats.org/package/2006/relationships/metadata/core-properties" Target="docProps/core.xml"/></Relationships>`)
	}},
	{name: "empty relationships added", code: "unsigned-part", edit: func(k *kit) {
		k.set("xl/_rels/styles.xml.rels", `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"></Relationships>`)
	}},
	{name: "second record", code: "unsigned-part", edit: func(k *kit) { k.set("customXml/item2.xml", k.get(item)) }},
	{name: "styles removed", code: "part-missing", edit: func(k *kit) { k.remove("xl/styles.xml") }},
	{name: "relationships of a sheet removed", code: "part-missing", edit: func(k *kit) { k.remove("xl/worksheets/_rels/sheet1.xml.rels") }},
	{name: "part renamed", code: "unsigned-part", edit: func(k *kit) {
		k.set("xl/theme/theme2.xml", k.get("xl/theme/theme1.xml"))
		k.remove("xl/theme/theme1.xml")
		k.swap(typesEntry, "/xl/theme/theme1.xml", "/xl/theme/theme2.xml")
	}},
	{name: "relationship removed", code: "relationship-missing", edit: match(bookRels, `<Relationship [^>]*styles.xml[^>]*>(</Relationship>)?`, "")},
	{name: "relationship of the record removed", code: "relationship-missing", edit: match(bookRels, `<Relationship Id="rIdRecord"[^>]*/>`, "")},
	{name: "relationship retargeted", code: "digest-mismatch", edit: swap(bookRels, "sheet2.xml", "sheet1.xml")},
	{name: "relationship made external", code: "digest-mismatch", edit: swap(bookRels, `<Relationship Id="rId1" `, `<Relationship Id="rId1" TargetMode="External" `)},
	{name: "relationship of another kind", code: "digest-mismatch", edit: swap(bookRels, "relationships/worksheet", "relationships/chartsheet")},
	{name: "relationship twice", code: "relationship-duplicate-id", edit: match(bookRels, `(<Relationship Id="rIdRecord"[^>]*/>)`, "$1$1")},
	{name: "content type of a part", code: "content-type-changed", edit: match(typesEntry, `(PartName="/xl/styles.xml" ContentType=")[^"]*`, "${1}application/xml")},
	{name: "content type made macro", code: "content-type-changed", edit: swap(typesEntry, "openxmlformats-officedocument.spreadsheetml.sheet.main+xml", "ms-excel.sheet.macroEnabled.main+xml")},
	{name: "content type of an ending", code: "content-type-changed", edit: swap(typesEntry, "image/png", "image/gif")},
	{name: "content type twice", code: "content-type-duplicate", edit: swap(typesEntry, "</Types>", `<Override PartName="/XL/styles.xml" ContentType="application/xml"/></Types>`)},
	{name: "content type of no part", code: "content-type-unused", edit: swap(typesEntry, "</Types>", `<Override PartName="/xl/later.xml" ContentType="application/xml"/></Types>`)},
	{name: "two origins", code: "origin", edit: swap("_rels/.rels", "</Relationships>", `<Relationship Id="rId88" Type="http://schemas.openxmlformats.org/package/2006/relationships/digital-signature/origin" Target="_xmlsignatures/origin.sigs"/></Relationships>`)},
	{name: "origin filled", code: "origin", edit: func(k *kit) { k.set("_xmlsignatures/origin.sigs", "x") }},
	{name: "signature hidden", code: "signature-stray", edit: match(originRels, `<Relationship [^>]*Target="sig2.xml"/>`, "")},
	{name: "file among the signatures", code: "signature-stray", edit: func(k *kit) { k.set("_xmlsignatures/note.xml", "<a/>") }},
	{name: "origin left without signatures", code: "signature-missing", edit: func(k *kit) {
		k.unsign("sig2.xml")
		k.unsign("sig1.xml")
	}},
}

// archiveFaults are faults of the archive, part of which most readers do not see.
var archiveFaults = []fault{
	{name: "name twice, other content first", code: "zip-duplicate-name", raw: func(t testing.TB, b []byte) []byte {
		k := takeApart(t, b)
		k.names = slices.Insert(k.names, 0, "xl/worksheets/sheetX.xml")
		k.data["xl/worksheets/sheetX.xml"] = "<evil/>"
		return bytes.ReplaceAll(k.bytes(), []byte("sheetX.xml"), []byte("sheet2.xml"))
	}},
	{name: "name twice, other content last", code: "zip-duplicate-name", raw: func(t testing.TB, b []byte) []byte {
		k := takeApart(t, b)
		k.set("xl/worksheets/sheetX.xml", "<evil/>")
		return bytes.ReplaceAll(k.bytes(), []byte("sheetX.xml"), []byte("sheet2.xml"))
	}},
	{name: "name twice, case apart", code: "zip-duplicate-name", edit: func(k *kit) { k.set("xl/worksheets/SHEET2.xml", "<evil/>") }},
	{name: "bytes after the end", code: "zip-trailing", raw: func(_ testing.TB, b []byte) []byte { return append(bytes.Clone(b), "tail"...) }},
	{name: "bytes before the start", code: "zip-gap", raw: func(_ testing.TB, b []byte) []byte { return append([]byte("head"), b...) }},
	{name: "bytes before the start, offsets moved", code: "zip-gap", raw: func(_ testing.TB, b []byte) []byte { return insert(b, 0, []byte("head")) }},
	{name: "archive comment", code: "zip-comment", raw: func(_ testing.TB, b []byte) []byte {
		b = append(bytes.Clone(b), "hi"...)
		b[len(b)-4] = 2
		return b
	}},
	{name: "hidden entry", code: "zip-gap", raw: func(t testing.TB, b []byte) []byte {
		k := &kit{t: t, data: map[string]string{}}
		k.set(results, "<evil/>")
		e := k.bytes()
		e = e[:binary.LittleEndian.Uint32(e[len(e)-6:])]
		return insert(b, int(binary.LittleEndian.Uint32(b[len(b)-6:])), e)
	}},
	{name: "local name differs", code: "zip-mismatch", raw: func(_ testing.TB, b []byte) []byte {
		return bytes.Replace(b, []byte("xl/styles.xml"), []byte("xl/stylez.xml"), 1)
	}},
	{name: "folder", code: "zip-name", edit: func(k *kit) { k.set("xl/", "") }},
	{name: "name upwards", code: "zip-name", edit: func(k *kit) { k.set("xl/../evil.xml", "<a/>") }},
	{name: "name with a backslash", code: "zip-name", edit: func(k *kit) { k.set(`xl\evil.xml`, "<a/>") }},
	{name: "packed bytes damaged", code: "part-damaged", raw: func(_ testing.TB, b []byte) []byte {
		b = bytes.Clone(b)
		b[bytes.Index(b, []byte("xl/styles.xml"))+40] ^= 0x55
		return b
	}},
}

// signatureFaults change a signature without its key.
var signatureFaults = []fault{
	{name: "time of a signature", code: "digest-mismatch", edit: swap(sig1, "<mdssi:Value>2026", "<mdssi:Value>2025")},
	{name: "comment that office programs show", code: "digest-mismatch", edit: swap(sig1, "<SignatureComments>prepared", "<SignatureComments>approved")},
	{name: "role", code: "digest-mismatch", edit: swap(sig1, "<xd:ClaimedRole>Eng", "<xd:ClaimedRole>Ing")},
	{name: "meaning", code: "digest-mismatch", edit: swap(sig1, "<lp:Meaning>prepared", "<lp:Meaning>approved")},
	{name: "disposition", code: "digest-mismatch", edit: swap(sig2, "released", "rejected")},
	{name: "name in a signature", code: "digest-mismatch", edit: swap(sig2, "<lp:Name>Bert", "<lp:Name>Kurt")},
	{name: "value of a signature", code: "signature-value", edit: match(sig1, `(<SignatureValue>)....`, "${1}AAAA")},
	{name: "digest of a part and the part", code: "digest-mismatch", edit: func(k *kit) {
		k.swap(readings, "<v>9.9", "<v>9.8")
		k.match(sig1, `(/xl/worksheets/sheet5.xml\?[^"]*"><DigestMethod [^>]*/><DigestValue>)[^<]*`, "${1}47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU=")
	}},
	{name: "reference to a part and the part", code: "digest-mismatch", edit: func(k *kit) {
		k.swap(readings, "<v>9.9", "<v>9.8")
		k.match(sig1, `<Reference URI="/xl/worksheets/sheet5.xml\?.*?</Reference>`, "")
	}},
	{name: "first signature removed", code: "previous-missing", edit: func(k *kit) { k.unsign("sig1.xml") }},
	{name: "one signature in the place of the other", code: "previous-unlisted", edit: func(k *kit) { k.data[sig2] = k.get(sig1) }},
	{name: "signatures swapped", edit: func(k *kit) { k.data[sig1], k.data[sig2] = k.get(sig2), k.get(sig1) }},
	{name: "unsigned object last", code: "unreferenced-object", edit: swap(sig1, "</Signature>", `<Object Id="spoof"/></Signature>`)},
	{name: "unsigned object first", code: "unreferenced-object", edit: swap(sig1, "<Object ", `<Object Id="spoof"/><Object `)},
	{name: "another certificate after", code: "certificate", edit: func(k *kit) {
		k.swap(sig1, "</X509Certificate>", "</X509Certificate>"+certificateIn(k, sig2))
	}},
	{name: "another certificate before", code: "certificate-mismatch", edit: func(k *kit) { k.swap(sig1, "<X509Certificate>", certificateIn(k, sig2)+"<X509Certificate>") }},
	{name: "another certificate instead", code: "signature-value", edit: func(k *kit) {
		k.match(sig1, "<X509Certificate>.*?</X509Certificate>", certificateIn(k, sig2))
	}},
	{name: "no certificate", code: "signature-form", edit: match(sig1, "<KeyInfo>.*?</KeyInfo>", "")},
	{name: "wrapped, same Id", code: "duplicate-id", edit: match(sig1, `(<Object Id="idPackageObject">.*?</Object>)`, `$1<Object Id="wrap">$1</Object>`)},
	{name: "root is no signature", code: "signature-form", edit: match(sig1, `(<Signature .*</Signature>)`, `<wrap>$1</wrap>`)},
	{name: "signature in a signature", code: "nested-signature", edit: swap(sig1, "</Signature>", "<Object><Signature/></Object></Signature>")},
	{name: "DTD", code: "dtd", edit: swap(sig1, "<Signature ", `<!DOCTYPE Signature [<!ENTITY e "x">]><Signature `)},
	{name: "comment in a text", code: "comment-in-signature", edit: swap(sig1, "<lp:Meaning>pre", "<lp:Meaning>pre<!-- -->")},
	{name: "instruction", code: "instruction-in-signature", edit: swap(sig1, "<KeyInfo>", "<?a b?><KeyInfo>")},
	{name: "manifest emptied", code: "package-object", edit: match(sig1, "<Manifest>.*?</Manifest>", "<Manifest></Manifest>")},
	{name: "package object not named", code: "package-object", edit: match(sig1, `<Reference [^>]*URI="#idPackageObject">.*?</Reference>`, "")},
	{name: "signature method weaker", code: "weak-algorithm", edit: swap(sig1, "xmldsig-more#ecdsa-sha256", "xmldsig-more#ecdsa-sha1")},
	{name: "signature no XML", code: "xml", edit: func(k *kit) { k.data[sig1] += "<a>" }},
}

func certificateIn(k *kit, part string) string {
	s := k.get(part)
	const open, shut = "<X509Certificate>", "</X509Certificate>"
	i := strings.Index(s, open)
	return s[i : i+strings.Index(s[i:], shut)+len(shut)]
}
