//go:build window && cgo

package main

import (
	"bytes"
	"fmt"
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

// program builds the program and says where it is.
func program(t *testing.T) string {
	t.Helper()
	if os.Getenv("DISPLAY") == "" {
		t.Fatal("DISPLAY: found none, want a display; run it as check does, under Xvfb")
	}
	path := filepath.Join(t.TempDir(), "lotpair")
	build := exec.Command("go", "build", "-tags", "migrated_fynedo", "-o", path, ".")
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("build: %v\n%s", err, out)
	}
	return path
}

// running is the program while it runs.
type running struct {
	*exec.Cmd
	said bytes.Buffer
	gone chan error
}

func start(t *testing.T, path string, args ...string) *running {
	t.Helper()
	r := &running{Cmd: exec.Command(path, args...), gone: make(chan error, 1)}
	r.Stdout, r.Stderr = &r.said, &r.said
	if err := r.Start(); err != nil {
		t.Fatal(err)
	}
	go func() { r.gone <- r.Wait() }()
	t.Cleanup(func() { _ = r.Process.Kill() }) // it may have ended by itself
	return r
}

// press presses keys in the window of the name.
func (r *running) press(t *testing.T, name string, keys ...string) {
	t.Helper()
	id := appears(t, name, r.gone)
	for _, args := range [][]string{{"windowfocus", "--sync", id}, append([]string{"key", "--delay", "200"}, keys...)} {
		if out, err := tool(args...); err != nil {
			t.Fatalf("xdotool %v: %v %s", args, err, out)
		}
	}
}

// closes waits for a clean end.
func (r *running) closes(t *testing.T) {
	t.Helper()
	select {
	case err := <-r.gone:
		if err != nil {
			t.Fatalf("closed: got %v, want a clean end\n%s", err, r.said.String())
		}
	case <-time.After(30 * time.Second):
		t.Fatalf("the program did not end within 30 seconds after ctrl+q\n%s", r.said.String())
	}
	if strings.Contains(r.said.String(), "fyne.Do") {
		t.Errorf("the toolkit complains of a call from the wrong thread:\n%s", r.said.String())
	}
}

const demoTitle = "Hub shell HS-40: second foundry – Lotpair"

func TestTheWindowOpensAnswersAndCloses(t *testing.T) {
	path, dir := program(t), t.TempDir()
	acts := filepath.Join(dir, "acts.txt")
	r := start(t, path, "--acts", acts, "--register", filepath.Join(dir, "register"), filepath.Join("..", "..", "testdata", "demo", "plan.toml"))
	r.press(t, demoTitle, "Home", "Down", "Down")
	r.press(t, demoTitle, "ctrl+q")
	r.closes(t)
	got, err := os.ReadFile(acts)
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(string(got)), "\n")
	want := []string{"selected 1", "selected 2", "selected 3"}
	if len(lines) < 4 || !strings.HasPrefix(lines[0], "opened the plan") || !slices.Equal(lines[1:4], want) {
		t.Errorf("acts: got %q, want the plan opened, then %q", lines, want)
	}
}

// TestAKilledWindowOpensWhereItWas kills the program and starts it again without a file: the record lies open, on the line and
// in the look that it was left in. Closed by its user it opens with the register, from which return opens the record.
func TestAKilledWindowOpensWhereItWas(t *testing.T) {
	path, dir := program(t), t.TempDir()
	register := filepath.Join(dir, "register")
	r := start(t, path, "--register", register, filepath.Join("..", "..", "testdata", "demo", "plan.toml"))
	r.press(t, demoTitle, "End", "3")
	time.Sleep(time.Second)
	if err := r.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	<-r.gone
	acts := filepath.Join(dir, "acts.txt")
	r = start(t, path, "--acts", acts, "--register", register)
	r.press(t, demoTitle, "Up", "2", "ctrl+l")
	r.press(t, "^Lotpair$", "Return")
	r.press(t, demoTitle, "ctrl+q")
	r.closes(t)
	got, err := os.ReadFile(acts)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := filepath.Abs(filepath.Join("..", "..", "testdata", "demo", "plan.toml"))
	if err != nil {
		t.Fatal(err)
	}
	again := "opened the record again: " + plan
	want := []string{again, "selected 5", "looked at Order", "left the record", again}
	if lines := strings.Split(strings.TrimSpace(string(got)), "\n"); !slices.Equal(lines, want) {
		t.Errorf("acts: got %q, want %q", lines, want)
	}
}

// TestHeadingsToVerdictByKeyboard goes from a file of readings to a verdict without a mouse: the headings are taken masked, the margin
// is stated in the unit, the criterion sealed, the readings taken. Control and return do the one next thing.
func TestHeadingsToVerdictByKeyboard(t *testing.T) {
	path, dir := program(t), t.TempDir()
	var text strings.Builder
	text.WriteString("Lot;Part;Wall [mm]\n")
	for i := range 24 {
		lot := "R-118"
		if i >= 12 {
			lot = "C-022"
		}
		fmt.Fprintf(&text, "%s;%d;4.%02d\n", lot, i+1, i*7%11)
	}
	file, acts := filepath.Join(dir, "wall.csv"), filepath.Join(dir, "acts.txt")
	if err := os.WriteFile(file, []byte(text.String()), 0o600); err != nil {
		t.Fatal(err)
	}
	h := &hand{T: t, controls: filepath.Join(dir, "controls.txt")}
	h.running = start(t, path, "--acts", acts, "--controls", h.controls, "--register", filepath.Join(dir, "register"), file)
	h.id = appears(t, "Comparison without a title – Lotpair", h.running.gone)
	h.focus()
	h.sees("Readings from wall.csv")
	h.press("ctrl+Return")
	h.sees("The margin")
	h.tabToButton("in the unit")
	h.press("space")
	h.tabToLine("margin ±", 0)
	h.press("ctrl+a")
	h.writes("0.1")
	h.press("ctrl+Return")
	h.sees("sealed")
	h.press("ctrl+Return")
	h.sees("Overall:")
	h.press("ctrl+q")
	h.running.closes(t)
	got, err := os.ReadFile(acts)
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(string(got)), "\n")
	want := []string{
		"began a comparison", "took headings and limits of wall.csv, every reading masked", "margin: in the unit", "margin 0.1",
		"sealed the criterion", "took the readings of wall.csv and compared",
	}
	if len(lines) != len(want) {
		t.Fatalf("acts: got %q, want %q", lines, want)
	}
	for i := range want {
		if !strings.HasPrefix(lines[i], want[i]) {
			t.Errorf("act %d: got %q, want %q", i, lines[i], want[i])
		}
	}
}
