package app

import (
	"sort"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
)

// pageRows is how the findings and readings of one page stand at one width. Readings that are not used stand first and may
// take several lines, for their reason; the others take one line each.
type pageRows struct {
	width    float32
	title    []string
	findings []string
	columns  columns
	first    float32   // where the readings begin
	notes    []note    // of the readings not used: the lines of their reasons
	tops     []float32 // of the readings not used
	rest     float32   // where those in use begin
	readings desk.Readings
}

// note is the lines of a reason: beside the reading, or below it where it is long.
type note struct {
	lines []string
	below bool
}

// mostNotes bounds how many reasons are wrapped; a page with more shows the others in one line each.
const mostNotes = 500

func (w *window) pageRowsAt(of qa.Side, width float32) *pageRows {
	if r, ok := w.rows[of]; ok && r.width == width {
		return r
	}
	v, room := w.view.pages[of], width-margin-12
	r := &pageRows{width: width, title: fontHeading.wrap(v.FindingsTitle, room, room), columns: columnsOf(v.Readings), readings: v.Readings}
	for _, f := range v.Findings {
		r.findings = append(r.findings, fontPlain.wrap(f, room, room)...)
	}
	r.first = 6 + float32(len(r.title))*16 + float32(len(r.findings))*findingLine + 40
	y := r.first
	for i := range min(v.Readings.Unused(), mostNotes) {
		reason := v.Readings.At(i).Note
		beside := width - margin - r.columns.cell - r.columns.value - 20
		n := note{lines: fontAxis.wrap(reason, beside, beside)}
		height := float32(max(0, len(n.lines)-1)) * noteLine
		if len(n.lines) > 2 {
			n = note{lines: fontAxis.wrap(reason, room, room), below: true}
			height = float32(len(n.lines))*noteLine + 4
		}
		r.notes, r.tops = append(r.notes, n), append(r.tops, y)
		y += readingLine + height
	}
	r.rest = y
	w.rows[of] = r
	return r
}

// top is where a reading stands.
func (r *pageRows) top(i int) float32 {
	if i < len(r.tops) {
		return r.tops[i]
	}
	return r.rest + float32(i-len(r.tops))*readingLine
}

// at is the reading at a height; -1 above the first.
func (r *pageRows) at(y float32) int {
	switch {
	case y < r.first:
		return -1
	case y >= r.rest:
		return len(r.tops) + int((y-r.rest)/readingLine)
	}
	return sort.Search(len(r.tops), func(i int) bool { return r.tops[i] > y }) - 1
}

func (r *pageRows) height() float32 { return r.top(r.readings.Len()) + 8 }

// newPageRows is what scrolls on a page: the findings, then the readings.
func (w *window) newPageRows(of qa.Side) *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height:  func(width float32) float32 { return w.pageRowsAt(of, width).height() },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			w.paintPageRows(p, size, of, top, bottom, out.content.focused)
		},
		tapped: func(at fyne.Position) { w.onReading(of, w.pageRowsAt(of, out.content.width).at(at.Y)) },
		key:    func(k fyne.KeyName) { w.pageKey(of, out, k) },
	})
	return out
}

func (w *window) paintPageRows(p *pen, size fyne.Size, of qa.Side, top, bottom float32, focused bool) {
	r := w.pageRowsAt(of, size.Width)
	s := side{p, size.Width, of == qa.Candidate}
	y := float32(18)
	for _, l := range r.title {
		s.text(l, y, fontHeading, p.MutedText)
		y += 16
	}
	y += 4
	for _, l := range r.findings {
		s.text(l, y, fontPlain, p.Text)
		y += findingLine
	}
	if r.first-6 <= bottom {
		s.text(w.view.pages[of].ReadingsTitle, r.first-10, fontHeading, p.MutedText)
	}
	for i := max(0, r.at(top)); i < r.readings.Len(); i++ {
		x := w.readingShown(r.readings.At(i))
		y, end := r.top(i), r.top(i+1)
		if y+readingLine > bottom+2 {
			break // half a line would be neither read nor missed
		}
		if focused && i == w.cursor[of] {
			p.box(4, y, size.Width-8, end-y, faint(p.Text, 0x14))
		}
		var n note
		if i < len(r.notes) {
			n = r.notes[i]
		} else if x.Note != "" {
			n.lines = []string{fontAxis.fit(x.Note, size.Width-margin-r.columns.cell-r.columns.value-20)}
		}
		for len(n.lines) > 0 && y+float32(len(n.lines)-1)*noteLine+readingLine > bottom+2 {
			n.lines = n.lines[:len(n.lines)-1] // nor half a line of the reason
		}
		paintReading(s, x, n, r.columns, y+15)
	}
}

// columns are how wide the cells and the values of a page are. Only the longest of each is measured.
type columns struct{ cell, value float32 }

func columnsOf(all desk.Readings) columns {
	cell, value := all.Longest()
	return columns{cell: max(36, min(90, fontNote.width(cell)+12)), value: max(48, min(96, fontPlain.width(value)+8))}
}

// paintReading draws one reading: its cell, its value, and why it is not used.
func paintReading(s side, r desk.ReadingView, n note, c columns, y float32) {
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
	for i, l := range n.lines {
		at := y + float32(i)*noteLine
		switch {
		case n.below:
			s.text(l, at+noteLine+1, fontAxis, p.MutedText)
		case s.right:
			p.ending(l, end-c.value-10, at, fontAxis, p.MutedText)
		default:
			p.text(l, end+12, at, fontAxis, p.MutedText)
		}
	}
}

// pageKey moves along the readings of a page; return asks what is to become of the one the keys are on.
func (w *window) pageKey(of qa.Side, s *scrolled, k fyne.KeyName) {
	r := w.pageRowsAt(of, s.content.width)
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
		at = r.readings.Len() - 1
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		w.onReading(of, at)
		return
	default:
		return
	}
	at = max(0, min(r.readings.Len()-1, at))
	w.cursor[of] = at
	top := r.top(at)
	if at == 0 && r.top(1) <= s.scroll.Size().Height {
		top = 0 // the findings come into sight again
	}
	s.reveal(top, r.top(at+1)+4)
	s.content.Refresh()
}
