package app

import (
	"fmt"
	"os"
	"path/filepath"
	"reflect"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/qa"
)

// inRegister is the register of a folder.
func inRegister(t testing.TB, dir string) *register.Register {
	t.Helper()
	r, said, err := openRegister(dir)
	if err != nil || said != "" {
		t.Fatalf("register: %q, %v", said, err)
	}
	t.Cleanup(func() { _ = r.Close() })
	return r
}

// TestAKilledProgramOpensWhereItWas does acts in one window and opens another on the same register, as a program does that was
// killed and is started again: it shows the same, and the source files are no longer needed.
func TestAKilledProgramOpensWhereItWas(t *testing.T) {
	dir, plan := t.TempDir(), demo(t)
	w := openedWith(t, inRegister(t, dir), plan, 1280, 800)
	noProblem(t, w)
	again := func() *window {
		x := openedWith(t, inRegister(t, dir), "", 1280, 800)
		x.begin("", "", nil)
		noProblem(t, x)
		return x
	}
	same := func(what string) {
		t.Helper()
		noProblem(t, w)
		x := again()
		if !reflect.DeepEqual(x.view, w.view) {
			t.Errorf("%s: got another view\n%+v\nwant\n%+v", what, x.view.spine, w.view.spine)
		}
		if !reflect.DeepEqual(x.state.Record.Trail, w.state.Record.Trail) && fmt.Sprint(x.state.Record.Trail) != fmt.Sprint(w.state.Record.Trail) {
			t.Errorf("%s: got another trail\n%v\nwant\n%v", what, x.state.Record.Trail, w.state.Record.Trail)
		}
	}
	for _, name := range []string{"plan.toml", "hub-shell.xlsx"} {
		if err := os.Remove(filepath.Join(filepath.Dir(plan), name)); err != nil {
			t.Fatal(err)
		}
	}
	same("opened")
	w.spineKey(fyne.KeyEnd)
	w.lookKey(fyne.Key3)
	same("looked at")
	at := w.view.pages[qa.Candidate].Readings.At(3).Source
	w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(at, "burr, NCR-90", "tester", now()) })
	if x := again(); x.state.Compared || x.view.foot.Compare == "" {
		t.Error("left out: got a result, want none until it is compared again")
	}
	w.compare()
	same("compared again")
	if got := w.state.Record.Result.Attempts; got.Known != 2 || got.KeptBy != "register of this machine" {
		t.Errorf("attempts: got %+v, want 2 of the register", got)
	}
	out := filepath.Join(filepath.Dir(plan), "record.xlsx")
	w.export(out)
	noProblem(t, w)
	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: out})
	noProblem(t, w)
	if err := os.Remove(out); err != nil {
		t.Fatal(err)
	}
	x := again()
	if !x.state.Closed() || x.view.foot.Signatures != "1 signature" || x.view.header.Right != w.view.header.Right {
		t.Errorf("signed: got %+v, %+v", x.view.header, x.view.foot)
	}
	// Who leaves the record finds the register, and the record in it.
	w.leave()
	if x := again(); x.state.Open {
		t.Error("left: got a record, want the register")
	}
	if len(w.list.rows) != 1 || w.list.rows[0].Verdict != "not equivalent" || w.list.rows[0].Sign != "prepared by Ada Example" {
		t.Errorf("list: got %+v", w.list.rows)
	}
}

// TestTheSamePlanGoesOn opens a plan a second time: while its record is open to changes it goes on where it was left; once it
// is signed a new one begins.
func TestTheSamePlanGoesOn(t *testing.T) {
	r, plan := inRegister(t, t.TempDir()), demo(t)
	w := openedWith(t, r, plan, 1280, 800)
	w.spineKey(fyne.KeyEnd)
	w.leave()
	w.open(plan, readFile)
	noProblem(t, w)
	if n, err := r.Count(); err != nil || n != 1 || w.state.Selected != 5 {
		t.Errorf("again: got %d records, line %d, %v, want the one as it was left", n, w.state.Selected, err)
	}
	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: filepath.Join(t.TempDir(), "a.xlsx")})
	noProblem(t, w)
	w.open(plan, readFile)
	noProblem(t, w)
	if n, err := r.Count(); err != nil || n != 2 || w.state.Closed() {
		t.Errorf("after signing: got %d records, closed %v, %v, want a second, open one", n, w.state.Closed(), err)
	}
	if got := w.state.Record.Result.Attempts.Known; got != 2 {
		t.Errorf("attempts: got %d, want 2", got)
	}
}

