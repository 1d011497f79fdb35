package importers

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

func FuzzOpen(f *testing.F) {
	f.Add(false, []byte("Lot,Part,Bore [mm]\nA,1,12.003\nA,2,11.994\nB,1,12.008\nB,2,12.013\n"))
	f.Add(false, []byte("Lot;Bore\n;mm\nUSL;12,05\nA;12,003\nA;11,9\nB;12,008\nB;12,013\nMean;12\n"))
	f.Add(false, []byte("\xff\xfeL\x00"))
	f.Add(false, []byte("# c\n\"a\nb\";<0.05\n;n/a\nMean;1\n"))
	f.Add(true, xlsx(f, sheetOf{name: "Data", rows: long()[:4], merged: []string{"A2:A3"}}))
	f.Add(true, xlsx(f, sheetOf{name: "Data", rows: withSpecs()[:7]}))
	f.Fuzz(func(t *testing.T, workbook bool, data []byte) {
		name := "d1.csv"
		if workbook {
			name = "d1.xlsx"
		}
		b, err := Open(name, data, "")
		if err != nil {
			if _, ok := errors.AsType[*FileError](err); !ok {
				t.Fatalf("got %T %v, want a *FileError", err, err)
			}
			return
		}
		if len(b.Sheets) == 0 {
			t.Fatal("got a book without sheets")
		}
		in, err := Inspect(name, data, "", "")
		if err == nil {
			_ = in.Plan()
		}
		if err == nil && len(in.Lots) >= 2 {
			p := plan(name, func(p *qa.Plan) { p.Reference.Lot, p.Candidate.Lot = in.Lots[0].Lot, in.Lots[1].Lot })
			if r, err := Read(p, files(map[string][]byte{name: data})); err == nil {
				reconcile(t, r, map[string][]byte{name: data}, "")
			}
		}
	})
}

// tall is n rows of two lots with a part id and three characteristics.
func tall(n int) [][]any {
	rows := [][]any{{"Lot", "Part", "Bore [mm]", "Run-out [mm]", "Length [mm]"}}
	for i := range n {
		lot := "REF-0417"
		if i >= n/2 {
			lot = "CAND-0931"
		}
		rows = append(rows, []any{lot, num(fmt.Sprint(i + 1)), num(fmt.Sprintf("%.3f", 12+float64(i*7919%101)/1000)), num("0.0123"), num(fmt.Sprintf("%.2f", 80+float64(i%13)/100))})
	}
	return rows
}

func BenchmarkOpen(b *testing.B) {
	data := xlsx(b, sheetOf{name: "Data", rows: tall(10000)})
	b.Run("xlsx/rows=10000", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := Open("d1.xlsx", data, ""); err != nil {
				b.Fatal(err)
			}
		}
	})
	text := []byte(tallCSV(10000))
	b.Run("csv/rows=10000", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := Open("d1.csv", text, ""); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func BenchmarkRead(b *testing.B) {
	data := []byte(tallCSV(10000))
	p := plan("d1.csv")
	b.Run("csv/rows=10000", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := Read(p, files(map[string][]byte{"d1.csv": data})); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func tallCSV(n int) string {
	var b strings.Builder
	for _, row := range tall(n) {
		for j, c := range row {
			if j > 0 {
				b.WriteByte(',')
			}
			fmt.Fprint(&b, c)
		}
		b.WriteByte('\n')
	}
	return b.String()
}
