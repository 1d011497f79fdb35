package app

import (
	"bufio"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/qa"
)

// thread stands in for the window's thread: what jobs hand over is done by the test, one thing after the other.
type thread struct {
	queue   chan func()
	longest time.Duration
	what    string
}

func onTestThread(w *window) *thread {
	t := &thread{queue: make(chan func(), 1000)}
	w.jobs.atOnce, w.jobs.hand = false, func(do func()) { t.queue <- do }
	return t
}

// timed does something and remembers the longest.
func (t *thread) timed(what string, do func()) {
	began := threadTime()
	do()
	if took := threadTime() - began; took > t.longest {
		t.longest, t.what = took, what
	}
}

// until does what is handed over until the state is as wanted.
func (t *thread) until(tb testing.TB, what string, wanted func() bool) {
	tb.Helper()
	late := time.After(2 * time.Minute)
	for !wanted() {
		select {
		case do := <-t.queue:
			t.timed(what, do)
		case <-late:
			tb.Fatalf("%s: not within two minutes", what)
		}
	}
}

// millionFile is a plan and its file of a million readings in the given number of characteristics.
func millionFile(t testing.TB, characteristics int) string {
	t.Helper()
	dir := t.TempDir()
	plan := "format = \"lotpair.plan/1\"\n[reference]\nlot = \"R\"\nfile = \"m.csv\"\n[candidate]\nlot = \"C\"\nfile = \"m.csv\"\n[reading]\nlayout = \"row-per-part\"\nlot_column = \"Lot\"\n" +
		"[criterion]\nobjective = \"equivalence\"\nmargin = { absolute = 0.1, reason = \"a test\" }\n"
	if err := os.WriteFile(filepath.Join(dir, "plan.toml"), []byte(plan), 0o600); err != nil {
		t.Fatal(err)
	}
	f, err := os.Create(filepath.Join(dir, "m.csv"))
	if err != nil {
		t.Fatal(err)
	}
	b := bufio.NewWriter(f)
	fmt.Fprint(b, "Lot")
	for c := range characteristics {
		fmt.Fprintf(b, ",Wall %d [mm]", c+1)
	}
	for i := range 1_000_000 / characteristics {
		fmt.Fprintf(b, "\n%s", map[bool]string{true: "R", false: "C"}[i%2 == 0])
		for c := range characteristics {
			fmt.Fprintf(b, ",4.%04d", (i*7919+c)%9973)
		}
	}
	if err := b.Flush(); err != nil {
		t.Fatal(err)
	}
	if err := f.Close(); err != nil {
		t.Fatal(err)
	}
	return filepath.Join(dir, "plan.toml")
}

// TestTheWindowAnswersWhileAMillionReadingsAreRead times everything that is done on the window's thread while a million readings
// are brought in, looked at and walked along. The aim is a tenth of a second, and the figure is logged; the test fails at three
// times that, which no busy machine explains but work on the wrong thread does: what is timed is the processor's time of the
// thread where the system counts it, and the best of three is taken.
func TestTheWindowAnswersWhileAMillionReadingsAreRead(t *testing.T) {
	if testing.Short() {
		t.Log("a million readings take seconds")
		return
	}
	runtime.LockOSThread() // one thread's time is counted
	defer runtime.UnlockOSThread()
	const most = 300 * time.Millisecond
	for _, characteristics := range []int{1, 20} {
		plan := millionFile(t, characteristics)
		best, where := time.Hour, ""
		for range 3 {
			r := inRegister(t, t.TempDir())
			w := openedWith(t, r, "", 1280, 800)
			h := onTestThread(w)
			h.timed("opening", func() { w.open(plan, readFile) })
			h.until(t, "reading", func() bool { return w.state.Job.Name == "" })
			noProblem(t, w)
			for range 3 {
				h.timed("walking", func() { w.spineKey(fyne.KeyDown) })
			}
			h.timed("looking", func() { w.lookKey(fyne.Key2) })
			h.timed("end of the page", func() { w.leftRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd}) })
			h.timed("painting the bench", func() { w.picture.Figure() })
			if h.longest < best {
				best, where = h.longest, h.what
			}
			if best < most {
				break
			}
		}
		t.Logf("%d characteristics: the longest on the window's thread took %v, %s", characteristics, best, where)
		if best > most {
			t.Errorf("%d characteristics: %s took %v on the window's thread, want at most %v", characteristics, where, best, most)
		}
	}
}

// TestAReadingIsStopped gives a long reading up by escape, as soon as the window tells how far it has come: the record that lay
// open lies there as it was, the register has nothing new, and the next file is read.
func TestAReadingIsStopped(t *testing.T) {
	r := inRegister(t, t.TempDir())
	w := openedWith(t, r, demo(t), 1280, 800)
	before, records := w.state, count(t, r)
	h := onTestThread(w)
	w.open(millionFile(t, 20), readFile)
	h.until(t, "telling", func() bool { return w.jobs.doing.Doing != "" })
	if text := w.bannerText(); !strings.Contains(text, "Opening plan.toml: ") || w.banner.Hidden {
		t.Errorf("while reading: got %q", text)
	}
	for _, c := range crowded(w) {
		t.Errorf("while reading: %s", c)
	}
	w.win.Canvas().OnTypedKey()(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if w.state.Job.Name != "" || w.state.Problem.Text != "" || w.bannerText() != "" {
		t.Errorf("given up: got job %q, problem %q", w.state.Job.Name, w.state.Problem.Text)
	}
	for rests := false; !rests; {
		select {
		case do := <-h.queue: // the job hands its end over and then rests
			do()
		case <-time.After(time.Second):
			rests = true
		}
	}
	if w.state.Number != before.Number || w.state.Path != before.Path || count(t, r) != records {
		t.Errorf("given up: got act %d of %s and %d records, want %d of %s and %d", w.state.Number, w.state.Path, count(t, r), before.Number, before.Path, records)
	}
	w.jobs.atOnce = true
	w.open(demo(t), readFile)
	noProblem(t, w)
}

func count(t testing.TB, r *register.Register) int {
	t.Helper()
	n, err := r.Count()
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// TestAJobIsGivenUpBeforeItWritesOrNotAtAll cancels an export before and after it begins to write.
func TestAJobIsGivenUpBeforeItWritesOrNotAtAll(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	w.work("Testing", func(watch qa.Watch) change {
		w.cancel()
		if err := w.jobs.writes(watch); err == nil {
			t.Error("given up before: got leave to write, want none")
		}
		return func(s desk.State) desk.State { return s }
	})
	w.work("Testing", func(watch qa.Watch) change {
		if err := w.jobs.writes(watch); err != nil {
			t.Errorf("not given up: got %v", err)
		}
		w.cancel()
		return func(s desk.State) desk.State { return s.Exported("record.xlsx") }
	})
	if w.state.Workbook.Path != "record.xlsx" {
		t.Errorf("given up while writing: got %q, want what was written", w.state.Workbook.Path)
	}
}
