package exports

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// faulty is the computer's disk with one step that fails.
type faulty struct {
	computer
	at  string
	err error
}

type faultyFile struct {
	diskFile
	f faulty
}

func (f faulty) create(dir string) (diskFile, error) {
	if f.at == "create" {
		return nil, &fs.PathError{Op: "open", Path: dir, Err: f.err}
	}
	d, err := f.computer.create(dir)
	return faultyFile{d, f}, err
}

func (f faulty) rename(from, to string) error {
	if f.at == "rename" {
		return &os.LinkError{Op: "rename", Old: from, New: to, Err: f.err}
	}
	return f.computer.rename(from, to)
}

func (f faulty) read(name string) ([]byte, error) {
	b, err := f.computer.read(name)
	if f.at == "bits" {
		b[len(b)/2] ^= 1
	}
	return b, err
}

func (f faultyFile) Write(b []byte) (int, error) {
	if f.f.at == "write" { // half of it goes on the disk
		n, _ := f.diskFile.Write(b[:len(b)/2])
		return n, &fs.PathError{Op: "write", Path: f.Name(), Err: f.f.err}
	}
	return f.diskFile.Write(b)
}

func (f faultyFile) Sync() error {
	if f.f.at == "sync" {
		return f.f.err
	}
	return f.diskFile.Sync()
}

func (f faultyFile) Close() error {
	err := f.diskFile.Close()
	if f.f.at == "close" {
		return f.f.err
	}
	return err
}

// TestSaveFaults lets each step of writing fail: the old file is as it was, nothing is left beside it, and the message says
// what to do.
func TestSaveFaults(t *testing.T) {
	for _, c := range []struct {
		at   string
		err  error
		want string
	}{
		{"create", syscall.EACCES, "no permission"},
		{"create", syscall.ENOENT, "no such folder"},
		{"write", syscall.ENOSPC, "disk full"},
		{"sync", syscall.ENOSPC, "disk full"},
		{"sync", syscall.EIO, "choose another place"},
		{"close", syscall.EIO, "choose another place"},
		{"bits", nil, "other bytes"},
		{"rename", syscall.EPERM, "no permission"},
	} {
		dir := t.TempDir()
		path := filepath.Join(dir, "r.xlsx")
		if err := os.WriteFile(path, []byte("old"), 0o600); err != nil {
			t.Fatal(err)
		}
		err := writeOn(faulty{at: c.at, err: c.err}, path, bytes.Repeat([]byte("new"), 1000))
		var not *NotSavedError
		if !errors.As(err, &not) || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), "nothing was changed") {
			t.Errorf("%s, %v: got %v, want it to say %q", c.at, c.err, err, c.want)
		}
		if b, err := os.ReadFile(path); err != nil || string(b) != "old" {
			t.Errorf("%s: the old file: got %.20q, %v", c.at, b, err)
		}
		if left, _ := os.ReadDir(dir); len(left) != 1 {
			t.Errorf("%s: left behind: %v", c.at, left)
		}
	}
}

// halfWay writes half of the file, says so and waits to be killed.
type halfWay struct{ computer }

type halfFile struct{ diskFile }

func (h halfWay) create(dir string) (diskFile, error) {
	f, err := h.computer.create(dir)
	return halfFile{f}, err
}

func (h halfFile) Write(b []byte) (int, error) {
	n, err := h.diskFile.Write(b[:len(b)/2])
	fmt.Println("half", n, err)
	select {}
}

// TestSaveKilled kills a program half-way through writing: the old file is as it was.
func TestSaveKilled(t *testing.T) {
	const name = "LOTPAIR_TEST_SAVE"
	if path := os.Getenv(name); path != "" { // the program that is killed
		_ = writeOn(halfWay{}, path, bytes.Repeat([]byte("new"), 100000))
		return
	}
	path := filepath.Join(t.TempDir(), "r.xlsx")
	if err := os.WriteFile(path, []byte("old"), 0o600); err != nil {
		t.Fatal(err)
	}
	c := exec.Command(os.Args[0], "-test.run=^TestSaveKilled$")
	c.Env = append(os.Environ(), name+"="+path)
	out, err := c.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	line, err := bufio.NewReader(out).ReadString('\n')
	if err != nil || !strings.HasPrefix(line, "half ") {
		t.Errorf("got %q, %v", line, err)
	}
	if err := c.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	_ = c.Wait() // it was killed
	if b, err := os.ReadFile(path); err != nil || string(b) != "old" {
		t.Errorf("the old file: got %.20q, %v", b, err)
	}
	if err := Save(path, []byte("new"), true); err != nil {
		t.Errorf("saving again: %v", err)
	}
}
