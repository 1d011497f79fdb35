package app

import (
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
)

// benchHead is where the bench's picture begins: below its name and the ways of looking at it, which take a line each where
// they do not stand beside each other.
func (w *window) benchHead(divider float32) (top float32, beside bool) {
	need := max(164, margin+fontName.width(w.view.bench.Name)+25)
	for _, l := range w.view.bench.Looks {
		need += w.act.looks[l.Look].wide() + lookGap
	}
	if need+w.act.picture.wide()+12 <= divider {
		return 42, true
	}
	return 70, false
}

const lookGap = 14 // between the ways of looking

// paintBench draws the characteristic looked at: its picture, and beside it what was found.
func (w *window) paintBench(p *pen, size fyne.Size) {
	v := w.view.bench
	p.across(0, size.Width, 0.6, 1.2, p.Text)
	divider := float32(int(size.Width * 0.489))
	top, beside := w.benchHead(divider)
	wide := w.act.picture.wide()
	x, y := float32(margin-6), float32(37)
	if beside {
		x, y = max(164, p.text(v.Name, margin, 28, fontName, p.Text)+25), 9
	} else {
		p.text(fontName.middle(v.Name, divider-2*margin-wide), margin, 28, fontName, p.Text)
	}
	for _, l := range v.Looks {
		b := w.act.looks[l.Look]
		p.put(b, x, y, b.wide(), 28)
		b.Refresh()
		x += b.wide() + lookGap
	}
	if len(v.Looks) > 0 {
		p.put(w.act.picture, divider-12-wide, 9, wide, 28)
		w.act.picture.Refresh()
		p.put(w.picture, margin, top, divider-margin-18, size.Height-top-8)
	}
	p.down(divider, 16, size.Height-8, 1, p.Rule)
	w.sentences.place(p, divider+1, 10, size.Width-divider-2, size.Height-14)
}

// paragraph is some lines of one font, with room above.
type paragraph struct {
	lines   []string
	font    font
	leading float32
	above   float32
	muted   bool
}

// saidAt is what the bench says at one width, until it says something else.
type saidAt struct {
	width float32
	all   []paragraph
}

// paragraphs is what the bench says, wrapped.
func (w *window) paragraphs(width float32) []paragraph {
	if w.said.all == nil || w.said.width != width {
		w.said = saidAt{width, w.wrapped(width)}
	}
	return w.said.all
}

func (w *window) wrapped(width float32) []paragraph {
	v, room := w.view.bench, width-2*margin
	if w.state.Drafting {
		v.Headline, v.Paragraphs, v.Whole, v.Caution, v.Read = w.drafted.Headline, w.drafted.Paragraphs, nil, "", ""
	}
	set := func(s string, f font, leading, above float32, muted bool) paragraph {
		return paragraph{f.wrap(s, room, room), f, leading, above, muted}
	}
	out := []paragraph{set(v.Headline, fontVerdict, 24, 20, false)}
	for i, s := range v.Paragraphs {
		above := float32(4)
		if i == 1 {
			above = 9
		}
		out = append(out, set(s, fontBody, 20, above, false))
	}
	if v.Caution != "" {
		out = append(out, set(v.Caution, fontNote, 17, 12, true))
	}
	// What concerns the whole comparison stands below what concerns this characteristic.
	for i, s := range v.Whole {
		above := float32(4)
		if i == 0 {
			s, above = "On the comparison as a whole: "+s, 12
		}
		out = append(out, set(s, fontBody, 20, above, false))
	}
	if v.Read != "" {
		out = append(out, set(v.Read, fontNote, 17, 12, true))
	}
	return out
}

func (w *window) newSentences() *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height: func(width float32) float32 {
			h := float32(0)
			for _, g := range w.paragraphs(width) {
				h += g.above + g.leading*float32(len(g.lines))
			}
			return h + 6
		},
		paint: func(p *pen, size fyne.Size, _, _ float32) {
			y := float32(0)
			for _, g := range w.paragraphs(size.Width) {
				c := p.Text
				if g.muted {
					c = p.MutedText
				}
				p.lines(g.lines, margin, y+g.above+g.font.size-1, g.leading, g.font, c)
				y += g.above + g.leading*float32(len(g.lines))
			}
			if out.content.focused {
				p.frame(margin-10, 1, size.Width-2*margin+20, max(size.Height-2, 0), 1, p.Text)
			}
		},
		tapped: func(at fyne.Position) { w.helpWith(w.paragraphAt(out.content.width, at.Y)) },
		key: func(k fyne.KeyName) {
			switch k {
			case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
				w.helpWith(w.paragraphAt(out.content.width, -1))
			default:
				out.content.scrollKey(k)
			}
		},
	})
	return out
}

// paragraphAt is the paragraph at a height; all of them above the first.
func (w *window) paragraphAt(width, at float32) string {
	var all []string
	y := float32(0)
	for _, g := range w.paragraphs(width) {
		y += g.above + g.leading*float32(len(g.lines))
		text := strings.Join(g.lines, " ")
		if at >= 0 && at < y {
			return text
		}
		all = append(all, text)
	}
	if at >= 0 {
		return ""
	}
	return strings.TrimSpace(strings.Join(all, "\n"))
}

// helpWith shows a text with what its words and numbers mean, to be read and copied.
func (w *window) helpWith(text string) {
	if text != "" && !w.busy() {
		w.showText("In plain words", w.allShown(desk.Help(text)))
	}
}
