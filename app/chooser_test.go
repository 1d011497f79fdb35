package app

import (
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/qa"
)

// inFolder is a folder with files to choose among.
func inFolder(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	text := "Lot,Wall [mm]\nR,4.01\nR,4.02\nR,4.00\nR,4.03\n"
	for _, name := range []string{"Reference.csv", "candidate.CSV", "notes.md", filepath.Join("more", "third.csv")} {
		if err := os.MkdirAll(filepath.Dir(filepath.Join(dir, name)), 0o700); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

// choosing is a window with the chooser open in a folder.
func choosing(t *testing.T, dir string) (*window, *pathLine) {
	t.Helper()
	w := opened(t, "", 1280, 800)
	w.opens(filepath.Join(dir, "gone.csv")) // was here once: its folder is where to look
	w.beginComparison()
	w.askBring(qa.Candidate)
	l, ok := w.win.Canvas().Focused().(*pathLine)
	if !ok {
		t.Fatalf("keys: got %T, want the line for the name", w.win.Canvas().Focused())
	}
	return w, l
}

func seenIn(w *window) string {
	var all []string
	for _, line := range strings.Split(w.controls(), "\n") {
		if f := strings.Split(line, "\t"); f[0] == "text" {
			all = append(all, f[len(f)-1])
		}
	}
	return strings.Join(all, "|")
}

func TestAFileIsChosenByKeys(t *testing.T) {
	dir := inFolder(t)
	w, l := choosing(t, dir)
	if got, want := l.Text, dir+string(filepath.Separator); got != want {
		t.Fatalf("folder: got %q, want %q", got, want)
	}
	if got := seenIn(w); !strings.Contains(got, "candidate.CSV|") || !strings.Contains(got, "Reference.csv") || strings.Contains(got, "notes.md") || strings.Contains(got, "gone.csv") {
		t.Errorf("list: got %q", got)
	}
	test.Type(l, "ref")
	if got := seenIn(w); strings.Contains(got, "candidate.CSV") {
		t.Errorf("narrowed: got %q", got)
	}
	l.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	if w.dialog != nil || w.state.Sheet == nil || w.state.Sheet.File.Name != "Reference.csv" || w.state.Sheet.Side != qa.Candidate {
		t.Fatalf("chosen: got %+v, %+v", w.state.Problem, w.state.Sheet)
	}
	if got := w.recent(); len(got) != 2 || got[0] != filepath.Join(dir, "Reference.csv") {
		t.Errorf("recent: got %q", got)
	}
}

func TestAFolderIsEnteredByClicks(t *testing.T) {
	dir := inFolder(t)
	w, l := choosing(t, dir)
	click := func(text string) {
		t.Helper()
		for _, line := range strings.Split(w.controls(), "\n") {
			if f := strings.Split(line, "\t"); f[0] == "text" && f[5] == text {
				test.TapCanvas(w.win.Canvas(), fyne.NewPos(parsed(t, f[1])+5, parsed(t, f[2])+8))
				return
			}
		}
		t.Fatalf("found no %q in %q", text, seenIn(w))
	}
	click("more" + string(filepath.Separator))
	if want := filepath.Join(dir, "more") + string(filepath.Separator); l.Text != want {
		t.Fatalf("entered: got %q, want %q", l.Text, want)
	}
	click("..")
	click("more" + string(filepath.Separator))
	click("third.csv")
	if w.dialog != nil || w.state.Sheet == nil || w.state.Sheet.File.Name != "third.csv" {
		t.Errorf("chosen: got %+v", w.state.Problem)
	}
}

func TestEscapeLeavesTheChooserAlone(t *testing.T) {
	w, l := choosing(t, inFolder(t))
	l.SetText("/nowhere/at/all/")
	if got := seenIn(w); !strings.Contains(got, "no such file") && !strings.Contains(got, "cannot find") {
		t.Errorf("a folder that is not there: got %q", got)
	}
	l.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if w.dialog != nil || !w.state.Drafting || w.win.Canvas().Overlays().Top() != nil {
		t.Error("escape: the chooser is still there, or the criterion is not")
	}
}

func parsed(t *testing.T, number string) float32 {
	t.Helper()
	v, err := strconv.ParseFloat(number, 32)
	if err != nil {
		t.Fatal(err)
	}
	return float32(v)
}
