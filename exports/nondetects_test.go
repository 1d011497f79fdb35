package exports_test

import (
	"reflect"
	"testing"

	"lotpair/exports"
	"lotpair/qa"
)

// Non-detects come back from the record as they went in, and give the same bounds again.
func TestRecordKeepsNonDetects(t *testing.T) {
	rec := record(t)
	limit := 9.99
	source := qa.Source{File: "lots.xlsx", Sheet: "Data", Cell: "C99", Text: "=<9.99"}
	s := &rec.Readings.Reference.Series[0]
	s.NonDetected = []qa.NonDetect{{Source: source, Part: "p<1", Group: "g", Limit: &limit, Decimals: 2}, {Source: qa.Source{File: "lots.xlsx", Cell: "C98", Text: ">10"}, Limit: &limit, Above: true, Substitute: &limit}}
	s.NonDetects, s.Rows = 1, s.Rows+2
	s.Readings = append(s.Readings, qa.Reading{Value: limit, Decimals: 2, Source: s.NonDetected[1].Source})
	result, err := rec.Recompute()
	if err != nil {
		t.Fatal(err)
	}
	rec.Result = result
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	back, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	if got := back.Readings.Reference.Series[0].NonDetected; !reflect.DeepEqual(got, s.NonDetected) {
		t.Errorf("got %+v, want %+v", got, s.NonDetected)
	}
	again, err := back.Recompute()
	if err != nil || mustJSON(t, again) != mustJSON(t, rec.Result) {
		t.Errorf("got another result from the record read back (%v)", err)
	}
	if !qa.Has(again.Characteristics[0].Warnings, qa.WarnNonDetects) {
		t.Errorf("got the warnings %v, want the non-detects told", again.Characteristics[0].Warnings)
	}
}
