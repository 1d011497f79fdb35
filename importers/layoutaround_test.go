package importers

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa"
)

// drawn is a sheet made at random around D1, and where each reading stands.
type drawn struct {
	rows   [][]any
	layout string
	ids    bool // the parts have ids
}

// abreastDrawn puts the lots side by side: each a block with or without its own headings and part ids.
func abreastDrawn(rt *rapid.T) drawn {
	d := drawn{layout: ColumnPerLot}
	headed, own := rapid.Bool().Draw(rt, "headings"), rapid.Bool().Draw(rt, "own ids")
	own = own && headed
	for range rapid.IntRange(0, 3).Draw(rt, "above") {
		d.rows = append(d.rows, []any{rapid.SampledFrom([]any{"Report", nil, num("4711")}).Draw(rt, "block")})
	}
	names, heads := []any{}, []any{}
	shared := rapid.Bool().Draw(rt, "shared ids") && !own
	d.ids = shared || own
	if shared {
		names, heads = append(names, "No"), append(heads, nil)
	}
	lots := []struct {
		name   string
		values []string
	}{{"REF-0417", d1Reference}, {"OLD-1", []string{"99", "98"}}, {"CAND-0931", d1Candidate}}
	if !rapid.Bool().Draw(rt, "third lot") {
		lots = slices.Delete(lots, 1, 2)
	}
	gap := rapid.IntRange(0, 1).Draw(rt, "gap")
	var body [][]any
	for range d1Reference {
		body = append(body, nil)
	}
	for i := range body {
		if shared {
			body[i] = append(body[i], num(fmt.Sprint(i+1)))
		}
	}
	for _, l := range lots {
		names = append(names, l.name)
		if own {
			names, heads = append(names, nil), append(heads, "Part")
		}
		heads = append(heads, "Bore dia")
		for i := range body {
			id, value := any(nil), any(nil)
			if i < len(l.values) {
				id, value = num(fmt.Sprint(i+1)), num(l.values[i])
			}
			if own {
				body[i] = append(body[i], id)
			}
			body[i] = append(body[i], value)
		}
		for range gap {
			names, heads = append(names, nil), append(heads, nil)
			for i := range body {
				body[i] = append(body[i], nil)
			}
		}
	}
	d.rows = append(d.rows, names)
	if headed {
		d.rows = append(d.rows, heads)
	}
	if rapid.Bool().Draw(rt, "units") {
		units := make([]any, len(names))
		for i, c := range names {
			if c != nil && c != "No" && !own {
				units[i] = "mm"
			}
			if own && i < len(heads) && heads[i] == "Bore dia" {
				units[i] = "mm"
			}
		}
		d.rows = append(d.rows, units)
	}
	blank := rapid.SliceOfN(rapid.IntRange(0, 11), 0, 3).Draw(rt, "blank")
	for i, row := range body {
		if slices.Contains(blank, i) {
			d.rows = append(d.rows, nil)
		}
		d.rows = append(d.rows, row)
	}
	if rapid.Bool().Draw(rt, "foot") && shared {
		foot := []any{"Mean"}
		for range names[1:] {
			foot = append(foot, formula{"AVERAGE(B2:B9)", "12.5"})
		}
		d.rows = append(d.rows, nil, foot)
	}
	return d
}

