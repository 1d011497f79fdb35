package app

import "fyne.io/fyne/v2"

// paintFoot draws the one next thing to do, what was done last, and the acts that leave the window.
func (w *window) paintFoot(p *pen, size fyne.Size) {
	v := w.view.foot
	p.across(0, size.Width, 0.6, 1.2, p.Text)
	right := size.Width - margin
	for _, b := range []*button{w.act.seal, w.act.take, w.act.compare, w.act.sign, w.act.export, w.act.savePlan, w.act.amend, w.act.redo, w.act.undo, w.act.signatures} {
		if b.label == "" {
			continue
		}
		wide := b.wide()
		if b.kind != quiet {
			wide = max(wide, 168)
		}
		p.put(b, right-wide, 10, wide, 28)
		b.Refresh()
		right -= wide + 16
	}
	room := right - 2*margin
	if v.Said == "" {
		if fontBody.width(v.Next) <= room {
			p.text(v.Next, margin, 30, fontBody, p.Text)
			return
		}
		p.lines(fontPlain.atMost(fontPlain.wrap(v.Next, room, room), 2, room), margin, 21, 18, fontPlain, p.Text)
		return
	}
	p.text(fontBody.fit(v.Next, room), margin, 21, fontBody, p.Text)
	p.text(fontAxis.fit(v.Said, room), margin, 39, fontAxis, p.MutedText)
}
