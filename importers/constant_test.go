package importers

import (
	"strings"
	"testing"
)

// A lot that is constant is no measure of how far the other's readings may lie apart: they are no deviations because of it.
func TestReadConstantLot(t *testing.T) {
	text := "Lot,x\n" + strings.Repeat("REF-0417,10\n", 6) + "CAND-0931,1\nCAND-0931,2.5\nCAND-0931,3\nCAND-0931,4\nCAND-0931,5\n"
	r := mustRead(t, plan("a.csv"), []byte(text))
	if n := len(r.Candidate.Series[0].Readings); n != 5 {
		t.Errorf("got %d readings, want 5", n)
	}
}
