package importers

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/qa"
)

const soundPlan = `format = "lotpair.plan/1"
title = "Hub shell HS-40: second foundry"
supports = "DEV-2291"
retention = "active + 1 year"
signatures = [
  { meaning = "prepared", name = "A", title = "B" },
  { meaning = "reviewed" },
]

[record]
part = "HS-40"
revision = "C"
quantity_reference = 1200
quantity_candidate = 800
sampling = "every 30th"
gauge_reference = "bore gauge 14"
gauge_candidate = "bore gauge 14"

[reference]
lot = "R-118"
source = "Existing foundry"
file = "hub-shell.xlsx"
sheet = "Data"
unit = "mm"
values = "absolute"
[candidate]
lot = "C-022"
file = "hub-shell.xlsx"

[reading]
layout = "row-per-part"
sheet = "Data"
header_row = 1
lot_column = "Lot"
part_column = "Part"
order_column = "Measured at"
decimal = "."
encoding = "utf-8"
exclude = [ # why
  { cell = "Data!D17", reason = "dropped part, NCR-77" },
]

[criterion]
objective = "equivalence"
claim = "lots"
groups = "none"
alpha = 0.05
method = "welch"
margin = { tolerance_fraction = 0.10, of = "half" }
guard = 0.0005
power = 0.90
overall = "all"
second_sample = "none"

[[characteristic]]
name = "Bore diameter"
column = "Bore"
kind = "numeric"
unit = "mm"
lower = 39.975
target = 40
upper = 40.025
sd = 0.006
uncertainty = { reference = 0.0004, candidate = 0.0004 }
margin = { absolute = 0.004, reason = "fit of the bearing", approved_by = "design" }
decimals = 4

[[characteristic]]
name = "Flange run-out"
upper = 0.080
objective = "not-higher"
margin.absolute = 0.008

[performance]
coverage = 0.95
confidence = 0.95
[sensitivity]
resamples = 0
seed = 1
`

func TestLoadPlan(t *testing.T) {
	for _, text := range []string{soundPlan, "\ufeff" + soundPlan, strings.ReplaceAll(soundPlan, "\n", "\r\n")} {
		p, err := LoadPlan("plan.toml", []byte(text))
		if err != nil {
			t.Fatal(err)
		}
		if p.Reference.Lot != "R-118" || *p.Characteristics[0].Margin.Absolute != 0.004 || *p.Characteristics[0].Target != 40 ||
			*p.Characteristics[1].Margin.Absolute != 0.008 || p.Reading.Exclude[0].Cell != "Data!D17" || p.Criterion.Margin.Of != "half" ||
			len(p.Signatures) != 2 || p.Sensitivity.Seed != 1 || *p.Record.QuantityReference != 1200 {
			t.Errorf("got %+v", p)
		}
	}
}

// Every key of the contract is known, and only those.
func TestLoadPlanKnowsEveryKey(t *testing.T) {
	for line := range strings.Lines(soundPlan) {
		key, _, ok := strings.Cut(line, " = ")
		if !ok || strings.HasPrefix(line, " ") {
			continue
		}
		wrong := strings.Replace(soundPlan, line, strings.Replace(line, key, key+"x", 1), 1)
		_, err := LoadPlan("plan.toml", []byte(wrong))
		wantPlanError(t, err, "unknown key "+`"`+key[strings.LastIndexByte(key, '.')+1:]+`x"`, "nearest known key is")
	}
}

