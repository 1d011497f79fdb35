package exports_test

import (
	"bytes"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/qa"
)

// TestVerifyFormulas changes the formulas of an unsigned workbook, one thing a case: verification names the cell.
func TestVerifyFormulas(t *testing.T) {
	pkg, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	workings, results := sheetFile(t, pkg, exports.SheetWorkings), sheetFile(t, pkg, exports.SheetResults)
	for _, c := range []struct{ name, part, old, new, want string }{
		{"another function", workings, "<f>AVERAGE(", "<f>MEDIAN(", "Workings!B"},
		{"a longer range", workings, "$D$15)", "$D$16)", "Workings!B"},
		{"a number in the place of a formula", workings, "<f>COUNT(Readings!$D$4:$D$15)</f>", "", "Workings!B"},
		{"what it gives", workings, "</f><v>12</v>", "</f><v>13</v>", "Workings!B"},
		{"shared with other cells", workings, "<f>COUNT", `<f t="shared" ref="B6:B9" si="0">COUNT`, "Workings!B"},
		{"over an area", workings, "<f>COUNT", `<f t="array" ref="B6:C9">COUNT`, "Workings!B"},
		{"a formula among the results", results, "<v>12</v>", "<f>6+6</f><v>12</v>", "Results!"},
		{"a number format", "xl/styles.xml", `<xf numFmtId="0" fontId="2" fillId="0" borderId="0" xfId="0" applyFont`, `<xf numFmtId="10" fontId="2" fillId="0" borderId="0" xfId="0" applyFont`, "number format"},
		{"a hidden column", workings, `max="4" `, `max="4" hidden="1" `, "hidden"},
	} {
		t.Run(c.name, func(t *testing.T) {
			found := false
			changed := rezip(t, pkg, func(name string, b []byte) []byte {
				if name == c.part && bytes.Contains(b, []byte(c.old)) {
					found = true
					return bytes.Replace(b, []byte(c.old), []byte(c.new), 1)
				}
				return b
			})
			if !found {
				t.Fatalf("%s holds no %q", c.part, c.old)
			}
			v := exports.Verify(changed, nil)
			if v.Agrees || len(v.Differences) == 0 || !strings.Contains(v.Differences[0], c.want) {
				t.Errorf("got agrees %v, %v; want a difference that names %s", v.Agrees, v.Differences, c.want)
			}
		})
	}
}

// TestWorkingsUsesOnlyWhatIsUsed leaves readings out and takes away what the figures need: the range never takes in a reading
// left out, and what does not exist has no line.
func TestWorkingsUsesOnlyWhatIsUsed(t *testing.T) {
	rec := record(t)
	s := &rec.Readings.Reference.Series[0]
	s.Readings[2].LeftOut = "dropped part"
	for i := range rec.Readings.Candidate.Series[1].Readings { // constant
		rec.Readings.Candidate.Series[1].Readings[i].Value = 10
		rec.Readings.Reference.Series[1].Readings[i].Value = 10
	}
	rec.Readings.Reference.Series[2].Readings = nil
	rec.Readings.Reference.Series[2].Missing = 12
	result, err := rec.Recompute()
	if err != nil {
		t.Fatal(err)
	}
	rec = qa.NewRecord(rec.Plan, rec.PlanFile, rec.Readings, result, "tester", when)
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(pkg, nil); !v.Agrees {
		t.Errorf("got %v", v.Differences)
	}
	got := cellsOf(t, pkg, exports.SheetReadings)
	if got["D6"] != "" || got["E6"] == "" || !strings.HasPrefix(got["J6"], "left out: dropped part") {
		t.Errorf("the reading left out: got %q used, %q left out, %q", got["D6"], got["E6"], got["J6"])
	}
	for at, text := range cellsOf(t, pkg, exports.SheetWorkings) {
		if strings.Contains(text, "NaN") || strings.Contains(text, "{") {
			t.Errorf("%s: got %q", at, text)
		}
	}
}
