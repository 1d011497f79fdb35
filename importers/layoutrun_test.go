package importers

import (
	"bytes"
	"errors"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lotpair/qa"
)

const layoutsDir = "testdata/layouts"

func (f layoutFile) bytes(t testing.TB) []byte {
	t.Helper()
	if f.sheets == nil {
		return []byte(f.text)
	}
	data := xlsx(t, f.sheets...)
	if f.change != nil {
		return f.change(t, data)
	}
	return data
}

// TestLayouts reads every case as it is committed, and every file that another program made of it.
func TestLayouts(t *testing.T) {
	for _, c := range layoutCases() {
		t.Run(c.name, func(t *testing.T) {
			dir := filepath.Join(layoutsDir, c.name)
			if *update {
				if err := os.MkdirAll(dir, 0o755); err != nil {
					t.Fatal(err)
				}
			}
			committed := map[string][]byte{"plan.toml": []byte(c.plan)}
			for _, f := range c.files {
				committed[f.name] = f.bytes(t)
			}
			for name, want := range committed {
				if *update {
					if err := os.WriteFile(filepath.Join(dir, name), want, 0o644); err != nil {
						t.Fatal(err)
					}
				}
				if got, err := os.ReadFile(filepath.Join(dir, name)); err != nil || !bytes.Equal(got, want) {
					t.Errorf("%s is not what -update writes (%v)", name, err)
				}
			}
			c.check(t, "own.xlsx")
			for _, other := range []string{"openpyxl.xlsx", "libreoffice.xlsx", "openxlsx.xlsx"} {
				if _, err := os.Stat(filepath.Join(dir, other)); err == nil {
					t.Run(other, func(t *testing.T) { c.check(t, other) })
				}
			}
		})
	}
}

// check reads the case with one file in the place of our own.
func (c layoutCase) check(t *testing.T, file string) {
	p, err := LoadPlan("plan.toml", []byte(c.plan))
	if err != nil && c.want.fault != nil {
		wantPlanError(t, err, c.want.fault...)
		return
	}
	if err != nil {
		t.Fatal(err)
	}
	data := map[string][]byte{}
	r, err := Read(p, func(name string) ([]byte, error) {
		from := name
		if name == "own.xlsx" {
			from = file
		}
		b, err := os.ReadFile(filepath.Join(layoutsDir, c.name, from))
		data[name] = b
		return b, err
	})
	if c.want.refused {
		wantFileError(t, err, c.want.fault...)
		return
	}
	if c.want.fault != nil {
		if _, ok := errors.AsType[*PlanError](err); !ok {
			t.Fatalf("got the error %v (%T), want a *PlanError", err, err)
		}
		wantWords(t, err.Error(), c.want.fault...)
		return
	}
	if err != nil {
		t.Fatalf("got the error %v, want readings", err)
	}
	reconcile(t, r, data, "")
	c.want.check(t, r)
	c.want.compare(t, p, r)
}

// misread are the upper 90 % limits of D1 where foot rows are taken for readings, the candidate stands twice, both stand twice,
// 12.022 is dropped, limits are taken for readings, a blank for 0 and 12,008 for 12008, and the readings are rounded to 0.01
// (computed in R 4).
var misread = []float64{0.009575, 0.009091, 0.008176, 0.008662, 0.016101, 2.238, 2795, 0.010610}

// compare runs the comparison: the limits as R 4 has them, to the digits printed there.
func (w layoutWant) compare(t *testing.T, p qa.Plan, r qa.Readings) {
	t.Helper()
	result, err := qa.Compare(p, r, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	first := result.Characteristics[0]
	if w.upper != 0 {
		if got := *first.Equivalence.Upper; math.Abs(got-w.upper) > 5e-7 || w.upper == d1.upper && math.Abs(got-w.upper) > 5e-11 {
			t.Errorf("got the upper 90 %% limit %.10g, want %.10g", got, w.upper)
		}
	}
	for _, wrong := range misread {
		if e := first.Equivalence; w.upper != 0 && e.Upper != nil && math.Abs(*e.Upper-wrong) < 5e-7 {
			t.Errorf("got the upper 90 %% limit %.7g of a misread sheet", *e.Upper)
		}
	}
	if e := first.Equivalence; w.upper == d1.upper && first.Method == "welch" && e.MarginUpper != nil && *e.MarginUpper == 0.010 && e.Verdict != qa.Undecided {
		t.Errorf("got %s at the margin 0.010, want it undecided by a hair", e.Verdict)
	}
	if d := first.Difference.Estimate; d != nil && math.Abs(*d+11.531) < 0.001 {
		t.Errorf("got the difference %v of inches that were not converted", *d)
	}
	if w.p != 0 {
		if e := first.Equivalence; e.P == nil || math.Abs(*e.P-w.p) > 5e-6 || e.Verdict != qa.Equivalent {
			t.Errorf("got %+v, want equivalent with p %v", e, w.p)
		}
	}
	if w.spread != 0 {
		if s := first.Spread; first.Method != "welch" || s == nil || s.SDRatio == nil || math.Abs(*s.SDRatio-w.spread) > 5e-4*w.spread {
			t.Errorf("got the method %s and the spread %+v, want welch and the ratio %v", first.Method, s, w.spread)
		}
	}
	if w.finding != "" && !slices.ContainsFunc(first.Warnings, func(x qa.Warning) bool { return x.Code == w.finding }) {
		t.Errorf("got the warnings %v, want %s", first.Warnings, w.finding)
	}
}

func (w layoutWant) check(t *testing.T, r qa.Readings) {
	t.Helper()
	if n := len(r.Characteristics); n != max(1, w.count) {
		t.Fatalf("got %d characteristics, want %d: %v", n, max(1, w.count), r.Characteristics)
	}
	for side, lot := range []qa.Lot{r.Reference, r.Candidate} {
		for k, s := range lot.Series {
			v := s.Values()
			if len(v) != w.n[side] || s.Repeats != w.repeats {
				t.Fatalf("%s, %s: got n %d and %d repeats, want %d and %d", lot.Name, s.Characteristic, len(v), s.Repeats, w.n[side], w.repeats)
			}
			if m, want := meanOf(v), w.mean[side]+float64(k)*w.step; math.Abs(m-want) > 1e-10 {
				t.Errorf("%s, %s: got the mean %.12g, want %.12g", lot.Name, s.Characteristic, m, want)
			}
		}
	}
	for side, lot := range []qa.Lot{r.Reference, r.Candidate} {
		if x := lot.Series[0].Readings; w.first[side] != "" && x[0].Source.Text != w.first[side] {
			t.Errorf("%s: got %s first, want %s", lot.Name, x[0].Source.Text, w.first[side])
		}
	}
	c := r.Characteristics[0]
	for i, got := range []*float64{c.Lower, c.Target, c.Upper} {
		if want := w.limits[i]; want != 0 && (got == nil || *got != want) {
			t.Errorf("%s: got the limit %v, want %v", c.Name, got, want)
		}
	}
	var groups []string
	for _, x := range r.Reference.Series[0].Readings {
		if x.Group != "" && !slices.Contains(groups, x.Group) {
			groups = append(groups, x.Group)
		}
	}
	if !slices.Equal(groups, w.groups) {
		t.Errorf("got the groups %v, want %v", groups, w.groups)
	}
	for _, code := range w.warnings {
		wantWarning(t, r, code)
	}
	wantWords(t, strings.Join(r.Said, "\n"), w.said...)
	var texts []string
	for _, x := range r.Warnings {
		texts = append(texts, x.Text)
	}
	wantWords(t, strings.Join(texts, "\n"), w.texts...)
}
