package exports_test

import (
	"bytes"
	"context"
	"errors"
	"testing"

	"lotpair/exports"
	"lotpair/qa"
)

// A watch is told of a large workbook, changes nothing of it, and stops it.
func TestWorkbookUnderWatch(t *testing.T) {
	rec := made(t, 1, 20_000)
	want, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	told := map[string]int64{}
	ctx, stop := context.WithCancel(context.Background())
	defer stop()
	got, err := exports.Under(qa.Watch{Context: ctx, Progress: func(p qa.Progress) {
		if p.Doing != "writing" || p.Share() > 1 {
			t.Errorf("got %+v, want writing and a share", p)
		}
		told[p.Of] = p.Done
	}}).Workbook(rec)
	if err != nil || !bytes.Equal(got, want) || told["Readings"] < 20_000 {
		t.Errorf("got %v, told of %v, the same bytes: %v; want readings told of", err, told, bytes.Equal(got, want))
	}
	got, err = exports.Under(qa.Watch{Context: ctx, Progress: func(qa.Progress) { stop() }}).Workbook(rec)
	if stopped, ok := errors.AsType[*qa.StoppedError](err); !ok || !errors.Is(err, context.Canceled) || stopped.Doing != "writing" || got != nil {
		t.Errorf("got %d bytes and %v, want none and a *qa.StoppedError", len(got), err)
	}
}
