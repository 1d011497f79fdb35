package app

import (
	"unicode/utf8"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
)

// Places on a page, from its top, in points.
const (
	pageRule    = 152 // what stands above it does not scroll
	findingLine = 18
	readingLine = 20
)

// side is how a page stands: the right page is the left one mirrored.
type side struct {
	p     *pen
	width float32
	right bool
}

// text sets a line from the page's outer edge inward.
func (s side) text(t string, y float32, f font, c colour) {
	t = f.fit(t, s.width-margin-8)
	if s.right {
		s.p.ending(t, s.width-margin, y, f, c)
		return
	}
	s.p.text(t, margin, y, f, c)
}

// paintPage draws what is known of one lot.
func (w *window) paintPage(p *pen, size fyne.Size, of qa.Side) {
	v := w.view.pages[of]
	s := side{p, size.Width, of == qa.Candidate}
	rows := w.leftRows
	heading := spacedWidth(v.Heading, fontLot11)
	if s.right {
		rows = w.rightRows
		p.spaced(v.Heading, size.Width-margin-heading, 28, fontLot11, p.CandidateText)
		p.put(w.mark(of), size.Width-margin-heading-20, 16, 16, 16)
		p.down(0.5, 0, size.Height, 1, p.Rule)
	} else {
		p.spaced(v.Heading, margin, 28, fontLot11, p.ReferenceText)
		p.put(w.mark(of), margin+heading+5, 16, 16, 16)
		p.down(size.Width-0.5, 0, size.Height, 1, p.Rule)
	}
	s.text(v.Lot, 54, fontLot, p.Text)
	s.text(v.Source, 74, fontPlain, p.Text)
	s.text(v.File, 98, fontNote, p.MutedText)
	s.text(v.Digest, 115, fontNote, p.MutedText)
	s.text(v.Parts, 138, fontPlain, p.Text)
	inner, outer := float32(20), float32(margin)
	if s.right {
		p.across(inner, size.Width-outer, pageRule, 1, p.Rule)
	} else {
		p.across(outer, size.Width-inner, pageRule, 1, p.Rule)
	}
	rows.place(p, 0, pageRule+4, size.Width, size.Height-pageRule-5)
}

// newPageRows is what scrolls on a page: the findings, then the readings.
func (w *window) newPageRows(of qa.Side) *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height: func(width float32) float32 {
			return w.readingsTop(of, width) + float32(len(w.view.pages[of].Readings))*readingLine + 8
		},
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			w.paintPageRows(p, size, of, top, bottom, out.content.focused)
		},
		tapped: func(at fyne.Position) {
			if i := int((at.Y - w.readingsTop(of, out.content.width)) / readingLine); at.Y >= w.readingsTop(of, out.content.width) {
				w.onReading(of, i)
			}
		},
		key: func(k fyne.KeyName) { w.pageKey(of, out, k) },
	})
	return out
}

// findingLines are the findings as wrapped on a page.
func (w *window) findingLines(of qa.Side, width float32) [][]string {
	var out [][]string
	for _, f := range w.view.pages[of].Findings {
		out = append(out, fontPlain.wrap(f, width-margin-12, width-margin-12))
	}
	return out
}

// readingsTop is where the first reading stands.
func (w *window) readingsTop(of qa.Side, width float32) float32 {
	n := 0
	for _, f := range w.findingLines(of, width) {
		n += len(f)
	}
	title := len(fontHeading.wrap(w.view.pages[of].FindingsTitle, width-margin-12, width-margin-12))
	return 6 + float32(title)*16 + float32(n)*findingLine + 24 + 20
}

func (w *window) paintPageRows(p *pen, size fyne.Size, of qa.Side, top, bottom float32, focused bool) {
	v := w.view.pages[of]
	s := side{p, size.Width, of == qa.Candidate}
	y := float32(18)
	for _, l := range fontHeading.wrap(v.FindingsTitle, size.Width-margin-12, size.Width-margin-12) {
		s.text(l, y, fontHeading, p.MutedText)
		y += 16
	}
	y += 4
	for _, f := range w.findingLines(of, size.Width) {
		for _, l := range f {
			s.text(l, y, fontPlain, p.Text)
			y += findingLine
		}
	}
	first := w.readingsTop(of, size.Width)
	s.text(v.ReadingsTitle, first-10, fontHeading, p.MutedText)
	c := columnsOf(v.Readings)
	for i := max(0, int((top-first)/readingLine)); i < len(v.Readings); i++ {
		y := first + float32(i)*readingLine
		if y+readingLine > bottom+2 {
			break // half a line would be neither read nor missed
		}
		if focused && i == w.cursor[of] {
			p.box(4, y, size.Width-8, readingLine, faint(p.Text, 0x14))
		}
		w.paintReading(s, v.Readings[i], c, y+15)
	}
}

// columns are how wide the cells and the values of a page are. Only the longest of each is measured.
type columns struct{ cell, value float32 }

func columnsOf(all []desk.ReadingView) columns {
	longest := func(of func(desk.ReadingView) string) string {
		most := ""
		for _, r := range all {
			if s := of(r); utf8.RuneCountInString(s) > utf8.RuneCountInString(most) {
				most = s
			}
		}
		return most
	}
	return columns{
		cell:  max(46, min(90, fontNote.width(longest(func(r desk.ReadingView) string { return r.Cell }))+14)),
		value: max(52, min(96, fontPlain.width(longest(func(r desk.ReadingView) string { return r.Value }))+8)),
	}
}

// paintReading draws one reading: its cell, its value, and why it is not used.
func (w *window) paintReading(s side, r desk.ReadingView, c columns, y float32) {
	p := s.p
	ink := p.Text
	if !r.Used {
		ink = p.MutedText
	}
	value := fontPlain.fit(r.Value, c.value)
	end := margin + c.cell + c.value
	cell := fontNote.fit(r.Cell, c.cell-4)
	if s.right {
		end = s.width - margin - c.cell
		p.ending(cell, s.width-margin, y, fontNote, p.MutedText)
	} else {
		p.text(cell, margin, y, fontNote, p.MutedText)
	}
	begin := p.ending(value, end, y, fontPlain, ink)
	if r.LeftOut {
		p.across(begin-1, end+1, y-4.5, 1, ink)
	}
	if r.Note == "" {
		return
	}
	if s.right {
		left := end - c.value - 10
		p.ending(fontAxis.fit(r.Note, left-10), left, y, fontAxis, p.MutedText)
		return
	}
	p.text(fontAxis.fit(r.Note, s.width-end-12-8), end+12, y, fontAxis, p.MutedText)
}

// pageKey moves along the readings of a page; return asks what is to become of the one the keys are on.
func (w *window) pageKey(of qa.Side, s *scrolled, k fyne.KeyName) {
	n := len(w.view.pages[of].Readings)
	at := w.cursor[of]
	switch k {
	case fyne.KeyDown:
		at++
	case fyne.KeyUp:
		at--
	case fyne.KeyPageDown:
		at += 10
	case fyne.KeyPageUp:
		at -= 10
	case fyne.KeyHome:
		at = 0
	case fyne.KeyEnd:
		at = n - 1
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		w.onReading(of, at)
		return
	default:
		return
	}
	w.cursor[of] = max(0, min(n-1, at))
	y := w.readingsTop(of, s.content.width) + float32(w.cursor[of])*readingLine
	if w.cursor[of] == 0 {
		y = 0
	}
	s.reveal(y, y+readingLine+8)
	s.content.Refresh()
}
