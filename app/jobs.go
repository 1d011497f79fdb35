package app

import (
	"fmt"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
)

// jobs is the work that runs off the window's thread, one at a time. This file is the only one with a goroutine.
type jobs struct {
	number int  // of the job that runs or ran last: what a job that was given up brings back is not taken
	atOnce bool // for pictures and tests: the job is done when work returns
}

// change is what a job brings back: an act on the state as it is then.
type change func(desk.State) desk.State

// work does something off the window's thread, unless other work still runs. do touches nothing of the window; what it returns is applied on the thread.
// A fault of ours in it is said where it happened and closes nothing.
func (w *window) work(name string, do func() change) {
	if w.state.Job.Name != "" {
		return
	}
	w.jobs.number++
	mine := w.jobs.number
	w.apply(func(s desk.State) desk.State { return s.Working(name, -1) })
	run := func() (c change) {
		defer func() {
			if fault := recover(); fault != nil {
				err := fmt.Errorf("a fault of ours, version %s: %v; nothing was changed", w.build.Version, fault)
				c = func(s desk.State) desk.State { return s.Failed(name, err) }
			}
		}()
		return do()
	}
	done := func(c change) {
		if mine == w.jobs.number {
			w.apply(func(s desk.State) desk.State { return c(s).Rested() })
		}
	}
	if w.jobs.atOnce {
		done(run())
		return
	}
	go func() {
		c := run()
		fyne.Do(func() { done(c) })
	}()
}

// cancel gives up the job that runs: the window is free at once, and what the job still brings back is not taken.
func (w *window) cancel() {
	w.jobs.number++
	w.apply(desk.State.Rested)
}

// failed is the change that says an error.
func failed(place string, err error) change {
	return func(s desk.State) desk.State { return s.Failed(place, err) }
}
