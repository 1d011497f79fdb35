package exports

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"lotpair/exports/opcsign"
)

// ExistsError says that nothing was written because something would be lost.
type ExistsError struct {
	Path   string
	Signed bool
	Kept   bool // a file that is never overwritten, signed or not
}

func (e *ExistsError) Error() string {
	if e.Signed {
		return fmt.Sprintf("%s: found a file that holds a signature, want another name; signed files are never overwritten", e.Path)
	}
	if e.Kept {
		return fmt.Sprintf("%s: found an existing file, want another name; an identity is never overwritten", e.Path)
	}
	return fmt.Sprintf("%s: found an existing file, want another name; use --force to overwrite it", e.Path)
}

// Save writes data to path so that either the whole file is there or nothing has changed: beside it, synced, renamed, read
// back and compared. An existing file is kept without force, and one that holds a signature always.
func Save(path string, data []byte, force bool) error {
	old, err := os.ReadFile(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
	case err != nil:
		return fmt.Errorf("%s: %w", path, err)
	case opcsign.HasSignature(old):
		return &ExistsError{Path: path, Signed: true}
	case !force:
		return &ExistsError{Path: path}
	}
	return write(path, data)
}

// Replace writes data over a file that must still hold what was read from it before: how a signature is added.
func Replace(path string, before, data []byte) error {
	now, err := os.ReadFile(path)
	if err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if !bytes.Equal(now, before) {
		return fmt.Errorf("%s: found it changed since it was read, want it unchanged; sign again", path)
	}
	return write(path, data)
}

func write(path string, data []byte) (err error) {
	f, err := os.CreateTemp(filepath.Dir(path), ".lotpair-*")
	if err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	defer func() {
		if err != nil {
			_ = f.Close()
			_ = os.Remove(f.Name())
		}
	}()
	if _, err = f.Write(data); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if err = f.Sync(); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if err = f.Chmod(0o644); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if err = f.Close(); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if err = os.Rename(f.Name(), path); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	back, err := os.ReadFile(path)
	if err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if !bytes.Equal(back, data) {
		return fmt.Errorf("%s: found other bytes than were written, want the same; check the disk", path)
	}
	return nil
}

// SaveSecret writes a new file that only its owner may read; an existing one is never overwritten.
func SaveSecret(path string, data []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600)
	if errors.Is(err, fs.ErrExist) {
		return &ExistsError{Path: path, Kept: true}
	}
	if err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	_, err = f.Write(data)
	if e := f.Sync(); err == nil {
		err = e
	}
	if e := f.Close(); err == nil {
		err = e
	}
	if err != nil {
		_ = os.Remove(path)
		return fmt.Errorf("%s: %w", path, err)
	}
	return nil
}
