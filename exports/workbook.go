package exports

import (
	"fmt"
	"io"

	"lotpair/qa"
)

// MaxReadings is how many readings a workbook takes: a sheet has 1,048,576 rows (contract: console, exit code 3).
const MaxReadings = 1_000_000

// TooManyReadings says that a record is too large for a workbook.
type TooManyReadings struct{ N int }

func (e TooManyReadings) Error() string {
	return fmt.Sprintf("workbook: found %d readings, want at most %d, the rows of one sheet; compare and print JSON instead", e.N, MaxReadings)
}

// Workbook writes the record as an .xlsx package, unsigned: the sheets, the pictures and the record itself as custom XML.
// The same record gives the same bytes.
func Workbook(rec qa.Record) ([]byte, error) { return Watched{}.Workbook(rec) }

// Workbook writes the record as the function of that name does.
func (w Watched) Workbook(rec qa.Record) ([]byte, error) {
	n := 0
	for _, l := range []qa.Lot{rec.Readings.Reference, rec.Readings.Candidate} {
		for _, s := range l.Series {
			n += len(s.Readings)
		}
	}
	if n > MaxReadings {
		return nil, TooManyReadings{N: n}
	}
	b, _, err := bookOf(rec)
	if err != nil {
		return nil, err
	}
	b.watch = w.watch
	return b.bytes()
}

// bookOf is the workbook of a record, and the digest of its content.
func bookOf(rec qa.Record) (book, string, error) {
	digest, err := contentDigest(rec)
	if err != nil {
		return book{}, "", err
	}
	record := func(w io.Writer) error {
		_, err := writeRecord(w, rec)
		return err
	}
	b := book{title: rec.Result.Title, sheets: sheets(rec, digest), record: record, draft: rec.Signer == nil}
	b.foot = footerText(rec.Result.Title, rec.Result.Supports) + fmt.Sprintf("\nRecord %s, criterion %s", RecordID(digest), shortDigest(rec.Result.Seal.Digest))
	return b, digest, nil
}

// RecordID is the name of a record that survives copies and renaming: the first twelve digits of the digest of its content.
func RecordID(digest string) string { return digest[:min(12, len(digest))] }

// shortDigest is enough of a digest to tell two apart on paper.
func shortDigest(digest string) string { return digest[:min(12, len(digest))] }
