package desk_test

import (
	"strings"
	"testing"
	"time"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

const sheetText = "Lot;Serial;Heat;Operator;When;Bore 1 [mm];Bore 2 [mm];Mass [g]\n" +
	"A;1;h1;ann;07:10;12,1;12,2;50\nA;2;h1;ann;07:20;12,3;12,1;58\nA;3;h2;ben;07:30;12,2;12,4;52\n" +
	"B;1;h3;ben;08:10;12,2;12,3;53\nB;2;h3;ann;08:20;12,5;12,1;54\nB;3;h4;ann;08:30;12,2;12,2;56\nB;4;h4;ann;08:40;99,9;99,9;99\n"

func looked(t *testing.T, stated desk.Stated) desk.Sheet {
	t.Helper()
	x, err := desk.LookedInto(qa.Watch{}, "a.csv", []byte(sheetText), stated, false)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// Each part that a column can be given is stated as a plan says it, and the file read by it.
func TestColumnsPlayEveryPart(t *testing.T) {
	comma := desk.Stated{}.WithDecimal(",")
	for _, tt := range []struct {
		column int
		part   string
		want   func(desk.Stated) bool
	}{
		{3, importers.PlaysGroup, func(t desk.Stated) bool { return t.Reading.GroupColumn == "Heat" }},
		{5, importers.PlaysOrder, func(t desk.Stated) bool { return t.Reading.OrderColumn == "When" }},
		{2, importers.PlaysPair, func(t desk.Stated) bool { return t.Reading.PairColumn == "Serial" }},
		{2, importers.PlaysRepeated, func(t desk.Stated) bool { return t.Reading.PartColumn == "Serial" }},
		{3, importers.PlaysLot, func(t desk.Stated) bool { return t.Reading.LotColumn == "Heat" }},
		{3, importers.PlaysGauge, func(t desk.Stated) bool { return t.Named["Heat"] == importers.PlaysGauge }},
		{5, importers.PlaysOperator, func(t desk.Stated) bool { return t.Named["When"] == importers.PlaysOperator }},
		{8, importers.PlaysNothing, func(t desk.Stated) bool { return len(t.Taken) == 2 }},
	} {
		x := looked(t, comma)
		stated, err := x.Playing(tt.column, tt.part)
		if err != nil || !tt.want(stated) {
			t.Errorf("column %d as %s: got %+v, %v", tt.column, tt.part, stated, err)
			continue
		}
		if n := len(stated.Said); n != 2 || !strings.Contains(stated.Said[1], tt.part+", not ") {
			t.Errorf("column %d as %s: said %q", tt.column, tt.part, stated.Said)
		}
		if got := looked(t, stated).View(qa.Plan{}).Columns[tt.column-1].Plays; got != tt.part {
			t.Errorf("column %d as %s: read again it plays %s", tt.column, tt.part, got)
		}
	}
	// Columns of repeat readings are one characteristic; one that is not repeated cannot stand beside it.
	x := looked(t, comma)
	stated, err := x.Playing(8, importers.PlaysNothing)
	if err != nil {
		t.Fatal(err)
	}
	if stated, err = looked(t, stated).Playing(6, importers.PlaysRepeat); err != nil || stated.Reading.PartColumn != "Serial" || len(stated.Taken) != 1 || stated.Taken[0].Name != "Bore" {
		t.Errorf("repeats: got %+v, %v", stated, err)
	}
	if got := looked(t, stated).View(qa.Plan{}).Taken[0].Text; got != "6 rows, 6 readings, those of a part averaged" {
		t.Errorf("repeats: got %q", got)
	}
	for _, bad := range []struct {
		column int
		part   string
	}{{1, importers.PlaysNothing}, {8, importers.PlaysRepeat}, {40, importers.PlaysLot}} {
		if _, err := x.Playing(bad.column, bad.part); err == nil {
			t.Errorf("column %d as %s: got it allowed", bad.column, bad.part)
		}
	}
}

// A row that is said to be no part is left out of the plan's readings, with what it is as the reason.
func TestRowsPlayOtherParts(t *testing.T) {
	x := looked(t, desk.Stated{}.WithDecimal(","))
	if got := x.View(qa.Plan{}).Taken[1].Text; got != "4 parts, 12 readings" {
		t.Fatalf("before: got %q", got)
	}
	stated, err := x.RowPlaying(8, importers.RowFoot)
	if err != nil {
		t.Fatal(err)
	}
	x = looked(t, stated)
	v := x.View(qa.Plan{})
	if v.Taken[1].Text != "3 parts, 9 readings" || v.Rows != 8 || x.Row(7).Part != importers.RowFoot || !x.Row(7).Cells[5].Struck {
		t.Errorf("foot: got %+v, row %+v", v.Taken, x.Row(7))
	}
	s := desk.State{}.Begun("tester", time.Unix(0, 0)).WithSheet(&x)
	s, err = s.TookHeadings("tester", time.Unix(0, 0))
	if err != nil {
		t.Fatal(err)
	}
	p := s.Record.Plan
	if len(p.Reading.Exclude) != 3 || p.Reading.Exclude[0] != (qa.Exclusion{Cell: "F8", File: "a.csv", Reason: "row 8 is no part: foot"}) {
		t.Errorf("plan: got %+v", p.Reading.Exclude)
	}
	p.Criterion.Margin = &qa.Margin{Absolute: number(1)}
	r, err := importers.Read(p, func(string) ([]byte, error) { return []byte(sheetText), nil })
	if err != nil || r.Candidate.Of("Mass").Readings[3].Used() {
		t.Errorf("read: got %v, %+v", err, r.Candidate.Of("Mass"))
	}
	said := 0
	for _, a := range s.Record.Trail {
		if a.What == "said how the file is read" {
			said++
		}
	}
	if said != 2 || s.Record.Trail.Broken() >= 0 {
		t.Errorf("trail: got %d sayings in %+v", said, s.Record.Trail)
	}
	// A limit row gives its limits, and is left out as a reading.
	if stated, err = x.RowPlaying(8, importers.RowUpper); err != nil {
		t.Fatal(err)
	}
	x = looked(t, stated)
	if got := strings.Join(x.View(qa.Plan{}).Limits, "; "); !strings.Contains(got, "Mass to 99") {
		t.Errorf("limits: got %q", got)
	}
	if stated, err = x.RowPlaying(8, desk.RowReading); err != nil || len(stated.Rows) != 0 {
		t.Errorf("a part again: got %+v, %v", stated.Rows, err)
	}
	for _, bad := range []struct {
		row  int
		part string
	}{{1, importers.RowFoot}, {1, desk.RowReading}} {
		if _, err := x.RowPlaying(bad.row, bad.part); err == nil {
			t.Errorf("row %d as %s: got it allowed", bad.row, bad.part)
		}
	}
}

// The characteristics of a sealed criterion stay.
func TestPartsOfASealedCriterionStay(t *testing.T) {
	x := looked(t, desk.Stated{}.WithDecimal(","))
	s := desk.State{}.Begun("tester", time.Unix(0, 0)).WithSheet(&x)
	s.Record.Result.Seal.Time = "2026-12-01T09:12:00Z"
	if _, err := s.Playing(8, importers.PlaysNothing); err == nil {
		t.Error("a characteristic of a sealed criterion: got it left out")
	}
	if _, err := s.Playing(3, importers.PlaysGroup); err != nil {
		t.Errorf("a group: got %v", err)
	}
}

// The next lot: the plan without files, the seal only where it was set before the readings and never amended.
func TestBegunFromCarriesTheSealOrNot(t *testing.T) {
	noon := time.Date(2026, 12, 1, 12, 0, 0, 0, time.UTC)
	rec := example(t)
	rec.Plan.Reading.Exclude = []qa.Exclusion{{Cell: "Data!D17", Reason: "burr"}}
	for _, tt := range []struct {
		name    string
		seal    qa.Seal
		carried bool
	}{
		{"sealed before", qa.Seal{Digest: rec.Plan.SealDigest(), Time: "2026-11-30T09:12:00Z", Readings: "unopened"}, true},
		{"after the readings", qa.Seal{Digest: rec.Plan.SealDigest(), Time: "2026-11-30T09:12:00Z", Readings: "opened"}, false},
		{"amended", qa.Seal{Digest: rec.Plan.SealDigest(), Time: "2026-11-30T09:12:00Z", Readings: "unopened", Amended: 1}, false},
		{"never", qa.Seal{Digest: rec.Plan.SealDigest(), Readings: "unknown"}, false},
		{"another criterion", qa.Seal{Digest: "00", Time: "2026-11-30T09:12:00Z", Readings: "unopened"}, false},
	} {
		rec.Result.Seal = tt.seal
		old := desk.State{}.Opened("old.toml", rec)
		s, err := old.BegunFrom("tester", noon)
		if err != nil {
			t.Fatal(err)
		}
		p := s.Record.Plan
		if s.Sealed() != tt.carried || !s.Drafting || s.Seen || p.Reference.File+p.Candidate.File+p.Candidate.Lot != "" || len(p.Reading.Exclude) > 0 || p.SealDigest() != rec.Plan.SealDigest() {
			t.Errorf("%s: got sealed %v, %+v", tt.name, s.Sealed(), p)
		}
		if s.Record.Trail.Broken() >= 0 || !strings.HasPrefix(s.Last(), "began ") {
			t.Errorf("%s: trail %+v, last %q", tt.name, s.Record.Trail, s.Last())
		}
		if len(old.Record.Plan.Reading.Exclude) != 1 {
			t.Errorf("%s: the old record changed", tt.name)
		}
	}
	if _, err := (desk.State{}).BegunFrom("tester", noon); err == nil {
		t.Error("nothing on the desk: got a comparison")
	}
}

// Superseding is an act with its reason, and can be undone until the record leaves.
func TestSuperseding(t *testing.T) {
	noon := time.Date(2026, 12, 1, 12, 0, 0, 0, time.UTC)
	old := []qa.Superseded{{Record: "LP-1", File: qa.File{Name: "a.xlsx"}, Reason: "drawing"}, {Record: "LP-2", File: qa.File{Name: "b.xlsx"}, Reason: "gauge"}}
	s := desk.State{}.Opened("x.toml", example(t))
	next, err := s.Superseding(old, "tester", noon)
	if err != nil || len(next.Record.Supersedes) != 2 || next.Record.Result.Attempts.Known != 3 || next.Record.Trail.Broken() >= 0 || next.CanUndo() == "" {
		t.Fatalf("got %+v, %v", next.Record.Supersedes, err)
	}
	if _, err := next.Superseding(old, "tester", noon); err == nil {
		t.Error("a second time: got it allowed")
	}
	if back := next.Undone("tester", noon); len(back.Record.Supersedes) != 0 || len(back.Record.Trail) != len(next.Record.Trail)+1 {
		t.Errorf("undone: got %+v", back.Record.Supersedes)
	}
	if _, err := (desk.State{}).Superseding(old, "tester", noon); err == nil {
		t.Error("nothing on the desk: got it superseding")
	}
}
