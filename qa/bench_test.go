package qa_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"lotpair/qa"
)

// manyCharacteristics are readings of k characteristics on n parts a lot, written with three decimals, with limits. The true
// shifts run from none to beyond the margin of 1, so that every verdict is among them.
func manyCharacteristics(k, n int) (qa.Plan, qa.Readings) {
	r := rand.New(rand.NewPCG(200, 100))
	p := plan(qa.Equivalence, absolute(1))
	p.Criterion.SpreadRatio = ptr(1.5)
	var all qa.Readings
	all.Reference, all.Candidate = qa.Lot{Name: "R", Rows: n}, qa.Lot{Name: "C", Rows: n}
	for i := range k {
		ch := qa.Characteristic{Name: fmt.Sprint("X", i+1), Lower: ptr(90.0), Target: ptr(100.0), Upper: ptr(110.0)}
		lot := func(shift float64) qa.Series {
			x := make([]float64, n)
			for j := range x {
				x[j] = math.Round(1000*(100+shift+2*r.NormFloat64())) / 1000
			}
			return series(ch.Name, 3, x...)
		}
		all.Characteristics = append(all.Characteristics, ch)
		all.Reference.Series = append(all.Reference.Series, lot(0))
		all.Candidate.Series = append(all.Candidate.Series, lot(float64(i%10)/5))
	}
	return p, all
}

func BenchmarkCompare(b *testing.B) {
	for _, size := range []struct{ k, n int }{{200, 100}, {100, 1000}, {10, 10_000}} {
		p, readings := manyCharacteristics(size.k, size.n)
		b.Run(fmt.Sprintf("%dx%d", size.k, size.n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := qa.Compare(p, readings, qa.Run{}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
