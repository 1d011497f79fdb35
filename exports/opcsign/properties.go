package opcsign

import (
	"bytes"
	"crypto"
	"crypto/x509"
	"encoding/base64"
	"time"
)

// statementSpace is the namespace of our own statement. The form does not change under this name.
const statementSpace = "urn:lotpair:statement:1"

// commentLimit is the length of SignatureComments in characters (MS-OFFCRYPTO 2.5.2.5).
const commentLimit = 255

// timeForm is how every time in a signature is written: seconds, with Z or an offset.
const timeForm = "2006-01-02T15:04:05Z07:00"

// comments is the statement in the field that office programs show.
func comments(s Statement) string {
	text := s.Meaning
	if s.Reason != "" {
		text += ": " + s.Reason
	}
	r := []rune(text)
	return string(r[:min(len(r), commentLimit)])
}

// readStatement reads our own statement from the signed objects.
func (k *check) readStatement() {
	list := k.signedElements(statementSpace, "Statement")
	if len(list) != 1 {
		k.form(codeStatement, "found %d signed statements, want one", len(list))
		k.sig.Statement = k.foreign()
		return
	}
	kids, clean := list[0].elements()
	s := &k.sig.Statement
	var when string
	fields := []struct {
		name string
		to   *string
	}{
		{"Name", &s.Name},
		{"Title", &s.Title},
		{"Organization", &s.Organization},
		{"Meaning", &s.Meaning},
		{"Reason", &s.Reason},
		{"Disposition", &s.Disposition},
		{"Time", &when},
		{"Zone", &s.Zone},
	}
	ok := clean && len(list[0].attrs) == 0 && len(kids) >= len(fields)
	for i := 0; ok && i < len(fields); i++ {
		*fields[i].to, ok = kids[i].leaf()
		ok = ok && kids[i].is(statementSpace, fields[i].name) && len(kids[i].attrs) == 0
	}
	if ok {
		s.Time, ok = parseTime(when)
	}
	for i := len(fields); ok && i < len(kids); i++ {
		part, has := kids[i].attr("Part")
		digest, also := kids[i].attr("Digest")
		d, err := base64.StdEncoding.Strict().DecodeString(digest)
		ok = kids[i].is(statementSpace, "Previous") && has && also && err == nil && kids[i].only("Part", "Digest") && len(kids[i].kids) == 0
		k.previous = append(k.previous, previous{part, d})
	}
	if !ok {
		k.form(codeStatementBad, "found a statement that cannot be read, want its eight fields in order and the earlier signatures")
		*s = Statement{}
	}
}

// parseTime reads a time. The zone never depends on where the program runs.
func parseTime(s string) (time.Time, bool) {
	t, err := time.ParseInLocation(timeForm, s, time.UTC)
	return t, err == nil && t.Format(timeForm) == s
}

// text is the content of the one signed element of a name.
func (k *check) one(space, local string) (string, bool) {
	list := k.signedElements(space, local)
	if len(list) != 1 {
		return "", false
	}
	return list[0].leaf()
}

// signatureTime is the time in the package object.
func (k *check) signatureTime() (time.Time, bool) {
	list := k.signedElements(opcSpace, "SignatureTime")
	if len(list) != 1 {
		return time.Time{}, false
	}
	kids, clean := list[0].elements()
	if !clean || len(kids) != 2 || !kids[0].is(opcSpace, "Format") || !kids[1].is(opcSpace, "Value") {
		return time.Time{}, false
	}
	s, _ := kids[1].leaf()
	return parseTime(s)
}

// foreign is what a signature of another program states, as far as it is signed.
func (k *check) foreign() Statement {
	var s Statement
	if k.sig.Certificate != nil {
		s.Name = k.sig.Certificate.Subject.CommonName
	}
	s.Title, _ = k.one(xadesSpace, "ClaimedRole")
	s.Meaning, _ = k.one(xadesSpace, "Description")
	s.Reason, _ = k.one(officeSpace, "SignatureComments")
	s.Time, _ = k.signatureTime()
	return s
}

