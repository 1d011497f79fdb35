package cells

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"fmt"
	"io"
	"math/rand/v2"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// numbersBook is a workbook of rows times cols numbers of 17 digits with a style, as common programs write them; odd writes the same
// cells as valid XML that no plain reading fits.
func numbersBook(tb testing.TB, rows, cols int, odd bool) []byte {
	tb.Helper()
	var b bytes.Buffer
	b.WriteString(`<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + "\n")
	random := rand.New(rand.NewPCG(4, 2))
	if odd {
		b.WriteString(`<x:worksheet xmlns:x="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><x:sheetData>`)
	} else {
		b.WriteString(`<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><dimension ref="A1"/><sheetData>`)
	}
	for r := 1; r <= rows; r++ {
		if odd {
			b.WriteString("<x:row>")
		} else {
			fmt.Fprintf(&b, `<row r="%d" spans="1:%d">`, r, cols)
		}
		for c := 1; c <= cols; c++ {
			v := strconv.AppendFloat(nil, 25+0.01*random.NormFloat64(), 'g', 17, 64)
			switch {
			case odd && c%2 == 0:
				fmt.Fprintf(&b, "<x:c s='2' ><x:v><![CDATA[%s]]></x:v></x:c>", v)
			case odd:
				fmt.Fprintf(&b, "<x:c r='%s'><!-- --><x:v>%s</x:v></x:c>", Name(c, r), v)
			default:
				fmt.Fprintf(&b, `<c r="%s" s="2"><v>%s</v></c>`, Name(c, r), v)
			}
		}
		if odd {
			b.WriteString("</x:row>")
		} else {
			b.WriteString("</row>")
		}
	}
	if odd {
		b.WriteString("</x:sheetData></x:worksheet>")
	} else {
		b.WriteString("</sheetData></worksheet>")
	}
	return packOf(tb, "", wholeParts(b.String(), `<sst xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"/>`))
}

// unzip is the floor: the sheet part inflated and thrown away.
func unzip(tb testing.TB, data []byte) {
	tb.Helper()
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		tb.Fatal(err)
	}
	for _, f := range z.File {
		if f.Name != "xl/worksheets/sheet1.xml" {
			continue
		}
		raw, err := f.OpenRaw()
		if err != nil {
			tb.Fatal(err)
		}
		if n, err := io.Copy(io.Discard, flate.NewReader(raw)); err != nil || n != int64(f.UncompressedSize64) {
			tb.Fatal(n, err)
		}
	}
}

// BenchmarkRead reads a sheet whole; its peer only unzips the same part (compress/flate).
func BenchmarkRead(b *testing.B) {
	for _, tt := range []struct {
		name       string
		rows, cols int
		odd        bool
	}{
		{"cells=1e6", 50000, 20, false},
		{"cells=2e6", 100000, 20, false},
		{"tall", MaxRow, 2, false},
		{"wide", 64, MaxCol, false},
		{"odd", 50000, 20, true},
	} {
		b.Run(tt.name, func(b *testing.B) {
			data := numbersBook(b, tt.rows, tt.cols, tt.odd)
			b.Run("ours", func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					runtime.GC()
					s, err := ReadSheet(data, "Data")
					if err != nil || len(s.Rows) != tt.rows {
						b.Fatal(err)
					}
				}
			})
			b.Run("peer", func(b *testing.B) {
				for b.Loop() {
					runtime.GC()
					unzip(b, data)
				}
			})
			b.Run("inturn", func(b *testing.B) { // on a busy machine the ratio of neighbours says more
				var ratios []float64
				for b.Loop() {
					runtime.GC()
					begun := b.Elapsed()
					if _, err := ReadSheet(data, "Data"); err != nil {
						b.Fatal(err)
					}
					read := b.Elapsed()
					unzip(b, data)
					ratios = append(ratios, float64(read-begun)/float64(b.Elapsed()-read))
				}
				slices.Sort(ratios)
				b.ReportMetric(ratios[len(ratios)/2], "times-unzip")
			})
		})
	}
}

// BenchmarkReadExcelize reads the numbers of a sheet; its peer is another library's rows, the values raw.
func BenchmarkReadExcelize(b *testing.B) {
	data := numbersBook(b, 50000, 20, false)
	b.Run("ours", func(b *testing.B) {
		for b.Loop() {
			if _, err := ReadSheet(data, "Data"); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("peer", func(b *testing.B) {
		for b.Loop() {
			f, err := excelize.OpenReader(bytes.NewReader(data))
			if err != nil {
				b.Fatal(err)
			}
			rows, err := f.Rows("Data")
			if err != nil {
				b.Fatal(err)
			}
			n := 0
			for rows.Next() {
				row, err := rows.Columns(excelize.Options{RawCellValue: true})
				if err != nil {
					b.Fatal(err)
				}
				n += len(row)
			}
			if n != 1000000 || f.Close() != nil {
				b.Fatal(n)
			}
		}
	})
}

// BenchmarkReadTypical reads what people have: a title, a heading, part ids, dates and nine columns of numbers.
func BenchmarkReadTypical(b *testing.B) {
	f := excelize.NewFile()
	date, err := f.NewStyle(&excelize.Style{NumFmt: 14})
	if err != nil {
		b.Fatal(err)
	}
	random := rand.New(rand.NewPCG(4, 2))
	set := func(col, row int, v any) {
		if err := f.SetCellValue("Sheet1", Name(col, row), v); err != nil {
			b.Fatal(err)
		}
	}
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
	if err := f.SetCellStyle("Sheet1", "B4", "B503", date); err != nil {
		b.Fatal(err)
	}
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read(out.Bytes()); err != nil {
			b.Fatal(err)
		}
	}
}
