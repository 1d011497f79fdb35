package app

import (
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/qa"
	"lotpair/qa/figure"
)

// sideOf is the lot that a mark belongs to.
func sideOf(m figure.Mark) qa.Side {
	if strings.HasPrefix(m.Name, string(qa.Candidate)) {
		return qa.Candidate
	}
	return qa.Reference
}

// pointed shows what is known of the reading that the pointer is on.
func (w *window) pointed(m figure.Mark, at fyne.Position, on bool) {
	w.tipText = ""
	if !on || m.Reading == nil {
		w.tip.Hide()
		return
	}
	w.tipText = w.shown(w.state.ReadingText(*m.Reading), m.Reading.Source.Place(), m.Reading.Part, m.Reading.LeftOut)
	size := w.win.Canvas().Size()
	wide := min(fontNote.width(w.tipText)+20, size.Width-2*margin)
	place := w.bench.Position().Add(w.picture.Position()).Add(at)
	x := max(margin, min(place.X-wide/2, size.Width-margin-wide))
	y := place.Y - 38
	w.tip.Move(fyne.NewPos(x, y))
	w.tip.Resize(fyne.NewSize(wide, 26))
	w.tip.Show()
	w.tip.Refresh()
}

func (w *window) paintTip(p *pen, size fyne.Size) {
	if w.tipText == "" {
		return
	}
	r := p.box(0, 0, size.Width, size.Height, p.Paper)
	r.StrokeColor, r.StrokeWidth, r.CornerRadius = p.Text, 1.2, 3
	p.text(fontNote.fit(w.tipText, size.Width-16), 10, 18, fontNote, p.Text)
}

// chosen finds a reading on its page: the page scrolls to it and the keys are on it.
func (w *window) chosen(m figure.Mark) {
	if m.Reading == nil || w.dialog != nil {
		return
	}
	side, rows := sideOf(m), w.leftRows
	if side == qa.Candidate {
		rows = w.rightRows
	}
	i := w.view.pages[side].Readings.Find(m.Reading.Source)
	if i < 0 {
		return
	}
	w.cursor[side] = i
	r := w.pageRowsAt(side, rows.content.width)
	w.win.Canvas().Focus(rows.content)
	rows.reveal(r.top(i)-3*readingLine, r.top(i+1)+3*readingLine)
	rows.content.Refresh()
}
