package app

import (
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// typing types into a line and leaves it, as a person does.
func typing(w *window, name, text string) {
	l := w.draft[name].line
	l.FocusGained()
	l.SetText(text)
	l.FocusLost()
}

// sheetFile is the readings of the worked example in a folder of its own.
func sheetFile(t testing.TB) string {
	t.Helper()
	return filepath.Join(filepath.Dir(demo(t)), "hub-shell.xlsx")
}

// TestFromTwoFilesToAVerdict goes the whole way in the window: a file brought in masked, its headings taken, the criterion
// written and sealed, the readings taken.
func TestFromTwoFilesToAVerdict(t *testing.T) {
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		folder := t.TempDir()
		w := openedWith(t, inRegister(t, folder), "", size.Width, size.Height)
		shot := func(name string) {
			t.Helper()
			shotOf(t, name+"-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
			for _, x := range crowded(w) {
				t.Errorf("%s at %v: %s", name, size.Width, x)
			}
		}
		w.beginComparison()
		shot("draft-empty")
		w.open(sheetFile(t), readFile)
		noProblem(t, w)
		if w.state.Sheet == nil || !w.state.Sheet.Masked {
			t.Fatal("a file of readings: got no masked sheet")
		}
		shot("reading-masked")
		for i := range w.sheetSaid.Rows {
			for k, c := range w.state.Sheet.Row(i).Cells {
				if k >= 2 && i >= 5 && c.Text != "" && c.Text != "•••" {
					t.Fatalf("masked: got %q in row %d", c.Text, i)
				}
			}
		}
		w.takeHeadings()
		noProblem(t, w)
		if n := len(w.state.Record.Plan.Characteristics); n != 6 || w.state.Seen {
			t.Errorf("headings: got %d characteristics, seen %v, want 6 unseen", n, w.state.Seen)
		}
		shot("draft-headings")
		w.chooseKind(desk.PartOfTolerance)
		for i, c := range w.state.Record.Plan.Characteristics {
			if c.Lower == nil { // the run-out has one limit
				c.Objective, c.Margin = qa.NotHigher, &qa.Margin{Absolute: ptrTo(0.008)}
				w.keepCharacteristic(i, c)
			}
			w.apply(func(s desk.State) desk.State { return s.WithSelected(i) })
			sd := map[string]string{"Bore diameter": "0.005", "Wall thickness": "0,02", "Flange run-out": "0.009"}[c.Name]
			if sd == "" {
				sd = "0.02"
			}
			typing(w, "standard deviation", sd)
			noProblem(t, w)
		}
		w.apply(func(s desk.State) desk.State { return s.WithSelected(1) })
		if got := w.drafted.Rows[1]; got.SD != "0.02" || got.Margin != "±0.02 mm" || got.Parts == "" || got.Permits == "" {
			t.Errorf("wall: got %+v", got)
		}
		typing(w, "reference source", "Existing foundry")
		typing(w, "alpha", "five")
		if w.state.Problem.Text != "" {
			t.Errorf("a faulty number: got a problem %q", w.state.Problem.Text)
		}
		shot("draft-written")
		w.sealDraft()
		noProblem(t, w)
		if !w.state.Sealed() || w.state.Record.Result.Seal.Readings != "unopened" {
			t.Errorf("seal: got %+v", w.state.Record.Result.Seal)
		}
		shot("draft-sealed")
		typing(w, "alpha", "0.2")
		if got := *w.state.Record.Plan.Criterion.Alpha; got != 0.05 {
			t.Errorf("alpha after the seal: got %v, want 0.05", got)
		}
		w.apply(desk.State.Read)
		// A program that is killed here goes on here, without the file.
		id := w.entry.ID
		w = openedWith(t, inRegister(t, folder), "", size.Width, size.Height)
		w.begin("", "", nil)
		noProblem(t, w)
		if w.entry.ID != id || !w.state.Sealed() || w.view.foot.Take == "" {
			t.Errorf("opened again: got record %d, foot %+v", w.entry.ID, w.view.foot)
		}
		w.takeKept()
		noProblem(t, w)
		if got, want := w.view.spine.Overall, "Overall: not equivalent."; got != want {
			t.Errorf("overall: got %q, want %q", got, want)
		}
		if got := w.view.header; !strings.HasPrefix(got.Right, "criterion sealed") || got.Note != "before the readings were opened" {
			t.Errorf("header: got %+v", got)
		}
		shot("draft-decided")
		w.askAmend()
		shotOf(t, "amend-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
		w.leaveDialog()
		p := w.state.Record.Plan
		m := *p.Criterion.Margin
		m.ToleranceFraction = ptrTo(0.4)
		p.Criterion.Margin = &m
		w.change("Amending", func(s desk.State) (desk.State, error) {
			return s.Amended(p, "the fit was changed, note FN-13", "tester", now())
		})
		noProblem(t, w)
		w.compare()
		noProblem(t, w)
		if got := w.view.header.Note; got != "amended since: 1 time" {
			t.Errorf("amended: got %q", got)
		}
		trail := w.state.Record.Trail
		amended, again := trail[len(trail)-2], trail[len(trail)-1]
		if trail.Broken() >= 0 || !strings.Contains(amended.On, "not equivalent") || again.What != "compared" {
			t.Errorf("trail: got %+v and %+v, want the amendment with the old verdict, then the comparison", amended, again)
		}
	}
}

func ptrTo(v float64) *float64 { return &v }

// TestTheReadingViewShowsTheFile opens a file of nasty cells with its readings in sight.
func TestTheReadingViewShowsTheFile(t *testing.T) {
	file := filepath.Join(t.TempDir(), "shell.csv")
	text := "Lot;Part;Wall thickness [mm];Run-out [mm]\n"
	for i := range 12 {
		text += []string{"R-118", "C-022"}[i/6] + ";" + qa.Plain(float64(i+1)) + ";4,0" + qa.Plain(float64(10+i)) + ";0,0" + qa.Plain(float64(30+i)) + "\n"
	}
	text += "C-022;13;n/a;<0,02\nC-022;14;4,011;abc\n"
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := opened(t, file, 1280, 800)
	noProblem(t, w)
	if n := len(w.sheetSaid.Ledger); n != 16 {
		t.Errorf("ledger before the decimal mark is stated: got %d cells, want 16", n)
	}
	w.restate(w.state.Sheet.Stated.WithDecimal(","))
	noProblem(t, w)
	if got, want := w.sheetSaid.Taken[0].Text, "6 parts, 12 readings"; got != want {
		t.Errorf("taken: got %q, want %q", got, want)
	}
	w.act.unmask.act()
	if w.state.Sheet.Masked || !w.state.Seen {
		t.Error("shown: got it masked, or not said")
	}
	shotOf(t, "reading-shown", w.win.Canvas().Capture())
	for _, x := range crowded(w) {
		t.Error(x)
	}
	if n := len(w.sheetSaid.Ledger); n != 3 {
		t.Errorf("ledger: got %d cells, want 3: %+v", n, w.sheetSaid.Ledger)
	}
	w.states(w.state.Playing(4, importers.PlaysNothing))
	if got := w.sheetSaid.Columns[3].Plays; got != "not used" {
		t.Errorf("column D: got %q, want it left out", got)
	}
	w.states(w.state.Playing(4, importers.PlaysCharacteristic))
	if got := w.sheetSaid.Columns[3].Plays; got != "characteristic" {
		t.Errorf("column D: got %q, want it taken in", got)
	}
	w.act.leaveSheet.act()
	if w.state.Sheet != nil {
		t.Error("left: got the sheet")
	}
}

// TestUndoWalksTheTrail undoes what was typed, a choice and the headings, does them again, and stops at the seal.
func TestUndoWalksTheTrail(t *testing.T) {
	folder := t.TempDir()
	w := openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.beginComparison()
	w.open(sheetFile(t), readFile)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.02")
	noProblem(t, w)
	w.undo()
	if m := w.state.Record.Plan.Criterion.Margin; m == nil || *m.Absolute != 0 {
		t.Errorf("undo of the number: got %+v, want 0", m)
	}
	w.undo()
	if m := w.state.Record.Plan.Criterion.Margin; m != nil {
		t.Errorf("undo of the choice: got %+v, want none", m)
	}
	w.undo()
	if n := len(w.state.Record.Plan.Characteristics); n != 0 {
		t.Errorf("undo of the headings: got %d characteristics, want none", n)
	}
	w.undo() // nothing is left to undo
	for range 4 {
		w.redo()
	}
	if m := w.state.Record.Plan.Criterion.Margin; m == nil || *m.Absolute != 0.02 || len(w.state.Record.Plan.Characteristics) != 6 {
		t.Errorf("redo: got %+v", m)
	}
	noProblem(t, w)
	w.sealDraft()
	noProblem(t, w)
	w.undo()
	if !w.state.Sealed() {
		t.Error("undo: took the seal back")
	}
	if n := len(w.state.Record.Trail); n != 11 || w.state.Record.Trail.Broken() >= 0 {
		t.Errorf("trail: got %d entries, want every act, every undo and every redo: %+v", n, w.state.Record.Trail)
	}
	_, acts, err := w.register.Record(w.entry.ID)
	if err != nil || len(acts) != 11 {
		t.Errorf("register: got %d acts, %v, want 11", len(acts), err)
	}
}

// TestTwoFilesOfOneLotEach brings a file in on either page; neither names its lot.
func TestTwoFilesOfOneLotEach(t *testing.T) {
	dir := t.TempDir()
	write := func(name string, shift int) string {
		text := "Part,Wall [mm],Bore [mm]\n"
		for i := range 15 {
			text += qa.Plain(float64(i+1)) + ",4." + qa.Plain(float64(100+shift+i*7%11)) + ",39." + qa.Plain(float64(900+i*5%13)) + "\n"
		}
		file := filepath.Join(dir, name)
		if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return file
	}
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1280, 800)
	w.beginComparison()
	typing(w, "reference lot", "R-118")
	typing(w, "candidate lot", "C-022")
	w.bring(write("first.csv", 0), qa.Reference, readFile)
	noProblem(t, w)
	w.takeHeadings()
	noProblem(t, w)
	w.bring(write("second.csv", 1), qa.Candidate, readFile)
	noProblem(t, w)
	if got := w.sheetSaid.Taken[0]; got.Side != qa.Candidate {
		t.Errorf("second file: got %+v, want it on the candidate's side", got)
	}
	w.takeHeadings()
	noProblem(t, w)
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.02")
	w.sealDraft()
	noProblem(t, w)
	w.takeKept()
	noProblem(t, w)
	if got, want := w.view.spine.Overall, "Overall: equivalent."; got != want {
		t.Errorf("overall: got %q, want %q", got, want)
	}
	if p := w.view.pages; p[qa.Reference].Lot != "R-118" || p[qa.Candidate].Lot != "C-022" || p[qa.Candidate].File != "second.csv" {
		t.Errorf("pages: got %q and %q of %q", p[qa.Reference].Lot, p[qa.Candidate].Lot, p[qa.Candidate].File)
	}
	shotOf(t, "two-files", w.win.Canvas().Capture())
}

// TestEveryWorkbookOfTheImportersIsLookedInto opens what the importers' own tests read: nothing of it stops the window.
func TestEveryWorkbookOfTheImportersIsLookedInto(t *testing.T) {
	var files []string
	for _, root := range []string{"importers", "testdata"} {
		err := filepath.WalkDir(filepath.Join("..", root), func(path string, d fs.DirEntry, err error) error {
			switch strings.ToLower(filepath.Ext(path)) {
			case ".xlsx", ".csv", ".tsv":
				if !strings.Contains(path, "fuzz") {
					files = append(files, path)
				}
			}
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	if len(files) < 10 {
		t.Fatalf("files: got %d, want those of the importers", len(files))
	}
	w := opened(t, "", 1024, 700)
	for i := 0; i < len(files); i += 4 { // enough to see every kind
		file := files[i]
		w.apply(func(desk.State) desk.State { return desk.State{} })
		w.open(file, readFile)
		if w.state.Sheet == nil && w.state.Problem.Text == "" && !w.state.Open {
			t.Errorf("%s: got neither the file nor what is wrong with it", file)
		}
		if x := w.state.Sheet; x != nil {
			for k := range w.sheetSaid.Rows {
				for c, cell := range x.Row(k).Cells {
					if cell.Text != "" && cell.Text != "•••" && w.sheetSaid.Columns[c].Plays == importers.PlaysCharacteristic && x.Row(k).Part == "" && k > 12 {
						t.Errorf("%s: row %d shows %q, want it masked", file, k, cell.Text)
					}
				}
			}
		}
		w.takeHeadings()
	}
}

// TestPicturesOfTheDraft renders the criterion and the file dark and at double scale; with -pictures they are kept.
func TestPicturesOfTheDraft(t *testing.T) {
	for name, x := range map[string]struct {
		dark  bool
		scale float32
	}{"draft-dark": {true, 1}, "draft-double": {false, 2}} {
		w := newWindow(test.NewTempApp(t), testBuild, wanted(x.dark), nil)
		w.jobs.atOnce = true
		w.win.Canvas().(test.WindowlessCanvas).SetScale(x.scale)
		w.win.Resize(fyne.NewSize(1280, 800))
		w.beginComparison()
		w.open(sheetFile(t), readFile)
		noProblem(t, w)
		w.act.unmask.act()
		shotOf(t, name+"-file", w.win.Canvas().Capture())
		w.takeHeadings()
		w.chooseKind(desk.PartOfTolerance)
		typing(w, "standard deviation", "0.005")
		shotOf(t, name, w.win.Canvas().Capture())
		for _, c := range crowded(w) {
			t.Errorf("%s: %s", name, c)
		}
		w.win.Close()
	}
}
