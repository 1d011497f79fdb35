package app

import "fyne.io/fyne/v2"

const margin = 24 // between the window's edge and what stands in it

// paintHeader draws the title and what it supports, and on the right what is known of criterion and file.
func (w *window) paintHeader(p *pen, size fyne.Size) {
	v := w.view.header
	right := size.Width - margin
	f := fontPlain
	if v.Alarm {
		f = fontButton
	}
	most := size.Width * 0.45
	text := f.fit(v.Right, most)
	left := min(p.ending(text, right, 34, f, p.Text), p.ending(fontPlain.fit(v.Note, most), right, 54, fontPlain, p.MutedText))
	p.text(fontTitle.fit(v.Title, left-2*margin), margin, 34, fontTitle, p.Text)
	supports := left - 2*margin
	if b := w.act.leave; w.state.Open && w.register != nil {
		supports -= b.wide() + 12
		if w.state.Drafting {
			supports -= w.act.particulars.wide() + 8
		}
		end := p.text(fontPlain.fit(v.Supports, supports), margin, 55, fontPlain, p.MutedText)
		p.put(b, end+12, 37, b.wide(), 26)
		b.Refresh()
		if x := w.act.particulars; w.state.Drafting {
			p.put(x, end+12+b.wide()+8, 37, x.wide(), 26)
			x.Refresh()
		}
	} else if x := w.act.particulars; w.state.Drafting {
		end := p.text(fontPlain.fit(v.Supports, supports-x.wide()-12), margin, 55, fontPlain, p.MutedText)
		p.put(x, end+12, 37, x.wide(), 26)
		x.Refresh()
	} else {
		p.text(fontPlain.fit(v.Supports, supports), margin, 55, fontPlain, p.MutedText)
	}
	p.across(0, size.Width, size.Height-0.6, 1.2, p.Text)
}
