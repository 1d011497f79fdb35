package qa_test

import (
	"runtime"
	"runtime/debug"
	"testing"

	"lotpair/qa"
)

// BenchmarkCompareLarge is the largest comparison that is looked after: 2,000 characteristics of 2 x 1,000 readings. The collector
// is held to the readings and 64 MiB more, so that the time is what it takes within that memory; more-MiB is what was taken from
// the machine beyond the readings.
func BenchmarkCompareLarge(b *testing.B) {
	const more = 64 << 20
	p, readings := manyCharacteristics(2000, 1000)
	debug.FreeOSMemory()
	before := taken()
	defer debug.SetGCPercent(debug.SetGCPercent(-1))
	defer debug.SetMemoryLimit(debug.SetMemoryLimit(int64(before) + more))
	for b.Loop() {
		r, err := qa.Compare(p, readings, qa.Run{})
		if err != nil || len(r.Characteristics) != 2000 {
			b.Fatal(len(r.Characteristics), err)
		}
	}
	b.ReportMetric((float64(taken())-float64(before))/(1<<20), "more-MiB")
	runtime.KeepAlive(readings)
}

// taken is all memory taken from the machine and not given back.
func taken() uint64 {
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	return m.Sys - m.HeapReleased
}
