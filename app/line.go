package app

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// line is a line to type in, in the window itself: ink on a rule. What is typed shows its consequence at once; it is an act
// when the keys leave the line, or on return.
type line struct {
	widget.Entry
	box      fyne.CanvasObject
	typed    func(text string)
	left     func()
	shortcut func(fyne.Shortcut) bool
	fault    string // what is wrong with what was typed
	setting  bool   // the window writes, not the user
	focused  bool
}

func (w *window) newLine(typed func(string), left func()) *line {
	l := &line{typed: typed, left: left, shortcut: w.shortcut}
	l.ExtendBaseWidget(l)
	l.OnChanged = func(text string) {
		if !l.setting {
			l.typed(text)
		}
	}
	l.OnSubmitted = func(string) { l.left() }
	l.box = container.NewThemeOverride(l, lineLook{w.look})
	return l
}

// show writes what the plan says, unless the user is typing.
func (l *line) show(text string) {
	if l.focused || l.Text == text {
		return
	}
	l.setting = true
	l.SetText(text)
	l.setting = false
	l.fault = ""
}

// FocusGained implements fyne.Focusable.
func (l *line) FocusGained() {
	l.focused = true
	l.Entry.FocusGained()
}

// FocusLost implements fyne.Focusable.
func (l *line) FocusLost() {
	l.focused = false
	l.Entry.FocusLost()
	l.left()
}

// TypedKey implements fyne.Focusable.
func (l *line) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		passed(l, e)
		return
	}
	l.Entry.TypedKey(e)
}

// TypedShortcut implements fyne.Shortcutable.
func (l *line) TypedShortcut(s fyne.Shortcut) {
	if !l.shortcut(s) {
		l.Entry.TypedShortcut(s)
	}
}

// lineLook is the window's look without a frame around lines to type in; the one that has the keys has a frame.
type lineLook struct{ look }

// Color implements fyne.Theme.
func (l lineLook) Color(name fyne.ThemeColorName, v fyne.ThemeVariant) color.Color {
	if name == theme.ColorNameInputBorder {
		return color.Transparent
	}
	return l.look.Color(name, v)
}

// Size implements fyne.Theme.
func (l lineLook) Size(name fyne.ThemeSizeName) float32 {
	if name == theme.SizeNameInnerPadding {
		return 4
	}
	return l.look.Size(name)
}

// putLine places a line to type in with its label above and what follows it; y is the label's baseline.
func (w *window) putLine(p *pen, l *line, label, after string, x, y, width float32) {
	p.text(fontTiny.fit(label, width), x, y, fontTiny, p.MutedText)
	room := width
	if after != "" {
		room -= fontNote.width(after) + 6
		p.ending(after, x+width, y+25, fontNote, p.MutedText)
	}
	if l.Disabled() { // it can be read, not changed
		p.text(fontBody.fit(l.Text, room-4), x+2, y+26, fontBody, p.Text)
	} else {
		p.put(l.box, x-2, y+6, room, 28)
	}
	thick := float32(1.2)
	if l.fault != "" {
		thick = 2.4
	}
	p.across(x, x+width, y+35, thick, p.Text)
}
