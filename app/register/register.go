package register

import (
	"database/sql"
	"errors"
	"fmt"
	"net/url"
	"os"
	"path/filepath"
	"time"

	_ "modernc.org/sqlite" // the database driver, without C
)

// Register is the open register of one folder. Its methods may be called from any goroutine.
type Register struct {
	dir  string
	db   *sql.DB // every commit is on the disk before it returns
	view *sql.DB // what may be lost with the power, not with the program

	opened os.FileInfo // the database's file
}

// database is the file of the database in the register's folder.
const database = "register.db"

// Open opens the register of a folder, which is made where there is none. A damaged database is put aside under a name with
// the time and what can be read of it is taken over; what was found is said.
func Open(dir string, now time.Time) (*Register, Damage, error) {
	if err := os.MkdirAll(filepath.Join(dir, "files"), 0o700); err != nil {
		return nil, Damage{}, fmt.Errorf("register: %w", err)
	}
	r, err := open(dir)
	if err == nil {
		return r, Damage{}, nil
	}
	if !Damaged(err) {
		return nil, Damage{}, fmt.Errorf("register in %s: %w", dir, err)
	}
	return Recover(dir, now)
}

// open opens the database, makes its tables where there are none, and reads through what a damage would show in.
func open(dir string) (*Register, error) {
	r := &Register{dir: dir}
	var err error
	if r.db, err = connect(filepath.Join(dir, database), "FULL"); err == nil {
		if r.view, err = connect(filepath.Join(dir, database), "NORMAL"); err == nil {
			if err = r.prepare(); err == nil {
				err = r.remember()
			}
		}
	}
	if err != nil {
		_ = r.Close() // the first error is the one that counts
		return nil, err
	}
	return r, nil
}

// connect opens one connection: a program does one thing at a time, and other programs are waited for.
func connect(path, synchronous string) (*sql.DB, error) {
	q := url.Values{"_pragma": {"busy_timeout(10000)", "journal_mode(WAL)", "synchronous(" + synchronous + ")", "foreign_keys(1)"}, "_txlock": {"immediate"}}
	db, err := sql.Open("sqlite", "file:"+filepath.ToSlash(path)+"?"+q.Encode())
	if err != nil {
		return nil, err
	}
	db.SetMaxOpenConns(1)
	return db, nil
}

// format is the number of the tables' form (PRAGMA user_version).
const format = 1

func (r *Register) prepare() error {
	tx, err := r.db.Begin()
	if err != nil {
		return err
	}
	defer func() { _ = tx.Rollback() }() // after Commit this does nothing
	var version int
	if err := tx.QueryRow("PRAGMA user_version").Scan(&version); err != nil {
		return err
	}
	switch version {
	case 0:
		if _, err := tx.Exec(tables); err != nil {
			return err
		}
		if _, err := tx.Exec(fmt.Sprintf("PRAGMA user_version = %d", format)); err != nil {
			return err
		}
	case format:
	default:
		return fmt.Errorf("found format %d, want %d; use the version of Lotpair that wrote it, or a later one", version, format)
	}
	if err := tx.Commit(); err != nil {
		return err
	}
	return r.look()
}

// tables are the tables of the register. found holds the words of each record under the number of its last change, so that the
// newest come first without sorting.
const tables = `
CREATE TABLE records (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  origin TEXT NOT NULL,
  title TEXT NOT NULL, supports TEXT NOT NULL, reference TEXT NOT NULL, candidate TEXT NOT NULL,
  verdict TEXT NOT NULL, signatures TEXT NOT NULL,
  changed TEXT NOT NULL, changes INTEGER NOT NULL UNIQUE,
  acts INTEGER NOT NULL, view BLOB
);
CREATE INDEX records_origin ON records(origin);
CREATE TABLE acts (
  record INTEGER NOT NULL REFERENCES records(id), number INTEGER NOT NULL,
  time TEXT NOT NULL, who TEXT NOT NULL, what TEXT NOT NULL, attempt TEXT NOT NULL, state BLOB NOT NULL,
  before TEXT NOT NULL, digest TEXT NOT NULL,
  UNIQUE (record, number)
);
CREATE INDEX acts_attempt ON acts(attempt) WHERE attempt <> '';
CREATE TRIGGER acts_kept BEFORE UPDATE ON acts BEGIN SELECT RAISE(ABORT, 'acts are only appended'); END;
CREATE TRIGGER acts_stay BEFORE DELETE ON acts BEGIN SELECT RAISE(ABORT, 'acts are only appended'); END;
CREATE VIRTUAL TABLE found USING fts5(words, content='', contentless_delete=1, prefix='1 2 3', tokenize='unicode61 remove_diacritics 2');
CREATE TABLE place (key INTEGER PRIMARY KEY CHECK (key = 1), record INTEGER NOT NULL);
INSERT INTO place VALUES (1, 0);`

// look reads the newest entries and the search's own tables: a damage near what is used shows at once.
func (r *Register) look() error {
	if _, err := r.Search("", 50); err != nil {
		return err
	}
	if _, err := r.Search("a", 50); err != nil {
		return err
	}
	if _, err := r.Place(); err != nil {
		return err
	}
	var n int
	return r.db.QueryRow("SELECT count(*) FROM acts WHERE record = (SELECT max(id) FROM records)").Scan(&n)
}

// Dir is the folder of the register.
func (r *Register) Dir() string { return r.dir }

// Close closes the register.
func (r *Register) Close() error {
	var all []error
	for _, db := range []*sql.DB{r.view, r.db} {
		if db != nil {
			all = append(all, db.Close())
		}
	}
	return errors.Join(all...)
}