// turnedDrawn makes a row of the characteristic and a column of each part.
func turnedDrawn(rt *rapid.T) drawn {
	d := drawn{layout: RowPerCharacteristic, ids: true}
	for range rapid.IntRange(0, 3).Draw(rt, "above") {
		d.rows = append(d.rows, []any{rapid.SampledFrom([]any{"Report", nil, num("4711")}).Draw(rt, "block")})
	}
	columns := rapid.Permutation([]string{"Nominal", "Upper tol", "Lower tol", "Unit", "Gauge"}).Draw(rt, "columns")
	columns = columns[:rapid.IntRange(1, 5).Draw(rt, "how many")]
	if !slices.Contains(columns, "Nominal") {
		columns[0] = "Nominal"
	}
	head, names := []any{"No", "Characteristic"}, []any{nil, nil}
	for _, c := range columns {
		head, names = append(head, c), append(names, nil)
	}
	first := rapid.IntRange(0, 3).Draw(rt, "row of bore")
	var body [][]any
	for k := range 4 {
		name, add := fmt.Sprintf("Length %d", k), k+1
		if k == first {
			name, add = "Bore dia", 0
		}
		row := []any{num(fmt.Sprint(k + 1)), name}
		for _, c := range columns {
			row = append(row, map[string]any{"Nominal": num(fmt.Sprint(12 + add)), "Upper tol": num("0.05"), "Lower tol": num("-0.05"), "Unit": "mm", "Gauge": "gauge 14"}[c])
		}
		body = append(body, row)
	}
	prefix := rapid.SampledFrom([]string{"", "S", "Part ", "#"}).Draw(rt, "prefix")
	gap := rapid.Bool().Draw(rt, "gap")
	for l, lot := range [][]string{d1Reference, d1Candidate} {
		if l == 1 && gap {
			head, names = append(head, nil), append(names, nil)
			for k := range body {
				body[k] = append(body[k], nil)
			}
		}
		for i, v := range lot {
			name := any(nil)
			if i == 0 {
				name = []any{"REF-0417", "CAND-0931"}[l]
			}
			names = append(names, name)
			if prefix == "" {
				head = append(head, num(fmt.Sprint(i+1)))
			} else {
				head = append(head, fmt.Sprintf("%s%d", prefix, i+1))
			}
			for k := range body {
				add := k + 1
				if k == first {
					add = 0
				}
				body[k] = append(body[k], shifted(v, add))
			}
		}
	}
	d.rows = append(append(d.rows, names, head), body...)
	if rapid.Bool().Draw(rt, "remark") {
		d.rows = append(d.rows, nil, []any{nil, "measured at 20 °C"})
	}
	return d
}

// Whatever stands around the readings in the turned layouts, the readings taken are the same, each from its cell.
func TestReadTurnedWhateverStandsAround(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := abreastDrawn(rt)
		if rapid.Bool().Draw(rt, "a row a characteristic") {
			d = turnedDrawn(rt)
		}
		data := xlsx(t, sheetOf{name: "Data", rows: d.rows})
		p := xlsxPlan(func(p *qa.Plan) {
			p.Characteristics = []qa.Characteristic{{Name: "Bore dia"}}
			if rapid.Bool().Draw(rt, "stated") {
				p.Reading.Layout = d.layout
			}
		})
		r, err := Read(p, files(map[string][]byte{"d1.xlsx": data}))
		if err != nil {
			rt.Fatalf("got the error %v for %v", err, d.rows)
		}
		reconcile(t, r, map[string][]byte{"d1.xlsx": data}, "")
		for _, want := range []struct {
			lot    qa.Lot
			values []string
		}{{r.Reference, d1Reference}, {r.Candidate, d1Candidate}} {
			got := want.lot.Series[0].Readings
			if len(got) != len(want.values) || len(want.lot.Series) != 1 || want.lot.Series[0].Missing != 0 {
				rt.Fatalf("lot %s: got %d readings and %d missing, want %d: %v", want.lot.Name, len(got), want.lot.Series[0].Missing, len(want.values), d.rows)
			}
			for i, x := range got {
				if id := strings.TrimLeft(x.Part, "S#Part "); d.ids != (x.Part != "") || d.ids && id != fmt.Sprint(i+1) {
					rt.Fatalf("lot %s: got the part %q, want %d: %v", want.lot.Name, x.Part, i+1, d.rows)
				}
				if x.Source.Text != want.values[i] || x.Value != mustFloat(want.values[i]) {
					rt.Fatalf("lot %s: got %+v, want %s", want.lot.Name, x, want.values[i])
				}
			}
		}
	})
}
