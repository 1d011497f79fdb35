package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"strconv"
	"testing"

	"github.com/xuri/excelize/v2"

	"lotpair/importers"
	"lotpair/qa"
)

// benchFile is a sheet of two lots with the given parts each and ten characteristics.
func benchFile(b *testing.B, parts int) []byte {
	b.Helper()
	f := excelize.NewFile()
	stream, err := f.NewStreamWriter("Sheet1")
	if err != nil {
		b.Fatal(err)
	}
	row := []any{"Lot"}
	for c := range 10 {
		row = append(row, fmt.Sprintf("Length %c", 'A'+c))
	}
	random := rand.New(rand.NewPCG(1, 2))
	for r := range 2*parts + 1 {
		if r > 0 {
			row[0] = "R"
			if r > parts {
				row[0] = "C"
			}
			for c := range 10 {
				row[c+1] = rounded(12+0.01*random.NormFloat64(), 3)
			}
		}
		if err := stream.SetRow("A"+strconv.Itoa(r+1), row); err != nil {
			b.Fatal(err)
		}
	}
	if err := stream.Flush(); err != nil {
		b.Fatal(err)
	}
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		b.Fatal(err)
	}
	return out.Bytes()
}

// BenchmarkWholeComparison takes a file to its result: every cell accounted for, ten comparisons. Its peer only reads the
// cells into floats with another library.
func BenchmarkWholeComparison(b *testing.B) {
	file := benchFile(b, 1000)
	margin := 0.01
	plan := qa.Plan{
		Format:    qa.PlanFormat,
		Reference: qa.LotPlan{Lot: "R", File: "bench.xlsx"},
		Candidate: qa.LotPlan{Lot: "C", File: "bench.xlsx"},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &margin}},
	}
	b.Run("ours", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			readings, err := importers.Read(plan, func(string) ([]byte, error) { return file, nil })
			if err != nil {
				b.Fatal(err)
			}
			result, err := qa.Compare(plan, readings, qa.Run{})
			if err != nil {
				b.Fatal(err)
			}
			if got := len(result.Characteristics); got != 10 || result.Characteristics[9].Reference.N != 1000 {
				b.Fatalf("got %d characteristics of %d readings, want 10 of 1000", got, result.Characteristics[9].Reference.N)
			}
		}
	})
	b.Run("peer", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			f, err := excelize.OpenReader(bytes.NewReader(file))
			if err != nil {
				b.Fatal(err)
			}
			rows, err := f.GetRows("Sheet1", excelize.Options{RawCellValue: true})
			if err != nil {
				b.Fatal(err)
			}
			n := 0
			for _, row := range rows[1:] {
				for _, text := range row[1:] {
					if _, err := strconv.ParseFloat(text, 64); err != nil {
						b.Fatal(err)
					}
					n++
				}
			}
			if n != 20000 {
				b.Fatalf("got %d numbers, want 20000", n)
			}
		}
	})
}
