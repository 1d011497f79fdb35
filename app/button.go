package app

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"lotpair/qa/figure/draw"
)

// kind is how much a button asks to be pressed.
type kind int

const (
	plain  kind = iota // an outline
	main               // filled with ink
	quiet              // words alone
	choice             // words alone, one of several of which one is chosen
	strong             // a word of a sentence that is a choice: bold and underlined
	word               // a choice at the left of its line
	bare               // nothing of its own: what lies below it is pressed
)

// button is a button as the drawings of the window have it, reached by Tab and pressed by space or return.
type button struct {
	widget.BaseWidget
	palette  func() draw.Palette
	label    string
	kind     kind
	disabled bool
	chosen   bool // of a choice
	press    func()

	hovered, focused bool
}

func newButton(palette func() draw.Palette, label string, k kind, press func()) *button {
	b := &button{palette: palette, label: label, kind: k, press: press}
	b.ExtendBaseWidget(b)
	return b
}

// font is the font of the label.
func (b *button) font() font {
	switch {
	case b.kind == main || b.chosen:
		return fontButton
	case b.kind == strong:
		return fontStrong
	case b.kind == word:
		return fontBody
	}
	return fontPlain
}

// wide is how wide the button wants to be.
func (b *button) wide() float32 {
	switch b.kind {
	case quiet:
		return b.font().width(b.label) + 12
	case choice:
		return fontButton.width(b.label) + 12 // the same chosen or not, so that nothing moves
	}
	return b.font().width(b.label) + 56
}

// CreateRenderer implements fyne.Widget.
func (b *button) CreateRenderer() fyne.WidgetRenderer {
	return &painter{of: b, palette: b.palette, draw: b.paint, least: func() fyne.Size { return fyne.NewSize(b.wide(), 28) }}
}

func (b *button) paint(p *pen, size fyne.Size) {
	ink, ground := p.Text, color.Color(color.Transparent) // which the toolkit does not draw
	if b.kind == main {
		ink, ground = p.Paper, p.Text
	}
	if b.kind == choice && !b.chosen {
		ink = p.MutedText
	}
	if b.disabled {
		ink, ground = p.MutedText, color.Color(color.Transparent)
	}
	r := p.box(0, 0, size.Width, size.Height, ground)
	r.CornerRadius = 3
	switch {
	case b.kind != plain && b.kind != main && b.focused:
		r.StrokeColor, r.StrokeWidth = p.Text, 1.2
	case b.kind == quiet || b.kind == choice || b.kind == strong || b.kind == word || b.kind == bare:
	case b.disabled:
		r.StrokeColor, r.StrokeWidth = p.Rule, 1.2
	default:
		r.StrokeColor, r.StrokeWidth = p.Text, 1.2
	}
	if b.kind == bare {
		return // its label is its name, for who cannot see what lies below it
	}
	f := b.font()
	label := f.fit(b.label, size.Width-8)
	base := size.Height/2 + 5
	if b.kind == word {
		p.text(label, 2, base, f, ink)
		if !b.disabled {
			p.ending("▾", size.Width-4, base, fontTiny, p.MutedText)
		}
		return
	}
	p.centred(label, size.Width/2, base, f, ink)
	switch w := f.width(label); {
	case b.chosen:
		p.across(size.Width/2-w/2, size.Width/2+w/2, base+6, 2, ink)
	case b.focused:
		p.across(size.Width/2-w/2, size.Width/2+w/2, base+4, 2, ink)
	case b.hovered || b.kind == quiet || b.kind == strong:
		p.across(size.Width/2-w/2, size.Width/2+w/2, base+3, 1, ink)
	}
}

func (b *button) act() {
	if !b.disabled && b.press != nil {
		b.press()
	}
}

// Tapped implements fyne.Tappable.
func (b *button) Tapped(*fyne.PointEvent) {
	focus(b)
	b.act()
}

// MouseIn implements desktop.Hoverable.
func (b *button) MouseIn(*desktop.MouseEvent) {
	b.hovered = !b.disabled
	b.Refresh()
}

// MouseMoved implements desktop.Hoverable.
func (b *button) MouseMoved(*desktop.MouseEvent) {}

// MouseOut implements desktop.Hoverable.
func (b *button) MouseOut() {
	b.hovered = false
	b.Refresh()
}

// Cursor implements desktop.Cursorable.
func (b *button) Cursor() desktop.Cursor { return desktop.PointerCursor }

// FocusGained implements fyne.Focusable.
func (b *button) FocusGained() {
	b.focused = true
	b.Refresh()
}

// FocusLost implements fyne.Focusable.
func (b *button) FocusLost() {
	b.focused = false
	b.Refresh()
}

// TypedRune implements fyne.Focusable.
func (b *button) TypedRune(rune) {}

// TypedKey implements fyne.Focusable.
func (b *button) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeySpace, fyne.KeyReturn, fyne.KeyEnter:
		b.act()
	default:
		passed(b, e)
	}
}
