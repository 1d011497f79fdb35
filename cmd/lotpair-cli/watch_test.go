package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"lotpair/qa"
)

// A run that was stopped says so, has its own exit code and writes nothing; a terminal is told of what takes long.
func TestStopped(t *testing.T) {
	dir := t.TempDir()
	demo, err := filepath.Abs("../../testdata/demo")
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	stop()
	for _, args := range [][]string{
		{"inspect", filepath.Join(demo, "hub-shell.xlsx")},
		{"compare", filepath.Join(demo, "plan.toml"), "--workbook", "out.xlsx"},
	} {
		var o, e bytes.Buffer
		p := program{in: &bytes.Buffer{}, out: &o, err: &e, now: func() time.Time { return fixedTime }, workDir: dir, watch: qa.Watch{Context: ctx}}
		if code := p.run(args); code != exitStopped || o.Len() > 0 || !strings.Contains(e.String(), "was stopped") {
			t.Errorf("%v: got exit %d, %q and %q, want it stopped", args, code, o.String(), e.String())
		}
	}
	p := program{now: func() time.Time { return fixedTime }, workDir: dir, watch: qa.Watch{Context: ctx}}
	if err := p.save("late.xlsx", []byte("x"), false); err == nil {
		t.Error("late.xlsx: got it written, want nothing written after the stop")
	}
	if left, err := os.ReadDir(dir); err != nil || len(left) > 0 {
		t.Errorf("got %v, %v left behind, want nothing", left, err)
	}
}

// The line that says how far the work is comes late, not often, and is gone before anything else is written.
func TestProgressLine(t *testing.T) {
	var screen bytes.Buffer
	at := fixedTime
	p := program{now: func() time.Time { return at }}
	l := &line{w: &screen}
	tell := p.progress(l)
	for range 6 {
		tell(qa.Progress{Doing: "reading", Of: "long.xlsx", Done: 1, Total: 4})
		at = at.Add(90 * time.Millisecond)
	}
	out := behind{l, &screen}
	if _, err := out.Write([]byte("done\n")); err != nil {
		t.Fatal(err)
	}
	const want = "long.xlsx: reading 25 %\r\r\x1b[Kdone\n"
	if got := screen.String(); got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
