package exports

import (
	"fmt"
	"strings"
	"time"

	"lotpair/qa"
)

// signatureBlock says who has to sign and who signed first.
func signatureBlock(s *sheet, rec qa.Record, digest string) {
	s.add(wide("Signatures required for a complete record", groupLook, summaryColumns))
	s.add(text("Meaning", headLook), text("Name", headLook), wide("Title, organization", headLook, 2), wide("Signed at (local time)", headLook, 2), wide("Certificate, SHA-256", headLook, 2))
	printed := false
	for _, q := range rec.Plan.RequiredMeanings() {
		if g := rec.Signer; g != nil && !printed && g.Meaning == q.Meaning {
			signerRow(s, *g)
			printed = true
			continue
		}
		s.addTall(signHeight(1, orWord(q.Name, "to be signed"), q.Title), text(q.Meaning, signLook), text(orWord(q.Name, "to be signed"), signLook), wide(q.Title, signLook, 2), wide("see the signatures of this file", signLook, 2), wide("", signLook, 2))
	}
	if g := rec.Signer; g != nil && !printed {
		signerRow(s, *g)
	}
	s.addTall(4)
	if g := rec.Signer; g != nil && g.Certificate != "" {
		paragraph(s, "The first signer's certificate: "+g.Certificate+". Time by the clock of the signer's machine. Each signature covers every part of this file.", smallLook, smallRoom, 12.5)
	}
	if g := rec.Signer; g != nil && g.Reason != "" {
		paragraph(s, "Reason of the first signature: "+g.Reason, smallLook, smallRoom, 12.5)
	}
	if g := rec.Signer; g != nil && g.Disposition != "" {
		paragraph(s, "Disposition stated with it by the signer: "+g.Disposition, strongWrapLook, 115, 14)
	}
	paragraph(s, "Later signatures, with reason and disposition, stand in the signatures of this file: lotpair-cli verify shows them, and --note writes them as a page to print.", smallLook, smallRoom, 12.5)
	paragraph(s, "Retention: "+orWord(rec.Plan.Retention, "not stated in the plan; the site's rule holds")+".", smallLook, smallRoom, 12.5)
	v := rec.Result.Software
	paragraph(s, fmt.Sprintf("Record %s: the first digits of the digest of its content, signatures apart (SHA-256): %s", RecordID(digest), digest), smallLook, smallRoom, 12.5)
	paragraph(s, fmt.Sprintf("Made by Lotpair %s (%s), calculation %d, %s/%s.", v.Version, orWord(v.Revision, "no revision"), v.Calculation, v.OS, v.Arch), smallLook, smallRoom, 12.5)
}

func signerRow(s *sheet, g qa.Signer) {
	who := g.Title
	if g.Organization != "" {
		who = strings.TrimPrefix(who+", "+g.Organization, ", ")
	}
	s.addTall(signHeight(3, g.Name, who), text(g.Meaning, signLook), text(g.Name, signLook), wide(who, signLook, 2),
		wide(bothTimes(g.Time), signLook, 2), wide(fingerprintLines(g.Fingerprint), signLook, 2))
}

// signHeight is the height of a line of the signature block that holds a name, a title and so many lines besides.
func signHeight(least float64, name, title string) float64 {
	return max(least, wordLines(name, 18), wordLines(title, 22))*11.5 + 6
}

// fingerprintLines breaks a digest into groups that can be read aloud.
func fingerprintLines(s string) string {
	var b strings.Builder
	for i := 0; i < len(s); i += 8 {
		if i > 0 {
			b.WriteString(map[bool]string{true: "\n", false: " "}[i%24 == 0])
		}
		b.WriteString(s[i:min(i+8, len(s))])
	}
	return b.String()
}

func orWord(s, word string) string {
	if s == "" {
		return word
	}
	return s
}

// bothTimes is a time as the person saw it, and in UTC below it.
func bothTimes(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return localTime(t) + "\n" + t.UTC().Format("2006-01-02 15:04:05") + " UTC"
}

// localTime writes a time as the person saw it, with its offset.
func localTime(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.Format("2006-01-02 15:04:05 -07:00")
}
