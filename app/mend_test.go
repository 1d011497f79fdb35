package app

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/qa"
)

// TestADamagedRegisterIsMendedWhereItShows spoils the pages of one record behind a register that opens well: opening the record
// recovers the others and says what was lost.
func TestADamagedRegisterIsMendedWhereItShows(t *testing.T) {
	dir := t.TempDir()
	r := inRegister(t, dir)
	for i := range 20 {
		state := []byte(fmt.Sprintf("mark %02d ", i) + strings.Repeat("x", 9000))
		if _, err := r.Add(register.Entry{Title: fmt.Sprint("record ", i)}, register.Act{Time: time.Unix(0, 0).UTC(), Who: "tester", What: "opened", State: state}); err != nil {
			t.Fatal(err)
		}
	}
	if err := r.Close(); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(dir, "register.db")
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	at := bytes.Index(data, []byte("mark 03 ")) // in the root of the table, which all rows hang on
	if at < 0 {
		t.Fatal("the record's page was not found")
	}
	for i := at / 4096 * 4096; i < (at/4096+1)*4096; i++ {
		data[i] = byte(i * 7)
	}
	if err := os.WriteFile(file, data, 0o600); err != nil {
		t.Fatal(err)
	}
	w := openedWith(t, inRegister(t, dir), "", 1280, 800)
	w.begin("", "", nil)
	for i, row := range w.list.rows {
		if row.Title == "record 3" {
			w.openListed(i)
			break
		}
	}
	if !strings.Contains(w.state.Problem.Text, "was damaged") {
		t.Fatalf("opening the spoilt record: got %q, want it said that the register was damaged", w.state.Problem.Text)
	}
	if n := len(w.list.rows); n < 20 {
		t.Errorf("recovered: got %d records, want all 20: %s", n, w.state.Problem.Text)
	}
	t.Cleanup(func() { _ = w.register.Close() })
	w.openSample()
	noProblemButTheRegister(t, w)
}

// noProblemButTheRegister checks that the window goes on: a new act is kept.
func noProblemButTheRegister(t *testing.T, w *window) {
	t.Helper()
	if !w.state.Open || w.entry.ID == 0 {
		t.Errorf("after the recovery: got open %v, record %d, want an act kept", w.state.Open, w.entry.ID)
	}
}

// TestTwoWindowsOnADamagedRegister recovers the register from one window: the other one, which has it open still, does its next
// act in the recovered one, and neither loses an act.
func TestTwoWindowsOnADamagedRegister(t *testing.T) {
	dir, plan := t.TempDir(), demo(t)
	a, b := openedWith(t, inRegister(t, dir), plan, 1280, 800), openedWith(t, inRegister(t, dir), plan, 1280, 800)
	leave := func(w *window, i int) {
		cells := w.view.pages[qa.Candidate].Readings
		w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(cells.At(i).Source, "burr", "tester", now()) })
	}
	leave(a, 3)
	noProblem(t, a)
	if err := a.register.Close(); err != nil {
		t.Fatal(err)
	}
	r, damage, err := register.Recover(dir, now())
	if err != nil || damage.LostActs != 0 {
		t.Fatalf("recovered: got %+v, %v", damage, err)
	}
	a.register = r
	t.Cleanup(func() { _ = r.Close() })
	leave(b, 4) // it does not know of the first window's act
	if !strings.Contains(b.state.Problem.Text, "another window") {
		t.Errorf("second window: got %q, want it said that another window acted", b.state.Problem.Text)
	}
	b.apply(desk.State.Read)
	b.leave()
	b.openListed(0)
	noProblem(t, b)
	leave(b, 4)
	noProblem(t, b)
	t.Cleanup(func() { _ = b.register.Close() })
	_, acts, err := r.Record(b.entry.ID)
	if err != nil || len(acts) != 3 {
		t.Errorf("acts: got %d, %v, want the opening and one of each window", len(acts), err)
	}
}
