package exports

import (
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strconv"

	"lotpair/exports/opcsign"
	"lotpair/qa"
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

	lot *qa.Lot // the whole lot, where it was read along
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

// ReadRecord takes the record out of a workbook. It checks nothing: Verify does.
func ReadRecord(pkg []byte) (qa.Record, error) {
	rec, _, err := readRecord(pkg)
	return rec, err
}

// readRecord gives the record and the XML that it was read from.
func readRecord(pkg []byte) (qa.Record, *recordXML, error) {
	x, err := recordOf(func() (io.Reader, int64, error) { return opcsign.OpenPart(pkg, recordPart) })
	if err != nil {
		return qa.Record{}, nil, err
	}
	rec, err := decodeRecord(x)
	return rec, x, err
}

// recordOf reads a record's XML. One as this program writes it is read along, because a general reader takes ten times as long
// for a million readings; every other one goes to the general reader, and so does every error.
func recordOf(open func() (io.Reader, int64, error)) (*recordXML, error) {
	r, size, err := open()
	if err != nil {
		return nil, fmt.Errorf("%w (%w)", ErrNoRecord, err)
	}
	if x, err := scanRecord(r, size); err == nil {
		return x, nil
	}
	if r, _, err = open(); err != nil {
		return nil, fmt.Errorf("%w (%w)", ErrNoRecord, err)
	}
	return decodeXML(r)
}

// decodeXML reads a record's XML in whatever form.
func decodeXML(r io.Reader) (*recordXML, error) {
	var x recordXML
	err := xml.NewDecoder(r).Decode(&x)
	if err == nil {
		_, err = io.Copy(io.Discard, r) // the part is whole
	}
	if errors.Is(err, io.EOF) {
		return nil, ErrNoRecord
	}
	if err != nil {
		return nil, fmt.Errorf("record %s: %w", recordPart, err)
	}
	return &x, nil
}

func decodeRecord(x *recordXML) (qa.Record, error) {
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
	if x.lot != nil {
		return *x.lot, nil
	}
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
