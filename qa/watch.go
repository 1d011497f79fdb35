package qa

import (
	"context"
	"fmt"
)

// Watch follows a long job and can stop it. The zero Watch does neither. It changes nothing of what the job comes to.
type Watch struct {
	Context  context.Context // its end stops the job; nil: nothing does
	Progress func(Progress)  // told now and then, by whoever does the job and while it waits; nil: nobody is told
}

// Progress says how far a job has come.
type Progress struct {
	Doing string // "reading", "finding the layout", "taking the readings", "comparing"
	Of    string // the file, sheet or characteristic that it is about
	Done  int64  // of Total; its unit is that of the work and means nothing outside
	Total int64  // 0 where it is not known
}

// Share is how much of this part of the job is done, in [0,1]; -1 where it is not known.
func (p Progress) Share() float64 {
	if p.Total <= 0 {
		return -1
	}
	return min(1, max(0, float64(p.Done)/float64(p.Total)))
}

// StoppedError says that a job was stopped before its end, by its watch. Nothing of it is left.
type StoppedError struct {
	Progress       // how far it had come
	Err      error // why: context.Canceled, context.DeadlineExceeded or the cause that was given
}

// Error says what was stopped and why.
func (e *StoppedError) Error() string {
	place := ""
	if e.Of != "" {
		place = e.Of + ": "
	}
	return fmt.Sprintf("%s%s was stopped (%v); nothing was decided and nothing written", place, e.Doing, e.Err)
}

// Unwrap is why the job was stopped.
func (e *StoppedError) Unwrap() error { return e.Err }

// Told tells how far the job has come, and gives a *StoppedError where it is to stop. A job calls it often enough to stop
// within a blink and seldom enough that it costs nothing.
func (w Watch) Told(p Progress) error {
	if w.Context != nil {
		if w.Context.Err() != nil {
			return &StoppedError{Progress: p, Err: context.Cause(w.Context)}
		}
	}
	if w.Progress != nil {
		w.Progress(p)
	}
	return nil
}

// Stop gives a *StoppedError where the job is to stop, and tells nothing.
func (w Watch) Stop(p Progress) error {
	return Watch{Context: w.Context}.Told(p)
}

// comparing is what Compare tells its watch.
const comparing = "comparing"

// blocks does the blocks of a resampling one after another and stops between two of them; what it comes to then is thrown away
// with the whole comparison.
func (w Watch) blocks(of string) func(blocks int, do func(block int)) {
	return func(blocks int, do func(block int)) {
		for b := range blocks {
			if w.Stop(Progress{Doing: comparing, Of: of}) != nil {
				return
			}
			do(b)
		}
	}
}
