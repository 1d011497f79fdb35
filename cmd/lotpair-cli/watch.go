package main

import (
	"context"
	"fmt"
	"io"
	"os"
	"os/signal"
	"time"

	"golang.org/x/term"

	"lotpair/exports"
	"lotpair/qa"
)

// How the program is watched: it stops at the first Ctrl-C, at the latest after a short while where it does something that
// looks at no watch; what is being put in its place is put there whole. A second Ctrl-C ends it as the system does.
const stopWithin = 300 * time.Millisecond

// How a terminal is told of what takes long (contract: console).
const (
	tellAfter = 300 * time.Millisecond
	tellEvery = 100 * time.Millisecond
)

// interrupted is the watch that Ctrl-C ends.
func (p *program) interrupted() qa.Watch {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	context.AfterFunc(ctx, func() {
		stop()
		time.Sleep(stopWithin)
		p.writing.Lock()
		fmt.Fprintln(os.Stderr, "stopped; nothing was written")
		os.Exit(exitStopped)
	})
	w := qa.Watch{Context: ctx}
	if term.IsTerminal(int(os.Stderr.Fd())) {
		line := &line{w: os.Stderr}
		p.out, p.err = behind{line, p.out}, behind{line, p.err}
		w.Progress = p.progress(line)
	}
	return w
}

// line is the terminal's line that says how far the work is: it is written over, and gone before anything else is written.
type line struct {
	w     io.Writer
	shown bool
}

func (l *line) clear() {
	if l.shown {
		l.shown = false
		fmt.Fprint(l.w, "\r\x1b[K")
	}
}

// behind writes behind the line.
type behind struct {
	line *line
	w    io.Writer
}

// Write clears the line first.
func (b behind) Write(p []byte) (int, error) {
	b.line.clear()
	return b.w.Write(p)
}

// progress tells the line of what takes long.
func (p *program) progress(l *line) func(qa.Progress) {
	begun := p.now()
	last := time.Time{}
	return func(at qa.Progress) {
		now := p.now()
		if now.Sub(begun) < tellAfter || now.Sub(last) < tellEvery {
			return
		}
		last = now
		text := at.Of + ": " + at.Doing
		if s := at.Share(); s >= 0 {
			text += fmt.Sprintf(" %.0f %%", 100*s)
		}
		if r := []rune(text); len(r) > 75 {
			text = string(r[:75])
		}
		l.clear()
		l.shown = true
		fmt.Fprintf(l.w, "%s\r", text)
	}
}

// save puts a file in its place, unless the program was stopped before.
func (p *program) save(name string, b []byte, force bool) error {
	p.writing.Lock()
	defer p.writing.Unlock()
	if err := p.watch.Stop(qa.Progress{Doing: "writing", Of: name}); err != nil {
		return err
	}
	return exports.Save(p.file(name), b, force)
}
