package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/qa"
)

// TestEveryFormOpensAndIsLeft opens every form and text of the window at both sizes, and leaves it by its keys.
func TestEveryFormOpensAndIsLeft(t *testing.T) {
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		folder := t.TempDir()
		d := openedWith(t, inRegister(t, folder), "", size.Width, size.Height)
		d.beginComparison()
		d.open(sheetFile(t), readFile)
		d.takeHeadings()
		w := openedWith(t, inRegister(t, t.TempDir()), demo(t), size.Width, size.Height)
		sealed := decided(t, t.TempDir())
		for name, x := range map[string]struct {
			w  *window
			do func()
		}{
			"terms": {d, d.askTerms}, "characteristic": {d, func() { d.askCharacteristic(1) }}, "particulars": {d, d.askParticulars}, "size": {d, d.askSize},
			"save-plan": {w, w.askSavePlan}, "supersede": {w, w.askSupersede}, "sign": {w, w.askSign}, "words": {w, w.showWords}, "keys": {w, w.showKeys},
			"trail": {w, w.showTrail}, "identity-new": {w, w.askNewIdentity}, "identity-show": {w, w.askShowIdentity}, "qualify": {w, w.askQualify},
			"trust": {w, w.showTrusted}, "about": {w, w.showAbout}, "licences": {w, w.showLicences}, "seal": {sealed, sealed.askSaveSeal}, "amend": {sealed, sealed.askAmend},
			"particulars-decided": {w, w.askParticulars},
		} {
			x.do()
			if x.w.dialog == nil {
				t.Errorf("%s: got no dialog", name)
				continue
			}
			shotOf(t, "form-"+name+"-"+qa.Plain(float64(size.Width)), x.w.win.Canvas().Capture())
			if top := x.w.win.Canvas().Overlays().Top(); top != nil {
				for _, o := range test.LaidOutObjects(top) {
					if b, ok := o.(*button); ok && b.label == "" {
						t.Errorf("%s: found a button without a name", name)
					}
				}
			}
			x.w.leaveDialog()
			if x.w.dialog != nil {
				t.Errorf("%s: it stays open", name)
			}
		}
		w.offerMore()
		shotOf(t, "more-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
	}
}

// TestKeysAreSeenInALongForm walks through a form that is longer than its place: what has the keys is in sight.
func TestKeysAreSeenInALongForm(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1024, 700)
	w.beginComparison()
	w.open(sheetFile(t), readFile)
	w.takeHeadings()
	w.askCharacteristic(0)
	focused := 0
	for range 40 {
		w.win.Canvas().(interface{ FocusNext() }).FocusNext()
		if f, ok := w.win.Canvas().Focused().(*field); ok && f.Text == "" {
			focused++
		}
	}
	if focused < 10 {
		t.Errorf("got the keys on %d lines, want all of the form", focused)
	}
	shotOf(t, "form-walked", w.win.Canvas().Capture())
	w.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if w.dialog != nil {
		t.Error("escape: it stays open")
	}
}

// TestCopies copies what the bench says, and all characteristics.
func TestCopies(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	w.copyBench()
	if got := w.app.Clipboard().Content(); !strings.HasPrefix(got, w.view.bench.Name+": ") || !strings.Contains(got, "\n") {
		t.Errorf("bench: got %q", got)
	}
	w.copyTable()
	lines := strings.Split(w.app.Clipboard().Content(), "\n")
	if len(lines) != 7 || strings.Count(lines[1], "\t") != 8 {
		t.Errorf("table: got %q", lines)
	}
}

// TestEverySentenceIsExplained clicks on each sentence and presses return on all of them.
func TestEverySentenceIsExplained(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	y := float32(0)
	for i, g := range w.paragraphs(w.sentences.content.width) {
		w.sentences.content.Tapped(&fyne.PointEvent{Position: fyne.NewPos(60, y+g.above+2)})
		if w.dialog == nil {
			t.Errorf("sentence %d %q: got no help", i, g.lines)
		}
		if i == 1 {
			shotOf(t, "plain-words", w.win.Canvas().Capture())
		}
		w.leaveDialog()
		y += g.above + g.leading*float32(len(g.lines))
	}
	w.sentences.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	if w.dialog == nil {
		t.Error("return: got no help")
	}
	w.leaveDialog()
	for _, c := range []struct{ text, word string }{
		{"Ppk falls from 1.88 to 0.58; expected outside the limits: 4.0 %", "Pp, Ppk"},
		{"The difference is detectable: two-sided p < 0.0001, Welch, 66.4 degrees of freedom.", "degrees of freedom"},
		{"The interval crosses the margin.", "margin"},
	} {
		found := false
		for _, x := range desk.WordsIn(c.text) {
			found = found || x.Word == c.word
		}
		if !found {
			t.Errorf("%q: got no %q among %v", c.text, c.word, desk.WordsIn(c.text))
		}
	}
	if got := desk.WordsIn("The lots are mapped."); len(got) != 1 || got[0].Word != "lot" {
		t.Errorf("got %v, want the lot alone", got)
	}
}

// TestPasteAndJSON brings in cells from the clipboard and saves a result for other programs.
func TestPasteAndJSON(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1280, 800)
	w.paste()
	if w.state.Problem.Text == "" {
		t.Error("an empty clipboard: got no problem")
	}
	w.apply(desk.State.Read)
	text := "Lot\tPart\tBore [mm]\n"
	for i := range 12 {
		text += []string{"A", "B"}[i/6] + "\t" + qa.Plain(float64(i+1)) + "\t40.0" + qa.Plain(float64(10+i*7%13)) + "\n"
	}
	w.app.Clipboard().SetContent(text)
	w.paste()
	noProblem(t, w)
	if w.state.Sheet == nil || !w.state.Sheet.Masked || len(w.sheetSaid.Taken) != 2 {
		t.Fatalf("pasted: got %+v", w.sheetSaid)
	}
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	w.takeKept()
	noProblem(t, w)
	to := filepath.Join(t.TempDir(), "result.json")
	res := w.state.Record.Result
	w.saveBytes("Result", to, func() ([]byte, error) { return exports.ResultJSON(res) })
	noProblem(t, w)
	data, err := os.ReadFile(to)
	if err != nil || !strings.Contains(string(data), "lotpair.result/1") {
		t.Errorf("JSON: got %.60s, %v", data, err)
	}
}

// TestParticularsAfterTheComparison states them without another attempt, and not what would change the verdict.
func TestParticularsAfterTheComparison(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), demo(t), 1280, 800)
	before := w.state.Record.Result
	p := w.state.Record.Plan
	p.Record.Revision = "D"
	w.keepParticulars(p)
	noProblem(t, w)
	if r := w.state.Record; r.Plan.Record.Revision != "D" || r.Result.Attempts != before.Attempts || r.Result.Verdict != before.Verdict {
		t.Errorf("stated: got %+v", r.Plan.Record)
	}
	alpha := 0.2
	p.Criterion.Alpha = &alpha
	w.keepParticulars(p)
	if w.state.Problem.Text == "" {
		t.Error("another alpha: got it taken as a particular")
	}
	w.apply(desk.State.Read)
	w.undo()
	if w.state.Record.Plan.Record.Revision == "D" {
		t.Error("undo: got the revision still there")
	}
}
