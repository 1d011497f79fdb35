package main

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"fmt"
	"io"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"lotpair/importers"
)

// fileRows are the reading of files without a comparison. The sheets of full size, by cells alone, are pairs (BenchmarkRead).
var fileRows = []benchRow{
	{
		name: "open .xlsx, 1,000,000 numbers",
		build: func() work {
			file := digitsFile(50_000)
			return work{goal: goal{ofFloor: 2}, ours: func() { must(importers.Open("bench.xlsx", file, "")) }, floor: rival{"unzip", func() { unzipped(file) }}}
		},
		growth: &growth{sizes: []int{10_000, 100_000, 1_000_000, 2_000_000}, of: "numbers", build: func(n int) func() {
			file := digitsFile(n / 20)
			return func() { must(importers.Open("bench.xlsx", file, "")) }
		}},
	},
	{
		name: "inspect .xlsx, 1,000,000 numbers",
		build: func() work {
			file := digitsFile(50_000)
			return work{
				goal: goal{ofFloor: 2.5}, floor: rival{"unzip", func() { unzipped(file) }},
				ours: func() { must(importers.Inspect("bench.xlsx", file, "", "")) },
			}
		},
	},
	{
		name: "typical .xlsx, 500 rows x 12 columns",
		build: func() work {
			file := typicalFile()
			return work{
				goal: goal{seconds: 0.004}, floor: rival{"unzip", func() { unzipped(file) }},
				ours: func() { must(importers.Open("bench.xlsx", file, "")) },
				peers: []rival{{"excelize, raw rows", func() {
					must(must(excelize.OpenReader(bytes.NewReader(file))).GetRows("Sheet1", excelize.Options{RawCellValue: true}))
				}}},
			}
		},
	},
	{
		name: "numbers of .csv, 1,000,000",
		build: func() work {
			name := filepath.Join(must(os.MkdirTemp("", "bench")), "bench.csv")
			must(0, os.WriteFile(name, benchText(50_000, 20), 0o600))
			return work{
				goal: goal{seconds: 0.100}, floor: rival{"os.ReadFile", func() { must(os.ReadFile(name)) }},
				ours: func() { textNumbers(must(os.ReadFile(name))) },
			}
		},
	},
}

// unzipped inflates every sheet with the standard library and throws it away.
func unzipped(file []byte) {
	for _, f := range must(zip.NewReader(bytes.NewReader(file), int64(len(file)))).File {
		if strings.HasPrefix(f.Name, "xl/worksheets/") {
			must(io.Copy(io.Discard, flate.NewReader(must(f.OpenRaw()))))
		}
	}
}

// textNumbers opens a text, which finds its encoding, delimiter and quotes, and reads every number of it.
func textNumbers(data []byte) {
	b := must(importers.Open("bench.csv", data, ""))
	n := 0
	for _, r := range b.Sheets[0].Rows[1:] {
		for _, c := range r.Cells {
			v, _, err := importers.ParseNumber(c.Text, ',')
			if err != nil {
				panic(err)
			}
			kept += v
			n++
		}
	}
	if n != 1_000_000 {
		panic("bench: text: got another number of readings")
	}
}

// benchText is a text of rows with semicolons and decimal commas.
func benchText(rows, cols int) []byte {
	random := rand.New(rand.NewPCG(1, 2))
	var b bytes.Buffer
	for c := range cols {
		fmt.Fprintf(&b, ";\"Length %c\"", 'A'+c)
	}
	out := append(b.Bytes()[1:], '\n')
	for range rows {
		for c := range cols {
			if c > 0 {
				out = append(out, ';')
			}
			from := len(out)
			out = strconv.AppendFloat(out, 25+0.01*random.NormFloat64(), 'f', 5, 64)
			out[from+bytes.IndexByte(out[from:], '.')] = ','
		}
		out = append(out, '\n')
	}
	return out
}

// digitsFile is a sheet of two lots and twenty characteristics of all the digits that a float64 has.
func digitsFile(rows int) []byte {
	f := excelize.NewFile()
	stream := must(f.NewStreamWriter("Sheet1"))
	random := rand.New(rand.NewPCG(1, 2))
	row := []any{"Lot"}
	for c := range 20 {
		row = append(row, fmt.Sprintf("Length %c", 'A'+c))
	}
	for r := range rows + 1 {
		if r > 0 {
			row[0] = []string{"R", "C"}[2*(r-1)/rows]
			for c := range 20 {
				row[c+1] = 25 + 0.01*random.NormFloat64()
			}
		}
		must(0, stream.SetRow("A"+strconv.Itoa(r+1), row))
	}
	must(0, stream.Flush())
	return must(f.WriteToBuffer()).Bytes()
}

// typicalFile is what people have: a title, a styled heading, part ids, dates, operators and nine columns of numbers.
func typicalFile() []byte {
	f := excelize.NewFile()
	date := must(f.NewStyle(&excelize.Style{NumFmt: 14}))
	set := func(col, row int, v any) {
		must(0, f.SetCellValue("Sheet1", string(rune('A'+col-1))+strconv.Itoa(row), v))
	}
	random := rand.New(rand.NewPCG(4, 2))
	set(1, 1, "Incoming inspection")
	for c := 1; c <= 12; c++ {
		set(c, 3, "Heading "+strconv.Itoa(c))
	}
	for r := 4; r < 504; r++ {
		set(1, r, "P-"+strconv.Itoa(r))
		set(2, r, 45000+r)
		set(3, r, "Operator "+strings.Repeat("x", r%5))
		for c := 4; c <= 12; c++ {
			set(c, r, 25+float64(random.IntN(1000))/1000)
		}
	}
	must(0, f.SetCellStyle("Sheet1", "B4", "B503", date))
	return must(f.WriteToBuffer()).Bytes()
}
