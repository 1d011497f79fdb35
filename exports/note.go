package exports

import (
	"crypto/ecdsa"
	"crypto/rsa"
	"crypto/x509"
	"crypto/x509/pkix"
	"fmt"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"lotpair/qa"
)

// SheetStatement is the one sheet of a note.
const SheetStatement = "Statement"

// Note writes a printable statement of what verification found of a file: every signature with its meaning, name, time and
// certificate, what is missing, and whether the result computes again. It is a workbook of one sheet, and itself not signed.
func Note(name string, pkg []byte, v Verification, software qa.Software, when time.Time) ([]byte, error) {
	file := qa.FileOf(name, pkg)
	b := book{title: "Signatures of " + name, sheets: []sheet{noteSheet(file, v, software, when)}}
	b.foot = footerText("Signatures of "+name, "") + "\nSHA-256 " + file.SHA256[:32] + "…"
	return b.bytes()
}

// What each state means, and what to do.
var stateWords = map[State]string{
	Unreadable: "The file is no record that this version of Lotpair can read; why, stands below. Get the original file from whoever signed it, or the version that wrote it.",
	Changed:    "Something in the file is not as it was signed; what, stands below. Do not rely on it: get the original file. A file saved again by an office program is always found like this.",
	Unsigned:   "Nobody has signed the file. It is a draft.",
	Disagrees:  "The file is as it was signed, but what it states does not agree with itself: the result computed again from its readings, or its sheets, differ. Ask the signer.",
	Incomplete: "All that is signed is as it was signed; a signature that the record requires is missing, or one person gave two of them.",
	Intact:     "Everything in the file is as it was signed, and all required signatures are there.",
}

func noteSheet(file qa.File, v Verification, software qa.Software, when time.Time) sheet {
	s := sheet{name: SheetStatement, widths: []float64{24, 92}}
	say := func(t string, l look) { s.addTall(lines(t, 118)*13.5+2, wide(t, l, 2)) }
	line := func(name, value string) {
		if value != "" {
			s.addTall(lines(value, 100)*13.5+2, text(name, ruledLook), text(value, ruledWrapLook))
		}
	}
	s.addTall(26, wide("Signatures of "+file.Name, titleLook, 2))
	say("Checked "+localTime(when)+" ("+when.UTC().Format("2006-01-02 15:04:05")+fmt.Sprintf(" UTC, the clock of this machine) by Lotpair %s (%s), %s/%s.", software.Version, orWord(software.Revision, "no revision"), software.OS, software.Arch), mutedLook)
	s.gap()
	say(capital(v.Headline())+".", verdictLook)
	say(stateWords[v.State], wrapLook)
	if v.Record != nil && (v.State == Intact || v.State == Incomplete) {
		say(capital(v.Agreement())+".", wrapLook)
	}
	if (v.State == Intact || v.State == Incomplete) && !v.AllTrusted() {
		say("Anyone can make a certificate with any name in it: compare the SHA-256 of each certificate below with what its owner tells you, or check again with --trust.", wrapLook)
	}
	s.gap()
	s.add(wide("The file", groupLook, 2))
	line("name, size", fmt.Sprintf("%s, %d bytes", file.Name, file.Bytes))
	line("SHA-256", file.SHA256)
	noteContent(v, line)
	for i, g := range v.Signatures {
		s.gap()
		s.add(wide(fmt.Sprintf("Signature %d: %s", i+1, orWord(g.Meaning, "no meaning stated")), groupLook, 2))
		noteSignature(g, when, line)
	}
	if len(v.Signatures) == 0 {
		s.gap()
		say("No signature was found.", wrapLook)
	}
	if len(v.Reasons)+len(v.MissingMeanings)+len(v.Differences) > 0 {
		s.gap()
		s.add(wide("What was found", groupLook, 2))
		for _, m := range v.MissingMeanings {
			line("missing", "a signature as "+m)
		}
		for i, r := range v.Reasons {
			if i == maxDifferences {
				line("…", fmt.Sprintf("and %d more", len(v.Reasons)-maxDifferences))
				break
			}
			line(r.Code, r.Error())
		}
		for _, d := range v.Differences {
			line("difference", d)
		}
	}
	s.gap()
	say("This statement is a report and itself not signed. What counts is the file named above, checked again.", smallLook)
	return s
}

