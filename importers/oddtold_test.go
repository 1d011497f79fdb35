package importers

import (
	"strings"
	"testing"

	"lotpair/qa"
)

func TestInspectTells(t *testing.T) {
	rows := withCandidate3(num("9999"))
	rows[16][2], rows[17][2], rows[18][2] = num("120.19"), "<0.05", "BDL"
	in, err := Inspect("d1.xlsx", xlsx(t, sheetOf{name: "Data", rows: rows}), "", "")
	if err != nil {
		t.Fatal(err)
	}
	told := ""
	for _, w := range in.Warnings {
		told += w.Code + ": " + w.Text + "\n"
	}
	wantWords(t, told, "sentinel: ", "9999 in Data!C16", "factor: ", "120.19 in Data!C17 is 10 times", "non-detects: ", "2 cells", "C18, C19", "non_detect")
}

// Every file that is read goes through inspect, and the plan that comes of it reads the same file.
func TestInspectFormats(t *testing.T) {
	for name, data := range map[string][]byte{
		"report.txt": []byte(coordinateReport("REF-0417", d1Reference, false) + coordinateReport("CAND-0931", d1Candidate, false)),
		"d1.prn":     []byte("Lot       Part  Bore [mm]\n" + strings.ReplaceAll(strings.SplitN(longCSV("   ", "."), "\n", 2)[1], "REF-0417", "REF-0417 ")),
		"d1.csv":     []byte(longCSV(";", ".")),
	} {
		in, err := Inspect(name, data, "", "")
		if err != nil {
			t.Errorf("%s: got %v", name, err)
			continue
		}
		text := strings.NewReplacer("absolute = 0 ", "absolute = 0.01 ").Replace(in.Plan())
		p, err := LoadPlan("plan.toml", []byte(text))
		if err != nil {
			t.Errorf("%s: got %v for\n%s", name, err, text)
			continue
		}
		p.Criterion.Margin = &qa.Margin{Absolute: p.Criterion.Margin.Absolute}
		wantD1(t, mustRead(t, p, data))
	}
}

func TestPlanRefusesMargins(t *testing.T) { // N43
	whole := "format = \"lotpair.plan/1\"\n[reference]\nlot = \"a\"\nfile = \"a.csv\"\n[candidate]\nlot = \"b\"\nfile = \"a.csv\"\n[criterion]\nmargin = { absolute = 0.02 }\n"
	for change, words := range map[string][]string{
		"absolute = -0.02":                       {"criterion.margin.absolute", "above 0"},
		"absolute = 0,02":                        {"plan.toml:9"},
		"absolute = \"0,02\"":                    {"criterion.margin.absolute", "a number"},
		"lower = 0.02, upper = -0.02":            {"below the upper"},
		"absolute = 0.02, lower = 1":             {"exactly one kind"},
		"absolute = nan":                         {"criterion.margin.absolute"},
		"absolute = inf":                         {"criterion.margin.absolute"},
		"absolute = 0":                           {"criterion.margin.absolute", "above 0"},
		"absolute = 0.02 }\nalpha = 0.5 #":       {"alpha"},
		"absolute = 0.02 }\nobjective = \"x\" #": {"objective"},
	} {
		_, err := LoadPlan("plan.toml", []byte(strings.Replace(whole, "absolute = 0.02", change, 1)))
		wantPlanError(t, err, words...)
	}
	for key, words := range map[string][]string{
		"[reading]\nnon_detect = \"half\"\n": {"reading.non_detect", "exclude, limit, half-limit, zero"},
		"[reading]\nnon_detect = \"zero\"\n": nil,
	} {
		_, err := LoadPlan("plan.toml", []byte(whole+key))
		if words == nil && err != nil || words != nil && err == nil {
			t.Errorf("%s: got %v", key, err)
		}
		if err != nil {
			wantPlanError(t, err, words...)
		}
	}
	for value, good := range map[string]bool{"absolute": true, "deviation": true, "relative": false} {
		_, err := LoadPlan("plan.toml", []byte(strings.Replace(whole, "[candidate]\n", "[candidate]\nunit = \"in\"\nvalues = \""+value+"\"\n", 1)))
		if good != (err == nil) {
			t.Errorf("values = %q: got %v", value, err)
		}
	}
}
