package main

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"time"
)

// benchWindow measures the real window on a display without a screen, beside an empty window of the toolkit in the same run:
// machines differ, ratios less.
func benchWindow(d *dev) error {
	if !onLinux {
		return errors.New("bench window: it reads /proc and runs Xvfb, which this system has not; run it on Linux")
	}
	if err := d.install("window", desktopNeeds, windowNeeds); err != nil {
		return err
	}
	dir, err := os.MkdirTemp("", "lotpair-bench-")
	if err != nil {
		return err
	}
	defer func() { _ = os.RemoveAll(dir) }() // a temporary folder
	display, end, err := d.display("1600x1000", "-fbdir", dir)
	if err != nil {
		return err
	}
	defer end()
	b := &windowBench{dev: d, dir: dir, display: display, frame: filepath.Join(dir, "Xvfb_screen0")}
	if b.ours, err = d.build(desktop, "lotpair", "./cmd/lotpair", "-tags", desktopTags); err != nil {
		return err
	}
	if b.empty, err = d.build(desktop, "empty", "./app/testdata/empty", "-tags", desktopTags); err != nil {
		return err
	}
	for _, part := range []func() error{b.start, b.memory, b.frames} {
		if err := part(); err != nil {
			return err
		}
	}
	return nil
}

// windowBench is what the measurements share.
type windowBench struct {
	*dev
	dir, display, frame string
	ours, empty         string
}

// command prepares one of the two programs on the bench's display.
func (b *windowBench) program(name string, args ...string) *exec.Cmd {
	c := b.command([]string{"DISPLAY=" + b.display, "WAYLAND_DISPLAY=", "LIBGL_ALWAYS_SOFTWARE=1", "LC_ALL=C.UTF-8"}, b.path(name), args...)
	c.Stdout, c.Stderr = nil, nil
	return c
}

// register is a folder for the records of one run.
func (b *windowBench) register(name string) []string {
	return []string{"--register", filepath.Join(b.dir, "register-"+name)}
}

// start measures from the launch to the first pixel that changes, both programs in turn.
func (b *windowBench) start() error {
	const runs = 9
	var ours, empty []float64
	for i := range runs + 1 {
		for _, x := range []struct {
			name string
			args []string
			to   *[]float64
		}{{b.empty, nil, &empty}, {b.ours, b.register("start"), &ours}} {
			ms, err := b.firstPixel(x.name, x.args...)
			if err != nil {
				return err
			}
			if i > 0 { // the first run warms the disk
				*x.to = append(*x.to, ms)
			}
		}
	}
	b.say("start to first frame: %.2f times an empty window (%.0f ms, %.0f ms; medians of %d runs in turn), want at most 1.5", median(ours)/median(empty), median(ours), median(empty), runs)
	return nil
}

// firstPixel is how long a program takes until it changes the middle of the screen, in milliseconds.
func (b *windowBench) firstPixel(name string, args ...string) (float64, error) {
	middle := func() ([]byte, error) {
		f, err := os.Open(b.frame)
		if err != nil {
			return nil, err
		}
		defer func() { _ = f.Close() }() // only read
		info, err := f.Stat()
		if err != nil {
			return nil, err
		}
		out := make([]byte, 4*64)
		_, err = f.ReadAt(out, info.Size()-4*1600*600+4*500) // row 400 of 1000, from the 500th pixel; the file has a head
		return out, err
	}
	before, err := middle()
	if err != nil {
		return 0, err
	}
	c := b.program(name, args...)
	began := time.Now()
	if err := c.Start(); err != nil {
		return 0, err
	}
	defer func() {
		_ = c.Process.Kill() // it has no other end
		_ = c.Wait()
		time.Sleep(100 * time.Millisecond) // the server clears the screen
	}()
	for time.Since(began) < time.Minute {
		now, err := middle()
		if err != nil {
			return 0, err
		}
		if !bytes.Equal(before, now) {
			return float64(time.Since(began).Microseconds()) / 1000, nil
		}
		time.Sleep(500 * time.Microsecond)
	}
	return 0, fmt.Errorf("bench window: %s showed nothing within a minute", name)
}