// TestTwoWindowsOnOneRecord does an act in each of two windows: the second, which does not know of the first, is refused and
// shows what it had.
func TestTwoWindowsOnOneRecord(t *testing.T) {
	dir, plan := t.TempDir(), demo(t)
	a := openedWith(t, inRegister(t, dir), plan, 1280, 800)
	b := openedWith(t, inRegister(t, dir), plan, 1280, 800)
	cells := a.view.pages[qa.Candidate].Readings
	leave := func(w *window, i int) {
		w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(cells.At(i).Source, "burr", "tester", now()) })
	}
	leave(a, 3)
	noProblem(t, a)
	leave(b, 4)
	if b.state.Problem.Text == "" || !b.state.Compared {
		t.Errorf("second window: got %+v, want the act refused", b.state.Problem)
	}
	b.apply(desk.State.Read)
	b.leave()
	b.openListed(0)
	noProblem(t, b)
	leave(b, 4)
	noProblem(t, b)
	if n := len(b.state.Record.Plan.Reading.Exclude); n != 3 {
		t.Errorf("exclusions: got %d, want the plan's and one of each window", n)
	}
}

func TestTheRegisterIsSearchedAsYouType(t *testing.T) {
	dir := t.TempDir()
	r := inRegister(t, dir)
	for i := range 40 {
		_, err := r.Add(register.Entry{
			Title: fmt.Sprintf("Hub shell HS-%d: second foundry with a name that is longer than its column has room for in a narrow window", i), Supports: fmt.Sprint("DEV-", 2000+i),
			Reference: "R-118", Candidate: fmt.Sprint("C-", i), Verdict: []string{"equivalent", "not equivalent", "undecided"}[i%3], Signatures: []string{"", "prepared by Ada Example; reviewed by Ben Example"}[i%2],
		}, register.Act{Time: time.Date(2026, 11, 1, 9, i, 0, 0, time.UTC), Who: "tester", What: "opened", State: []byte("{}")})
		if err != nil {
			t.Fatal(err)
		}
	}
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		w := openedWith(t, inRegister(t, dir), "", size.Width, size.Height)
		w.begin("", "", nil)
		if len(w.list.rows) != 40 {
			t.Fatalf("list: got %d, want 40", len(w.list.rows))
		}
		shotOf(t, fmt.Sprintf("register-%v", size.Width), w.win.Canvas().Capture())
		for _, x := range crowded(w) {
			t.Errorf("at %v: %s", size.Width, x)
		}
		w.search.SetText("dev-2017")
		if len(w.list.rows) != 1 || w.list.rows[0].Supports != "supports DEV-2017" {
			t.Errorf("search: got %+v", w.list.rows)
		}
		w.search.SetText("undecided")
		w.search.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
		w.search.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
		if w.list.cursor != 2 {
			t.Errorf("down twice: got line %d, want 2", w.list.cursor)
		}
		w.search.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
		if w.state.Problem.Text == "" {
			t.Error("a record without a plan: got no problem, want one")
		}
	}
}

func TestEmptyRegister(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1024, 700)
	w.begin("", "", nil)
	shotOf(t, "register-empty", w.win.Canvas().Capture())
	for _, x := range crowded(w) {
		t.Error(x)
	}
	w.openSample()
	noProblem(t, w)
	if !w.state.Open || w.entry.ID == 0 {
		t.Error("the worked example was not kept")
	}
}

// TestARegisterThatCannotBeOpened says so and keeps working.
func TestARegisterThatCannotBeOpened(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	r, said, err := openRegister(filepath.Join(file, "register"))
	if err == nil {
		t.Fatal("got no error")
	}
	w := openedWith(t, r, "", 1280, 800)
	w.begin("", said, err)
	if w.state.Problem.Text == "" {
		t.Error("got no problem, want one")
	}
	w.openSample()
	if !w.state.Open {
		t.Error("the worked example does not open")
	}
}
