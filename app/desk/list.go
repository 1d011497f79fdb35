package desk

import (
	"strconv"
	"strings"
	"time"
)

// ListEntry is a record as the register has it.
type ListEntry struct {
	ID                            int64
	Title, Supports               string
	Reference, Candidate, Verdict string
	Signatures                    string
	Changed                       time.Time
}

// ListRow is a record as the list shows it.
type ListRow struct {
	ID                  int64
	Title, Supports     string
	Lots, Verdict, Sign string
	Changed             string
}

// List says the rows of the register's list.
func List(all []ListEntry) []ListRow {
	out := make([]ListRow, 0, len(all))
	for _, e := range all {
		r := ListRow{ID: e.ID, Title: e.Title, Supports: "supports " + e.Supports, Verdict: e.Verdict, Sign: e.Signatures, Changed: e.Changed.Format("2 Jan 2006 15:04")}
		if e.Supports == "" {
			r.Supports = "supports: not stated"
		}
		r.Lots = strings.Trim(e.Reference+", "+e.Candidate, ", ")
		if r.Sign == "" {
			r.Sign = "not signed"
		}
		out = append(out, r)
	}
	return out
}

// ListTitle says how many records are seen of how many.
func ListTitle(seen, all, most int, search string) string {
	switch {
	case all == 0:
		return "No records yet. A record is kept from the first act on; nothing has to be saved."
	case strings.TrimSpace(search) == "" && seen == all:
		return count(all) + ", the last changed first"
	case seen == most:
		return "the first " + count(seen) + " of those that were found; type more to find less"
	case seen == 0:
		return "no record holds all of these words; " + count(all) + " in all"
	}
	return count(seen) + " of " + count(all)
}

func count(n int) string {
	if n == 1 {
		return "1 record"
	}
	return strconv.Itoa(n) + " records"
}
