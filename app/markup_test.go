package app

import (
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/qa"
	"lotpair/qa/figure/draw"
)

var update = flag.Bool("update", false, "write the golden files anew")

// TestWidgetsAreDrawnAsBefore holds what each widget of the window is made of against testdata/markup, in the toolkit's markup: a
// person reads what changed there.
func TestWidgetsAreDrawnAsBefore(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	got := map[string]fyne.CanvasObject{"spine": w.spine, "bench": w.bench, "foot": w.foot, "header": w.header}
	for name, k := range map[string]kind{"plain": plain, "main": main, "quiet": quiet, "choice": choice, "strong": strong, "word": word} {
		b := newButton(draw.Light, "Compare", k, nil)
		b.Resize(fyne.NewSize(160, 28))
		got["button-"+name] = b
		f := newButton(draw.Light, "Compare", k, nil)
		f.focused, f.chosen, f.disabled = true, k == choice, k == plain
		f.Resize(fyne.NewSize(160, 28))
		got["button-"+name+"-keys"] = f
	}
	failing := opened(t, demo(t), 1280, 800)
	failing.apply(func(s desk.State) desk.State { return s.Failed("Opening wall.csv", os.ErrNotExist) })
	got["banner-problem"] = failing.banner
	working := opened(t, demo(t), 1280, 800)
	working.apply(func(s desk.State) desk.State { return s.Working("Opening wall.csv", -1) })
	working.tell(working.jobs.number, qa.Progress{Doing: "taking the readings", Of: "wall.csv", Done: 3, Total: 8})
	got["banner-working"] = working.banner
	for name, o := range got {
		text := test.RenderObjectToMarkup(o)
		file := filepath.Join("testdata", "markup", name+".xml")
		if *update {
			if err := os.MkdirAll(filepath.Dir(file), 0o755); err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		want, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if strings.ReplaceAll(string(want), "\r\n", "\n") != text {
			t.Errorf("%s: differs from %s; go test ./app -run %s -update writes it anew", name, file, t.Name())
		}
	}
}
