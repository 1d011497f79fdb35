package register

import (
	"database/sql"
	"errors"
	"fmt"
	"strings"
	"time"
	"unicode"
)

// Entry is what the register's list shows of a record.
type Entry struct {
	ID                   int64
	Origin               string // says of what it was made: the same again is found by it
	Title, Supports      string
	Reference, Candidate string
	Verdict, Signatures  string
	Changed              time.Time
	Acts                 int // how many are kept
}

// words are what a search looks through.
func (e Entry) words() string {
	return strings.Join([]string{e.Title, e.Supports, e.Reference, e.Candidate, e.Verdict, e.Signatures}, " ")
}

const entryColumns = "r.id, r.origin, r.title, r.supports, r.reference, r.candidate, r.verdict, r.signatures, r.changed, r.acts"

func scanEntry(row interface{ Scan(...any) error }) (Entry, error) {
	var e Entry
	var changed string
	err := row.Scan(&e.ID, &e.Origin, &e.Title, &e.Supports, &e.Reference, &e.Candidate, &e.Verdict, &e.Signatures, &changed, &e.Acts)
	if err != nil {
		return e, err
	}
	e.Changed, err = time.Parse(time.RFC3339Nano, changed)
	return e, err
}

// Search lists the records that hold every word, or a word that begins with it, the last changed first, at most so many.
// Without a word it lists all.
func (r *Register) Search(text string, most int) ([]Entry, error) {
	query, args := "SELECT "+entryColumns+" FROM records r ORDER BY r.changes DESC LIMIT ?", []any{most}
	if m := match(text); m != "" {
		query = "SELECT " + entryColumns + " FROM found f JOIN records r ON r.changes = f.rowid WHERE found MATCH ? ORDER BY f.rowid DESC LIMIT ?"
		args = []any{m, most}
	}
	rows, err := r.db.Query(query, args...)
	if err != nil {
		return nil, fmt.Errorf("register, search: %w", err)
	}
	defer func() { _ = rows.Close() }() // rows.Err says what went wrong
	var out []Entry
	for rows.Next() {
		e, err := scanEntry(rows)
		if err != nil {
			return nil, fmt.Errorf("register, search: %w", err)
		}
		out = append(out, e)
	}
	if err := rows.Err(); err != nil {
		return nil, fmt.Errorf("register, search: %w", err)
	}
	return out, nil
}

// match is the text as the database's query: each word quoted, so that nothing in it means anything, and open at its end.
func match(text string) string {
	var out []string
	for _, w := range strings.FieldsFunc(text, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsNumber(r) && !unicode.IsMark(r) }) {
		out = append(out, `"`+w+`"*`)
	}
	return strings.Join(out, " ")
}

// Count is how many records there are.
func (r *Register) Count() (int, error) {
	var n int
	if err := r.db.QueryRow("SELECT count(*) FROM records").Scan(&n); err != nil {
		return 0, fmt.Errorf("register: %w", err)
	}
	return n, nil
}

// From is the record last changed of those made of the same; false where there is none.
func (r *Register) From(origin string) (Entry, bool, error) {
	e, err := scanEntry(r.db.QueryRow("SELECT "+entryColumns+" FROM records r WHERE r.origin = ? ORDER BY r.changes DESC LIMIT 1", origin))
	if errors.Is(err, sql.ErrNoRows) {
		return Entry{}, false, nil
	}
	if err != nil {
		return Entry{}, false, fmt.Errorf("register: %w", err)
	}
	return e, true, nil
}
