package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// form is a dialog of many lines: it scrolls, says at once what the lines come to, and stays open with what is wrong until it
// is right.
type form struct {
	w      *window
	items  []*widget.FormItem
	first  fyne.Focusable
	fields []*field
	body   *container.Scroll
	said   *widget.Label // what the lines come to, or what is wrong
	live   func() []string
}

// barRoom keeps the bar that scrolls a form off its lines.
const barRoom = 14

func (w *window) newForm() *form { return &form{w: w, said: wrapped("")} }

func wrapped(text string) *widget.Label {
	l := widget.NewLabel(text)
	l.Wrapping, l.Selectable = fyne.TextWrapWord, true
	return l
}

// text is a line to type in; hint is shown below it.
func (f *form) text(label, value, hint string) *field {
	x := f.w.newField(value)
	x.OnChanged, x.seen = func(string) { f.say() }, f.reveal
	f.fields = append(f.fields, x)
	f.add(label, x, hint)
	return x
}

// reveal scrolls as far as is needed to see what has the keys.
func (f *form) reveal(o fyne.CanvasObject) {
	if f.body == nil {
		return
	}
	d := fyne.CurrentApp().Driver()
	top := d.AbsolutePositionForObject(o).Y - d.AbsolutePositionForObject(f.body.Content).Y
	bottom := top + o.Size().Height + 24 // with its hint
	at, tall := f.body.Offset.Y, f.body.Size().Height
	switch {
	case top < at:
		at = top
	case bottom > at+tall:
		at = bottom - tall
	default:
		return
	}
	f.body.ScrollToOffset(fyne.NewPos(0, max(at, 0)))
}

// secret is a line whose text is not shown.
func (f *form) secret(label, hint string) *field {
	x := f.text(label, "", hint)
	x.Password = true
	return x
}

// choice is one of several words.
func (f *form) choice(label, value string, words []string, hint string) *pick {
	x := f.w.newPick(words, value)
	x.OnChanged, x.seen = func(string) { f.say() }, f.reveal
	f.add(label, x, hint)
	return x
}

// add is a line with any control.
func (f *form) add(label string, o fyne.CanvasObject, hint string) {
	item := widget.NewFormItem(label, o)
	item.HintText = f.w.shown(hint)
	f.items = append(f.items, item)
	if c, ok := o.(fyne.Focusable); ok && f.first == nil {
		f.first = c
	}
}

// say says what the lines come to.
func (f *form) say() {
	if f.live == nil {
		f.said.SetText("")
		return
	}
	f.said.SetText(f.w.shown(joinLines(f.live())))
}

// ask shows the form. do is called on confirm; what it returns is said in the form, which then stays.
func (f *form) ask(title, confirm string, do func() error) {
	w := f.w
	content := container.New(layout.NewCustomPaddedLayout(0, 0, 0, barRoom), widget.NewForm(f.items...))
	f.body = container.NewVScroll(content)
	below := container.NewVScroll(f.said)
	room := float32(46) // two lines of what is wrong
	if f.live != nil {
		room = 84
	}
	below.SetMinSize(fyne.NewSize(10, room))
	d := dialog.NewCustomWithoutButtons(title, container.NewBorder(nil, below, nil, nil, f.body), w.win)
	try := func() {
		if err := do(); err != nil {
			f.said.SetText(f.w.shown(err.Error()))
			return
		}
		d.Hide()
	}
	cancel := newButton(w.palette, "Cancel", plain, d.Hide)
	ok := newButton(w.palette, confirm, main, try)
	d.SetButtons([]fyne.CanvasObject{container.New(layout.NewHBoxLayout(), cancel, ok)})
	for _, x := range f.fields {
		x.OnSubmitted = func(string) { try() }
	}
	f.say()
	size := w.win.Canvas().Size()
	wide := min(760, size.Width-80)
	content.Resize(fyne.NewSize(wide-40, 10)) // paragraphs are as tall as their width makes them
	tall := content.MinSize().Height + room + 130
	w.present(d, wide, min(tall, size.Height-60))
	if f.first == nil {
		f.first = ok
	}
	w.win.Canvas().Focus(f.first)
}

func joinLines(all []string) string {
	out := ""
	for i, s := range all {
		if i > 0 {
			out += "\n"
		}
		out += s
	}
	return out
}
