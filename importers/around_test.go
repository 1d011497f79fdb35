package importers

import (
	"fmt"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa"
)

// Whatever stands around the readings - a block above, units, limits, blank rows, another lot, foot rows, other columns in
// any order - the readings taken are the same, each from the cell that holds it.
func TestReadWhateverStandsAround(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		var rows [][]any
		for range rapid.IntRange(0, 4).Draw(rt, "above") {
			rows = append(rows, []any{rapid.SampledFrom([]any{"Report", nil, num("4711")}).Draw(rt, "block")})
		}
		order := rapid.Permutation([]int{0, 1, 2, 3}).Draw(rt, "columns")
		put := func(lot, part, value, remark any) {
			cells, row := []any{lot, part, value, remark}, make([]any, 4)
			for i, at := range order {
				row[at] = cells[i]
			}
			rows = append(rows, row)
		}
		put("Lot", "Part", "Bore dia", "Remark")
		if rapid.Bool().Draw(rt, "units") {
			put(nil, nil, "mm", nil)
		}
		if rapid.Bool().Draw(rt, "limits") {
			put("USL", nil, num("12.05"), nil)
			put("LSL", nil, num("11.95"), nil)
		}
		blank := rapid.SliceOfN(rapid.IntRange(0, 40), 0, 4).Draw(rt, "blank")
		n := 0
		for _, lot := range []struct {
			name   string
			values []string
		}{{"REF-0417", d1Reference}, {"OLD", []string{"99", "98"}}, {"CAND-0931", d1Candidate}} {
			for i, v := range lot.values {
				if n++; slices.Contains(blank, n) {
					rows = append(rows, nil)
				}
				put(lot.name, num(fmt.Sprint(i+1)), num(v), rapid.SampledFrom([]any{nil, "ok", "re-measured"}).Draw(rt, "remark"))
			}
			if rapid.Bool().Draw(rt, "foot") {
				at := rapid.SampledFrom([][2]any{{"Mean", nil}, {nil, "Mittelwert"}, {lot.name, "Average"}, {nil, nil}}).Draw(rt, "label")
				put(at[0], at[1], formula{"AVERAGE(A1:A9)", "12.5"}, nil)
			}
		}
		data := xlsx(t, sheetOf{name: "Data", rows: rows})
		p := xlsxPlan()
		r, err := Read(p, files(map[string][]byte{"d1.xlsx": data}))
		if err != nil {
			rt.Fatalf("got the error %v for %v", err, rows)
		}
		reconcile(t, r, map[string][]byte{"d1.xlsx": data}, "")
		for _, want := range []struct {
			lot    qa.Lot
			values []string
		}{{r.Reference, d1Reference}, {r.Candidate, d1Candidate}} {
			got := want.lot.Series[0].Readings
			if len(got) != len(want.values) || len(want.lot.Series) != 1 {
				rt.Fatalf("lot %s: got %d readings in %d series, want %d in one: %v", want.lot.Name, len(got), len(want.lot.Series), len(want.values), rows)
			}
			for i, x := range got {
				if x.Source.Text != want.values[i] || fmt.Sprint(x.Value) != fmt.Sprint(mustFloat(want.values[i])) || x.Part != fmt.Sprint(i+1) {
					rt.Fatalf("lot %s: got %+v, want %s of part %d", want.lot.Name, x, want.values[i], i+1)
				}
			}
		}
	})
}

func mustFloat(s string) float64 {
	v, _, err := ParseNumber(s, '.')
	if err != nil {
		panic(err)
	}
	return v
}
