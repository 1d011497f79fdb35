package desk_test

import (
	"slices"
	"strings"
	"testing"

	"lotpair/app/desk"
)

// TestOtherVersion shows a record that this version computes otherwise: the header says it as an alarm, the list of signatures in
// a sentence.
func TestOtherVersion(t *testing.T) {
	w := desk.Workbook{Path: "record.xlsx", State: "intact", Otherwise: true, Agreement: "computed again by this version the result DIFFERS", Reasons: []string{"layout 1"}}
	s := desk.State{}.OpenedWorkbook(example(t), w)
	h := s.Header()
	if want := "intact; this version computes another result; who signed is not established"; h.Right != want || !h.Alarm {
		t.Errorf("header: got %q, alarm %v, want %q as an alarm", h.Right, h.Alarm, want)
	}
	all := s.Signatures()
	for _, want := range []string{"layout 1", "Computed again by this version the result DIFFERS."} {
		if !slices.Contains(all, want) {
			t.Errorf("signatures: got %s, want %q in it", strings.Join(all, "\n"), want)
		}
	}
}
