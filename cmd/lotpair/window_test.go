//go:build window && cgo

package main

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

// The tests in this file start the real program on the display that DISPLAY names and use it by the keys that a user has.

// tool runs xdotool and gives what it printed.
func tool(args ...string) (string, error) {
	out, err := exec.Command("xdotool", args...).CombinedOutput()
	return strings.TrimSpace(string(out)), err
}

// appears waits for a window of the name.
func appears(t *testing.T, name string, gone <-chan error) string {
	t.Helper()
	for end := time.Now().Add(60 * time.Second); time.Now().Before(end); time.Sleep(200 * time.Millisecond) {
		if id, err := tool("search", "--name", name); err == nil && id != "" {
			return strings.Fields(id)[0]
		}
		select {
		case err := <-gone:
			t.Fatalf("the program ended before its window appeared: %v", err)
		default:
		}
	}
	t.Fatalf("no window %q within a minute", name)
	return ""
}

func TestTheWindowOpensAnswersAndCloses(t *testing.T) {
	if os.Getenv("DISPLAY") == "" {
		t.Fatal("DISPLAY: found none, want a display; run it as check does, under Xvfb")
	}
	dir := t.TempDir()
	program, acts := filepath.Join(dir, "lotpair"), filepath.Join(dir, "acts.txt")
	build := exec.Command("go", "build", "-tags", "migrated_fynedo", "-o", program, ".")
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("build: %v\n%s", err, out)
	}
	var said bytes.Buffer
	c := exec.Command(program, "--acts", acts, "--register", filepath.Join(dir, "register"), filepath.Join("..", "..", "testdata", "demo", "plan.toml"))
	c.Stdout, c.Stderr = &said, &said
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	gone := make(chan error, 1)
	go func() { gone <- c.Wait() }()
	defer func() { _ = c.Process.Kill() }() // it may have ended by itself

	id := appears(t, "Hub shell HS-40: second foundry – Lotpair", gone)
	for _, args := range [][]string{
		{"windowfocus", "--sync", id},
		{"key", "--delay", "200", "Home", "Down", "Down"},
		{"key", "--delay", "200", "ctrl+q"},
	} {
		if out, err := tool(args...); err != nil {
			t.Fatalf("xdotool %v: %v %s", args, err, out)
		}
	}
	select {
	case err := <-gone:
		if err != nil {
			t.Fatalf("closed: got %v, want a clean end\n%s", err, said.String())
		}
	case <-time.After(30 * time.Second):
		t.Fatalf("the program did not end within 30 seconds after ctrl+q\n%s", said.String())
	}
	got, err := os.ReadFile(acts)
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(string(got)), "\n")
	want := []string{"selected 1", "selected 2", "selected 3"}
	if len(lines) < 4 || !strings.HasPrefix(lines[0], "opened the plan") || !slices.Equal(lines[1:4], want) {
		t.Errorf("acts: got %q, want the plan opened, then %q", lines, want)
	}
	if strings.Contains(said.String(), "fyne.Do") {
		t.Errorf("the toolkit complains of a call from the wrong thread:\n%s", said.String())
	}
}
