package importers

import (
	"maps"
	"slices"
	"strings"
	"testing"

	"lotpair/qa"
)

const partsText = "Lot;Serial;Heat;Operator;Gauge no;Bore 1 [mm];Bore 2 [mm];Mass [g]\n" +
	";;;;;mm;mm;g\n" +
	"Upper limit;;;;;12,9;12,9;60\n" +
	"A;1;h1;ann;7;12,1;12,2;50\nA;2;h1;ann;7;12,3;12,1;58\nA;3;h2;ben;7;12,2;12,4;52\n" +
	"B;1;h3;ben;7;12,2;12,3;53\nB;2;h3;ann;7;12,5;12,1;54\nB;3;h4;ann;7;12,2;12,2;55\n" +
	"Mean;;;;;12,3;12,2;52,5\n"

func TestParts(t *testing.T) {
	in, err := InspectAs("a.csv", []byte(partsText), qa.ReadingPlan{Decimal: ","}, nil)
	if err != nil {
		t.Fatal(err)
	}
	p := in.Parts()
	var got []string
	for _, col := range slices.Sorted(maps.Keys(p.Columns)) {
		got = append(got, p.Columns[col])
	}
	want := []string{PlaysLot, PlaysPart, PlaysNothing, PlaysOperator, PlaysGauge, PlaysCharacteristic, PlaysCharacteristic, PlaysCharacteristic}
	if !slices.Equal(got, want) {
		t.Errorf("columns: got %q, want %q", got, want)
	}
	if !p.Stand || p.First != 4 || p.Rows[1] != RowHeading || p.Rows[2] != RowUnit || p.Rows[3] != RowUpper || p.Rows[10] != RowFoot || p.Rows[4] != "" || p.Lots[4] != "A" || p.Lots[9] != "B" {
		t.Errorf("rows: got %+v", p)
	}
}

// Stated columns are taken, whatever would have been found.
func TestInspectAs(t *testing.T) {
	stated := qa.ReadingPlan{Decimal: ",", PartColumn: "Serial", GroupColumn: "Heat", OrderColumn: "Gauge no"}
	in, err := InspectAs("a.csv", []byte(partsText), stated, []qa.Characteristic{{Name: "Mass"}})
	if err != nil {
		t.Fatal(err)
	}
	p := in.Parts()
	for col, want := range map[int]string{2: PlaysRepeated, 3: PlaysGroup, 5: PlaysOrder, 6: PlaysNothing, 8: PlaysCharacteristic} {
		if p.Columns[col] != want {
			t.Errorf("column %d: got %q, want %q", col, p.Columns[col], want)
		}
	}
	if len(in.Characteristics) != 1 || in.Characteristics[0].Lots[0].N != 3 {
		t.Errorf("characteristics: got %+v", in.Characteristics)
	}
	got, err := LoadPlan("plan.toml", []byte(strings.Replace(in.Plan(), "absolute = 0 ", "absolute = 1 ", 1)))
	if err != nil || got.Reading.PartColumn != "Serial" || got.Reading.GroupColumn != "Heat" || got.Reading.OrderColumn != "Gauge no" || got.Reading.Decimal != "," || len(got.Characteristics) != 1 {
		t.Errorf("plan: got %+v, %v, want what was stated", got.Reading, err)
	}
	// Columns of repeat readings: one characteristic, twice as many readings before they are averaged.
	in, err = InspectAs("a.csv", []byte(partsText), qa.ReadingPlan{Decimal: ",", PartColumn: "Serial"}, []qa.Characteristic{{Name: "Bore"}})
	if err != nil {
		t.Fatal(err)
	}
	if in.Parts().Stand || len(in.Characteristics) != 1 || in.Characteristics[0].Lots[0].N != 6 {
		t.Errorf("repeat readings: got %+v", in.Characteristics)
	}
	for heading, want := range map[string]string{"Bore 1 [mm]": "Bore", "Bore_12": "Bore", "Bore": "", "7": ""} {
		if got := RepeatOf(heading); got != want {
			t.Errorf("%s: got %q, want %q", heading, got, want)
		}
	}
	// What the file no longer has is named.
	_, err = InspectAs("a.csv", []byte(partsText), qa.ReadingPlan{LotColumn: "Batch"}, nil)
	wantPlanError(t, err, "lot_column", `"Batch"`)
	_, err = InspectAs("a.csv", []byte(partsText), qa.ReadingPlan{}, []qa.Characteristic{{Name: "Depth"}, {Name: "Mass"}})
	wantPlanError(t, err, `"Depth"`)
}
