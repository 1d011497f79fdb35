package importers

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lotpair/qa"
)

// The plan that inspect prints, its blanks filled in, reads the same file as the case's own plan does.
func TestInspectLayouts(t *testing.T) {
	layouts := map[string]string{
		"l2": ColumnPerLot, "l3": SheetPerLot, "l5-5": RowPerCharacteristic, "l6": RowPerCharacteristic, "l9": RowPerCharacteristic, "l10": RowPerCharacteristic,
		"n01": RowPerPart, "n22": ColumnPerLot, "n31-beside": ColumnPerLot, "n31-stacked": RowPerPart, "n34": ColumnPerLot,
	}
	for _, c := range layoutCases() {
		if c.want.fault != nil || len(c.files) > 1 || slices.Contains(notFound, c.name) {
			continue
		}
		data, err := os.ReadFile(filepath.Join(layoutsDir, c.name, "own.xlsx"))
		if err != nil {
			t.Fatal(err)
		}
		in, err := Inspect("own.xlsx", data, "", "")
		if err != nil {
			t.Errorf("%s: got the error %v", c.name, err)
			continue
		}
		if want := layouts[c.name]; want != "" && in.Layout != want {
			t.Errorf("%s: got the layout %s, want %s: %v", c.name, in.Layout, want, in.Reasons)
		}
		if !slices.ContainsFunc(in.Reasons, func(r string) bool { return strings.HasPrefix(r, "the layout "+in.Layout+" is ") }) {
			t.Errorf("%s: got the reasons %v, want one for the layout", c.name, in.Reasons)
		}
		plan := strings.Replace(in.Plan(), "absolute = 0 ", "absolute = 0.01 ", 1)
		p, err := LoadPlan("plan.toml", []byte(plan))
		if err != nil {
			t.Errorf("%s: got %v for\n%s", c.name, err, plan)
			continue
		}
		r, err := Read(p, files(map[string][]byte{"own.xlsx": data}))
		if err != nil {
			t.Errorf("%s: got %v for\n%s", c.name, err, plan)
			continue
		}
		reconcile(t, r, map[string][]byte{"own.xlsx": data}, "")
		for i, l := range []qa.Lot{r.Reference, r.Candidate} {
			for k, s := range l.Series {
				seen := in.Characteristics[k].Lots[i]
				if v := s.Values(); seen.Lot != l.Name || seen.N != len(v) || seen.N > 0 && *seen.Mean != meanOf(v) {
					t.Errorf("%s, %s: got %+v by inspect, n %d and mean %v by its plan", c.name, s.Characteristic, seen, len(v), meanOf(v))
				}
			}
		}
	}
}

// notFound are the cases that only a person can tell: repeat readings, what an odd requirement asks, lots under an odd heading or called by numbers; and
// a table in two halves, of which the first is shown.
var notFound = []string{"n01-lots", "n20-rows", "n24-read", "n24-stated", "n31-halves", "n42-numbers", "tidy-repeats"}
