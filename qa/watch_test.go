package qa_test

import (
	"context"
	"errors"
	"reflect"
	"testing"

	"lotpair/qa"
)

// A comparison under a watch is the same as one without; one that is stopped, at whatever it is told, is no comparison.
func TestCompareStopped(t *testing.T) {
	plan, readings := watched(t)
	want, err := qa.Compare(plan, readings, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	told := 0
	got, err := qa.Compare(plan, readings, qa.Run{Watch: qa.Watch{Context: context.Background(), Progress: func(p qa.Progress) {
		if told++; p.Of == "" || p.Share() < 0 || p.Share() >= 1 {
			t.Errorf("told %+v", p)
		}
	}}})
	if err != nil || !reflect.DeepEqual(got, want) || told != len(readings.Characteristics) {
		t.Errorf("got another result or %v, told %d times, want the same and once a characteristic", err, told)
	}
	for at := range told {
		ctx, stop := context.WithCancel(context.Background())
		n := 0
		got, err := qa.Compare(plan, readings, qa.Run{Watch: qa.Watch{Context: ctx, Progress: func(qa.Progress) {
			if n++; n > at {
				stop()
			}
		}}})
		stop()
		var stopped *qa.StoppedError
		if !errors.As(err, &stopped) || !errors.Is(err, context.Canceled) || got.Characteristics != nil {
			t.Errorf("stopped at %d: got %+v, %v, want nothing and that it was stopped", at, got.Verdict, err)
		}
	}
}

func watched(t *testing.T) (qa.Plan, qa.Readings) {
	t.Helper()
	margin := 0.5
	plan := qa.Plan{
		Format: qa.PlanFormat, Reference: qa.LotPlan{Lot: "R", File: "f"}, Candidate: qa.LotPlan{Lot: "C", File: "f"},
		Criterion: qa.Criterion{Margin: &qa.Margin{Absolute: &margin}}, Sensitivity: &qa.SensitivityPlan{Seed: 7, Resamples: 1000},
	}
	r := qa.Readings{Reference: qa.Lot{Name: "R"}, Candidate: qa.Lot{Name: "C"}}
	for _, name := range []string{"Bore", "Depth", "Width"} {
		r.Characteristics = append(r.Characteristics, qa.Characteristic{Name: name})
		for i, lot := range []*qa.Lot{&r.Reference, &r.Candidate} {
			s := qa.Series{Characteristic: name, Rows: 20}
			for k := range 20 {
				s.Readings = append(s.Readings, qa.Reading{Value: float64(k*7919%13)/10 + float64(i)/20, Decimals: 2})
			}
			lot.Series = append(lot.Series, s)
		}
	}
	return plan, r
}
