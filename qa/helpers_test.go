package qa_test

import (
	"bufio"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa"
)

func ptr[T any](x T) *T { return &x }

// series makes a series of plain readings, numbered from row 2 of column C.
func series(name string, decimals int, values ...float64) qa.Series {
	s := qa.Series{Characteristic: name, Rows: len(values)}
	for i, v := range values {
		s.Readings = append(s.Readings, qa.Reading{
			Value: v, Decimals: decimals, Part: strconv.Itoa(i + 1),
			Source: qa.Source{File: "lots.xlsx", Sheet: "Data", Cell: "C" + strconv.Itoa(i+2), Text: strconv.FormatFloat(v, 'f', -1, 64)},
		})
	}
	return s
}

// lots are readings of one characteristic in two lots.
func lots(ch qa.Characteristic, ref, cand qa.Series) qa.Readings {
	return qa.Readings{
		Reference:       qa.Lot{Name: "R", Rows: ref.Rows, Series: []qa.Series{ref}},
		Candidate:       qa.Lot{Name: "C", Rows: cand.Rows, Series: []qa.Series{cand}},
		Characteristics: []qa.Characteristic{ch},
	}
}

// plan asks for one objective within one margin at alpha 0.05.
func plan(o qa.Objective, m *qa.Margin) qa.Plan {
	return qa.Plan{
		Format: qa.PlanFormat, Reference: qa.LotPlan{Lot: "R", File: "lots.xlsx"}, Candidate: qa.LotPlan{Lot: "C", File: "lots.xlsx"},
		Criterion: qa.Criterion{Objective: o, Margin: m},
	}
}

func absolute(m float64) *qa.Margin { return &qa.Margin{Absolute: &m} }

// one compares one characteristic and fails the test on an error.
func one(t *testing.T, p qa.Plan, r qa.Readings) qa.Comparison {
	t.Helper()
	res, err := qa.Compare(p, r, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return res.Characteristics[0]
}

// column reads one numeric column of a commented csv file, for the rows where another column holds a value.
func column(t *testing.T, file, by, group, value string) []float64 {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var out []float64
	var head []string
	for lines := bufio.NewScanner(f); lines.Scan(); {
		line := lines.Text()
		if strings.HasPrefix(line, "#") || line == "" {
			continue
		}
		cells := strings.Split(line, ",")
		if head == nil {
			head = cells
			continue
		}
		row := map[string]string{}
		for i, h := range head {
			row[h] = cells[i]
		}
		if by != "" && row[by] != group {
			continue
		}
		x, err := strconv.ParseFloat(row[value], 64)
		if err != nil {
			t.Fatalf("%s: %v", file, err)
		}
		out = append(out, x)
	}
	return out
}

func near(t *testing.T, name string, got *float64, want, relative float64) {
	t.Helper()
	if got == nil {
		t.Errorf("%s: got none, want %v", name, want)
		return
	}
	if d := math.Abs(*got-want) / math.Max(math.Abs(want), math.SmallestNonzeroFloat64); d > relative {
		t.Errorf("%s: got %.17g, want %.17g, relative difference %.3g, allowed %.3g", name, *got, want, d, relative)
	}
}
