package app

import (
	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa/figure"
)

const spineInset = 20 // between the spine's edge and its words

// spineColumns are where the columns of the spine stand.
type spineColumns struct{ line, lineEnd, verdict float32 }

// columnsFor keeps 150 points for the verdict and at least as much for the name; the picture has what is left, up to a
// measure, about the middle where there is room.
func columnsFor(width float32) spineColumns {
	const words, apart = 150, 16
	line := min(max(width-2*spineInset-2*words-2*apart, figure.SpineMinWidth), 560)
	if width >= 740 && width < 780 {
		line = figure.SpineWidth
	}
	from := spineInset + words + apart + (width-2*spineInset-2*words-2*apart-line)/2
	if width >= 740 && width < 780 {
		from = width/2 + 18 - line/2 // as drawn at 1280
	}
	return spineColumns{line: from, lineEnd: from + line, verdict: width - spineInset}
}

// spineHead is the words above the lines of the spine: the verdict, what it rests on, and what was asked.
type spineHead struct {
	bold            float32 // where the sentence begins, beside the verdict
	sentence, asked []string
}

// headLines bounds what the head may take from the lines; more ends with "…", and is whole in the workbook's summary.
const headLines = 3

func (w *window) spineHead(width float32) spineHead {
	v, room := w.view.spine, width-2*spineInset
	bold := fontOverall.width(v.Overall) + 7
	h := spineHead{bold: bold}
	if v.Sentence != "" {
		h.sentence = fontPlain.atMost(fontPlain.wrap(v.Sentence, room-bold, room), headLines, room)
	}
	if v.Asked != "" {
		h.asked = fontNote.atMost(fontNote.wrap(v.Asked, room, room), 2, room)
	}
	return h
}

// spineHeadHeight is how much the head takes; 88 in the drawing, where each of its texts is one line.
func (w *window) spineHeadHeight(width float32) float32 {
	h := w.spineHead(width)
	return 88 + float32(max(0, len(h.sentence)-1))*18 + float32(max(0, len(h.asked)-1))*16
}

// paintSpine draws the overall verdict, what was asked, and below them the lines.
func (w *window) paintSpine(p *pen, size fyne.Size) {
	v, h := w.view.spine, w.spineHead(size.Width)
	p.text(fontOverall.fit(v.Overall, size.Width-2*spineInset), spineInset, 28, fontOverall, p.Text)
	y := float32(28)
	for i, l := range h.sentence {
		x := float32(spineInset)
		if i == 0 {
			x += h.bold
		}
		p.text(l, x, y, fontPlain, p.Text)
		if i < len(h.sentence)-1 {
			y += 18
		}
	}
	y += 20
	p.lines(h.asked, spineInset, y, 16, fontNote, p.MutedText)
	head := w.spineHeadHeight(size.Width)
	if len(v.Rows) > 0 {
		w.paintScale(p, size.Width, head-12)
	}
	bottom := size.Height - spineFoot
	w.spineRows.place(p, 0, head, size.Width, bottom-head)
	p.across(0, size.Width, bottom, 0.7, p.Rule)
	p.text(fontNote.fit(v.Foot, size.Width-2*spineInset), spineInset, bottom+20, fontNote, p.MutedText)
}

// paintScale names the posts above the lines, and on the right the order of the lines.
func (w *window) paintScale(p *pen, width, y float32) {
	c := columnsFor(width)
	centre, one := (c.line+c.lineEnd)/2, (c.lineEnd-c.line)/2/figure.Reach
	minus, plus := "− margin", "+ margin"
	apart := max(one, fontAxis.width(minus)/2+fontAxis.width("0")/2+10)
	p.centred(minus, centre-apart, y, fontAxis, p.MutedText)
	p.centred("0", centre, y, fontAxis, p.MutedText)
	p.centred(plus, centre+apart, y, fontAxis, p.MutedText)
	b := w.act.order
	wide := b.wide()
	if c.verdict-wide+6 > centre+apart+fontAxis.width(plus)/2+8 {
		p.put(b, c.verdict-wide+6, y-18, wide, 26)
		b.Refresh()
	}
}

func (w *window) newSpineRows() *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(len(w.view.spine.Rows)) * rowHeight },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			first := max(0, int(top/rowHeight))
			last := min(len(w.view.spine.Rows), int(bottom/rowHeight)+1)
			c := columnsFor(size.Width)
			for i := first; i < last; i++ {
				p.put(w.line(w.view.spine.Rows[i].At), c.line, float32(i)*rowHeight, c.lineEnd-c.line, rowHeight)
			}
			for i := first; i < last; i++ {
				w.paintSpineRow(p, size.Width, float32(i)*rowHeight, w.view.spine.Rows[i], out.content.focused)
			}
		},
		tapped: func(at fyne.Position) {
			if i := int(at.Y / rowHeight); i >= 0 && i < len(w.view.spine.Rows) {
				w.apply(func(s desk.State) desk.State { return s.WithSelected(w.view.spine.Rows[i].At) })
			}
		},
		key: w.spineKey,
	})
	return out
}

func (w *window) paintSpineRow(p *pen, width, y float32, r desk.SpineRow, focused bool) {
	c := columnsFor(width)
	p.across(0, width, y+rowHeight, 0.7, p.Rule)
	if r.Selected {
		p.box(1, y, width-2, rowHeight, faint(p.Text, 0x0D))
		p.box(0, y, 3, rowHeight, p.Text)
		if focused {
			p.frame(1, y+1, width-2, rowHeight-2, 1, p.Text)
		}
	}
	name := fontBody
	if r.Selected {
		name = fontStrong
	}
	room := c.line - spineInset - 12
	lines := name.twoLines(r.Name, room)
	if len(lines) == 1 {
		p.text(lines[0], spineInset, y+27, name, p.Text)
	} else {
		p.lines(lines, spineInset, y+18, 17, name, p.Text)
	}
	verdict := fontBody
	if r.Weighty {
		verdict = fontStrong
	}
	room = c.verdict - c.lineEnd - 8
	if r.Note == "" {
		p.ending(verdict.fit(r.Verdict, room), c.verdict, y+27, verdict, p.Text)
		return
	}
	p.ending(verdict.fit(r.Verdict, room), c.verdict, y+21, verdict, p.Text)
	p.ending(fontTiny.fit(r.Note, room), c.verdict, y+36, fontTiny, p.MutedText)
}

// spineKey walks along the spine.
func (w *window) spineKey(k fyne.KeyName) {
	by := map[fyne.KeyName]int{
		fyne.KeyDown: 1, fyne.KeyUp: -1, fyne.KeyPageDown: 5, fyne.KeyPageUp: -5, fyne.KeyHome: -1 << 30, fyne.KeyEnd: 1 << 30,
	}[k]
	if by != 0 {
		w.apply(func(s desk.State) desk.State { return s.WithSelected(s.Stepped(by)) })
	}
}

// revealSelected scrolls the spine to the line that is looked at.
func (w *window) revealSelected() {
	for i, r := range w.view.spine.Rows {
		if r.Selected {
			w.spineRows.reveal(float32(i)*rowHeight, float32(i+1)*rowHeight)
			return
		}
	}
}
