package exports_test

import (
	"fmt"
	"math/rand/v2"
	"strconv"
	"testing"

	"github.com/xuri/excelize/v2"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// made is a record of k characteristics with n readings a lot.
func made(t testing.TB, k, n int) qa.Record {
	t.Helper()
	rng := rand.New(rand.NewPCG(3, 5))
	plan := qa.Plan{
		Format: qa.PlanFormat, Title: "Made up", Supports: "DEV-1", Record: qa.Particulars{Part: "A", Revision: "B"},
		Reference: qa.LotPlan{Lot: "R", File: "lots.csv"}, Candidate: qa.LotPlan{Lot: "C", File: "lots.csv"},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: ptr(0.05)}},
	}
	var r qa.Readings
	for j := range k {
		plan.Characteristics = append(plan.Characteristics, qa.Characteristic{Name: fmt.Sprintf("Characteristic %d", j+1), Unit: "mm", Lower: ptr(9.8), Upper: ptr(10.2)})
	}
	r.Characteristics = plan.Characteristics
	for i, lot := range []*qa.Lot{&r.Reference, &r.Candidate} {
		*lot = qa.Lot{Name: []string{"R", "C"}[i], Rows: n}
		for _, c := range plan.Characteristics {
			s := qa.Series{Characteristic: c.Name, Rows: n, Readings: make([]qa.Reading, 0, n)}
			for x := range n {
				v := 10 + 0.03*rng.NormFloat64()
				text := strconv.FormatFloat(v, 'f', 4, 64)
				v, _ = strconv.ParseFloat(text, 64)
				s.Readings = append(s.Readings, qa.Reading{Value: v, Decimals: 4, Part: strconv.Itoa(x), Source: qa.Source{File: "lots.csv", Cell: "B" + strconv.Itoa(x+2), Text: text}})
			}
			lot.Series = append(lot.Series, s)
		}
	}
	result, err := qa.Compare(plan, r, qa.Run{Software: qa.Software{Version: "test"}, Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: "not counted"}})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(plan, qa.File{Name: "plan.toml", SHA256: "aa"}, r, result, "tester", when)
}

// BenchmarkTypical writes, signs, reads back and verifies a record of 6 characteristics with 40 readings a lot.
func BenchmarkTypical(b *testing.B) {
	rec, id := made(b, 6, 40), person(b, "Ada")
	for b.Loop() {
		pkg, err := exports.SignFirst(rec, id, opcsign.Statement{Meaning: "prepared", Time: when})
		if err != nil {
			b.Fatal(err)
		}
		if v := exports.Verify(pkg, nil); v.State != exports.Intact {
			b.Fatal(v.State, v.Differences)
		}
	}
}

// The parts of it.

func BenchmarkTypicalWrite(b *testing.B) {
	rec := made(b, 6, 40)
	for b.Loop() {
		if _, err := exports.Workbook(rec); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkTypicalVerify(b *testing.B) {
	pkg, err := exports.SignFirst(made(b, 6, 40), person(b, "Ada"), opcsign.Statement{Meaning: "prepared", Time: when})
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if v := exports.Verify(pkg, nil); v.State != exports.Intact {
			b.Fatal(v.State)
		}
	}
}

// BenchmarkMillion writes a workbook of 1,000,000 readings; its peer writes the same cells of the sheet Readings alone by the
// spreadsheet library's stream.
func BenchmarkMillion(b *testing.B) {
	rec := made(b, 10, 50000)
	b.Run("ours", func(b *testing.B) {
		for b.Loop() {
			if _, err := exports.Workbook(rec); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("peer", func(b *testing.B) {
		for b.Loop() {
			f := excelize.NewFile()
			w, err := f.NewStreamWriter("Sheet1")
			if err != nil {
				b.Fatal(err)
			}
			row := 1
			for _, l := range []qa.Lot{rec.Readings.Reference, rec.Readings.Candidate} {
				for _, s := range l.Series {
					for _, r := range s.Readings {
						if err := w.SetRow("A"+strconv.Itoa(row), []any{"reference", l.Name, s.Characteristic, r.Value, nil, "mm", r.Source.Text, r.Source.File, r.Source.Place(), "used", r.Part}); err != nil {
							b.Fatal(err)
						}
						row++
					}
				}
			}
			if err := w.Flush(); err != nil {
				b.Fatal(err)
			}
			if _, err := f.WriteToBuffer(); err != nil {
				b.Fatal(err)
			}
			if err := f.Close(); err != nil {
				b.Fatal(err)
			}
		}
	})
}
