package cells

import (
	"os"
	"testing"
)

// The same cells, written by openpyxl and saved again by LibreOffice (testdata/make.sh), which computes the formulas.
func TestReadForeign(t *testing.T) {
	type at struct {
		name    string
		kind    Kind
		text    string
		formula bool
		format  string
	}
	both := []at{
		{"A1", Text, "Lot", false, ""},
		{"A22", Text, "CAND-0931", false, ""},
		{"C2", Number, "12", false, ""},
		{"C3", Number, "12.041", false, ""},
		{"I3", Text, "12,001", false, ""},
		{"J3", Text, " two\nlines \t<&>\"' 😀 Ω ", false, ""},
		{"XFD1048576", Blank, "", false, ""},
	}
	for file, own := range map[string][]at{
		"openpyxl.xlsx": {
			{"E2", Bool, "FALSE", false, ""},
			{"D2", Date, "46083", false, "yyyy-mm-dd h:mm:ss"},
			{"G3", FormulaNoValue, "", true, ""},
			{"H5", FormulaNoValue, "", true, ""},
			{"C6", Number, "12.063", false, `0.000" mm"`},
			{"F7", Number, "0.125", false, "0.0%"},
		},
		"libreoffice.xlsx": {
			{"E2", Bool, "FALSE", true, ""}, // it writes truth values as =FALSE()
			{"E3", Bool, "TRUE", true, ""},
			{"D2", Date, "46083", false, "yyyy\\-mm\\-dd\\ h:mm:ss"},
			{"G3", Number, "24.082", true, ""},
			{"H5", Error, "#DIV/0!", true, ""},
			{"C6", Number, "12.063", false, `0.000" mm"`},
			{"F7", Number, "0.125", false, "0.0%"},
			{"J5", Text, "ab", true, ""},
		},
	} {
		data, err := os.ReadFile("testdata/" + file)
		if err != nil {
			t.Fatal(err)
		}
		w, err := Read(data)
		if err != nil {
			t.Errorf("%s: %v", file, err)
			continue
		}
		if len(w.Sheets) != 3 || w.Sheets[0].Name != "Data & more" || !w.Sheets[1].Hidden || w.Sheets[2].Name != "empty" || len(w.Sheets[2].Rows) > 1 {
			t.Errorf("%s: got the sheets %+v", file, w.Sheets)
			continue
		}
		s := w.Sheets[0]
		if len(s.Merged) != 1 || s.Merged[0] != (Area{12, 2, 13, 4}) || !s.HiddenCol(9) || s.HiddenCol(8) {
			t.Errorf("%s: got merged %v, hidden columns %v", file, s.Merged, s.HiddenCols)
		}
		if r, _ := s.Row(9); !r.Hidden {
			t.Errorf("%s: got row 9 in sight, want it hidden", file)
		}
		for _, want := range append(both, own...) {
			col, row, _ := Parse(want.name)
			got := s.At(col, row)
			if (at{want.name, got.Kind, got.Text, got.Formula, got.Format}) != want {
				t.Errorf("%s!%s: got %+v, want %+v", file, want.name, got, want)
			}
		}
		if c := w.Sheets[1].At(MaxCol, MaxRow); c.Kind != Number || c.Text != "0.3" && c.Text != "0.30000000000000004" {
			t.Errorf("%s: got %+v in the last cell of the sheet", file, c)
		}
	}
}
