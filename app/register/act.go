package register

import (
	"crypto/sha256"
	"database/sql"
	"encoding/hex"
	"errors"
	"fmt"
	"time"
)

// Act is one entry of a record's trail, with what the record came to.
type Act struct {
	Number    int // from 1
	Time      time.Time
	Who, What string
	Attempt   string // of an act that ran a comparison: what was run, to count attempts by
	State     []byte // what the act came to
	Before    string // digest of the act before; empty for the first
	Digest    string
}

// digest is the SHA-256 of an act with the digest of the one before it.
func (a Act) digest() string {
	state := sha256.Sum256(a.State)
	text := fmt.Sprintf("%d %q %q %q %q %x %q", a.Number, a.Time.Format(time.RFC3339Nano), a.Who, a.What, a.Attempt, state, a.Before)
	sum := sha256.Sum256([]byte(text))
	return hex.EncodeToString(sum[:])
}

// ErrMoved says that another window did an act on the record in the meantime: the record must be opened again before this
// one acts on it.
var ErrMoved = errors.New("record: found an act of another window, want none since this window looked; open the record again")

// Add keeps a new record with its first act and returns the record's number.
func (r *Register) Add(e Entry, a Act) (Entry, error) {
	return r.keep(e, a)
}

// Keep appends an act to a record and shows the record in the list as e says; e.Acts is how many acts the caller knows of.
// When it returns without an error the act is on the disk.
func (r *Register) Keep(e Entry, a Act) (Entry, error) {
	if e.ID == 0 {
		return e, errors.New("record: found no number, want that of a record that was added")
	}
	return r.keep(e, a)
}

func (r *Register) keep(e Entry, a Act) (Entry, error) {
	if r.Aside() {
		return e, ErrAside
	}
	out, err := r.keepHere(e, a)
	if err == nil && r.Aside() { // it went where nobody looks: it is done again in the recovered one
		return e, ErrAside
	}
	return out, err
}

func (r *Register) keepHere(e Entry, a Act) (Entry, error) {
	fail := func(err error) (Entry, error) { return e, fmt.Errorf("register, %s: %w", a.What, err) }
	tx, err := r.db.Begin()
	if err != nil {
		return fail(err)
	}
	defer func() { _ = tx.Rollback() }() // after Commit this does nothing
	var change int64
	if err := tx.QueryRow("SELECT coalesce(max(changes), 0) + 1 FROM records").Scan(&change); err != nil {
		return fail(err)
	}
	e.Changed = a.Time
	changed := a.Time.Format(time.RFC3339Nano)
	if e.ID == 0 {
		e.Acts = 1
		done, err := tx.Exec("INSERT INTO records (origin, title, supports, reference, candidate, verdict, signatures, changed, changes, acts) VALUES (?,?,?,?,?,?,?,?,?,1)",
			e.Origin, e.Title, e.Supports, e.Reference, e.Candidate, e.Verdict, e.Signatures, changed, change)
		if err != nil {
			return fail(err)
		}
		if e.ID, err = done.LastInsertId(); err != nil {
			return fail(err)
		}
	} else {
		var acts int
		var was int64
		if err := tx.QueryRow("SELECT acts, changes FROM records WHERE id = ?", e.ID).Scan(&acts, &was); err != nil {
			return fail(err)
		}
		if acts != e.Acts {
			return e, ErrMoved
		}
		if err := tx.QueryRow("SELECT digest FROM acts WHERE record = ? AND number = ?", e.ID, acts).Scan(&a.Before); err != nil {
			return fail(err)
		}
		e.Acts++
		if _, err := tx.Exec("DELETE FROM found WHERE rowid = ?", was); err != nil {
			return fail(err)
		}
		if _, err := tx.Exec("UPDATE records SET title=?, supports=?, reference=?, candidate=?, verdict=?, signatures=?, changed=?, changes=?, acts=? WHERE id=?",
			e.Title, e.Supports, e.Reference, e.Candidate, e.Verdict, e.Signatures, changed, change, e.Acts, e.ID); err != nil {
			return fail(err)
		}
	}
	a.Number = e.Acts
	a.Digest = a.digest()
	if err := insert(tx, e.ID, a); err != nil {
		return fail(err)
	}
	if _, err := tx.Exec("INSERT INTO found (rowid, words) VALUES (?, ?)", change, e.words()); err != nil {
		return fail(err)
	}
	if err := tx.Commit(); err != nil {
		return fail(err)
	}
	_ = r.append(e, a) // the act is kept; the log is a second copy
	return e, nil
}

func insert(tx *sql.Tx, record int64, a Act) error {
	state := a.State
	if state == nil {
		state = []byte{}
	}
	_, err := tx.Exec("INSERT INTO acts (record, number, time, who, what, attempt, state, before, digest) VALUES (?,?,?,?,?,?,?,?,?)",
		record, a.Number, a.Time.Format(time.RFC3339Nano), a.Who, a.What, a.Attempt, state, a.Before, a.digest())
	return err
}

// Record is a record's entry and its acts in order. Acts that are not as they were kept are an error that says from where on.
func (r *Register) Record(id int64) (Entry, []Act, error) {
	e, err := scanEntry(r.db.QueryRow("SELECT "+entryColumns+" FROM records r WHERE r.id = ?", id))
	if err != nil {
		return Entry{}, nil, fmt.Errorf("register, record %d: %w", id, err)
	}
	acts, err := acts(r.db, id)
	if err != nil {
		return e, nil, fmt.Errorf("register, record %d: %w", id, err)
	}
	if n := whole(acts); n < len(acts) || n < e.Acts {
		return e, acts[:n], fmt.Errorf("register, record %d: found act %d missing or not as it was kept, want an unbroken trail; what stands before it is shown", id, n+1)
	}
	return e, acts, nil
}

func acts(db *sql.DB, id int64) ([]Act, error) {
	rows, err := db.Query("SELECT number, time, who, what, attempt, state, before, digest FROM acts WHERE record = ? ORDER BY number", id)
	if err != nil {
		return nil, err
	}
	defer func() { _ = rows.Close() }() // rows.Err says what went wrong
	var out []Act
	for rows.Next() {
		a, err := scanAct(rows)
		if err != nil {
			return out, err
		}
		out = append(out, a)
	}
	return out, rows.Err()
}

func scanAct(row interface{ Scan(...any) error }) (Act, error) {
	var a Act
	var at string
	err := row.Scan(&a.Number, &at, &a.Who, &a.What, &a.Attempt, &a.State, &a.Before, &a.Digest)
	if err != nil {
		return a, err
	}
	a.Time, err = time.Parse(time.RFC3339Nano, at)
	return a, err
}

// whole is how many acts from the first on are as they were kept.
func whole(acts []Act) int {
	before := ""
	for i, a := range acts {
		if a.Number != i+1 || a.Before != before || a.Digest != a.digest() {
			return i
		}
		before = a.Digest
	}
	return len(acts)
}

// Attempts counts the acts of all records that ran the same.
func (r *Register) Attempts(of string) (int, error) {
	var n int
	if err := r.db.QueryRow("SELECT count(*) FROM acts WHERE attempt = ? AND attempt <> ''", of).Scan(&n); err != nil {
		return 0, fmt.Errorf("register, attempts: %w", err)
	}
	return n, nil
}
