package opcsign

import (
	"crypto"
	"crypto/rand"
	"crypto/x509"
	"regexp"
	"strings"
	"testing"
)

var objectPattern = regexp.MustCompile(`<Object Id="idPackageObject">.*?</Object>`)

const spoof = `<Object Id="spoof"><SignatureProperties><SignatureProperty Target="#idPackageSignature"><lp:Statement xmlns:lp="` + statementSpace +
	`"><lp:Name>Mallory</lp:Name></lp:Statement></SignatureProperty></SignatureProperties></Object>`

func certificateOf(t testing.TB, person string) string {
	t.Helper()
	return "<X509Certificate>" + b64(key(t, person).Chain[0].Raw) + "</X509Certificate>"
}

// signatureCases change a signature part without a key.
var signatureCases = []fault{
	{name: "signature time", edit: func(p *pack) { p.swap(sig1, "<mdssi:Value>2026", "<mdssi:Value>2025") }, code: codeDigest},
	{name: "comment shown", edit: func(p *pack) { p.swap(sig1, "<SignatureComments>prepared", "<SignatureComments>approved") }, code: codeDigest},
	{name: "role", edit: func(p *pack) { p.swap(sig1, "<xd:ClaimedRole>Eng", "<xd:ClaimedRole>Ing") }, code: codeDigest},
	{name: "meaning", edit: func(p *pack) { p.swap(sig1, "<lp:Meaning>prepared", "<lp:Meaning>approved") }, code: codeDigest},
	{name: "signature value", edit: func(p *pack) {
		p.swapAll(sig1, "<SignatureValue>.*?</SignatureValue>", "<SignatureValue>"+b64(make([]byte, 64))+"</SignatureValue>")
	}, code: codeValue},
	{name: "second of three removed", signatures: 3, edit: func(p *pack) { removeSignature(p, "sig2.xml") }, code: codePrevMissing},
	{name: "first of two removed", edit: func(p *pack) { removeSignature(p, "sig1.xml") }, code: codePrevMissing},
	{name: "first signed anew", edit: func(p *pack) { p.sign(sig1, key(p.t, "prepared")) }, code: codePrevChanged},
	{name: "unsigned object last", edit: func(p *pack) { p.swap(sig1, "</Signature>", spoof+"</Signature>") }, code: codeUnreferenced},
	{name: "unsigned object first", edit: func(p *pack) { p.swap(sig1, "<Object ", spoof+"<Object ") }, code: codeUnreferenced},
	{name: "unsigned content beside the properties", edit: func(p *pack) {
		p.swap(sig1, "</xd:QualifyingProperties>", "</xd:QualifyingProperties>"+`<SignatureTime xmlns="`+opcSpace+`"/>`)
	}, code: codeUnreferenced},
	{name: "unsigned property other than a time stamp", edit: func(p *pack) {
		p.swap(sig1, "</xd:QualifyingProperties>", "<xd:UnsignedProperties><xd:UnsignedSignatureProperties><xd:CounterSignature/></xd:UnsignedSignatureProperties></xd:UnsignedProperties></xd:QualifyingProperties>")
	}, code: codeUnreferenced},
	{name: "another certificate after", edit: func(p *pack) {
		p.swap(sig1, "</X509Certificate>", "</X509Certificate>"+certificateOf(p.t, "other"))
	}, code: codeCertificate},
	{name: "another certificate before", edit: func(p *pack) {
		p.swap(sig1, "<X509Certificate>", certificateOf(p.t, "other")+"<X509Certificate>")
	}, code: codeMismatch},
	{name: "another certificate instead", edit: func(p *pack) {
		p.swapAll(sig1, "<X509Certificate>.*?</X509Certificate>", certificateOf(p.t, "other"))
	}, code: codeValue},
	{name: "another X509Data", edit: func(p *pack) {
		p.swap(sig1, "</X509Data>", "</X509Data><X509Data>"+certificateOf(p.t, "other")+"</X509Data>")
	}, code: codeForm},
	{name: "key value beside the certificate", edit: func(p *pack) { p.swap(sig1, "<X509Data>", "<KeyName>Mallory</KeyName><X509Data>") }, code: codeForm},
	{name: "wrapped, same Id", edit: func(p *pack) {
		o := objectPattern.FindString(p.get(sig1))
		p.swap(sig1, o, strings.ReplaceAll(o, "idSignatureTime", "idOther")+`<Object Id="wrap">`+o+`</Object>`)
	}, code: codeDuplicateID},
	{name: "wrapped, moved away", edit: func(p *pack) {
		o := objectPattern.FindString(p.get(sig1))
		evil := strings.ReplaceAll(strings.Replace(o, packageID, "evil", 1), "idSignatureTime", "idOther")
		p.swap(sig1, o, evil+`<Object Id="wrap">`+o+`</Object>`)
	}, code: codePackage},
	{name: "root is no signature", edit: func(p *pack) {
		p.swapAll(sig1, `(<Signature .*</Signature>)`, `<wrap>$1</wrap>`)
	}, code: codeForm},
	{name: "signature inside the signature", edit: func(p *pack) {
		p.swap(sig1, "</Signature>", "<Object><Signature/></Object></Signature>")
	}, code: codeNested},
	{name: "DTD", edit: func(p *pack) {
		p.swap(sig1, "<Signature ", `<!DOCTYPE Signature [<!ENTITY e "x">]><Signature `)
	}, code: codeDTD},
	{name: "comment in text", edit: func(p *pack) { p.swap(sig1, "<lp:Meaning>pre", "<lp:Meaning>pre<!-- -->") }, code: codeComment},
	{name: "comment after the root", edit: func(p *pack) { p.data[sig1] += "<!-- -->" }, code: codeComment},
	{name: "instruction", edit: func(p *pack) { p.swap(sig1, "<KeyInfo>", "<?a b?><KeyInfo>") }, code: codeInstruction},
	{name: "not well-formed", edit: func(p *pack) { p.data[sig1] += "<a>" }, code: codeXML},
	{name: "text between the elements", edit: func(p *pack) { p.swap(sig1, "<KeyInfo>", "approved<KeyInfo>") }, code: codeForm},
	{name: "order of the elements", edit: func(p *pack) { p.swapAll(sig1, "(<KeyInfo>.*?</KeyInfo>)(<Object.*)</Signature>", "$2$1</Signature>") }, code: codeForm},
	{name: "manifest emptied", edit: func(p *pack) { p.swapAll(sig1, "<Manifest>.*?</Manifest>", "<Manifest></Manifest>") }, code: codePackage},
	{name: "package object not named", edit: func(p *pack) { p.swapAll(sig1, `<Reference [^>]*URI="#idPackageObject">.*?</Reference>`, "") }, code: codePackage},
	{name: "signature of one on the other's place", edit: func(p *pack) { p.data[sig2] = p.get(sig1) }, code: codePrevUnlisted},
}

