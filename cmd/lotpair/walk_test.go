//go:build window && cgo

package main

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
)

// Each walk goes through the whole job in the real window: from an empty register to a signed and verified record of one's own
// two files. `go run ./cmd/dev screens` keeps a picture of each step.
var (
	walkPictures = flag.String("walk-pictures", "", "keep a picture of each step in `DIR`")
	walkSize     = flag.String("walk-size", "1280x800", "the window's `size`, in pixels")
	walkDark     = flag.Bool("walk-dark", false, "the dark colours")
)

// ownFiles are two files of readings, one a lot, as a person has them.
func ownFiles(t *testing.T, dir string) (reference, candidate string) {
	t.Helper()
	write := func(name string, shift float64) string {
		var b strings.Builder
		b.WriteString("Part;Wall [mm];Bore [mm]\n")
		for i := range 30 {
			fmt.Fprintf(&b, "%d;%.3f;%.3f\n", i+1, 4.0+shift+float64(i*7%11)/1000, 40.0-shift+float64(i*5%13)/1000)
		}
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(b.String()), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	return write("existing.csv", 0), write("second.csv", 0.002)
}

// walk starts the program with an empty register and nothing open.
func walk(t *testing.T, name string) (h *hand, dir string) {
	t.Helper()
	path, dir := program(t), t.TempDir()
	h = &hand{T: t, controls: filepath.Join(dir, "controls.txt")}
	if *walkPictures != "" {
		h.pictures = filepath.Join(*walkPictures, name)
		if err := os.MkdirAll(h.pictures, 0o755); err != nil {
			t.Fatal(err)
		}
	}
	t.Setenv("HOME", dir)
	t.Setenv("XDG_CONFIG_HOME", filepath.Join(dir, "config"))
	args := []string{"--controls", h.controls, "--register", filepath.Join(dir, "register")}
	if *walkDark {
		args = append(args, "--dark")
	}
	h.running = start(t, path, args...)
	h.id = appears(t, "^Lotpair$", h.running.gone)
	wide, high, ok := strings.Cut(*walkSize, "x")
	if !ok {
		t.Fatalf("size: found %q, want one such as 1280x800", *walkSize)
	}
	h.focus()
	h.tool("windowmove", h.id, "0", "0")
	h.resize(wide, high)
	return h, dir
}

const passphrase = "a walk on two feet"

// particulars are what a record must state before it is signed.
var particulars = [][2]string{{"Supports", "DEV-7"}, {"Part", "HS-40"}, {"Revision", "C"}}

// TestTheWholeJobByMouse uses the pointer for all but what must be typed.
func TestTheWholeJobByMouse(t *testing.T) {
	h, dir := walk(t, "mouse")
	began := time.Now()
	reference, candidate := ownFiles(t, dir)
	h.sees("No records yet")
	h.shot("register")
	h.click("New comparison")
	h.sees("Drop a spreadsheet here")
	h.shot("criterion-empty")
	for side, file := range []string{reference, candidate} {
		h.clickAt(h.lineOf("lot", side))
		h.writes([]string{"R-118", "C-022"}[side])
		h.clickAt(h.reads("Drop a spreadsheet here", 0))
		h.sees("Readings of the")
		h.shot("choosing")
		h.click(filepath.Base(file))
		h.sees("Readings from " + filepath.Base(file))
		h.shot("masked")
		h.click("Take headings and limits only")
		h.sees("The margin")
	}
	h.click("in the unit")
	h.clickAt(h.lineOf("margin ±", 0))
	h.writes("0.01")
	h.click("The claim") // anywhere else: what was typed is an act
	h.shot("criterion")
	h.click("Seal criterion")
	h.sees("sealed")
	h.shot("sealed")
	h.click("Take the readings")
	h.sees("Overall:")
	h.shot("decided")
	h.clickAt(h.scrolledTo("B2", h.reads("Findings, Wall", 0)))
	h.sees("Leave out")
	h.clickAt(h.lineOf("Reason", 0))
	h.writes("burr at the gauge, NCR-12")
	h.shot("leaving-out")
	h.click("Leave out")
	h.sees("Not compared")
	h.click("Compare")
	h.sees("Overall:")
	h.shot("compared-again")
	for _, look := range []string{"Order", "Shape", "Sensitivity", "Spread"} {
		h.click(look)
		h.shot("look-" + strings.ToLower(look))
	}
	h.click("More")
	h.shot("more")
	h.click("Make an identity…")
	key := filepath.Join(dir, "ada.p12")
	for label, text := range map[string]string{"Name": "Ada Example", "File": key, "Passphrase": passphrase, "The same again": passphrase} {
		h.clickAt(h.lineOf(label, 0))
		h.writes(text)
	}
	h.shot("identity")
	h.click("Make")
	h.sees("Identity of Ada Example")
	h.click("Sign as prepared") // which asks first for what a record must state
	for _, x := range particulars {
		h.clickAt(h.lineOf(x[0], 0))
		h.writes(x[1])
	}
	h.shot("particulars")
	h.click("Keep")
	h.sees("DEV-7")
	h.click("Sign as prepared")
	record := filepath.Join(dir, "record.xlsx")
	for _, x := range [][2]string{{"Workbook", record}, {"Passphrase", passphrase}} { // the identity is the one made last
		h.clickAt(h.lineOf(x[0], 0))
		h.writes(x[1])
	}
	h.shot("signing")
	h.click("Sign")
	h.sees("intact")
	h.shot("signed")
	h.click("All records")
	h.sees("prepared by Ada Example")
	h.shot("register-signed")
	h.click("Open a workbook")
	h.click("record.xlsx")
	h.sees("intact")
	h.shot("verified")
	t.Logf("by mouse: %d clicks and %d texts typed, %.0f seconds", h.clicks, h.pressed, time.Since(began).Seconds())
	h.press("ctrl+q")
	h.running.closes(t)
}

// TestTheWholeJobByKeys never moves the pointer.
func TestTheWholeJobByKeys(t *testing.T) {
	h, dir := walk(t, "keys")
	began := time.Now()
	reference, candidate := ownFiles(t, dir)
	h.sees("No records yet")
	h.press("ctrl+Return")
	h.sees("Drop a spreadsheet here")
	for side, file := range []string{reference, candidate} {
		h.tabToLine("lot", side)
		h.writes([]string{"R-118", "C-022"}[side])
		h.press("ctrl+o")
		h.sees("the folder above")
		if side == 0 {
			h.shot("choosing")
		}
		h.writes(file)
		h.press("Return")
		h.sees("Readings from " + filepath.Base(file))
		h.press("ctrl+Return")
		h.sees("The margin")
	}
	h.tabToButton("in the unit")
	h.press("space")
	h.tabToLine("margin ±", 0)
	h.writes("0.01")
	h.press("ctrl+Return")
	h.sees("sealed")
	h.shot("sealed")
	h.press("ctrl+Return")
	h.sees("Overall:")
	h.shot("decided")
	cell := h.reads("B2", 0)
	h.tabTo("the readings of the reference", func(c control) bool {
		return c.left < cell.left && c.right > cell.left && c.top < cell.top+400 && c.bottom > cell.top
	})
	h.press("Down", "Up", "Return")
	h.sees("Leave out")
	h.writes("burr at the gauge, NCR-12")
	h.shot("leaving-out")
	h.press("Return")
	h.sees("Not compared")
	h.press("ctrl+Return")
	h.sees("Overall:")
	h.press("2", "3", "4", "1")
	h.tabToButton("More")
	h.press("space")
	h.sees("Make an identity…")
	at := h.reads("Make an identity…", 0)
	n := 0
	for _, c := range h.seen() { // the lines of the menu above it
		if c.what == "text" && c.left == at.left && c.top < at.top {
			n++
		}
	}
	for range n + 1 {
		h.press("Down")
	}
	h.press("Return")
	key := filepath.Join(dir, "ada.p12")
	h.sees("The same again")
	for _, x := range [][2]string{{"Name", "Ada Example"}, {"File", key}, {"Passphrase", passphrase}, {"The same again", passphrase}} {
		h.tabToLine(x[0], 0)
		h.writes(x[1])
	}
	h.shot("identity")
	h.press("Return")
	h.sees("Identity of Ada Example")
	h.press("ctrl+Return")
	for _, x := range particulars {
		h.tabToLine(x[0], 0)
		h.writes(x[1])
	}
	h.press("Return")
	h.sees("DEV-7")
	h.press("ctrl+Return")
	h.sees("Sign this record")
	record := filepath.Join(dir, "record.xlsx")
	for _, x := range [][2]string{{"Workbook", record}, {"Passphrase", passphrase}} {
		h.tabToLine(x[0], 0)
		h.writes(x[1])
	}
	h.shot("signing")
	h.press("Return")
	h.sees("intact")
	h.press("ctrl+l")
	h.sees("prepared by Ada Example")
	h.press("ctrl+o")
	h.writes(record)
	h.press("Return")
	h.sees("intact")
	h.shot("verified")
	t.Logf("by keys: %s presses and texts, %.0f seconds", strconv.Itoa(h.pressed), time.Since(began).Seconds())
	h.press("ctrl+q")
	h.running.closes(t)
}
