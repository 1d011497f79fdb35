package importers

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
)

func TestInspect(t *testing.T) {
	rows := withSpecs()
	rows[7][2] = "n/a"
	rows = append(rows, []any{"Mean", nil, formula{"AVERAGE(C6:C29)", "12.006"}})
	data := xlsx(t, sheetOf{name: "Notes", rows: [][]any{{"x"}}}, sheetOf{name: "Data", rows: rows}, sheetOf{name: "raw", hidden: true, rows: long()})
	in, err := Inspect("d1.xlsx", data, "", "")
	if err != nil {
		t.Fatal(err)
	}
	if in.Format != "lotpair.inspect/1" || in.Layout != "row-per-part" || in.Sheet != "Data" || in.HeaderRow != 1 || len(in.Sheets) != 3 || !in.Sheets[2].Hidden || in.Decimal != "." {
		t.Errorf("got %+v", in)
	}
	if len(in.Lots) != 2 || in.Lots[0] != (InspectedLot{"REF-0417", 12}) || in.Lots[1] != (InspectedLot{"CAND-0931", 12}) {
		t.Errorf("got the lots %+v", in.Lots)
	}
	c := in.Characteristics
	if len(c) != 1 || c[0].Name != "Bore dia" || c[0].Unit != "mm" || *c[0].Limits.Upper != 12.05 || c[0].Lots[0].N != 11 || math.Abs(*c[0].Lots[1].Mean-d1MeanCandidate) > 1e-10 {
		t.Errorf("got the characteristics %+v", c)
	}
	if len(in.Unread) != 2 || in.Unread[0].Cell != "Data!C8" || in.Unread[0].Found != "n/a" || in.Unread[0].TakenAs != "missing" || in.Unread[1].TakenAs != "summary" {
		t.Errorf("got the unread cells %+v", in.Unread)
	}
	text, err := json.Marshal(in)
	if err != nil {
		t.Fatal(err)
	}
	wantWords(t, string(text), `"file":{"name":"d1.xlsx","sha256":"`, `"header_row":1`, `"taken_as":"missing"`, `"hidden-sheets"`, `"limits":{"lower":11.95,"target":12,"upper":12.05}`)
}

func TestInspectPlanLoads(t *testing.T) {
	data := xlsx(t, sheetOf{name: "Data", rows: withSpecs()})
	in, err := Inspect("d1.xlsx", data, "", "")
	if err != nil {
		t.Fatal(err)
	}
	p, err := LoadPlan("plan.toml", []byte(in.Plan()))
	if err != nil {
		t.Fatalf("got %v for\n%s", err, in.Plan())
	}
	wantD1(t, mustRead(t, p, data))
}

func TestInspectPlanWithBlanks(t *testing.T) {
	in, err := Inspect("my \"d1\".csv", []byte(strings.ReplaceAll(longCSV(";", ","), "REF-0417", `R\1`)), "", "")
	if err != nil {
		t.Fatal(err)
	}
	if in.Decimal != "" || in.Delimiter != ";" || in.Encoding != "utf-8" || len(in.Warnings) != 1 || in.Warnings[0].Code != DecimalAmbiguous {
		t.Errorf("got decimal %q, delimiter %q, encoding %q, warnings %v", in.Decimal, in.Delimiter, in.Encoding, in.Warnings)
	}
	text := in.Plan()
	filled := strings.NewReplacer("absolute = 0 ", "absolute = 0.01 ", `decimal = ""`, `decimal = ","`).Replace(text)
	p, err := LoadPlan("plan.toml", []byte(filled))
	if err != nil {
		t.Fatalf("got %v for\n%s", err, filled)
	}
	wantD1(t, mustRead(t, p, []byte(strings.ReplaceAll(longCSV(";", ","), "REF-0417", `R\1`))))
	if _, err := LoadPlan("plan.toml", []byte(text)); err == nil {
		t.Error("got a plan with blanks accepted, want the margin asked for")
	}
}

func TestInspectOneLot(t *testing.T) {
	in, err := Inspect("a.csv", []byte("no;value\n1;2.5\n2;2.6\n3;2.4\n"), "", "")
	if err != nil {
		t.Fatal(err)
	}
	if len(in.Lots) != 1 || in.Lots[0] != (InspectedLot{"a.csv", 3}) || in.Characteristics[0].Lots[0].N != 3 {
		t.Errorf("got %+v", in)
	}
	filled := strings.NewReplacer(`lot = "" #`, `lot = "b" #`, `file = "" #`, `file = "b.csv" #`, "absolute = 0 ", "absolute = 1 ").Replace(in.Plan())
	if _, err := LoadPlan("plan.toml", []byte(filled)); err != nil {
		t.Errorf("got %v for\n%s", err, filled)
	}
}

func TestInspectRefuses(t *testing.T) {
	_, err := Inspect("a.csv", []byte("1,2\n3,4\n"), "", "")
	wantPlanError(t, err, "a.csv", "header_row")
	_, err = Inspect("a.csv", []byte("lot,x\nA,1\n"), "", "column-per-lot")
	wantPlanError(t, err, "reading.layout", "side by side")
	_, err = Inspect("a.xlsx", xlsx(t, sheetOf{name: "Data", rows: long()}), "data", "")
	wantPlanError(t, err, `"Data"`)
	_, err = Inspect("a.xlsx", []byte("x"), "", "")
	wantFileError(t, err, "a.xlsx")
}

// A sheet of means before the readings is shown with a word on the other.
func TestInspectOtherSheets(t *testing.T) {
	means := [][]any{{"Lot", "Mean"}, {"REF-0417", num("12.0039")}, {"CAND-0931", num("12.0082")}}
	in, err := Inspect("own.xlsx", xlsx(t, sheetOf{name: "Summary", rows: means}, sheetOf{name: "Raw", rows: long()}), "", "")
	if err != nil {
		t.Fatal(err)
	}
	for _, w := range in.Warnings {
		if w.Code == "other-sheets" {
			wantWords(t, w.Text, `"Summary" is shown`, `"Raw"`)
			return
		}
	}
	t.Errorf("got the warnings %v, want other-sheets", in.Warnings)
}
