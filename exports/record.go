package exports

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"encoding/xml"
	"fmt"
	"io"
	"strconv"
	"strings"

	"lotpair/qa"
)

// The record's place in the package.
const (
	recordPart      = "/customXml/item1.xml"
	recordNamespace = "urn:lotpair:record:1"
)

// writeRecord writes the record as XML, and gives the digest of its content: everything but the signer and the acts of signing,
// so that a draft and the signed record made of it have one id. The readings are written by hand, because there may be a
// million.
func writeRecord(w io.Writer, rec qa.Record) (digest string, err error) {
	around := rec.Readings
	around.Reference, around.Candidate = qa.Lot{}, qa.Lot{}
	content := sha256.New()
	b := &recordWriter{to: io.MultiWriter(w, content)}
	b.WriteString(xml.Header)
	fmt.Fprintf(b, `<record xmlns="%s" format="%s" calculation="%d">`, recordNamespace, rec.Format, rec.Result.Software.Calculation)
	b.json("plan", rec.Plan)
	b.json("planFile", rec.PlanFile)
	b.lot(qa.Reference, rec.Readings.Reference)
	b.lot(qa.Candidate, rec.Readings.Candidate)
	b.json("around", around)
	b.json("result", rec.Result)
	if len(rec.Supersedes) > 0 {
		b.json("supersedes", rec.Supersedes)
	}
	b.flush()
	acts, err := json.Marshal(withoutSigning(rec.Trail))
	if err != nil {
		return "", fmt.Errorf("record: %w", err)
	}
	content.Write(acts)
	b.to = w
	b.json("trail", rec.Trail)
	if rec.Signer != nil {
		b.json("signer", rec.Signer)
	}
	b.layout()
	b.WriteString("</record>")
	b.flush()
	return hex.EncodeToString(content.Sum(nil)), b.err
}

// contentDigest is the digest of a record's content.
func contentDigest(rec qa.Record) (string, error) { return writeRecord(io.Discard, rec) }

// signedAs begins the act of signing in the trail.
const signedAs = "signed as "

func withoutSigning(t qa.Trail) qa.Trail {
	out := qa.Trail{}
	for _, a := range t {
		if !strings.HasPrefix(a.What, signedAs) {
			out = append(out, a)
		}
	}
	return out
}

// recordWriter gathers XML and passes it on; the first error stays.
type recordWriter struct {
	bytes.Buffer
	to  io.Writer
	err error
}

func (b *recordWriter) flush() {
	if b.err == nil {
		_, b.err = b.to.Write(b.Bytes())
	}
	b.Reset()
}

// json writes an element that holds a value as JSON.
func (b *recordWriter) json(name string, v any) {
	text, err := json.Marshal(v)
	if err != nil && b.err == nil {
		b.err = fmt.Errorf("record: %w", err)
	}
	b.WriteString("<" + name + ">")
	_ = xml.EscapeText(b, text) // a buffer does not fail
	b.WriteString("</" + name + ">")
}

// layout says which layout of the workbook the record came in.
func (b *recordWriter) layout() { fmt.Fprintf(b, "<layout>%d</layout>", Layout) }

func (b *recordWriter) lot(side qa.Side, l qa.Lot) {
	b.WriteString(`<lot side="` + string(side) + `">`)
	head := l
	head.Series = nil
	b.json("head", head)
	for _, s := range l.Series {
		b.WriteString("<series>")
		h := s
		h.Readings = nil
		b.json("head", h)
		file, sheet := "", ""
		for i := range s.Readings {
			const full = 1 << 16
			if b.Len() > full {
				b.flush()
			}
			r := &s.Readings[i]
			var room [32]byte
			value := string(strconv.AppendFloat(room[:0], r.Value, 'g', -1, 64))
			b.WriteString(`<r v="`)
			b.WriteString(value)
			b.attribute("c", r.Source.Cell)
			if r.Source.Text != value {
				b.attribute("t", r.Source.Text)
			}
			if r.Part != "" {
				b.attribute("p", r.Part)
			}
			if r.Decimals != 0 {
				b.attribute("d", strconv.Itoa(r.Decimals))
			}
			if r.LeftOut != "" {
				b.attribute("out", r.LeftOut)
			}
			if r.Group != "" {
				b.attribute("g", r.Group)
			}
			if r.Order != "" {
				b.attribute("o", r.Order)
			}
			if r.Pair != "" {
				b.attribute("a", r.Pair)
			}
			if r.Source.File != file {
				file = r.Source.File
				b.attribute("f", file)
			}
			if r.Source.Sheet != sheet {
				sheet = r.Source.Sheet
				b.attribute("s", sheet)
			}
			b.WriteString(`"></r>`)
		}
		b.WriteString("</series>")
	}
	b.WriteString("</lot>")
}

// attribute closes the attribute before and writes the next but for its last quote.
func (b *recordWriter) attribute(name, value string) {
	b.WriteString(`" `)
	b.WriteString(name)
	b.WriteString(`="`)
	if plainText(value) {
		b.WriteString(value)
		return
	}
	_ = xml.EscapeText(b, []byte(value)) // a buffer does not fail
}

// plainText says that nothing of a text has to be escaped.
func plainText(s string) bool {
	for i := range len(s) {
		if c := s[i]; c < ' ' || c > '~' || c == '&' || c == '<' || c == '>' || c == '"' || c == '\'' {
			return false
		}
	}
	return true
}
