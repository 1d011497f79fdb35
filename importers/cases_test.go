package importers

import (
	"bytes"
	"flag"
	"math"
	"os"
	"path/filepath"
	"testing"

	"lotpair/qa"
)

var update = flag.Bool("update", false, "write readings.xlsx of the case jahanmi2 again from readings.csv")

const jahanmi2 = "../testdata/cases/jahanmi2"

func caseFile(t testing.TB, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join(jahanmi2, name))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// jahanmi2Workbook is the case's workbook: the CSV's heading and readings, numbers as numbers.
func jahanmi2Workbook(t testing.TB) []byte {
	t.Helper()
	b, err := Open("readings.csv", caseFile(t, "readings.csv"), "")
	if err != nil {
		t.Fatal(err)
	}
	var rows [][]any
	for _, row := range b.Sheets[0].Rows[len(b.Comments):] {
		if len(rows) == 0 {
			rows = append(rows, []any{row.Cells[0].Text, row.Cells[1].Text})
			continue
		}
		rows = append(rows, []any{num(row.Cells[0].Text), num(row.Cells[1].Text)})
	}
	return xlsx(t, sheetOf{name: "Data", rows: rows})
}

// The same readings as text and as a workbook give the same lots. Standard deviations as published: NIST/SEMATECH
// e-Handbook, 1.3.5.9, 65.54909 and 61.85425 of 240 each.
func TestCaseJahanmi2(t *testing.T) {
	if *update {
		if err := os.WriteFile(filepath.Join(jahanmi2, "readings.xlsx"), jahanmi2Workbook(t), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	if !bytes.Equal(caseFile(t, "readings.xlsx"), jahanmi2Workbook(t)) {
		t.Error("readings.xlsx is not what -update writes")
	}
	var all []qa.Readings
	for _, name := range []string{"plan-csv.toml", "plan-xlsx.toml"} {
		p, err := LoadPlan(name, caseFile(t, name))
		if err != nil {
			t.Fatal(err)
		}
		data := caseFile(t, p.Reference.File)
		all = append(all, mustRead(t, p, data))
	}
	for i, r := range all {
		for _, want := range []struct {
			lot qa.Lot
			sd  float64
		}{{r.Reference, 65.54909}, {r.Candidate, 61.85425}} {
			v := want.lot.Series[0].Values()
			sum, mean := 0.0, meanOf(v)
			for _, x := range v {
				sum += (x - mean) * (x - mean)
			}
			if sd := math.Sqrt(sum / float64(len(v)-1)); len(v) != 240 || math.Abs(sd-want.sd) > 5e-6 {
				t.Errorf("file %d, lot %s: got n = %d, sd %.7g, want 240 and %.7g", i, want.lot.Name, len(v), sd, want.sd)
			}
		}
		if len(r.Ledger) != 0 || len(r.Warnings) != 0 || len(r.Characteristics) != 1 || r.Characteristics[0].Name != "strength" {
			t.Errorf("file %d: got the ledger %v, warnings %v, characteristics %v", i, r.Ledger, r.Warnings, r.Characteristics)
		}
	}
	a, b := all[0], all[1]
	for k, pair := range [][2]qa.Lot{{a.Reference, b.Reference}, {a.Candidate, b.Candidate}} {
		for i, x := range pair[0].Series[0].Readings {
			if y := pair[1].Series[0].Readings[i]; x.Value != y.Value || x.Part != y.Part || x.LeftOut != y.LeftOut {
				t.Fatalf("lot %d, reading %d: got %+v as text and %+v as a workbook", k, i, x, y)
			}
		}
	}
}
