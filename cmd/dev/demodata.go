package main

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"time"

	"github.com/xuri/excelize/v2"
)

// The worked example: hub shells HS-40 of an invented maker of cycle parts, cast by two foundries. Mean and standard
// deviation of every column are chosen, so that each kind of verdict against a margin occurs; the scatter is random with a
// fixed seed. Nothing in it was measured.

const (
	demoFolder   = "testdata/demo"
	demoWorkbook = "hub-shell.xlsx"
	demoPlanFile = "plan.toml"
	demoSheet    = "Data"
	demoSeed     = 40
	demoFirstRow = 6 // rows 1 to 5: headings, units, three rows of limits
)

// demoColumn is one characteristic of the worked example.
type demoColumn struct {
	name, unit           string
	upper, lower, target float64 // a limit that is not on the drawing is NaN
	decimals             int     // what the gauge resolves
	reference, candidate demoScatter
}

// demoScatter is how one lot scatters in one characteristic. The drawn readings are shifted and stretched to this mean and
// this standard deviation before they are rounded.
type demoScatter struct {
	mean, sd float64
	drift    float64 // how far the mean moves from the first to the last part, in standard deviations
	far      int     // index of a part that stands far from the others and is used; -1 where none
}

// demoLot is one lot of the worked example.
type demoLot struct {
	name, prefix string
	parts        int
}

var demoLots = [2]demoLot{{"R-118", "R118", 40}, {"C-022", "C022", 38}}

var none = math.NaN()

// demoColumns stand in the order of the sheet. The plan names them in another order.
var demoColumns = []demoColumn{
	{"Bore diameter", "mm", 40.025, 39.975, 40.000, 3, demoScatter{40.0012, 0.0049, 0, -1}, demoScatter{40.0017, 0.0051, 0, -1}},
	{"Wall thickness", "mm", 4.100, 3.900, 4.000, 3, demoScatter{4.0041, 0.0180, 0, -1}, demoScatter{3.9421, 0.0254, -1.6, -1}},
	{"Flange run-out", "mm", 0.080, none, none, 3, demoScatter{0.0392, 0.0072, 0, -1}, demoScatter{0.0455, 0.0078, 0, -1}},
	{"Bearing seat depth", "mm", 12.55, 12.45, 12.50, 3, demoScatter{12.5031, 0.0050, 0, 22}, demoScatter{12.5016, 0.0047, 0, -1}},
	{"Spoke hole pitch", "mm", 45.15, 44.85, 45.00, 3, demoScatter{44.9962, 0.0240, 0, -1}, demoScatter{45.0087, 0.0228, 0, -1}},
	{"Mass", "g", 188, 176, 182, 1, demoScatter{182.31, 1.10, 0, -1}, demoScatter{182.25, 1.04, 0, -1}},
}

// The cells that are not plain numbers, or not used.
const (
	demoDropped      = "D17" // wall thickness of part R118-12: left out in the plan, with its reason
	demoDroppedValue = 4.312
	demoTextNumber   = "G30" // a number that the sheet holds as text
	demoMissing      = "H61" // not measured
	demoMissingMark  = "n/a"
)

// demoReadings draws the readings of one lot in one characteristic.
func demoReadings(random *rand.Rand, n int, s demoScatter, skip, decimals int) []float64 {
	z := make([]float64, n)
	for i := range z {
		z[i] = random.NormFloat64() + s.drift*(float64(i)/float64(n-1)-0.5)
	}
	if s.far >= 0 {
		z[s.far] = 5.5
	}
	// The reading that is left out later (skip) has no part in the mean and the standard deviation that were chosen.
	var count, sum, squares float64
	for i, v := range z {
		if i != skip {
			count++
			sum += v
		}
	}
	mean := sum / count
	for i, v := range z {
		if i != skip {
			squares += (v - mean) * (v - mean)
		}
	}
	sd := math.Sqrt(squares / (count - 1))
	for i, v := range z {
		z[i] = rounded(s.mean+s.sd*(v-mean)/sd, decimals)
	}
	return z
}

// rounded is the double nearest to x written with the given decimals, as a gauge would show it.
func rounded(x float64, decimals int) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'f', decimals, 64), 64)
	if err != nil {
		return x
	}
	return r
}

