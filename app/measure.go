package app

import (
	"fmt"
	"io"
	"time"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
)

// Measurement is a way of using the window that `go run ./cmd/dev bench window` measures from outside: what is done at every
// tick of the toolkit's clock, and nothing of the measuring itself. The program says "begin" and "end" where processor time is
// to be read.
type Measurement struct {
	Name string // "" measures nothing
	Out  io.Writer
}

// The measurements: each tick is a frame.
const (
	ticksBefore = 45  // until everything is drawn once
	ticksDuring = 300 // five seconds on a quiet machine
)

// measuring gives what a tick does, nil for a name that is none.
func (w *window) measuring(name string) func(tick int) {
	there := func(tick, n int) int { // down to the end and up again
		if n < 2 {
			return 0
		}
		at := tick % (2*n - 2)
		return min(at, 2*n-2-at)
	}
	scroll := func(s *scrolled) func(int) {
		return func(tick int) {
			by := float32(41)
			if tick/120%2 == 1 {
				by = -41
			}
			s.content.reach(by)
		}
	}
	return map[string]func(int){
		"still": func(int) {},
		"walk": func(tick int) {
			w.apply(func(s desk.State) desk.State {
				lines := w.view.spine.Rows
				return s.WithSelected(lines[there(tick, len(lines))].At)
			})
		},
		"resize": func(tick int) {
			step := float32(there(tick, 40))
			w.win.Resize(fyne.NewSize(1200+4*step, 760+2*step))
		},
		"spine":    scroll(w.spineRows),
		"readings": scroll(w.leftRows),
	}[name]
}

// measure waits until the record lies open and nothing runs, does a measurement and closes the window; "still" stays until the
// program is ended.
func (w *window) measure(m Measurement) {
	if m.Name == "" {
		return
	}
	say := func(format string, args ...any) { fmt.Fprintf(m.Out, format+"\n", args...) }
	each := w.measuring(m.Name)
	if each == nil {
		say("measure: found %q, want still, walk, resize, spine or readings", m.Name)
		w.win.Close()
		return
	}
	tick := -ticksBefore
	var began time.Time
	var clock *fyne.Animation
	clock = fyne.NewAnimation(time.Second, func(float32) {
		if w.state.Job.Name != "" || !w.state.Compared {
			return
		}
		switch {
		case tick == 0:
			began = time.Now()
			say("begin")
		case tick == ticksDuring && m.Name != "still":
			clock.Stop()
			say("end %d %.3f", ticksDuring, time.Since(began).Seconds())
			w.win.Close()
			return
		}
		each(max(tick, 0))
		tick++
	})
	clock.RepeatCount = fyne.AnimationRepeatForever
	clock.Start()
}
