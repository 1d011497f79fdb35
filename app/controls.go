package app

import (
	"fmt"
	"os"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"
)

// tellControls keeps a file that says where every text and every line to type in stands, in points from the window's corner: the
// toolkit tells no other program, and the tests that use the window as a person does must find what a person sees.
func (w *window) tellControls(file string) {
	if file == "" {
		return
	}
	last, tick := "", 0
	clock := fyne.NewAnimation(time.Second, func(float32) {
		if tick++; tick%2 != 0 {
			return
		}
		now := w.controls()
		if now == last {
			return
		}
		last = now
		if err := os.WriteFile(file+".new", []byte(now), 0o600); err == nil {
			_ = os.Rename(file+".new", file) // the reader sees the old or the new; a failure shows there
		}
	})
	clock.RepeatCount = fyne.AnimationRepeatForever
	clock.Start()
}

// controls are the texts and lines that can be seen, a line each: what it is, its box, and what stands in it. What lies over the
// window hides the window. "keys" is the control that has the keys.
func (w *window) controls() string {
	var b strings.Builder
	c := w.win.Canvas()
	fmt.Fprintf(&b, "scale\t%.3f\nbusy\t%v\n", c.Scale(), w.state.Job.Name != "")
	if f, ok := c.Focused().(fyne.CanvasObject); ok {
		at, size := fyne.CurrentApp().Driver().AbsolutePositionForObject(f), f.Size()
		what := ""
		if x, ok := f.(*button); ok {
			what = x.label
		}
		fmt.Fprintf(&b, "keys\t%.1f\t%.1f\t%.1f\t%.1f\t%s\n", at.X, at.Y, at.X+size.Width, at.Y+size.Height, what)
	}
	box := seen{right: c.Size().Width, bottom: c.Size().Height}
	if over := c.Overlays().Top(); over != nil {
		writeControls(&b, over, fyne.Position{}, box)
	} else {
		writeControls(&b, c.Content(), fyne.Position{}, box)
	}
	return b.String()
}

// seen is what of the window can be seen at a place.
type seen struct{ left, top, right, bottom float32 }

func (s seen) within(at fyne.Position, size fyne.Size) seen {
	return seen{max(s.left, at.X), max(s.top, at.Y), min(s.right, at.X+size.Width), min(s.bottom, at.Y+size.Height)}
}

func writeControls(b *strings.Builder, o fyne.CanvasObject, at fyne.Position, box seen) {
	if !o.Visible() {
		return
	}
	at = at.Add(o.Position())
	say := func(what, text string) {
		x := box.within(at, o.Size())
		if x.right-x.left > 1 && x.bottom-x.top > 6 {
			fmt.Fprintf(b, "%s\t%.1f\t%.1f\t%.1f\t%.1f\t%s\n", what, x.left, x.top, x.right, x.bottom, strings.ReplaceAll(text, "\n", " "))
		}
	}
	var inside []fyne.CanvasObject
	switch x := o.(type) {
	case *canvas.Text:
		say("text", x.Text)
	case *fyne.Container:
		inside = x.Objects
	case *field:
		say("line", shown(&x.Entry))
	case *line:
		say("line", shown(&x.Entry))
	case *pathLine:
		say("line", shown(&x.Entry))
	case *search:
		say("line", shown(&x.Entry))
	case fyne.Widget:
		if _, ok := x.(*container.Scroll); ok {
			box = box.within(at, o.Size())
		}
		inside = test.WidgetRenderer(x).Objects()
	}
	for _, i := range inside {
		writeControls(b, i, at, box)
	}
}

// shown is the text of a line; what is secret is not told.
func shown(e *widget.Entry) string {
	if e.Password {
		return "(secret)"
	}
	return e.Text
}
