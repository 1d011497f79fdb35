package desk_test

import (
	"fmt"
	"reflect"
	"testing"
	"time"

	"pgregory.net/rapid"

	"lotpair/app/desk"
	"lotpair/qa"
)

// drafted is a draft of so many characteristics.
func drafted(n int) desk.State {
	s := desk.State{}.Begun("tester", time.Unix(0, 0))
	part := 0.1
	s.Record.Plan.Criterion.Margin = &qa.Margin{ToleranceFraction: &part}
	for i := range n {
		s.Record.Plan.Characteristics = append(s.Record.Plan.Characteristics, qa.Characteristic{Name: fmt.Sprint("c", i), Lower: number(9.9), Upper: number(10.1), Target: number(10), SD: number(0.02)})
	}
	return s
}

// What is remembered is what would be planned anew.
func TestPlannerRemembersTheSame(t *testing.T) {
	m := &desk.Planner{}
	rapid.Check(t, func(t *rapid.T) {
		s := drafted(2)
		p := &s.Record.Plan
		p.Criterion.Objective = rapid.SampledFrom([]qa.Objective{qa.Equivalence, qa.NotLower, qa.Lower}).Draw(t, "objective")
		p.Criterion.Method = rapid.SampledFrom([]string{"welch", "pooled", "paired", "log"}).Draw(t, "method")
		p.Characteristics[1].SD = number(rapid.SampledFrom([]float64{0.01, 0.02, 0.05}).Draw(t, "sd"))
		p.Criterion.Alpha = number(rapid.SampledFrom([]float64{0.05, 0.01}).Draw(t, "alpha"))
		if got, want := s.Draft(0, m), s.Draft(0, nil); !reflect.DeepEqual(got, want) {
			t.Fatalf("got %+v\nwant %+v", got, want)
		}
		if got, want := s.FootBy(m), s.Foot(); got != want {
			t.Fatalf("foot: got %+v, want %+v", got, want)
		}
	})
}

// BenchmarkTyping types in one of so many characteristics.
func BenchmarkTyping(b *testing.B) {
	for _, n := range []int{6, 200, 2000} {
		b.Run(fmt.Sprintf("characteristics=%d", n), func(b *testing.B) {
			s, m := drafted(n), &desk.Planner{}
			s.Draft(0, m)
			for i := 0; b.Loop(); i++ {
				all := append([]qa.Characteristic{}, s.Record.Plan.Characteristics...)
				all[0].SD = number(0.01 + float64(i)/1e5)
				s.Record.Plan.Characteristics = all
				s.Draft(0, m)
				s.FootBy(m)
			}
		})
	}
}
