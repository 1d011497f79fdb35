package app

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
	"sync"
	"time"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
)

// jobs is the work that runs off the window's thread, one at a time. This file is the only one with a goroutine.
type jobs struct {
	number int         // of the job that runs or ran last: what a job that was given up brings back is not taken
	doing  qa.Progress // of the job that runs
	quiet  bool        // it runs so short a time that nothing need be said of it
	stop   func()
	then   func()       // shows what the job came to, once it is done; nil where the window shows it
	atOnce bool         // for pictures and tests: the job is done when work returns
	hand   func(func()) // hands something to the window's thread

	end     sync.Mutex // of what follows: a job is given up before it writes, or not at all
	writing bool
}

// Times of a job: what ends sooner than shownAfter moves nothing in the window, and what is told is shown so often.
const (
	shownAfter = 200 * time.Millisecond
	toldEvery  = 80 * time.Millisecond
	givenBack  = time.Second
)

// change is what a job brings back: an act on the state as it is then.
type change func(desk.State) desk.State

// work does something off the window's thread, unless other work still runs. do touches nothing of the window; what it returns is applied on the thread.
// A fault of ours in it is said where it happened and closes nothing.
func (w *window) work(name string, do func(watch qa.Watch) change) {
	if w.state.Job.Name != "" {
		return
	}
	w.jobs.number++
	mine, hand := w.jobs.number, w.jobs.hand
	ctx, stop := context.WithCancel(context.Background())
	w.jobs.doing, w.jobs.quiet, w.jobs.stop, w.jobs.writing = qa.Progress{}, true, stop, false
	w.apply(func(s desk.State) desk.State { return s.Working(name, -1) })
	run := func(watch qa.Watch) (c change) {
		defer func() {
			if fault := recover(); fault != nil {
				err := fmt.Errorf("a fault of ours, version %s: %v; nothing was changed", w.build.Version, fault)
				c = func(s desk.State) desk.State { return s.Failed(name, err) }
			}
		}()
		return do(watch)
	}
	done := func(c change) {
		stop()
		if mine == w.jobs.number {
			w.apply(func(s desk.State) desk.State { return c(s).Rested() })
			if then := w.jobs.then; then != nil {
				w.jobs.then = nil
				then()
			}
		}
	}
	if w.jobs.atOnce {
		done(run(qa.Watch{Context: ctx}))
		return
	}
	began := time.Now()
	told := began
	watch := qa.Watch{Context: ctx, Progress: func(p qa.Progress) {
		if now := time.Now(); now.Sub(began) >= shownAfter && now.Sub(told) >= toldEvery {
			told = now
			hand(func() { w.tell(mine, p) })
		}
	}}
	go func() {
		late := time.AfterFunc(shownAfter, func() { hand(func() { w.tell(mine, qa.Progress{}) }) })
		c := run(watch)
		late.Stop()
		hand(func() { done(c) })
		time.AfterFunc(givenBack, debug.FreeOSMemory) // a large file was read, and its view was made: what remains of both is given back
	}()
}

// aside finds something out off the window's thread while everything else goes on, and does on the thread what that gives.
func (w *window) aside(find func() func()) {
	if w.jobs.atOnce {
		find()()
		return
	}
	hand := w.jobs.hand
	go func() {
		do := find()
		hand(do)
	}()
}

// tell shows how far the job has come, where it still runs.
func (w *window) tell(job int, p qa.Progress) {
	if job != w.jobs.number || w.state.Job.Name == "" {
		return
	}
	first := w.jobs.quiet
	w.jobs.quiet = false
	if p.Doing != "" {
		w.jobs.doing = p
	}
	if first {
		w.show()
		return
	}
	w.banner.Refresh()
}

// writes says that the job is about to write: from here on it is not given up. It is an error where it was given up before.
func (j *jobs) writes(watch qa.Watch) error {
	j.end.Lock()
	defer j.end.Unlock()
	err := watch.Stop(qa.Progress{Doing: "writing"})
	j.writing = err == nil
	return err
}

// cancel gives up the job that runs, unless it writes already: the window is free at once, and what the job still brings back is
// not taken.
func (w *window) cancel() {
	w.jobs.end.Lock()
	defer w.jobs.end.Unlock()
	if w.jobs.stop == nil || w.jobs.writing {
		return
	}
	w.jobs.stop()
	w.jobs.number++
	w.apply(desk.State.Rested)
}

// failed is the change that says an error. A job that was stopped says nothing: who stopped it knows.
func failed(place string, err error) change {
	if errors.Is(err, context.Canceled) {
		return func(s desk.State) desk.State { return s }
	}
	return func(s desk.State) desk.State { return s.Failed(place, err) }
}

// onThread is how the program hands something to the window's thread.
func onThread(do func()) { fyne.Do(do) }
