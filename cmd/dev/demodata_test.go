package main

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"

	"github.com/xuri/excelize/v2"

	"lotpair/qa"
)

// cells reads every stored value and formula of the worked example.
func cells(t *testing.T, path string) map[string]string {
	t.Helper()
	f, err := excelize.OpenFile(path)
	if err != nil {
		t.Fatal(err)
	}
	defer func() {
		if err := f.Close(); err != nil {
			t.Error(err)
		}
	}()
	if got := f.GetSheetList(); len(got) != 1 || got[0] != demoSheet {
		t.Fatalf("%s: got sheets %v, want %s alone", path, got, demoSheet)
	}
	rows, err := f.GetRows(demoSheet, excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]string{}
	for r, row := range rows {
		for c, value := range row {
			cell, err := excelize.CoordinatesToCellName(c+1, r+1)
			if err != nil {
				t.Fatal(err)
			}
			kind, err := f.GetCellType(demoSheet, cell)
			if err != nil {
				t.Fatal(err)
			}
			formula, err := f.GetCellFormula(demoSheet, cell)
			if err != nil {
				t.Fatal(err)
			}
			out[cell] = fmt.Sprintf("%q, type %d, formula %q", value, kind, formula)
		}
	}
	return out
}

// The committed worked example is what the generator writes; after a change of the generator run `go run ./cmd/dev cases`.
func TestDemoAsCommitted(t *testing.T) {
	folder := t.TempDir()
	if err := writeDemo(folder); err != nil {
		t.Fatal(err)
	}
	committed := filepath.Join("..", "..", demoFolder)
	got, want := cells(t, filepath.Join(folder, demoWorkbook)), cells(t, filepath.Join(committed, demoWorkbook))
	if len(got) != len(want) {
		t.Errorf("got %d cells, want %d", len(got), len(want))
	}
	for cell, w := range want {
		if got[cell] != w {
			t.Errorf("%s: got %s, want %s", cell, got[cell], w)
		}
	}
	plan, err := os.ReadFile(filepath.Join(committed, demoPlanFile))
	if err != nil {
		t.Fatal(err)
	}
	if string(plan) != demoPlan {
		t.Errorf("%s differs from the generator's plan", demoPlanFile)
	}
}

// demoComparison compares the generated table without any file: the verdicts are those of the numbers alone.
func demoComparison(t *testing.T) qa.Result {
	t.Helper()
	p := func(x float64) *float64 { return &x }
	tenth := 0.10
	plan := qa.Plan{Format: qa.PlanFormat, Criterion: qa.Criterion{Margin: &qa.Margin{ToleranceFraction: &tenth}}}
	readings := qa.Readings{Reference: qa.Lot{Name: demoLots[0].name}, Candidate: qa.Lot{Name: demoLots[1].name}}
	table := demoTable()
	for c, column := range demoColumns {
		ch := qa.Characteristic{Name: column.name, Unit: column.unit, Lower: p(column.lower), Target: p(column.target), Upper: p(column.upper)}
		if column.name == "Flange run-out" {
			ch.Lower, ch.Target, ch.Objective = nil, nil, qa.NotHigher
			ch.Margin = &qa.Margin{Absolute: p(0.008)}
		}
		readings.Characteristics = append(readings.Characteristics, ch)
		row := demoFirstRow
		for side, lot := range []*qa.Lot{&readings.Reference, &readings.Candidate} {
			s := qa.Series{Characteristic: column.name, Rows: demoLots[side].parts}
			for range demoLots[side].parts {
				cell, err := excelize.CoordinatesToCellName(c+3, row)
				if err != nil {
					t.Fatal(err)
				}
				value := table[row-1][c+2]
				text := fmt.Sprint(value)
				reading := qa.Reading{Source: qa.Source{Sheet: demoSheet, Cell: cell, Text: text}, Decimals: column.decimals}
				if cell == demoDropped {
					reading.LeftOut = "dropped part, NCR-77"
				}
				if text == demoMissingMark {
					s.Missing++
				} else if _, err := fmt.Sscan(text, &reading.Value); err != nil {
					t.Fatal(err)
				} else {
					s.Readings = append(s.Readings, reading)
				}
				row++
			}
			lot.Series = append(lot.Series, s)
		}
	}
	result, err := qa.Compare(plan, readings, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return result
}

func TestDemoVerdicts(t *testing.T) {
	want := map[string]struct {
		verdict    qa.Verdict
		detectable bool
		far        string // the cell of a far reading that is used
	}{
		"Bore diameter":      {qa.Equivalent, false, ""},
		"Wall thickness":     {qa.NotEquivalent, true, ""},
		"Flange run-out":     {qa.Undecided, true, ""},
		"Bearing seat depth": {qa.Equivalent, false, "Data!F28"},
		"Spoke hole pitch":   {qa.Equivalent, true, ""},
		"Mass":               {qa.Equivalent, false, ""},
	}
	result := demoComparison(t)
	if result.Verdict != qa.NotEquivalent {
		t.Errorf("overall: got %s, want %s", result.Verdict, qa.NotEquivalent)
	}
	for _, c := range result.Characteristics {
		w := want[c.Name]
		if c.Verdict != w.verdict || c.Detectable != w.detectable {
			t.Errorf("%s: got %s, detectable %v, want %s, %v", c.Name, c.Verdict, c.Detectable, w.verdict, w.detectable)
		}
		e := c.Equivalence
		t.Logf("%-20s %-15s [%v, %v] %v", c.Name, c.Verdict, *e.Lower, *e.Upper, c.Detectable)
		if g := c.Checks.Reference.Grubbs; w.far != "" && (g == nil || g.Cell != w.far || g.P >= 0.01) {
			t.Errorf("%s: got %+v, want a far reading in %s", c.Name, g, w.far)
		}
		if got := qa.Has(c.Warnings, qa.WarnFarReading); got != (w.far != "") {
			t.Errorf("%s: got a far reading %v, want %v: %v", c.Name, got, w.far != "", c.Warnings)
		}
	}
}
