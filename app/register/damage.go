package register

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"time"

	"modernc.org/sqlite"
	sqlite3 "modernc.org/sqlite/lib"
)

// Damage says what was found when a damaged database was opened. Its zero value says that nothing was damaged.
type Damage struct {
	Kept              string // where the damaged database lies now
	Records, Acts     int    // taken over
	LostActs, Unnamed int    // acts that could not be read or follow a gap; records known by their acts alone
}

// String says it in a sentence; empty where nothing was damaged.
func (d Damage) String() string {
	if d.Kept == "" {
		return ""
	}
	s := fmt.Sprintf("The register was damaged. Taken over: %d records with %d acts. Not readable: %d acts that are known of", d.Records, d.Acts, d.LostActs)
	if d.Unnamed > 0 {
		s += fmt.Sprintf("; %d records lost their names and are listed by number", d.Unnamed)
	}
	return s + ". The damaged database was kept as " + d.Kept + "; the source files lie beside it as they were."
}

// Damaged says whether an error means that the database itself is broken: then the register is to be closed and recovered.
func Damaged(err error) bool {
	var e *sqlite.Error
	if !errors.As(err, &e) {
		return false
	}
	switch e.Code() & 0xff {
	case sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB, sqlite3.SQLITE_FORMAT:
		return true
	case sqlite3.SQLITE_ERROR: // a table that should be there is not
		return true
	}
	return false
}

// Recover puts a damaged database aside, under a name with the time, and takes over what can be read of it. The register must
// not be open.
func Recover(dir string, now time.Time) (*Register, Damage, error) {
	d := Damage{Kept: filepath.Join(dir, "register-damaged-"+now.UTC().Format("20060102T150405.000")+".db")}
	for _, suffix := range []string{"", "-wal"} { // what is in the log belongs to it; the index of the log is made anew
		if err := os.Rename(filepath.Join(dir, database+suffix), d.Kept+suffix); err != nil && !errors.Is(err, os.ErrNotExist) {
			return nil, d, fmt.Errorf("register: %w", err)
		}
	}
	if err := os.Remove(filepath.Join(dir, database+"-shm")); err != nil && !errors.Is(err, os.ErrNotExist) {
		return nil, d, fmt.Errorf("register: %w", err)
	}
	r, err := open(dir)
	if err != nil {
		return nil, d, fmt.Errorf("register in %s: %w", dir, err)
	}
	old, err := connect(d.Kept, "OFF")
	if err != nil {
		_ = r.Close() // the first error is the one that counts
		return nil, d, fmt.Errorf("register: %w", err)
	}
	defer func() { _ = old.Close() }() // it is read no more
	s := salvage{from: old, to: r, damage: &d}
	if err := s.all(); err != nil {
		_ = r.Close() // the first error is the one that counts
		return nil, d, fmt.Errorf("register: %w", err)
	}
	return r, d, nil
}