// demoTable is the sheet as rows of cells: text, number or nil. The foot row is written by writeDemo.
func demoTable() [][]any {
	table := [][]any{{"Lot", "Part"}, {nil, nil}, {"Upper limit", nil}, {"Lower limit", nil}, {"Target", nil}}
	for _, lot := range demoLots {
		for i := range lot.parts {
			table = append(table, []any{lot.name, fmt.Sprintf("%s-%02d", lot.prefix, i+1)})
		}
	}
	limit := func(x float64) any {
		if math.IsNaN(x) {
			return nil
		}
		return x
	}
	random := rand.New(rand.NewPCG(demoSeed, 0))
	for _, c := range demoColumns {
		table[0] = append(table[0], c.name)
		table[1] = append(table[1], c.unit)
		table[2] = append(table[2], limit(c.upper))
		table[3] = append(table[3], limit(c.lower))
		table[4] = append(table[4], limit(c.target))
		row := demoFirstRow - 1
		for side, scatter := range []demoScatter{c.reference, c.candidate} {
			skip := -1
			if side == 0 && c.name == "Wall thickness" {
				skip = 17 - demoFirstRow
			}
			for _, v := range demoReadings(random, demoLots[side].parts, scatter, skip, c.decimals) {
				table[row] = append(table[row], v)
				row++
			}
		}
	}
	set := func(cell string, value func(any) any) {
		column, row, err := excelize.CellNameToCoordinates(cell)
		if err != nil { // the addresses are constants above
			panic("dev: internal error: " + err.Error())
		}
		table[row-1][column-1] = value(table[row-1][column-1])
	}
	set(demoDropped, func(any) any { return demoDroppedValue })
	set(demoTextNumber, func(v any) any { return strconv.FormatFloat(v.(float64), 'f', 3, 64) })
	set(demoMissing, func(any) any { return demoMissingMark })
	return table
}

// writeDemo writes the workbook and the plan of the worked example into folder.
func writeDemo(folder string) (err error) {
	f := excelize.NewFile()
	defer func() {
		if closing := f.Close(); err == nil {
			err = closing
		}
	}()
	if err := f.SetSheetName("Sheet1", demoSheet); err != nil {
		return err
	}
	// A fixed time, so that the same program writes the same file.
	made := time.Date(2026, time.November, 16, 8, 0, 0, 0, time.UTC).Format(time.RFC3339)
	if err := f.SetDocProps(&excelize.DocProperties{Creator: "Kettlewick Cycle Parts (invented)", Created: made, Modified: made, Title: "Hub shell HS-40, worked example"}); err != nil {
		return err
	}
	table := demoTable()
	for r, row := range table {
		for c, value := range row {
			if err := setDemoCell(f, c+1, r+1, value); err != nil {
				return err
			}
		}
	}
	if err := demoFoot(f, table); err != nil {
		return err
	}
	if err := demoLook(f, len(table)); err != nil {
		return err
	}
	if err := os.MkdirAll(folder, 0o755); err != nil {
		return err
	}
	var workbook bytes.Buffer
	if err := f.Write(&workbook); err != nil {
		return err
	}
	if err := os.WriteFile(filepath.Join(folder, demoWorkbook), workbook.Bytes(), 0o644); err != nil {
		return err
	}
	return os.WriteFile(filepath.Join(folder, demoPlanFile), []byte(demoPlan), 0o644)
}

func setDemoCell(f *excelize.File, column, row int, value any) error {
	if value == nil {
		return nil
	}
	cell, err := excelize.CoordinatesToCellName(column, row)
	if err != nil {
		return err
	}
	return f.SetCellValue(demoSheet, cell, value)
}

// demoFoot writes a row "Mean" below a blank one, as people do. It averages both lots and the dropped part, and so is good
// for nothing; a reader of the file must leave it alone.
func demoFoot(f *excelize.File, table [][]any) error {
	row := len(table) + 2
	if err := setDemoCell(f, 1, row, "Mean"); err != nil {
		return err
	}
	for c := range demoColumns {
		column := c + 3
		var sum, n float64
		for _, line := range table[demoFirstRow-1:] {
			if v, ok := line[column-1].(float64); ok { // a spreadsheet's average passes over text
				sum, n = sum+v, n+1
			}
		}
		if err := setDemoCell(f, column, row, sum/n); err != nil {
			return err
		}
	}
	return nil
}

// demoLook sets number formats, widths and the bold heading row; it changes no value.
func demoLook(f *excelize.File, lastRow int) error {
	bold, err := f.NewStyle(&excelize.Style{Font: &excelize.Font{Bold: true}, Alignment: &excelize.Alignment{WrapText: true, Vertical: "top"}})
	if err != nil {
		return err
	}
	if err := f.SetCellStyle(demoSheet, "A1", "H1", bold); err != nil {
		return err
	}
	for c, column := range demoColumns {
		format := "0.000"
		if column.decimals == 1 {
			format = "0.0"
		}
		style, err := f.NewStyle(&excelize.Style{CustomNumFmt: &format})
		if err != nil {
			return err
		}
		name, err := excelize.ColumnNumberToName(c + 3)
		if err != nil {
			return err
		}
		if err := f.SetCellStyle(demoSheet, name+"3", name+strconv.Itoa(lastRow+2), style); err != nil {
			return err
		}
	}
	if err := f.SetColWidth(demoSheet, "A", "H", 13); err != nil {
		return err
	}
	return f.SetPanes(demoSheet, &excelize.Panes{Freeze: true, YSplit: 1, TopLeftCell: "A2", ActivePane: "bottomLeft"})
}
