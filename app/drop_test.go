package app

import (
	"path/filepath"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/storage"

	"lotpair/qa"
)

// TestAFileIsDroppedOnItsPage drops a file on each place of the window, and two at once.
func TestAFileIsDroppedOnItsPage(t *testing.T) {
	file := storage.NewFileURI(filepath.Join(inFolder(t), "Reference.csv"))
	for at, want := range map[fyne.Position]qa.Side{{X: 100, Y: 300}: qa.Reference, {X: 1200, Y: 300}: qa.Candidate, {X: 640, Y: 300}: ""} {
		w := opened(t, "", 1280, 800)
		w.beginComparison()
		w.dropped(at, []fyne.URI{file})
		noProblem(t, w)
		if w.state.Sheet == nil || w.state.Sheet.Side != want {
			t.Errorf("dropped at %v: got %+v, want it on the page %q", at, w.state.Sheet, want)
		}
	}
	w := opened(t, demo(t), 1280, 800)
	before := w.state.Number
	w.dropped(fyne.NewPos(100, 300), []fyne.URI{file, file})
	if w.state.Problem.Text == "" || w.state.Number != before || w.banner.Hidden {
		t.Errorf("two files: got %+v, want a refusal that is shown", w.state.Problem)
	}
}