// readProperties holds the certificate against the one that XAdES says was used.
func (k *check) readProperties() {
	leaf := k.sig.Certificate
	if leaf == nil {
		return
	}
	list := k.signedElements(xadesSpace, "SigningCertificate")
	if len(list) != 1 {
		k.form(codeMismatch, "found %d signed signing certificates, want one", len(list))
		return
	}
	certs, clean := list[0].elements()
	if !clean || len(certs) == 0 || !certMatches(certs[0], leaf) {
		k.form(codeMismatch, "found the certificate of %q, want the one that was signed", clip(leaf.Subject.String(), 80))
	}
}

// certMatches compares a Cert of XAdES with a certificate: its digest and its serial number.
func certMatches(cert *node, leaf *x509.Certificate) bool {
	kids, clean := cert.elements()
	if !cert.is(xadesSpace, "Cert") || !clean || len(kids) != 2 || !kids[0].is(xadesSpace, "CertDigest") || !kids[1].is(xadesSpace, "IssuerSerial") {
		return false
	}
	d, clean := kids[0].elements()
	if !clean || len(d) != 2 || !d[0].is(dsSpace, "DigestMethod") || !d[1].is(dsSpace, "DigestValue") {
		return false
	}
	alg, _ := d[0].attr("Algorithm")
	h, known := digestMethods[alg]
	value, ok := decode(d[1])
	if !known || !ok || !bytes.Equal(sum(h, leaf.Raw), value) {
		return false
	}
	is, clean := kids[1].elements()
	if !clean || len(is) != 2 || !is[0].is(dsSpace, "X509IssuerName") || !is[1].is(dsSpace, "X509SerialNumber") {
		return false
	}
	serial, _ := is[1].leaf()
	return serial == leaf.SerialNumber.String()
}

// compare holds the statement against the certificate and against what office programs show of the signature, so nobody
// is shown another name, time, role or meaning than we show.
func (k *check) compare() {
	s, leaf := k.sig.Statement, k.sig.Certificate
	if leaf != nil && !s.Time.IsZero() && (s.Time.Before(leaf.NotBefore) || s.Time.After(leaf.NotAfter)) {
		k.form(codeCertTime, "found the time of signing %s, want one between %s and %s, when the certificate is valid", s.Time.Format(timeForm), leaf.NotBefore.Format(timeForm), leaf.NotAfter.Format(timeForm))
	}
	if leaf != nil && !keyUsageFits(leaf) {
		k.form(codeCertificate, "found a certificate whose key usage does not include signatures, want digital signature or non-repudiation")
	}
	if s.Time.IsZero() || leaf == nil || len(k.signedElements(statementSpace, "Statement")) != 1 {
		return
	}
	differs := func(what, found, want string) {
		if found != want {
			k.form(codeDiffers, "found the %s %q, want %q as in the statement", what, clip(found, 80), clip(want, 80))
		}
	}
	differs("name in the certificate", leaf.Subject.CommonName, s.Name)
	utc := s.Time.UTC().Format(timeForm)
	at, _ := k.signatureTime()
	differs("signature time", at.UTC().Format(timeForm), utc)
	at2, _ := k.one(xadesSpace, "SigningTime")
	differs("signing time", at2, utc)
	shown, _ := k.one(officeSpace, "SignatureComments")
	differs("comment", shown, comments(s))
	role, _ := k.one(xadesSpace, "ClaimedRole")
	differs("role", role, s.Title)
	meaning, _ := k.one(xadesSpace, "Description")
	differs("commitment", meaning, s.Meaning)
}

// checkPrevious holds the earlier signatures against what this statement says of them.
func (k *check) checkPrevious(earlier []*check) {
	for _, p := range k.previous {
		found := false
		for _, e := range earlier {
			if e.sig.Part != p.part {
				continue
			}
			found = true
			if !bytes.Equal(sum(crypto.SHA256, e.value), p.digest) {
				k.fail(codePrevChanged, p.part, "found another signature than the one %s was put after, want that one", k.sig.Part)
			}
		}
		if !found {
			k.fail(codePrevMissing, p.part, "found no such signature, want the one %s was put after", k.sig.Part)
		}
	}
	for _, e := range earlier {
		listed := false
		for _, p := range k.previous {
			listed = listed || p.part == e.sig.Part
		}
		if !listed {
			k.fail(codePrevUnlisted, e.sig.Part, "found an earlier signature that %s does not name, want every earlier one named", k.sig.Part)
		}
	}
}
