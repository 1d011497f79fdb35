package exports_test

import (
	"bytes"
	"encoding/csv"
	"image/png"
	"strconv"
	"strings"
	"testing"

	"lotpair/exports"
)

// TestResultCSV reads the text back: every number to the last digit, no text that would become a formula.
func TestResultCSV(t *testing.T) {
	rec := record(t)
	b, err := exports.ResultCSV(rec.Result)
	if err != nil {
		t.Fatal(err)
	}
	lines, err := csv.NewReader(bytes.NewReader(b)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(lines) != 1+len(rec.Result.Characteristics) {
		t.Fatalf("lines: got %d", len(lines))
	}
	at := map[string]int{}
	for i, n := range lines[0] {
		at[n] = i
	}
	for i, c := range rec.Result.Characteristics {
		l := lines[i+1]
		if got, err := strconv.ParseFloat(l[at["equivalence.upper"]], 64); err != nil || got != *c.Equivalence.Upper {
			t.Errorf("%s: equivalence.upper: got %v, want %v", c.Name, got, *c.Equivalence.Upper)
		}
		if l[at["verdict"]] != string(c.Verdict) {
			t.Errorf("%s: verdict: got %q", c.Name, l[at["verdict"]])
		}
		if strings.HasPrefix(l[0], "=") {
			t.Errorf("a name that would become a formula: %q", l[0])
		}
	}
}

// TestResultsSheet holds the sheet Results against the result: a line a characteristic under the names of the format.
func TestResultsSheet(t *testing.T) {
	rec := record(t)
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	got := cellsOf(t, pkg, exports.SheetResults)
	if got["A4"] != "name" || got["A6"] != "Bore" || got["A7"] != "=Length" || got["C6"] != string(rec.Result.Characteristics[0].Verdict) {
		t.Errorf("got %q, %q, %q, %q", got["A4"], got["A6"], got["A7"], got["C6"])
	}
	for at, name := range got {
		if name != "difference.p_two_sided" {
			continue
		}
		col := strings.TrimRight(at, "0123456789")
		if x, err := strconv.ParseFloat(got[col+"6"], 64); err != nil || x != *rec.Result.Characteristics[0].Difference.PTwoSided {
			t.Errorf("p: got %q", got[col+"6"])
		}
		if got[col+"5"] == "" {
			t.Errorf("%s: no plain words", name)
		}
		return
	}
	t.Error("found no column difference.p_two_sided")
}

// TestFigures saves each figure both ways.
func TestFigures(t *testing.T) {
	rec := record(t)
	for _, name := range exports.FigureNames() {
		b, err := exports.FigurePNG(rec, "Bore", name, 2)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := png.Decode(bytes.NewReader(b)); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		s, err := exports.FigureSVG(rec, "=Length", name)
		if err != nil || !bytes.HasPrefix(s, []byte("<svg")) {
			t.Errorf("%s: got %.20q, %v", name, s, err)
		}
	}
	if _, err := exports.FigureSVG(rec, "Bore", "pie"); err == nil {
		t.Error("an unknown figure: got no error")
	}
	if _, err := exports.FigureSVG(rec, "Mass", exports.FigureSpine); err == nil {
		t.Error("an unknown characteristic: got no error")
	}
}

// TestWorkbookManyCharacteristics checks that the bound of signed parts holds with more characteristics than have pictures.
func TestWorkbookManyCharacteristics(t *testing.T) {
	pkg, err := exports.Workbook(made(t, 60, 6))
	if err != nil {
		t.Fatal(err)
	}
	if n := signedParts(t, pkg); n > 30 {
		t.Errorf("parts to sign: got %d, want at most 30", n)
	}
	if v := exports.Verify(pkg, nil); !v.Agrees {
		t.Errorf("got %v", v.Differences)
	}
}
