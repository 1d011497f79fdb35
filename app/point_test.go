package app

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"lotpair/app/desk"
	"lotpair/qa"
)

// TestPointingTellsTheReading points at a reading in each look: its value and its cell are told, and a click finds it on its page.
func TestPointingTellsTheReading(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	for _, l := range []desk.Look{desk.Spread, desk.Order, desk.Shape} {
		w.apply(func(s desk.State) desk.State { return s.WithLook(l) })
		w.win.Canvas().Capture() // painted
		marks := w.picture.Figure().Marks
		found := 0
		for _, m := range marks {
			if m.Reading == nil || !strings.HasPrefix(m.Name, "candidate") {
				continue
			}
			at := fyne.NewPos(float32(m.X), float32(m.Y))
			w.picture.MouseMoved(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}})
			near, ok := w.picture.Nearest(at)
			if !ok || w.tip.Hidden || !strings.Contains(w.tipText, near.Reading.Source.Place()) || !strings.HasPrefix(w.tipText, qa.Fixed(near.Reading.Value, 3)) {
				t.Fatalf("%v: got %q at a reading of %s", l, w.tipText, m.Reading.Source.Place())
			}
			w.picture.Tapped(&fyne.PointEvent{Position: at})
			if got := w.view.pages[qa.Candidate].Readings.At(w.cursor[qa.Candidate]).Source; got != near.Reading.Source {
				t.Errorf("%v: click found %v, want %v", l, got, near.Reading.Source)
			}
			if found++; found == 1 {
				shotOf(t, "pointed-"+l.String(), w.win.Canvas().Capture())
			}
		}
		if found != 38 {
			t.Errorf("%v: got %d readings of the candidate, want 38", l, found)
		}
		w.picture.MouseMoved(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(2, 2)}})
		if !w.tip.Hidden {
			t.Errorf("%v: beside every reading: got %q", l, w.tipText)
		}
	}
}

// many is a record of two lots of n readings of one characteristic.
func many(t testing.TB, n int) qa.Record {
	t.Helper()
	margin := 0.02
	series := func(shift float64) qa.Lot {
		s := qa.Series{Characteristic: "Wall", Rows: n, Readings: make([]qa.Reading, n)}
		for i := range n {
			s.Readings[i] = qa.Reading{Value: 4 + shift + float64((i*7919)%10007)*1e-6, Decimals: 6, Source: qa.Source{File: "wall.csv", Cell: fmt.Sprintf("C%d", i+2)}}
		}
		return qa.Lot{Rows: n, Series: []qa.Series{s}}
	}
	r := qa.Readings{Reference: series(0), Candidate: series(0.001), Characteristics: []qa.Characteristic{{Name: "Wall", Unit: "mm", Margin: &qa.Margin{Absolute: &margin}}}}
	res, err := qa.Compare(qa.Plan{}, qa.Readings{Reference: lotOf(r.Reference, 60), Candidate: lotOf(r.Candidate, 60), Characteristics: r.Characteristics}, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(qa.Plan{}, qa.File{Name: "plan.toml"}, r, res, "tester", time.Unix(0, 0))
}

// lotOf is the first n readings of a lot: enough for the figures beside a list of many.
func lotOf(l qa.Lot, n int) qa.Lot {
	s := l.Series[0]
	s.Readings, s.Rows = s.Readings[:min(n, len(s.Readings))], min(n, len(s.Readings))
	return qa.Lot{Rows: s.Rows, Series: []qa.Series{s}}
}

// TestTheLastOfAMillionReadingsIsReached walks to the end of the longest list there is and back.
func TestTheLastOfAMillionReadingsIsReached(t *testing.T) {
	const rows = 1 << 20
	w := opened(t, "", 1280, 800)
	rec := many(t, rows)
	w.apply(func(s desk.State) desk.State { return s.Opened("plan.toml", rec) })
	seen := func() string {
		var all []string
		for _, p := range texts(w.left, fyne.Position{}, placed{clipR: 2000, clipBottom: 2000}) {
			if p.bottom > p.clipTop && p.top < p.clipBottom {
				all = append(all, p.text)
			}
		}
		return " " + strings.Join(all, " ") + " "
	}
	w.leftRows.content.FocusGained()
	w.leftRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd})
	if w.cursor[qa.Reference] != rows-1 || !strings.Contains(seen(), fmt.Sprintf(" C%d ", rows+1)) {
		t.Errorf("end: got reading %d, seen %.300s", w.cursor[qa.Reference], seen())
	}
	w.leftRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyUp})
	if !strings.Contains(seen(), fmt.Sprintf(" C%d ", rows)) {
		t.Errorf("one up: seen %.300s", seen())
	}
	w.leftRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyHome})
	if !strings.Contains(seen(), " C2 ") {
		t.Errorf("home: seen %.300s", seen())
	}
}

// BenchmarkLooks draws each look of 2 x 20,000 readings at the size of the bench.
func BenchmarkLooks(b *testing.B) {
	w := opened(b, "", 1280, 800)
	rec := many(b, 20_000)
	w.apply(func(s desk.State) desk.State { return s.Opened("plan.toml", rec) })
	for _, l := range []desk.Look{desk.Spread, desk.Order, desk.Shape} {
		b.Run(l.String(), func(b *testing.B) {
			w.apply(func(s desk.State) desk.State { return s.WithLook(l) })
			for b.Loop() {
				if f, ok := w.state.Picture(560, 260); !ok || len(f.Marks) > 3000 {
					b.Fatalf("marks: got %d, want few", len(f.Marks))
				}
			}
		})
	}
}