// noteContent says what the file is of.
func noteContent(v Verification, line func(name, value string)) {
	if s := v.Sealed; s != nil {
		line("content", "a seal of the criterion of "+orWord(s.Plan.Title, "a comparison")+", "+localTime(s.Time)+", by "+s.Who)
		line("digest of the criterion", s.Digest)
	}
	if v.Record == nil {
		return
	}
	r := v.Record.Result
	line("content", orWord(r.Title, "a comparison")+prefixed(", supports ", r.Supports))
	if v.digest != "" {
		line("record", RecordID(v.digest)+", digest of its content "+v.digest)
	}
	for _, s := range v.Record.Supersedes {
		line("stands in place of", SupersedesText(s))
	}
	line("verdict in it", r.Sentence)
	line("computed again", v.Agreement())
}

func noteSignature(g SignatureView, when time.Time, line func(name, value string)) {
	valid := "valid: what it covers is as it was signed"
	if !g.Valid {
		valid = "NOT VALID"
	}
	covers := "covers every part of the file"
	if !g.CoversAll {
		covers = "does NOT cover every part of the file"
	}
	line("signature", valid+"; "+covers)
	line("name", g.Signer)
	line("title", g.Title)
	line("organization", g.Organization)
	line("meaning", g.Meaning)
	line("reason", g.Reason)
	line("disposition", g.Disposition)
	at, err := time.Parse(time.RFC3339, g.Time)
	if err == nil {
		t := localTime(at) + " (" + at.UTC().Format("2006-01-02 15:04:05") + " UTC), by the clock of the signer's machine"
		if at.After(when.Add(clockSlack)) {
			t += "; that is later than now by the clock of this machine: one of the two is wrong"
		}
		line("time", t)
	}
	switch {
	case g.Trusted == nil:
		line("trusted", "not asked: no certificates to trust were given")
	case *g.Trusted:
		line("trusted", "yes, by the certificates given")
	default:
		line("trusted", "NO: "+g.Doubt)
	}
	line("certificate, SHA-256", g.Fingerprint)
	if c := g.Certificate; c != nil {
		line("certificate of", person(c.Subject))
		line("issued by", issuer(c))
		line("serial number", c.SerialNumber.Text(16))
		line("valid", validity(c, when))
		line("algorithm", algorithm(c))
	}
}

// algorithm is the kind of key that a certificate is for, and the digest that is signed.
func algorithm(c *x509.Certificate) string {
	kind := c.PublicKeyAlgorithm.String()
	switch k := c.PublicKey.(type) {
	case *rsa.PublicKey:
		kind += fmt.Sprintf(" of %d bits", k.N.BitLen())
	case *ecdsa.PublicKey:
		kind += " on " + k.Params().Name
	}
	return kind + ", SHA-256"
}

// certificateText is what a certificate says of itself, as the sheets have it of the first signer.
func certificateText(c *x509.Certificate) string {
	const day = "2006-01-02"
	return fmt.Sprintf("issued by %s, serial number %s, valid %s to %s, %s", issuer(c), c.SerialNumber.Text(16), c.NotBefore.UTC().Format(day), c.NotAfter.UTC().Format(day), algorithm(c))
}

func issuer(c *x509.Certificate) string {
	if c.Issuer.String() == c.Subject.String() {
		return "itself"
	}
	return person(c.Issuer)
}

// person is a name in a certificate as people write it.
func person(n pkix.Name) string {
	parts := append([]string{n.CommonName}, n.OrganizationalUnit...)
	parts = append(append(append(parts, n.Organization...), n.Locality...), n.Country...)
	var out []string
	for _, s := range parts {
		if s != "" {
			out = append(out, s)
		}
	}
	return strings.Join(out, ", ")
}

// validity says the dates, and whether it has expired since.
func validity(c *x509.Certificate, when time.Time) string {
	const day = "2006-01-02"
	t := c.NotBefore.UTC().Format(day) + " to " + c.NotAfter.UTC().Format(day)
	switch {
	case when.After(c.NotAfter):
		t += "; it has expired since, which takes nothing from a signature given while it was valid"
	case when.Before(c.NotBefore):
		t += "; not valid yet today: check the clock of this machine"
	}
	return t
}

// prefixed is the word before a text, and nothing where there is none.
func prefixed(word, s string) string {
	if s == "" {
		return ""
	}
	return word + s
}

func capital(s string) string {
	r, n := utf8.DecodeRuneInString(s)
	if n == 0 {
		return s
	}
	return string(unicode.ToUpper(r)) + s[n:]
}
