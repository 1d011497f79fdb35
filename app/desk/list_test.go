package desk_test

import (
	"testing"

	"lotpair/app/desk"
)

func TestListSaysEveryRecord(t *testing.T) {
	got := desk.List([]desk.ListEntry{
		{ID: 7, Title: "Hub shell", Supports: "DEV-1", Reference: "R-118", Candidate: "C-022", Verdict: "undecided", Changed: noon},
		{ID: 8, Candidate: "C-022", Signatures: "prepared by Ann Example", Changed: noon},
	})
	want := []desk.ListRow{
		{ID: 7, Title: "Hub shell", Supports: "supports DEV-1", Lots: "R-118, C-022", Verdict: "undecided", Sign: "not signed", Changed: "1 Dec 2026 12:00"},
		{ID: 8, Supports: "supports: not stated", Lots: "C-022", Sign: "prepared by Ann Example", Changed: "1 Dec 2026 12:00"},
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("row %d: got %+v, want %+v", i, got[i], want[i])
		}
	}
	for _, c := range []struct {
		seen, all int
		search    string
		want      string
	}{
		{0, 0, "", "No records yet. A record is kept from the first act on; nothing has to be saved."},
		{1, 1, "", "1 record, the last changed first"},
		{3, 40, "x", "3 records of 40 records"},
		{0, 40, "x", "no record holds all of these words; 40 records in all"},
		{200, 5000, "", "the first 200 records of those that were found; type more to find less"},
	} {
		if got := desk.ListTitle(c.seen, c.all, 200, c.search); got != c.want {
			t.Errorf("title: got %q, want %q", got, c.want)
		}
	}
}
