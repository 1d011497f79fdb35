package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"lotpair/qa/figure/draw"
)

// scrolled is a region higher than its place, of which only what is seen is drawn: it stays fluent with any number of lines.
type scrolled struct {
	scroll  *container.Scroll
	content *sheet
}

// sheet is what moves inside a scrolled region.
type sheet struct {
	widget.BaseWidget
	palette func() draw.Palette
	window  *container.Scroll
	width   float32 // of its place: the height depends on it
	height  func(width float32) float32
	paint   func(p *pen, size fyne.Size, top, bottom float32)
	tapped  func(at fyne.Position)
	key     func(k fyne.KeyName) // nil: the keys scroll
	focused bool
	placing bool // its place is being changed: it is drawn when that is done
}

func newScrolled(s *sheet) *scrolled {
	out := &scrolled{content: s}
	s.ExtendBaseWidget(s)
	out.scroll = container.NewVScroll(s)
	s.window = out.scroll
	out.scroll.OnScrolled = func(fyne.Position) { s.Refresh() }
	return out
}

// place puts the region where it belongs and draws it.
func (s *scrolled) place(p *pen, x, y, w, h float32) {
	s.content.width, s.content.placing = w, true
	p.put(s.scroll, x, y, w, h)
	s.scroll.Refresh()
	s.content.placing = false
	s.content.Refresh()
}

// reveal scrolls just as far as is needed to see top to bottom.
func (s *scrolled) reveal(top, bottom float32) {
	at, h := s.scroll.Offset.Y, s.scroll.Size().Height
	switch {
	case h <= 0:
		return
	case top < at:
		at = top
	case bottom > at+h:
		at = bottom - h
	default:
		return
	}
	s.scroll.ScrollToOffset(fyne.NewPos(0, max(at, 0)))
	s.content.Refresh()
}

// CreateRenderer implements fyne.Widget.
func (s *sheet) CreateRenderer() fyne.WidgetRenderer {
	return &painter{
		of: s, palette: s.palette,
		draw: func(p *pen, size fyne.Size) {
			if s.placing {
				return
			}
			top := s.window.Offset.Y
			s.paint(p, size, top, top+s.window.Size().Height)
		},
		least: func() fyne.Size { return fyne.NewSize(0, s.height(s.width)) },
	}
}

// Tapped implements fyne.Tappable.
func (s *sheet) Tapped(e *fyne.PointEvent) {
	focus(s)
	if s.tapped != nil {
		s.tapped(e.Position)
	}
}

// focus gives the keys to what was clicked: what was typed elsewhere is an act before the click is one.
func focus(o interface {
	fyne.CanvasObject
	fyne.Focusable
},
) {
	c := fyne.CurrentApp().Driver().CanvasForObject(o)
	if c != nil && c.Focused() != o {
		c.Focus(o)
	}
}

// FocusGained implements fyne.Focusable.
func (s *sheet) FocusGained() {
	s.focused = true
	s.Refresh()
}

// FocusLost implements fyne.Focusable.
func (s *sheet) FocusLost() {
	s.focused = false
	s.Refresh()
}

// TypedRune implements fyne.Focusable.
func (s *sheet) TypedRune(rune) {}

// TypedKey implements fyne.Focusable.
func (s *sheet) TypedKey(e *fyne.KeyEvent) {
	passed(s, e)
	if s.key != nil {
		s.key(e.Name)
		return
	}
	s.scrollKey(e.Name)
}

// scrollKey scrolls by the keys that scroll.
func (s *sheet) scrollKey(k fyne.KeyName) {
	const step = 60
	switch k {
	case fyne.KeyDown:
		s.reach(step)
	case fyne.KeyUp:
		s.reach(-step)
	case fyne.KeyPageDown:
		s.reach(s.window.Size().Height)
	case fyne.KeyPageUp:
		s.reach(-s.window.Size().Height)
	}
}

// reach scrolls by so much, held at the ends.
func (s *sheet) reach(by float32) {
	most := s.Size().Height - s.window.Size().Height
	s.window.ScrollToOffset(fyne.NewPos(0, max(0, min(most, s.window.Offset.Y+by))))
	s.Refresh()
}
