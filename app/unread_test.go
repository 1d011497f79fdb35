package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// TestAveragedReadingIsLeftOut leaves out a reading that is the mean of repeats, finds it again after a kill, and puts it back.
func TestAveragedReadingIsLeftOut(t *testing.T) {
	folder, dir := t.TempDir(), t.TempDir()
	text := "Lot,Part,Bore [mm]\n"
	for i := range 24 {
		text += []string{"A", "B"}[i/12] + "," + qa.Plain(float64(i%12/2+1)) + ",40.0" + qa.Plain(float64(10+i*7%13)) + "\n"
	}
	file := filepath.Join(dir, "repeats.csv")
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := openedWith(t, inRegister(t, folder), file, 1280, 800)
	noProblem(t, w)
	w.states(w.state.Playing(2, importers.PlaysRepeated))
	noProblem(t, w)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	w.takeKept()
	noProblem(t, w)
	leave := w.view.pages[qa.Candidate].Readings.At(2)
	if !strings.Contains(leave.Source.Cell, ", ") {
		t.Fatalf("reading: got %+v, want the mean of two cells", leave)
	}
	w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(leave.Source, "burr", "tester", now()) })
	w.compare()
	noProblem(t, w)
	n := w.state.Record.Result.Characteristics[0].Candidate.N
	id := w.entry.ID
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.reopen(id)
	noProblem(t, w)
	if got := w.state.Record.Result.Characteristics[0].Candidate; got.N != n || got.N != 5 {
		t.Errorf("opened again: got n %d, want %d", got.N, n)
	}
	w.change("Putting back", func(s desk.State) (desk.State, error) { return s.PutBack(leave.Source, "tester", now()) })
	w.compare()
	noProblem(t, w)
	if got := w.state.Record.Result.Characteristics[0].Candidate.N; got != 6 {
		t.Errorf("put back: got n %d, want 6", got)
	}
}

// TestUnreadCellIsLeftOut leaves out a cell that is no number, which until then leaves its characteristic undecided, and puts it back.
func TestUnreadCellIsLeftOut(t *testing.T) {
	dir := t.TempDir()
	text := "Lot,Part,Bore [mm]\n"
	for i := range 24 {
		text += []string{"A", "B"}[i/12] + "," + qa.Plain(float64(i+1)) + ",40.0" + qa.Plain(float64(10+i*7%13)) + "\n"
	}
	text = strings.Replace(text, "B,20,40.013", "B,20,4O.013", 1)
	file := filepath.Join(dir, "typed.csv")
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := openedWith(t, inRegister(t, t.TempDir()), file, 1280, 800)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	w.takeKept()
	noProblem(t, w)
	if got := w.state.Record.Result.Verdict; got != qa.Undecided {
		t.Fatalf("verdict: got %s, want undecided while a cell is not read; %q", got, text)
	}
	at := w.view.pages[qa.Candidate].Readings.At(0)
	w.onReading(qa.Candidate, 0)
	shotOf(t, "unread", w.win.Canvas().Capture())
	if w.dialog == nil {
		t.Fatal("the cell: got no question")
	}
	w.leaveDialog()
	if _, err := w.state.WithoutUnread(at.Source, "  "); err == nil {
		t.Error("without a reason: got it left out")
	}
	p, err := w.state.WithoutUnread(at.Source, "typing error, sheet 3")
	if err != nil {
		t.Fatal(err)
	}
	w.reread("Leaving out", p, "left out", at.Source, "typing error, sheet 3")
	noProblem(t, w)
	w.compare()
	noProblem(t, w)
	if r := w.state.Record.Result; r.Verdict != qa.Equivalent || r.Characteristics[0].Candidate.Excluded != 1 {
		t.Errorf("left out: got %s, %+v", r.Verdict, r.Characteristics[0].Candidate)
	}
	if p, err = w.state.WithUnread(at.Source); err != nil {
		t.Fatal(err)
	}
	w.reread("Putting back", p, "put back", at.Source, "")
	w.compare()
	if got := w.state.Record.Result.Verdict; got != qa.Undecided {
		t.Errorf("put back: got %s", got)
	}
	w.undo()
	if len(w.state.Record.Plan.Reading.Exclude) != 1 {
		t.Error("undo: got the cell still put back")
	}
}

// TestColumnsFarToTheRight walks through a sheet of many columns by its buttons and by its keys.
func TestColumnsFarToTheRight(t *testing.T) {
	file := filepath.Join(t.TempDir(), "wide.csv")
	text := "Lot,Part"
	for c := range 200 {
		text += ",Hole " + string(rune('A'+c%26)) + qa.Plain(float64(c))
	}
	for r := range 12 {
		text += "\n" + []string{"A", "B"}[r/6] + "," + qa.Plain(float64(r%6+1))
		for c := range 200 {
			text += "," + qa.Plain(float64(10+(r*7+c)%9)+0.5)
		}
	}
	if err := os.WriteFile(file, []byte(text+"\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		w := opened(t, file, size.Width, size.Height)
		noProblem(t, w)
		w.act.unmask.act()
		for _, more := w.sheetColumns(size.Width * 0.625); more > 0; _, more = w.sheetColumns(size.Width * 0.625) {
			before := w.sheetFrom
			w.act.columnsRight.act()
			if w.sheetFrom == before {
				t.Fatal("the button: got no further")
			}
		}
		columns, _ := w.sheetColumns(size.Width * 0.625)
		if last := columns[len(columns)-1].at; last != 201 {
			t.Errorf("last column: got %d, want 201", last)
		}
		shotOf(t, "wide-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
		for _, x := range crowded(w) {
			t.Errorf("at %v: %s", size.Width, x)
		}
		w.states(w.state.Playing(202, importers.PlaysNothing))
		noProblem(t, w)
		if got := w.sheetSaid.Columns[201].Plays; got != importers.PlaysNothing {
			t.Errorf("last column: got %s", got)
		}
		w.sheetRows.content.FocusGained()
		for range 250 {
			w.sheetRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyLeft})
		}
		w.sheetRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd})
		if w.sheetFrom != 0 || w.sheetCursor != 12 {
			t.Errorf("keys: got column %d, row %d", w.sheetFrom, w.sheetCursor)
		}
	}
}
