package exports_test

import (
	"archive/zip"
	"bytes"
	"encoding/json"
	"reflect"
	"slices"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/importers/cells"
	"lotpair/qa"
)

// TestWorkbookSameBytes checks that the same record gives the same bytes, so that a reviewer can make the workbook again.
func TestWorkbookSameBytes(t *testing.T) {
	a, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	b, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(a, b) {
		t.Error("the same record gave two workbooks")
	}
}

// TestRecordRoundTrip checks that the record comes back as it went in, to the last digit, and gives the same result again.
func TestRecordRoundTrip(t *testing.T) {
	rec := record(t)
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	back, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	for i, s := range rec.Readings.Reference.Series {
		for j, r := range s.Readings {
			got := back.Readings.Reference.Series[i].Readings[j]
			if got.Value != r.Value {
				t.Errorf("reading %d of %s: got %v, want %v", j, s.Characteristic, got.Value, r.Value)
			}
		}
	}
	if a, b := mustJSON(t, rec.Result), mustJSON(t, back.Result); a != b {
		t.Errorf("result: got %s, want %s", b, a)
	}
	again, err := exports.Workbook(back)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(pkg, again) {
		t.Error("the record read back gives another workbook")
	}
}

// TestRecordKeepsEveryField fills every field of a reading, one that comes later as well: all come back.
func TestRecordKeepsEveryField(t *testing.T) {
	rec := record(t)
	r := &rec.Readings.Candidate.Series[2].Readings[5]
	fillFields(reflect.ValueOf(r).Elem(), 1)
	want := *r
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	back, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	if got := back.Readings.Candidate.Series[2].Readings[5]; !reflect.DeepEqual(got, want) {
		t.Errorf("got %+v, want %+v", got, want)
	}
	if v := exports.Verify(pkg, nil); len(v.Differences) == 0 { // the reading is another one now
		t.Error("a changed reading: got no differences")
	}
}

func fillFields(v reflect.Value, n int) {
	for i := range v.NumField() {
		switch f := v.Field(i); f.Kind() {
		case reflect.String:
			f.SetString(v.Type().Field(i).Name + " & more")
		case reflect.Float64:
			f.SetFloat(float64(n) + 0.1)
		case reflect.Int:
			f.SetInt(int64(n))
		case reflect.Struct:
			fillFields(f, n+1)
		}
	}
}

func mustJSON(t *testing.T, v any) string {
	t.Helper()
	b, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// TestWorkbookHoldsNoFormula checks that no text of a file becomes a formula, that only Workings holds formulas, and that the
// sheets agree with the record.
func TestWorkbookHoldsNoFormula(t *testing.T) {
	pkg, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	book, err := cells.Read(pkg)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, s := range book.Sheets {
		names = append(names, s.Name)
	}
	if want := []string{"Summary", "Results", "Sensitivity", "Findings", "Readings", "Ledger", "Workings", "Pictures", "Trail", "Method"}; !slices.Equal(names, want) {
		t.Errorf("sheets: got %v, want %v", names, want)
	}
	found := 0
	for _, s := range book.Sheets {
		for _, r := range s.Rows {
			for _, c := range r.Cells {
				if c.Formula && s.Name != exports.SheetWorkings {
					t.Errorf("%s!%s: found a formula %q", s.Name, c.Name(), c.Text)
				}
				if c.Text == hostile[0] && c.Kind == cells.Text {
					found++
				}
			}
		}
	}
	if found < 2 {
		t.Errorf("the text %q: found %d times as text, want it among readings and ledger", hostile[0], found)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Unsigned || !v.Agrees {
		t.Errorf("verify: got %s, agrees %v: %v", v.State, v.Agrees, v.Differences)
	}
}

// TestWorkbookParts checks that few enough parts have to be signed: newer outside verifiers refuse many references.
func TestWorkbookParts(t *testing.T) {
	if n := signedParts(t, signedOnce(t)); n > 30 {
		t.Errorf("parts to sign: got %d, want at most 30", n)
	}
}

// signedParts counts the parts that a signature has to name.
func signedParts(t testing.TB, pkg []byte) int {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for _, f := range z.File {
		if f.Name != "[Content_Types].xml" && f.Name != "docProps/core.xml" && !strings.HasPrefix(f.Name, "_xmlsignatures/") {
			n++
		}
	}
	return n
}

var once []byte

func signedOnce(t *testing.T) []byte {
	if once == nil {
		once = signed(t)
	}
	return once
}

// TestTooManyReadings checks the bound of a sheet.
func TestTooManyReadings(t *testing.T) {
	rec := record(t)
	rec.Readings.Reference.Series[0].Readings = make([]qa.Reading, exports.MaxReadings+1)
	if _, err := exports.Workbook(rec); err == nil {
		t.Error("got no error")
	}
}