// signerCases are made by somebody with a key, who signs what must not be signed: every digest and value is right.
var signerCases = []fault{
	signer("statement of another name", codeDiffers, func(p *pack) { p.swap(sig1, "<lp:Name>Ada", "<lp:Name>Eva") }),
	signer("another time shown", codeDiffers, func(p *pack) { p.swap(sig1, "<mdssi:Value>2026", "<mdssi:Value>2027") }),
	signer("another signing time", codeDiffers, func(p *pack) { p.swap(sig1, "<xd:SigningTime>2026", "<xd:SigningTime>2027") }),
	signer("another comment shown", codeDiffers, func(p *pack) { p.swap(sig1, "<SignatureComments>prepared", "<SignatureComments>approved") }),
	signer("another role shown", codeDiffers, func(p *pack) { p.swap(sig1, "<xd:ClaimedRole>Eng", "<xd:ClaimedRole>Head eng") }),
	signer("another commitment shown", codeDiffers, func(p *pack) { p.swap(sig1, "<xd:Description>prepared", "<xd:Description>approved") }),
	signer("before the certificate", codeCertTime, func(p *pack) { p.swapAll(sig1, "2026-12-01T", "2025-12-01T") }),
	signer("certificate for enciphering only", codeCertificate, func(p *pack) {
		id := key(p.t, "prepared")
		c := &x509.Certificate{
			SerialNumber: id.Chain[0].SerialNumber, Subject: id.Chain[0].Subject, NotBefore: id.Chain[0].NotBefore, NotAfter: id.Chain[0].NotAfter,
			RawSubject: id.Chain[0].RawSubject, KeyUsage: x509.KeyUsageKeyEncipherment, BasicConstraintsValid: true,
		}
		der, err := x509.CreateCertificate(rand.Reader, c, c, id.Key.Public(), id.Key)
		if err != nil {
			p.t.Fatal(err)
		}
		p.swapAll(sig1, `<X509Certificate>[^<]*`, "<X509Certificate>"+b64(der))
		p.swapAll(sig1, `(<xd:CertDigest><DigestMethod [^>]*/><DigestValue>)[^<]*`, "${1}"+b64(sum(crypto.SHA256, der)))
	}),
	signer("no statement", codeStatement, func(p *pack) { p.swapAll(sig1, "<lp:Statement.*?</lp:Statement>", "<a xmlns='b'/>") }),
	signer("two statements", codeStatement, func(p *pack) { p.swapAll(sig1, "(<lp:Statement.*?</lp:Statement>)", "$1$1") }),
	signer("field twice", codeStatementBad, func(p *pack) { p.swapAll(sig1, "(<lp:Meaning>.*?</lp:Meaning>)", "$1$1") }),
	signer("certificate digest", codeMismatch, func(p *pack) {
		p.swapAll(sig1, `(<xd:CertDigest><DigestMethod [^>]*/><DigestValue>)[^<]*`, "${1}47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU=")
	}),
	signer("SHA-1 digest", codeWeak, func(p *pack) { p.swap(sig1, sha256URI, dsSpace+"sha1") }),
	signer("SHA-1 signature", codeWeak, func(p *pack) { p.swap(sig1, moreSpace+"ecdsa-sha256", dsSpace+"rsa-sha1") }),
	signer("unknown signature method", codeAlgorithm, func(p *pack) {
		p.swap(sig1, moreSpace+"ecdsa-sha256", "http://www.w3.org/2021/04/xmldsig-more#eddsa-ed25519")
	}),
	signer("method of another key", codeAlgorithm, func(p *pack) { p.swap(sig1, "ecdsa-sha256", "rsa-sha256") }),
	signer("exclusive canonicalisation", codeTransform, func(p *pack) {
		p.swap(sig1, `<CanonicalizationMethod Algorithm="`+c14n, `<CanonicalizationMethod Algorithm="http://www.w3.org/2001/10/xml-exc-c14n#`)
	}),
	signer("XPath in a reference", codeTransform, func(p *pack) {
		p.swap(sig1, `<Transform Algorithm="`+c14n+`"/></Transforms><DigestMethod`, `<Transform Algorithm="http://www.w3.org/TR/1999/REC-xpath-19991116"/></Transforms><DigestMethod`)
	}),
	signer("transform of a part", codeTransform, func(p *pack) {
		p.swapAll(sig1, `(/xl/styles.xml\?[^"]*">)`, `$1<Transforms><Transform Algorithm="`+c14n+`"/></Transforms>`)
	}),
	signer("relationships by type", codeTransform, func(p *pack) {
		p.swapAll(sig1, `<mdssi:RelationshipReference ([^>]*)SourceId="[^"]*"/>`, `<mdssi:RelationshipsGroupReference ${1}SourceType="t"/>`)
	}),
	signer("part twice", codeTwice, func(p *pack) { p.swapAll(sig1, `(<Reference URI="/xl/styles.xml.*?</Reference>)`, "$1$1") }),
	signer("part outside the package", codeReference, func(p *pack) {
		p.swap(sig1, `<Reference URI="/xl/styles.xml`, `<Reference URI="https://example.org/styles.xml`)
	}),
	signer("part left out", codeUnsigned, func(p *pack) { p.swapAll(sig1, `<Reference URI="/xl/styles.xml.*?</Reference>`, "") }),
	signer("relationship left out", codeRelUnsigned, func(p *pack) {
		p.swapAll(sig1, `(/xl/_rels/workbook.xml.rels.*?)<mdssi:RelationshipReference [^>]*/>`, "$1")
	}),
	signer("reference out of the document", codeReference, func(p *pack) { p.swap(sig1, `URI="#idOfficeObject"`, `URI="https://example.org/"`) }),
	signer("reference to the whole document", codeReference, func(p *pack) { p.swap(sig1, `URI="#idOfficeObject"`, `URI=""`) }),
	signer("reference to the root", codeReference, func(p *pack) { p.swap(sig1, `URI="#idOfficeObject"`, `URI="#idPackageSignature"`) }),
	signer("object referenced twice", codeTwice, func(p *pack) { p.swap(sig1, `URI="#idOfficeObject"`, `URI="#idRecordStatement"`) }),
	signer("own content in the package object", codePackage, func(p *pack) { p.swap(sig1, "<Manifest>", "<a xmlns='b'/><Manifest>") }),
}

// signer is a fault of a signature that is then signed again with its own key.
func signer(name, code string, edit func(p *pack)) fault {
	return fault{name: "signed: " + name, signatures: 1, code: code, edit: func(p *pack) {
		edit(p)
		p.sign(sig1, key(p.t, "prepared"))
	}}
}
