package app

import (
	"fyne.io/fyne/v2"

	"lotpair/qa"
)

// Places on a page, from its top, in points.
const (
	pageRule    = 152 // what stands above it does not scroll
	findingLine = 18
	readingLine = 20
	noteLine    = 15
)

// side is how a page stands: the right page is the left one mirrored.
type side struct {
	p     *pen
	width float32
	right bool
}

// text sets a line from the page's outer edge inward.
func (s side) text(t string, y float32, f font, c colour) {
	t = f.middle(t, s.width-margin-8)
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
	s.text(v.Lot, 54, fontLot.smaller(v.Lot, size.Width-margin-8, 14), p.Text)
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
