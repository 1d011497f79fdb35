package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"

	"lotpair/app/desk"
)

// field is a line to type in, in a dialog: return does what the dialog is for, escape leaves it.
type field struct {
	widget.Entry
	leave func()
	seen  func(fyne.CanvasObject) // brings it into sight; nil where nothing scrolls
}

// FocusGained implements fyne.Focusable.
func (f *field) FocusGained() {
	f.Entry.FocusGained()
	if f.seen != nil {
		f.seen(f)
	}
}

func (w *window) newField(text string) *field {
	f := &field{leave: w.leaveDialog}
	f.ExtendBaseWidget(f)
	f.SetText(text)
	return f
}

// TypedKey implements fyne.Focusable.
func (f *field) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		f.leave()
		return
	}
	f.Entry.TypedKey(e)
}

// pick is one of several words, in a dialog: escape leaves it.
type pick struct {
	widget.Select
	leave func()
	seen  func(fyne.CanvasObject)
}

func (w *window) newPick(words []string, chosen string) *pick {
	p := &pick{leave: w.leaveDialog}
	p.ExtendBaseWidget(p)
	p.Options = words
	p.SetSelected(chosen)
	return p
}

// FocusGained implements fyne.Focusable.
func (p *pick) FocusGained() {
	p.Select.FocusGained()
	if p.seen != nil {
		p.seen(p)
	}
}

// TypedKey implements fyne.Focusable.
func (p *pick) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		p.leave()
		return
	}
	p.Select.TypedKey(e)
}

// present shows a dialog, over the one that is open where there is one; escape leaves it.
func (w *window) present(d dialog.Dialog, width, height float32) {
	below := w.dialog
	w.dialog = d
	d.SetOnClosed(func() {
		if w.dialog == d {
			w.dialog = below
		}
	})
	d.Resize(fyne.NewSize(width, height))
	d.Show()
}

// leaveDialog closes the dialog that is open, as Cancel does.
func (w *window) leaveDialog() {
	if w.dialog != nil {
		w.dialog.Dismiss()
	}
}

// typed takes the keys that no control took.
func (w *window) typed(e *fyne.KeyEvent) {
	switch {
	case e.Name == fyne.KeyEscape && w.dialog == nil && w.state.Job.Name != "":
		w.cancel()
	case w.dialog == nil && e.Name == fyne.KeyF1:
		w.showWords()
	case w.dialog == nil && e.Name >= fyne.Key1 && e.Name <= fyne.Key5:
		w.lookKey(e.Name)
	case w.dialog == nil:
		w.spineKey(e.Name)
	case e.Name == fyne.KeyEscape:
		w.leaveDialog()
	}
}

// lookKey looks at the bench in the way of its number.
func (w *window) lookKey(k fyne.KeyName) {
	w.apply(func(s desk.State) desk.State { return s.WithLook(desk.Look(k[0] - '1')) })
}

// passed hands the keys that mean the same everywhere from the control that has the keys to the window.
func passed(from fyne.CanvasObject, e *fyne.KeyEvent) {
	if e.Name != fyne.KeyEscape && e.Name != fyne.KeyF1 && (e.Name < fyne.Key1 || e.Name > fyne.Key5) {
		return
	}
	if c := fyne.CurrentApp().Driver().CanvasForObject(from); c != nil && c.OnTypedKey() != nil {
		c.OnTypedKey()(e)
	}
}
