package published_test

import (
	"testing"

	"lotpair/qa/published"
)

// TestRun runs every published check and prints the worst differences.
func TestRun(t *testing.T) {
	seen := map[string]bool{}
	for _, o := range published.Run() {
		if seen[o.ID] {
			t.Errorf("%s: the id stands twice", o.ID)
		}
		seen[o.ID] = true
		if o.Source == "" || o.Quantity == "" {
			t.Errorf("%s: no source or quantity", o.ID)
		}
		if !o.Holds {
			t.Errorf("%s, %s: got %.15g (%v), want %.15g; relative difference %.2g, allowed %.2g", o.ID, o.Quantity, o.Got, o.Err, o.Want, o.Error, o.Relative)
		}
	}
	if len(seen) < 30 {
		t.Errorf("got %d checks, want at least 30", len(seen))
	}
}
