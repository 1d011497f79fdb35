package register

import (
	"database/sql"
	"path/filepath"
	"time"
)

// Fill adds many records at once, as many single acts would.
func Fill(r *Register, n int, entry func(int) Entry, now time.Time) error {
	tx, err := r.db.Begin()
	if err != nil {
		return err
	}
	defer func() { _ = tx.Rollback() }()
	for i := range n {
		e := entry(i)
		if _, err := tx.Exec("INSERT INTO records (id, origin, title, supports, reference, candidate, verdict, signatures, changed, changes, acts) VALUES (?,?,?,?,?,?,?,?,?,?,1)",
			i+1, e.Origin, e.Title, e.Supports, e.Reference, e.Candidate, e.Verdict, e.Signatures, now.Format(time.RFC3339Nano), i+1); err != nil {
			return err
		}
		if err := insert(tx, int64(i+1), Act{Number: 1, Time: now, What: "opened", State: []byte("state")}); err != nil {
			return err
		}
		if _, err := tx.Exec("INSERT INTO found (rowid, words) VALUES (?, ?)", i+1, e.words()); err != nil {
			return err
		}
	}
	return tx.Commit()
}

// Raw is the database of a folder, past all rules.
func Raw(dir string) (*sql.DB, error) { return connect(filepath.Join(dir, database), "FULL") }

// Database is the name of the database's file.
const Database = database
