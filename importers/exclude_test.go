package importers

import (
	"math"
	"testing"

	"lotpair/qa"
)

// Of a reading that is the mean of several cells, one cell may be left out of the mean, or all of them as the one reading that
// they are, named as the record names it.
func TestReadExcludesOfAMean(t *testing.T) {
	rows := [][]any{{"Lot", "Part", "Bore dia"}}
	thrice(func(lot string, part int, v [3]string) {
		for _, x := range v {
			rows = append(rows, []any{lot, num(itoa(part)), num(x)})
		}
	})
	data := map[string][]byte{"d1.xlsx": xlsx(t, sheetOf{name: "Data", rows: rows})}
	// rows 44 to 46 hold the candidate's part 3: 11.997, 11.998, 11.996
	for _, tt := range []struct {
		cells   []string
		n       int
		of3     float64 // the third part's reading; 0 where it is left out
		leftOut int
		repeats int
	}{
		{nil, 12, 11.997, 0, 24},
		{[]string{"Data!C45"}, 12, 11.9965, 1, 23},
		{[]string{"Data!C45, C46"}, 12, 11.997, 1, 23},
		{[]string{"Data!C44, C45, C46"}, 11, 0, 1, 24},
		{[]string{"C44,C45,C46"}, 11, 0, 1, 24},
		{[]string{"Data!C44", "Data!C45", "Data!C46"}, 11, 0, 3, 22},
		{[]string{"Data!C44, C47"}, 12, 11.997, 2, 22}, // cells of two parts are no one reading
	} {
		p := xlsxPlan(func(p *qa.Plan) {
			p.Reading.PartColumn = "Part"
			for _, c := range tt.cells {
				p.Reading.Exclude = append(p.Reading.Exclude, qa.Exclusion{Cell: c, Reason: "dropped"})
			}
		})
		r, err := Read(p, files(data))
		if err != nil {
			t.Errorf("%v: got %v", tt.cells, err)
			continue
		}
		reconcile(t, r, data, "")
		s := r.Candidate.Series[0]
		if len(s.Values()) != tt.n || s.Excluded() != tt.leftOut || s.Repeats != tt.repeats {
			t.Errorf("%v: got n %d, %d left out, %d repeats, want %d, %d, %d", tt.cells, len(s.Values()), s.Excluded(), s.Repeats, tt.n, tt.leftOut, tt.repeats)
		}
		for _, x := range s.Readings {
			if x.Part == "3" && x.Used() && math.Abs(x.Value-tt.of3) > 1e-12 {
				t.Errorf("%v: got part 3 as %v, want %v", tt.cells, x.Value, tt.of3)
			}
			if tt.n == 11 && tt.leftOut == 1 && !x.Used() && (x.Value != 11.997 || x.Source.Place() != "Data!C44, C45, C46" || x.LeftOut != "dropped") {
				t.Errorf("%v: got %+v left out, want the mean of its cells", tt.cells, x)
			}
		}
		for _, e := range entries(r, qa.TakenExcluded) {
			if e.Reason != "dropped" || e.Value == nil {
				t.Errorf("%v: got %+v in the ledger, want each cell with its value and reason", tt.cells, e)
			}
		}
	}
	for _, bad := range []string{"Data!C44, C44", "Data!C44,", "Data!C44, D1", "Data!C44; C45"} {
		_, err := Read(xlsxPlan(func(p *qa.Plan) {
			p.Reading.PartColumn, p.Reading.Exclude = "Part", []qa.Exclusion{{Cell: bad, Reason: "x"}}
		}), files(data))
		wantPlanError(t, err, "reading.exclude 1")
	}
}

// A reading that the window leaves out by its place is left out by the plan that keeps it.
func TestReadExcludesAsPlaced(t *testing.T) {
	rows := [][]any{{"Lot", "Part", "Bore dia"}}
	thrice(func(lot string, part int, v [3]string) {
		for _, x := range v {
			rows = append(rows, []any{lot, num(itoa(part)), num(x)})
		}
	})
	data := xlsx(t, sheetOf{name: "My, data", rows: rows})
	first := mustRead(t, xlsxPlan(func(p *qa.Plan) { p.Reading.PartColumn = "Part" }), data)
	at := first.Candidate.Series[0].Readings[2].Source
	again := mustRead(t, xlsxPlan(func(p *qa.Plan) {
		p.Reading.PartColumn, p.Reading.Exclude = "Part", []qa.Exclusion{{Cell: at.Place(), File: at.File, Reason: "x"}}
	}), data)
	got, want := again.Candidate.Series[0].Readings, first.Candidate.Series[0].Readings
	if len(got) != len(want) {
		t.Fatalf("got %d readings, want %d", len(got), len(want))
	}
	for i := range got {
		if i == 2 {
			want[i].LeftOut = "x"
		}
		if got[i] != want[i] {
			t.Errorf("reading %d: got %+v, want %+v", i, got[i], want[i])
		}
	}
}