// memory measures what both programs hold once they stand still.
func (b *windowBench) memory() error {
	c := b.program(b.empty)
	if err := c.Start(); err != nil {
		return err
	}
	time.Sleep(4 * time.Second)
	floor, err := resident(c.Process.Pid)
	_ = c.Process.Kill() // it has no other end
	_ = c.Wait()
	if err != nil {
		return err
	}
	demo := b.path("testdata", "demo", "plan.toml")
	million, err := writePlan(b.dir, "million", 20, 25_000)
	if err != nil {
		return err
	}
	for _, x := range []struct{ what, plan, want string }{
		{"the worked example open", demo, "at most 1.4 times"},
		{"1,000,000 readings open", million, "at most 300 MiB"},
	} {
		var held float64
		err := b.measured(append(b.register("memory"), "--measure", "still", x.plan), func(r *reported) error {
			if _, err := r.line("begin"); err != nil {
				return err
			}
			time.Sleep(6 * time.Second)
			var err error
			held, err = resident(r.pid)
			return err
		})
		if err != nil {
			return err
		}
		b.say("resident with %s: %.0f MiB, %.2f times an empty window's %.0f MiB, want %s", x.what, held, held/floor, floor, x.want)
	}
	return nil
}

// frames measures what a frame costs while the window is used.
func (b *windowBench) frames() error {
	wide, err := writePlan(b.dir, "wide", 200, 50)
	if err != nil {
		return err
	}
	long, err := writePlan(b.dir, "long", 2000, 4)
	if err != nil {
		return err
	}
	deep, err := writePlan(b.dir, "deep", 1, 500_000)
	if err != nil {
		return err
	}
	for _, x := range []struct{ how, what, plan string }{
		{"walk", "walking a spine of 200 with 20,000 readings, want at least 55 frames a second", wide},
		{"resize", "resizing with the same, want at least 55 frames a second", wide},
		{"spine", "scrolling a spine of 2,000, want at most 15 ms a frame", long},
		{"readings", "scrolling 500,000 readings a page, want at most 15 ms a frame", deep},
	} {
		err := b.measured(append(b.register(x.how), "--measure", x.how, x.plan), func(r *reported) error {
			if _, err := r.line("begin"); err != nil {
				return err
			}
			before, err := spent(r.pid)
			if err != nil {
				return err
			}
			var frames, seconds float64
			end, err := r.line("end ")
			if err != nil {
				return err
			}
			after, err := spent(r.pid)
			if err != nil {
				return err
			}
			if _, err := fmt.Sscanf(end, "end %f %f", &frames, &seconds); err != nil {
				return fmt.Errorf("bench window: found %q, want frames and seconds: %w", end, err)
			}
			b.say("%s: %.1f ms of processor a frame, %.1f frames a second", x.what, (after-before)*1000/frames, frames/seconds)
			return nil
		})
		if err != nil {
			return err
		}
	}
	return nil
}

// reported is the program while it is measured.
type reported struct {
	pid   int
	lines *bufio.Scanner
}

// line waits for a line that begins so.
func (r *reported) line(begins string) (string, error) {
	for r.lines.Scan() {
		if strings.HasPrefix(r.lines.Text(), begins) {
			return r.lines.Text(), nil
		}
	}
	return "", fmt.Errorf("bench window: the program ended before it said %q", begins)
}

// measured runs the program while look looks at it, and ends it.
func (b *windowBench) measured(args []string, look func(*reported) error) error {
	c := b.program(b.ours, args...)
	c.Stderr = b.stderr
	out, err := c.StdoutPipe()
	if err != nil {
		return err
	}
	if err := c.Start(); err != nil {
		return err
	}
	err = look(&reported{c.Process.Pid, bufio.NewScanner(out)})
	_ = c.Process.Kill() // it may have ended by itself
	_ = c.Wait()
	return err
}

// resident is what a process holds in memory, in MiB.
func resident(pid int) (float64, error) {
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/status", pid))
	if err != nil {
		return 0, err
	}
	for _, line := range strings.Split(string(text), "\n") {
		if f := strings.Fields(line); len(f) == 3 && f[0] == "VmRSS:" {
			kib, err := strconv.ParseFloat(f[1], 64)
			return kib / 1024, err
		}
	}
	return 0, fmt.Errorf("process %d: found no VmRSS", pid)
}

// spent is how much processor time a process has taken, in seconds; Linux counts it in hundredths (proc(5), stat).
func spent(pid int) (float64, error) {
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return 0, err
	}
	_, rest, ok := strings.Cut(string(text), ") ") // the name may hold anything
	f := strings.Fields(rest)
	if !ok || len(f) < 13 {
		return 0, fmt.Errorf("process %d: found %q in stat", pid, text)
	}
	user, err := strconv.ParseFloat(f[11], 64)
	if err != nil {
		return 0, err
	}
	system, err := strconv.ParseFloat(f[12], 64)
	return (user + system) / 100, err
}
