//go:build outside

package importers

import (
	"bytes"
	"math"
	"strconv"
	"testing"
	"time"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// A full sheet: 1,048,576 rows of two lots side by side, under a dimension that says 25 rows (N29).
func TestReadFullRows(t *testing.T) {
	data := largeBook(t, func(b *bytes.Buffer) {
		b.WriteString(sheetHead + `<row r="1"><c r="A1" t="inlineStr"><is><t>REF-0417</t></is></c><c r="B1" t="inlineStr"><is><t>CAND-0931</t></is></c></row>`)
		for i := 2; i <= cells.MaxRow; i++ {
			n := strconv.Itoa(i)
			b.WriteString(`<row r="` + n + `"><c r="A` + n + `"><v>12.` + strconv.Itoa(1000 + thousandths(i, 0))[1:] + `</v></c><c r="B` + n + `"><v>12.` + strconv.Itoa(1000 + thousandths(i, 1))[1:] + `</v></c></row>`)
		}
		b.WriteString(`</sheetData></worksheet>`)
	})
	begun := time.Now()
	r := mustRead(t, xlsxPlan(), data)
	if took := time.Since(begun); took > 3*within {
		t.Errorf("got %v for a full sheet, want less than %v", took, 3*within)
	}
	for lot, l := range []qa.Lot{r.Reference, r.Candidate} {
		sum := 0
		for i := 2; i <= cells.MaxRow; i++ {
			sum += thousandths(i, lot)
		}
		v := l.Series[0].Values()
		if want := 12 + float64(sum)/1000/float64(cells.MaxRow-1); len(v) != cells.MaxRow-1 || math.Abs(meanOf(v)-want) > 1e-12 {
			t.Errorf("%s: got n %d and the mean %v, want %d and %v", l.Name, len(v), meanOf(v), cells.MaxRow-1, want)
		}
		if x := l.Series[0].Readings[len(v)-1]; x.Source.Place() != "Data!"+[]string{"A", "B"}[lot]+"1048576" {
			t.Errorf("%s: got the last reading from %s, want row 1048576", l.Name, x.Source.Place())
		}
	}
	wantCells(t, r, 2*cells.MaxRow)
}
