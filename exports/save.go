package exports

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"syscall"

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
		return notSaved(path, err)
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
		return notSaved(path, err)
	}
	if !bytes.Equal(now, before) {
		return fmt.Errorf("%s: found it changed since it was read, want it unchanged; sign again", path)
	}
	return write(path, data)
}

func write(path string, data []byte) error { return writeOn(computer{}, path, data) }

// disk is what writing needs of the computer; tests give their own, which fills up, forbids or fails.
type disk interface {
	create(dir string) (diskFile, error) // a new file of any name in the folder
	rename(from, to string) error
	remove(name string) error
	read(name string) ([]byte, error)
	settle(dir string) // makes a renaming last through a loss of power, where the system can
}

type diskFile interface {
	Name() string
	Write(b []byte) (int, error)
	Sync() error
	Chmod(mode fs.FileMode) error
	Close() error
}

// writeOn writes beside the file, syncs, renames and reads back. Whatever fails, the old file is as it was.
func writeOn(d disk, path string, data []byte) (err error) {
	f, err := d.create(filepath.Dir(path))
	if err != nil {
		return notSaved(path, err)
	}
	closed := false
	defer func() {
		if err != nil {
			if !closed {
				_ = f.Close()
			}
			_ = d.remove(f.Name())
			err = notSaved(path, err)
		}
	}()
	if _, err = f.Write(data); err != nil {
		return err
	}
	if err = f.Sync(); err != nil {
		return err
	}
	if err = f.Chmod(0o644); err != nil {
		return err
	}
	closed = true
	if err = f.Close(); err != nil {
		return err
	}
	// What lies on the disk is compared before it takes the place of the old file.
	back, err := d.read(f.Name())
	if err != nil {
		return err
	}
	if !bytes.Equal(back, data) {
		return errReadBack
	}
	if err = d.rename(f.Name(), path); err != nil {
		return err
	}
	d.settle(filepath.Dir(path))
	return nil
}

// errReadBack says that the disk gave back other bytes.
var errReadBack = errors.New("found other bytes on the disk than were written, want the same")

// NotSavedError says that nothing was written and what to do; what was there before is as it was.
type NotSavedError struct {
	Path string
	Err  error
}

func notSaved(path string, err error) error { return &NotSavedError{Path: path, Err: err} }

func (e *NotSavedError) Unwrap() error { return e.Err }

func (e *NotSavedError) Error() string {
	var step *fs.PathError
	var link *os.LinkError
	err := e.Err
	if errors.As(err, &step) {
		err = step.Err
	} else if errors.As(err, &link) {
		err = link.Err
	}
	found, do := "found "+err.Error()+", want a file that can be written", "choose another place"
	windows := func(code syscall.Errno) bool { return runtime.GOOS == "windows" && errors.Is(err, code) }
	switch {
	case errors.Is(err, syscall.ENOSPC), windows(112): // ERROR_DISK_FULL
		found, do = "found the disk full, want room for the file", "free some space or choose another disk"
	case windows(32), windows(33): // ERROR_SHARING_VIOLATION, ERROR_LOCK_VIOLATION
		found, do = "found the file open in another program, want it closed", "close it there and try again"
	case errors.Is(err, fs.ErrPermission):
		found, do = "found no permission to write here, want it", "choose another folder, or close the file where it is open"
	case errors.Is(err, fs.ErrNotExist):
		found, do = "found no such folder, want one that exists", "make it or choose another"
	case errors.Is(err, errReadBack):
		found, do = err.Error(), "check the disk and save elsewhere"
	}
	return fmt.Sprintf("%s: %s; %s; nothing was changed", e.Path, found, do)
}

// computer is the disk of the computer.
type computer struct{}

func (computer) create(dir string) (diskFile, error) { return os.CreateTemp(dir, ".lotpair-*") }
func (computer) rename(from, to string) error        { return os.Rename(from, to) }
func (computer) remove(name string) error            { return os.Remove(name) }
func (computer) read(name string) ([]byte, error)    { return os.ReadFile(name) }

func (computer) settle(dir string) {
	f, err := os.Open(dir)
	if err != nil {
		return
	}
	_ = f.Sync() // not every system can sync a folder
	_ = f.Close()
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
