package register_test

import (
	"bufio"
	"flag"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"strings"
	"testing"
	"time"

	"lotpair/app/register"
)

var kills = flag.Int("kills", 50, "how often the session is killed")

// sessionFolder is set in the child that TestKilledAtAnyMoment starts: it works there until it is killed.
const sessionFolder = "LOTPAIR_REGISTER_SESSION"

func TestMain(m *testing.M) {
	if dir := os.Getenv(sessionFolder); dir != "" {
		if err := session(dir); err != nil {
			fmt.Println("error", err)
			os.Exit(1)
		}
		return
	}
	os.Exit(m.Run())
}

// session opens the record that lay open, or a new one, and acts on it without end. It says what it was told is kept.
func session(dir string) error {
	r, d, err := register.Open(dir, noon)
	if err != nil {
		return err
	}
	if s := d.String(); s != "" {
		return fmt.Errorf("damaged: %s", s)
	}
	id, err := r.Place()
	if err != nil {
		return err
	}
	var e register.Entry
	if id != 0 {
		if e, _, err = r.Record(id); err != nil {
			return err
		}
	}
	for n := 0; ; n++ {
		digest, err := r.KeepFile([]byte(fmt.Sprintf("%d file %d %s", os.Getpid(), n, strings.Repeat("x", n%5000))))
		if err != nil {
			return err
		}
		a := register.Act{Time: noon, Who: "child", What: fmt.Sprintf("act %d of %d", n, os.Getpid()), State: []byte(digest)}
		if e.ID == 0 || n%17 == 16 {
			next := entry(n)
			if e, err = r.Add(next, a); err == nil {
				err = r.At(e.ID)
			}
		} else {
			e, err = r.Keep(e, a)
		}
		if err == nil {
			err = r.SetView(e.ID, []byte(fmt.Sprint(n)))
		}
		if err != nil {
			return err
		}
		fmt.Println("kept", e.ID, e.Acts, a.What)
	}
}

// TestKilledAtAnyMoment kills a session at random moments, again and again in one folder: nothing acknowledged is ever lost,
// the place is found again, the files are whole, and the register is never damaged.
func TestKilledAtAnyMoment(t *testing.T) {
	dir := t.TempDir()
	random := rand.New(rand.NewPCG(1, 200))
	kept := map[string]string{} // record and number: what
	total := 0
	for round := range *kills {
		c := exec.Command(os.Args[0])
		c.Env = append(os.Environ(), sessionFolder+"="+dir)
		out, err := c.StdoutPipe()
		if err != nil {
			t.Fatal(err)
		}
		if err := c.Start(); err != nil {
			t.Fatal(err)
		}
		wait := time.Duration(random.IntN(60_000)) * time.Microsecond
		// Every other session is killed from its start on, the others once they have begun to work: on a busy machine a start takes
		// longer than the work.
		kill := func() { _ = c.Process.Kill() }
		working := round%2 == 1
		var timer *time.Timer
		if !working {
			timer = time.AfterFunc(40*time.Millisecond+wait, kill)
		}
		var last string
		for lines := bufio.NewScanner(out); lines.Scan(); {
			f := strings.SplitN(lines.Text(), " ", 4)
			if f[0] != "kept" || len(f) != 4 {
				t.Errorf("round %d: the session said %q", round, lines.Text())
				continue
			}
			kept[f[1]+" "+f[2]] = f[3]
			last = f[1]
			total++
			if timer == nil {
				timer = time.AfterFunc(wait, kill)
			}
		}
		_ = c.Wait() // it was killed
		if timer != nil {
			timer.Stop()
		}
		r := opened(t, dir)
		if at, err := r.Place(); err != nil || last != "" && fmt.Sprint(at) < last && len(fmt.Sprint(at)) <= len(last) {
			t.Errorf("round %d: place %d, %v, want record %s or a later one", round, at, err, last)
		}
		if err := r.Close(); err != nil {
			t.Fatal(err)
		}
	}
	r := opened(t, dir)
	records, err := r.Count()
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for id := int64(1); id <= int64(records); id++ {
		_, acts, err := r.Record(id)
		if err != nil {
			t.Fatal(err)
		}
		for _, a := range acts {
			key := fmt.Sprint(id, " ", a.Number)
			if what, ok := kept[key]; ok {
				found++
				if what != a.What {
					t.Errorf("record %s: got %q, want %q", key, a.What, what)
				}
			}
			if _, err := r.File(string(a.State)); err != nil {
				t.Errorf("record %s: %v", key, err)
			}
		}
	}
	if found != total {
		t.Errorf("acknowledged acts: got %d back, want %d", found, total)
	}
	t.Logf("killed %d times; %d acknowledged acts in %d records, all there", *kills, total, records)
	if total < *kills/2 {
		t.Errorf("acknowledged acts: got %d in %d sessions, want more: the session is killed before it works", total, *kills)
	}
}