func TestLoadPlanFaults(t *testing.T) {
	for _, tt := range []struct {
		old, new string
		lines    []string
	}{
		{"tolerance_fraction", "toleranc_fraction", []string{`plan.toml:49: unknown key "toleranc_fraction" under "criterion.margin"; nearest known key is "tolerance_fraction"`}},
		{"alpha = 0.05", "Alpha = 0.05", []string{`plan.toml:47: unknown key "Alpha" under "criterion"; nearest known key is "alpha"`}},
		{"alpha = 0.05", "tolerance_fraction = 0.05", []string{`nearest known key is "criterion.margin.tolerance_fraction"`}},
		{"[criterion]", "[criteria]", []string{`plan.toml:43: unknown key "criteria"; nearest known key is "criterion"`}},
		{"[performance]", "[[performance]]", []string{`found a list of tables [[performance]], want one table [performance]`}},
		{"alpha = 0.05", `alpha = "0.05"`, []string{`plan.toml:47: key "criterion.alpha": found text "0.05", want a number`}},
		{"header_row = 1", "header_row = 1.5", []string{`plan.toml:33: key "reading.header_row": found the number "1.5", want a whole number`}},
		{`lot = "R-118"`, "lot = 118", []string{`plan.toml:20: key "reference.lot": found the number "118", want text in quotes`}},
		{`lot = "R-118"`, "lot = 2026-01-02", []string{`found a date or time "2026-01-02", want text in quotes`}},
		{"alpha = 0.05", "alpha = 0.5", []string{`plan.toml:68: `, "found 0.5, want a number above 0 and below 0.5"}},
		{"lower = 39.975", "lower = 41", []string{`plan.toml:62: `, "want more than the lower limit 41"}},
		{"lower = 39.975", "lower = nan", []string{`plan.toml:62: `, "want a finite number"}},
		{`reason = "dropped part, NCR-77"`, `reason = " "`, []string{"plan.toml:40: ", "want why the cell is left out"}},
		{`meaning = "reviewed"`, `meaning = "seen"`, []string{"plan.toml:7: ", `found "seen"`, "prepared, reviewed, approved"}},
		{`"lotpair.plan/1"`, `"lotpair.plan/2"`, []string{"plan.toml:1: ", `found "lotpair.plan/2", want "lotpair.plan/1"`}},
		{`layout = "row-per-part"`, `layout = "lot-per-sheet"`, []string{"plan.toml:31: ", "row-per-part, column-per-lot, sheet-per-lot, row-per-characteristic"}},
		{"[candidate]", "[candidate", []string{"plan.toml:26: ", "want TOML"}},
		{"[candidate]", "[reference]", []string{"plan.toml:26: ", "want TOML"}},
		{`title = "Hub`, `title = Hub`, []string{"plan.toml:2: ", "want TOML"}},
		{"[[characteristic]]\nname = \"F", "[characteristic]\nname = \"F", []string{"found one table [characteristic], want a list of tables [[characteristic]]"}},
	} {
		text := strings.Replace(soundPlan, tt.old, tt.new, 1)
		if text == soundPlan {
			t.Fatalf("the case %q changes nothing", tt.old)
		}
		p, err := LoadPlan("plan.toml", []byte(text))
		wantPlanError(t, err, tt.lines...)
		if p.Format != "" {
			t.Errorf("%s: got a plan besides the error", tt.new)
		}
	}
}

func TestLoadPlanListsAllFaults(t *testing.T) {
	text := strings.NewReplacer("alpha = 0.05", "alfa = 0.05", "decimals = 4", `decimals = "4"`, "[sensitivity]", "[sensitive]").Replace(soundPlan)
	_, err := LoadPlan("plan.toml", []byte(text))
	e, ok := errors.AsType[*PlanError](err)
	if !ok || len(e.Faults) != 3 || strings.Count(err.Error(), "\n") != 2 {
		t.Fatalf("got %v, want three faults, a line each", err)
	}
	for _, f := range e.Faults {
		if f.Line == 0 {
			t.Errorf("got %+v, want its line", f)
		}
	}
}

func TestLoadPlanRefusesOtherFiles(t *testing.T) {
	for text, words := range map[string]string{
		"":                                 "empty file",
		" \n\t":                            "empty file",
		"PK\x03\x04":                       "workbook",
		"\xff\xfef\x00":                    "UTF-16",
		"a\x00b":                           "binary",
		"format = \"x\"\ntitle = \"\xe4\"": "plan.toml:2: found a byte that is not UTF-8",
		"lot,part\nA,1\n":                  "plan.toml:1: ",
		"# only a comment":                 `want "lotpair.plan/1"`,
		strings.Repeat("#", maxPlan+1):     "4 MiB",
	} {
		_, err := LoadPlan("plan.toml", []byte(text))
		wantPlanError(t, err, words)
	}
}

func FuzzLoadPlan(f *testing.F) {
	f.Add([]byte(soundPlan))
	f.Add([]byte("format = \"lotpair.plan/1\"\n[[characteristic]]\n[characteristic.margin]\nabsolute = 1\n"))
	f.Add([]byte("a.b.c = [ { x = 1 }, 2 ]\n[criterion.margin.absolute]\n"))
	f.Add([]byte("signatures = [ [ ], \"x\" ]\nreference = 1\n"))
	if data, err := os.ReadFile(filepath.Join(jahanmi2, "plan-csv.toml")); err == nil {
		f.Add(data)
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := LoadPlan("plan.toml", data)
		if err != nil {
			e, ok := errors.AsType[*PlanError](err)
			if !ok || len(e.Faults) == 0 || err.Error() == "" {
				t.Fatalf("got %#v, want a *PlanError with faults", err)
			}
			return
		}
		if faults := p.Validate(); len(faults) > 0 || p.Format != qa.PlanFormat {
			t.Fatalf("got a plan that is not valid: %v", faults)
		}
	})
}
