package exports

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// The record's place in the package.
const (
	recordPart      = "/customXml/item1.xml"
	recordNamespace = "urn:lotpair:record:1"
)

// ErrNoRecord says that a workbook carries no record of Lotpair.
var ErrNoRecord = errors.New("record: found none in this workbook, want one written by Lotpair; open the original file")

// recordXML is the record as XML. What people read stands in elements; plan, result and the rest are JSON inside, the same
// JSON as everywhere. Readings are written small, a row each, because there may be a million.
type recordXML struct {
	XMLName     xml.Name `xml:"urn:lotpair:record:1 record"`
	Format      string   `xml:"format,attr"`
	Calculation int      `xml:"calculation,attr"`
	Plan        string   `xml:"plan"`
	PlanFile    string   `xml:"planFile"`
	Lots        []lotXML `xml:"lot"`
	Around      string   `xml:"around"` // characteristics, ledger, account and what was said, as JSON
	Result      string   `xml:"result"`
	Supersedes  string   `xml:"supersedes,omitempty"`
	Trail       string   `xml:"trail"`
	Signer      string   `xml:"signer,omitempty"`
	Layout      int      `xml:"layout"`
}

type lotXML struct {
	Side   string      `xml:"side,attr"`
	Head   string      `xml:"head"` // the lot without its series, as JSON
	Series []seriesXML `xml:"series"`
}

type seriesXML struct {
	Head     string       `xml:"head"` // the series without its readings, as JSON
	Readings []readingXML `xml:"r"`
}

// readingXML is one reading. File, sheet and text are left off where they equal the reading before (file, sheet) or the
// number's own shortest form (text).
type readingXML struct {
	Value    string  `xml:"v,attr"`
	Cell     string  `xml:"c,attr"`
	Text     *string `xml:"t,attr"`
	Part     string  `xml:"p,attr,omitempty"`
	Decimals int     `xml:"d,attr,omitempty"`
	LeftOut  string  `xml:"out,attr,omitempty"`
	Group    string  `xml:"g,attr,omitempty"`
	Order    string  `xml:"o,attr,omitempty"`
	Pair     string  `xml:"a,attr,omitempty"`
	File     *string `xml:"f,attr"`
	Sheet    *string `xml:"s,attr"`
}

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

// ReadRecord takes the record out of a workbook. It checks nothing: Verify does.
func ReadRecord(pkg []byte) (qa.Record, error) {
	rec, _, err := readRecord(pkg)
	return rec, err
}

// readRecord gives the record and the layout of its workbook.
func readRecord(pkg []byte) (qa.Record, int, error) {
	b, err := opcsign.ReadPart(pkg, recordPart)
	if err != nil {
		return qa.Record{}, 0, fmt.Errorf("%w (%w)", ErrNoRecord, err)
	}
	var x recordXML
	rec, err := decodeRecord(b, &x)
	return rec, x.Layout, err
}

func decodeRecord(b []byte, x *recordXML) (qa.Record, error) {
	d := xml.NewDecoder(bytes.NewReader(b))
	if err := d.Decode(x); err != nil {
		if errors.Is(err, io.EOF) {
			return qa.Record{}, ErrNoRecord
		}
		return qa.Record{}, fmt.Errorf("record %s: %w", recordPart, err)
	}
	if x.Format != qa.RecordFormat {
		return qa.Record{}, fmt.Errorf("record %s: found format %q, want %q; use the version of Lotpair that wrote it", recordPart, x.Format, qa.RecordFormat)
	}
	rec := qa.Record{Format: x.Format}
	for _, f := range []struct {
		from string
		to   any
	}{{x.Plan, &rec.Plan}, {x.PlanFile, &rec.PlanFile}, {x.Around, &rec.Readings}, {x.Result, &rec.Result}, {x.Trail, &rec.Trail}} {
		if err := json.Unmarshal([]byte(f.from), f.to); err != nil {
			return qa.Record{}, fmt.Errorf("record %s: %w", recordPart, err)
		}
	}
	if x.Supersedes != "" {
		if err := json.Unmarshal([]byte(x.Supersedes), &rec.Supersedes); err != nil {
			return qa.Record{}, fmt.Errorf("record %s: %w", recordPart, err)
		}
	}
	if x.Signer != "" {
		rec.Signer = &qa.Signer{}
		if err := json.Unmarshal([]byte(x.Signer), rec.Signer); err != nil {
			return qa.Record{}, fmt.Errorf("record %s: %w", recordPart, err)
		}
	}
	if len(x.Lots) != 2 || x.Lots[0].Side != string(qa.Reference) || x.Lots[1].Side != string(qa.Candidate) {
		return qa.Record{}, fmt.Errorf("record %s: found %d lots, want the reference and the candidate", recordPart, len(x.Lots))
	}
	var err error
	if rec.Readings.Reference, err = decodeLot(x.Lots[0]); err != nil {
		return qa.Record{}, err
	}
	if rec.Readings.Candidate, err = decodeLot(x.Lots[1]); err != nil {
		return qa.Record{}, err
	}
	showDecimals(&rec)
	return rec, nil
}

// showDecimals restores what the result's JSON does not carry: how many decimals to show.
func showDecimals(rec *qa.Record) {
	for i := range rec.Result.Characteristics {
		c := &rec.Result.Characteristics[i]
		for _, ch := range rec.Readings.Characteristics {
			if ch.Name == c.Name {
				c.Decimals = qa.Decimals(ch, rec.Readings.Reference.Of(ch.Name), rec.Readings.Candidate.Of(ch.Name))
			}
		}
	}
}

func decodeLot(x lotXML) (qa.Lot, error) {
	var l qa.Lot
	if err := json.Unmarshal([]byte(x.Head), &l); err != nil {
		return qa.Lot{}, fmt.Errorf("record %s: %w", recordPart, err)
	}
	for _, s := range x.Series {
		var one qa.Series
		if err := json.Unmarshal([]byte(s.Head), &one); err != nil {
			return qa.Lot{}, fmt.Errorf("record %s: %w", recordPart, err)
		}
		file, sheet := "", ""
		for _, r := range s.Readings {
			v, err := strconv.ParseFloat(r.Value, 64)
			if err != nil {
				return qa.Lot{}, fmt.Errorf("record %s, cell %s: found %q, want a number", recordPart, r.Cell, r.Value)
			}
			if r.File != nil {
				file = *r.File
			}
			if r.Sheet != nil {
				sheet = *r.Sheet
			}
			found := r.Value
			if r.Text != nil {
				found = *r.Text
			}
			one.Readings = append(one.Readings, qa.Reading{
				Value: v, Part: r.Part, Decimals: r.Decimals, LeftOut: r.LeftOut, Group: r.Group, Order: r.Order, Pair: r.Pair,
				Source: qa.Source{File: file, Sheet: sheet, Cell: r.Cell, Text: found},
			})
		}
		l.Series = append(l.Series, one)
	}
	return l, nil
}
