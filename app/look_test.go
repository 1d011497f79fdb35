package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
)

// TestKeysChooseTheLook presses 1 to 5 with the keys anywhere in the window.
func TestKeysChooseTheLook(t *testing.T) {
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		w := opened(t, demo(t), size.Width, size.Height)
		for _, press := range []func(*fyne.KeyEvent){w.win.Canvas().OnTypedKey(), w.spineRows.content.TypedKey, w.act.export.TypedKey, w.leftRows.content.TypedKey} {
			for _, c := range []struct {
				key  fyne.KeyName
				want desk.Look
			}{{fyne.Key2, desk.Order}, {fyne.Key3, desk.Shape}, {fyne.Key4, desk.Sensitivity}, {fyne.Key5, desk.Limits}, {fyne.Key1, desk.Spread}} {
				press(&fyne.KeyEvent{Name: c.key})
				if got := w.state.Shown(); got != c.want {
					t.Fatalf("key %s: got %v, want %v", c.key, got, c.want)
				}
				for _, x := range crowded(w) {
					t.Errorf("%v at %v: %s", c.want, size.Width, x)
				}
			}
		}
	}
}

// TestEveryLookIsSaved saves the picture of each way of looking and looks at each; with -pictures they are kept.
func TestEveryLookIsSaved(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	seen := map[string]bool{}
	for _, l := range w.view.bench.Looks {
		w.act.looks[l.Look].act()
		if got := w.state.Shown(); got != l.Look {
			t.Errorf("%s: got %v", l.Name, got)
		}
		shotOf(t, "bench-"+strings.ToLower(l.Name), w.win.Canvas().Capture())
		to := filepath.Join(t.TempDir(), l.Name+".svg")
		w.savePicture(to)
		noProblem(t, w)
		data, err := os.ReadFile(to)
		if err != nil || seen[string(data)] {
			t.Errorf("%s: got the picture of another look, or %v", l.Name, err)
		}
		seen[string(data)] = true
	}
	if len(seen) < 4 {
		t.Errorf("looks: got %d, want at least 4", len(seen))
	}
}
