package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"

	"github.com/xuri/excelize/v2"

	"lotpair/importers"
	"lotpair/qa"
)

// manyCharacteristics are k characteristics with limits, n readings a lot with three decimals; the true shifts run from none
// to beyond the margin of 1.
func manyCharacteristics(k, n int) (qa.Plan, qa.Readings) {
	margin, ratio := 1.0, 1.5
	plan := qa.Plan{
		Format: qa.PlanFormat, Reference: qa.LotPlan{Lot: "R", File: "lots.xlsx"}, Candidate: qa.LotPlan{Lot: "C", File: "lots.xlsx"},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &margin}, SpreadRatio: &ratio},
	}
	random := rand.New(rand.NewPCG(200, 100))
	all := qa.Readings{Reference: qa.Lot{Name: "R", Rows: n}, Candidate: qa.Lot{Name: "C", Rows: n}}
	for i := range k {
		lower, target, upper := 90.0, 100.0, 110.0
		ch := qa.Characteristic{Name: fmt.Sprint("X", i+1), Lower: &lower, Target: &target, Upper: &upper}
		lot := func(shift float64) qa.Series {
			s := qa.Series{Characteristic: ch.Name, Rows: n}
			for j := range n {
				v := rounded(100+shift+2*random.NormFloat64(), 3)
				s.Readings = append(s.Readings, qa.Reading{
					Value: v, Decimals: 3, Part: strconv.Itoa(j + 1),
					Source: qa.Source{File: "lots.xlsx", Sheet: "Data", Cell: "C" + strconv.Itoa(j+2), Text: strconv.FormatFloat(v, 'f', -1, 64)},
				})
			}
			return s
		}
		all.Characteristics = append(all.Characteristics, ch)
		all.Reference.Series = append(all.Reference.Series, lot(0))
		all.Candidate.Series = append(all.Candidate.Series, lot(float64(i%10)/5))
	}
	return plan, all
}

func compare(k, n int) func() {
	plan, readings := manyCharacteristics(k, n)
	return func() {
		if got := must(qa.Compare(plan, readings, qa.Run{})); len(got.Characteristics) != k {
			panic("bench: compare: got another number of characteristics")
		}
	}
}

func compareRow(k, n int, g goal, grows *growth) benchRow {
	return benchRow{
		name: fmt.Sprintf("Compare, every block, %s characteristics x 2 x %s", grouped(k), grouped(n)),
		build: func() work {
			refs, cands := lots(k, n)
			return work{goal: g, ours: compare(k, n), floor: rival{"sort and Welch alone", func() {
				for i := range refs {
					slices.Sort(slices.Clone(refs[i]))
					slices.Sort(slices.Clone(cands[i]))
					welch(refs[i], cands[i])
				}
			}}}
		},
		growth: grows,
	}
}

var compareRows = []benchRow{
	compareRow(200, 100, goal{seconds: 0.100}, &growth{sizes: []int{10, 100, 1000}, of: "characteristics x 2 x 100", build: func(k int) func() { return compare(k, 100) }}),
	compareRow(2000, 1000, goal{seconds: 6}, &growth{sizes: []int{100, 1000, 10_000, 100_000}, of: "readings a lot, 10 characteristics", build: func(n int) func() { return compare(10, n) }}),
}

// benchFile is a sheet of two lots with the given parts each and ten characteristics.
func benchFile(parts int) []byte {
	f := excelize.NewFile()
	stream := must(f.NewStreamWriter("Sheet1"))
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
		must(0, stream.SetRow("A"+strconv.Itoa(r+1), row))
	}
	must(0, stream.Flush())
	return must(f.WriteToBuffer()).Bytes()
}

// wholeFile takes a file to its result: every cell accounted for, ten comparisons.
func wholeFile(file []byte, parts int) {
	margin := 0.01
	plan := qa.Plan{
		Format: qa.PlanFormat, Reference: qa.LotPlan{Lot: "R", File: "bench.xlsx"}, Candidate: qa.LotPlan{Lot: "C", File: "bench.xlsx"},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &margin}},
	}
	readings := must(importers.Read(plan, func(string) ([]byte, error) { return file, nil }))
	result := must(qa.Compare(plan, readings, qa.Run{}))
	if len(result.Characteristics) != 10 || result.Characteristics[9].Reference.N != parts {
		panic("bench: whole comparison: got another number of readings")
	}
}

// numbersOnly reads the same cells into floats with another library, and does nothing with them.
func numbersOnly(file []byte, parts int) {
	f := must(excelize.OpenReader(bytes.NewReader(file)))
	n := 0
	for _, row := range must(f.GetRows("Sheet1", excelize.Options{RawCellValue: true}))[1:] {
		for _, text := range row[1:] {
			kept += must(strconv.ParseFloat(text, 64))
			n++
		}
	}
	if n != 20*parts {
		panic("bench: whole comparison: got another number of readings")
	}
}

var readingRows = []benchRow{
	{
		name: "file to result, 10 characteristics x 2 x 1,000",
		build: func() work {
			file := benchFile(1000)
			return work{
				ours:  func() { wholeFile(file, 1000) },
				peers: []rival{{"excelize, numbers only", func() { numbersOnly(file, 1000) }}},
			}
		},
		growth: &growth{sizes: []int{100, 1000, 10_000}, of: "parts a lot", build: func(n int) func() {
			file := benchFile(n)
			return func() { wholeFile(file, n) }
		}},
	},
}

const startRow = "start to exit of the console program"

// startRows are whole processes; their peers outside start and do nothing, too.
var startRows = []benchRow{{name: startRow, build: func() work {
	run := func(name string, args ...string) func() {
		return func() { must(0, exec.Command(name, args...).Run()) }
	}
	root := must(moduleRoot())
	w := work{wall: true, goal: goal{seconds: 0.010}, ours: run(filepath.Join(root, (&dev{}).program("lotpair-cli")), "--version")}
	if present("true") {
		w.floor = rival{"true", run("true")}
	}
	return w
}}}

// buildForStart builds the console program where a row starts it.
func (d *dev) buildForStart(rows []benchRow) error {
	if !contains(names(rows), startRow) {
		return nil
	}
	_, err := d.build(pure, "lotpair-cli", "./cmd/lotpair-cli")
	return err
}
