package exports

import (
	"bytes"
	"encoding/xml"
	"io"
	"reflect"
	"strings"
	"testing"

	"lotpair/qa"
)

// odd is a record whose texts hold what XML must escape, and what it may not.
func odd() qa.Record {
	reading := func(v float64, cell, found, part string) qa.Reading {
		return qa.Reading{Value: v, Part: part, Decimals: 2, Source: qa.Source{File: "a&b \"c\".csv", Sheet: "Läufe <1>", Cell: cell, Text: found}}
	}
	one := qa.Series{Characteristic: "Länge 'x' & \t\"y\"", Rows: 3, Readings: []qa.Reading{
		reading(1.5, "B2", "1,50", "1"), reading(-0.1, "B3", "-0.1", "é\u0301\U0001F642"), reading(1e-300, "B4", "  1e-300\r\n", ""),
	}}
	one.Readings[1].LeftOut, one.Readings[1].Group, one.Readings[1].Order, one.Readings[1].Pair = "gauge <dropped> & bent", "G 1", "2026-12-01", "p>1"
	one.Readings[2].Source.File, one.Readings[2].Source.Sheet = "", ""
	rec := qa.Record{Format: qa.RecordFormat, Supersedes: []qa.Superseded{{Record: "0", Reason: "a > b ]]> c"}}, Signer: &qa.Signer{Name: "Zoë O'Hara"}}
	rec.Readings.Reference = qa.Lot{Name: "R", Series: []qa.Series{one, {Characteristic: "none"}}}
	rec.Readings.Candidate = qa.Lot{Name: "C"}
	return rec
}

func xmlOf(t testing.TB, rec qa.Record) []byte {
	t.Helper()
	var b bytes.Buffer
	if _, err := writeRecord(&b, rec); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// scanned holds what is read along against what the general reader reads of the same bytes: where the first gives a record, the
// second gives the same.
func scanned(t *testing.T, b []byte) (along bool) {
	t.Helper()
	x, err := scanRecord(bytes.NewReader(b), int64(len(b)))
	if err != nil {
		return false
	}
	y, err := decodeXML(bytes.NewReader(b))
	if err != nil {
		t.Fatalf("read along, and the general reader says %v", err)
	}
	got, err := decodeRecord(x)
	want, err2 := decodeRecord(y)
	if (err == nil) != (err2 == nil) || x.Layout != y.Layout || x.Calculation != y.Calculation || x.Format != y.Format {
		t.Fatalf("got %v, %+v; want %v, %+v", err, x, err2, y)
	}
	if !reflect.DeepEqual(got, want) {
		t.Fatalf("got %+v, want %+v", got, want)
	}
	return true
}

// TestScanRecord reads along what this program writes, and nothing that differs from it by a character that XML lets differ.
func TestScanRecord(t *testing.T) {
	b := xmlOf(t, odd())
	if !scanned(t, b) {
		t.Error("our own form was not read along")
	}
	for name, change := range map[string][2]string{
		"apostrophes":       {`c="B2"`, `c='B2'`},
		"another order":     {`<r v="1.5" c="B2"`, `<r c="B2" v="1.5"`},
		"white space":       {`<r v="1.5"`, "<r  v=\"1.5\""},
		"a comment":         {"<series>", "<series><!-- -->"},
		"short end":         {"></r>", "/>"},
		"another escape":    {"&#34;", "&quot;"},
		"no value":          {`<r v="1.5" c`, `<r c`},
		"a number too many": {`<layout>`, `<layout>1</layout><layout>`},
		"a prefix":          {`<record xmlns=`, `<record xmlns:x="y" xmlns=`},
		"another space":     {recordNamespace, recordNamespace + "x"},
		"line break":        {"&#xA;", "\n"},
		"more after it":     {"</record>", "</record> "},
		"no number":         {`v="1.5"`, `v="1.5x"`},
		"bad character":     {"R", "\x01"},
		"bad encoding":      {"ä", "\xe4"},
		"noncharacter":      {"ä", "\uffff"},
	} {
		changed := strings.Replace(string(b), change[0], change[1], 1)
		if changed == string(b) {
			t.Errorf("%s: nothing to change", name)
		}
		if scanned(t, []byte(changed)) {
			t.Errorf("%s: was read along", name)
		}
	}
	if n := len(xml.Header); scanned(t, b[:len(b)-1]) || scanned(t, b[n:]) {
		t.Error("a cut record was read along")
	}
}

// TestScanFallsBack wants a record in another form to be read all the same.
func TestScanFallsBack(t *testing.T) {
	b := bytes.ReplaceAll(xmlOf(t, odd()), []byte("></r>"), []byte(" />"))
	x, err := recordOf(func() (io.Reader, int64, error) { return bytes.NewReader(b), int64(len(b)), nil })
	if err != nil {
		t.Fatal(err)
	}
	rec, err := decodeRecord(x)
	if want := odd(); err != nil || !reflect.DeepEqual(rec.Readings.Reference.Series[0], want.Readings.Reference.Series[0]) {
		t.Errorf("got %+v, %v; want %+v", rec.Readings.Reference, err, want.Readings.Reference)
	}
}

// FuzzScanRecord holds the two readers against each other.
func FuzzScanRecord(f *testing.F) {
	f.Add(xmlOf(f, odd()))
	f.Add(xmlOf(f, qa.Record{Format: qa.RecordFormat}))
	f.Fuzz(func(t *testing.T, b []byte) { scanned(t, b) })
}
