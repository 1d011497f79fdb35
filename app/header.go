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
	var all []*button
	if w.state.Open && w.register != nil {
		all = append(all, w.act.leave)
	}
	if w.state.Drafting || w.state.Compared && !w.state.Closed() {
		all = append(all, w.act.particulars)
	}
	all = append(all, w.act.more)
	for _, b := range all {
		supports -= b.wide() + 8
	}
	end := p.text(fontPlain.fit(v.Supports, supports-4), margin, 55, fontPlain, p.MutedText) + 12
	for _, b := range all {
		p.put(b, end, 37, b.wide(), 26)
		b.Refresh()
		end += b.wide() + 8
	}
	p.across(0, size.Width, size.Height-0.6, 1.2, p.Text)
}
