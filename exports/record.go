package exports

import (
	"bytes"
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strconv"

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
	Trail       string   `xml:"trail"`
	Signer      string   `xml:"signer,omitempty"`
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
	File     *string `xml:"f,attr"`
	Sheet    *string `xml:"s,attr"`
}

func encodeRecord(rec qa.Record) ([]byte, error) {
	x := recordXML{Format: rec.Format, Calculation: rec.Result.Software.Calculation}
	around := rec.Readings
	around.Reference, around.Candidate = qa.Lot{}, qa.Lot{}
	for _, f := range []struct {
		to   *string
		from any
	}{{&x.Plan, rec.Plan}, {&x.PlanFile, rec.PlanFile}, {&x.Around, around}, {&x.Result, rec.Result}, {&x.Trail, rec.Trail}} {
		if err := toJSON(f.to, f.from); err != nil {
			return nil, err
		}
	}
	if rec.Signer != nil {
		if err := toJSON(&x.Signer, rec.Signer); err != nil {
			return nil, err
		}
	}
	for _, l := range []struct {
		side qa.Side
		lot  qa.Lot
	}{{qa.Reference, rec.Readings.Reference}, {qa.Candidate, rec.Readings.Candidate}} {
		one, err := encodeLot(l.side, l.lot)
		if err != nil {
			return nil, err
		}
		x.Lots = append(x.Lots, one)
	}
	var b bytes.Buffer
	b.WriteString(xml.Header)
	if err := xml.NewEncoder(&b).Encode(x); err != nil {
		return nil, fmt.Errorf("record: %w", err)
	}
	return b.Bytes(), nil
}

func toJSON(to *string, from any) error {
	b, err := json.Marshal(from)
	if err != nil {
		return fmt.Errorf("record: %w", err)
	}
	*to = string(b)
	return nil
}

func encodeLot(side qa.Side, l qa.Lot) (lotXML, error) {
	out := lotXML{Side: string(side)}
	head := l
	head.Series = nil
	if err := toJSON(&out.Head, head); err != nil {
		return lotXML{}, err
	}
	for _, s := range l.Series {
		one := seriesXML{Readings: make([]readingXML, 0, len(s.Readings))}
		h := s
		h.Readings = nil
		if err := toJSON(&one.Head, h); err != nil {
			return lotXML{}, err
		}
		file, sheet := "", ""
		for _, r := range s.Readings {
			x := readingXML{Value: shortest(r.Value), Cell: r.Source.Cell, Part: r.Part, Decimals: r.Decimals, LeftOut: r.LeftOut}
			if r.Source.Text != x.Value {
				t := r.Source.Text
				x.Text = &t
			}
			if r.Source.File != file {
				file = r.Source.File
				f := file
				x.File = &f
			}
			if r.Source.Sheet != sheet {
				sheet = r.Source.Sheet
				sh := sheet
				x.Sheet = &sh
			}
			one.Readings = append(one.Readings, x)
		}
		out.Series = append(out.Series, one)
	}
	return out, nil
}

// ReadRecord takes the record out of a workbook. It checks nothing: Verify does.
func ReadRecord(pkg []byte) (qa.Record, error) {
	b, err := opcsign.ReadPart(pkg, recordPart)
	if err != nil {
		return qa.Record{}, fmt.Errorf("%w (%w)", ErrNoRecord, err)
	}
	return decodeRecord(b)
}

func decodeRecord(b []byte) (qa.Record, error) {
	var x recordXML
	d := xml.NewDecoder(bytes.NewReader(b))
	if err := d.Decode(&x); err != nil {
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
				Value: v, Part: r.Part, Decimals: r.Decimals, LeftOut: r.LeftOut,
				Source: qa.Source{File: file, Sheet: sheet, Cell: r.Cell, Text: found},
			})
		}
		l.Series = append(l.Series, one)
	}
	return l, nil
}
