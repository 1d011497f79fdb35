package exports

import (
	"fmt"
	"io"
	"math/rand/v2"
	"testing"

	"github.com/xuri/excelize/v2"

	"lotpair/qa"
)

// many is a record of k characteristics with n readings a lot, for the parts of a workbook alone.
func many(b *testing.B, k, n int) qa.Record {
	b.Helper()
	rng := rand.New(rand.NewPCG(3, 5))
	margin, low, high := 0.05, 9.8, 10.2
	plan := qa.Plan{Format: qa.PlanFormat, Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &margin}}}
	for j := range k {
		plan.Characteristics = append(plan.Characteristics, qa.Characteristic{Name: fmt.Sprintf("Characteristic %d", j+1), Unit: "mm", Lower: &low, Upper: &high})
	}
	r := qa.Readings{Characteristics: plan.Characteristics}
	for _, lot := range []*qa.Lot{&r.Reference, &r.Candidate} {
		for _, c := range plan.Characteristics {
			s := qa.Series{Characteristic: c.Name, Rows: n}
			for range n {
				s.Readings = append(s.Readings, qa.Reading{Value: float64(int((10+0.03*rng.NormFloat64())*10000)) / 10000, Decimals: 4})
			}
			lot.Series = append(lot.Series, s)
		}
	}
	result, err := qa.Compare(plan, r, qa.Run{})
	if err != nil {
		b.Fatal(err)
	}
	return qa.Record{Plan: plan, Readings: r, Result: result}
}

// BenchmarkFormulas lays out, writes and packs 40,000 formulas of the sheet Workings with what they give; its peer writes the
// same formulas and values by the spreadsheet library's stream.
func BenchmarkFormulas(b *testing.B) {
	rec := many(b, 480, 6)
	b.Run("ours", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			s := workingsSheet(rec)
			w := &looks{file: excelize.NewFile()}
			if _, err := writeZip(map[string]part{"sheet.xml": {write: func(to io.Writer) error { return writeSheetData(to, &s, w) }}}, 1<<20); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(float64(formulasOf(workingsSheet(rec))), "formulas")
	})
	b.Run("peer", func(b *testing.B) {
		b.ReportAllocs()
		s := workingsSheet(rec)
		for b.Loop() {
			f := excelize.NewFile()
			w, err := f.NewStreamWriter("Sheet1")
			if err != nil {
				b.Fatal(err)
			}
			s.lines(func(number int, r row) bool {
				line := make([]any, len(r.cells))
				for i, c := range r.cells {
					switch {
					case c.formula != "":
						line[i] = excelize.Cell{Formula: c.formula, Value: *c.number}
					case c.number != nil:
						line[i] = *c.number
					default:
						line[i] = c.text
					}
				}
				err = w.SetRow(fmt.Sprintf("A%d", number), line)
				return err == nil
			})
			if err == nil {
				err = w.Flush()
			}
			if err != nil {
				b.Fatal(err)
			}
			if err := f.Write(io.Discard); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func formulasOf(s sheet) int {
	n := 0
	s.lines(func(_ int, r row) bool {
		for _, c := range r.cells {
			if c.formula != "" {
				n++
			}
		}
		return true
	})
	return n
}

// BenchmarkPictures paints the pictures of 6 characteristics with 40 readings a lot.
func BenchmarkPictures(b *testing.B) {
	rec := many(b, 6, 40)
	b.ReportAllocs()
	for b.Loop() {
		var p painter
		if _, err := p.plots(rec.Result.Characteristics, rec.Readings); err != nil {
			b.Fatal(err)
		}
		if _, err := p.spines(rec.Result, 167); err != nil {
			b.Fatal(err)
		}
	}
}
