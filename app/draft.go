package app

import (
	"encoding/json"
	"image/color"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/qa"
	"lotpair/qa/figure"
)

// same says whether two plans say the same.
func same(a, b qa.Plan) bool {
	x, errX := json.Marshal(a)
	y, errY := json.Marshal(b)
	return errX == nil && errY == nil && string(x) == string(y)
}

// begin a new comparison.
func (w *window) beginComparison() {
	if w.busy() {
		return
	}
	w.shift = 0
	w.apply(func(s desk.State) desk.State { return s.Begun(person(), now()) })
}

// paintDraftPage draws one lot while the criterion is written: its name, its source, and where its file is dropped.
func (w *window) paintDraftPage(p *pen, size fyne.Size, of qa.Side) {
	heading, wide := "REFERENCE", size.Width-2*margin
	if of == qa.Candidate {
		heading = "CANDIDATE"
		p.spaced(heading, size.Width-margin-spacedWidth(heading, fontLot11), 28, fontLot11, p.CandidateText)
		p.put(w.mark(of), size.Width-margin-spacedWidth(heading, fontLot11)-20, 16, 16, 16)
		p.down(0.5, 0, size.Height, 1, p.Rule)
	} else {
		p.spaced(heading, margin, 28, fontLot11, p.ReferenceText)
		p.put(w.mark(of), margin+spacedWidth(heading, fontLot11)+5, 16, 16, 16)
		p.down(size.Width-0.5, 0, size.Height, 1, p.Rule)
	}
	w.putLine(p, w.draft[string(of)+" lot"].line, "lot", "", margin, 58, wide)
	w.putLine(p, w.draft[string(of)+" source"].line, "source", "", margin, 118, wide)
	top, bottom := float32(188), size.Height-24
	if bottom-top < 90 {
		top = 170
	}
	p.dashes(margin, top, wide, bottom-top, p.Muted)
	bring := w.act.bringLeft
	if of == qa.Candidate {
		bring = w.act.bringRight
	}
	p.put(bring, margin, top, wide, bottom-top)
	bring.Refresh()
	first, second := "Drop a spreadsheet here", "or click, or Ctrl+O"
	if f := w.state.Record.Plan.LotOf(of).File; f != "" {
		first, second = f, "drop or click to change it"
	}
	middle := (top + bottom) / 2
	p.centred(fontPlain.middle(first, wide-16), size.Width/2, middle-14, fontPlain, p.Text)
	p.centred(fontNote.fit(second, wide-16), size.Width/2, middle+6, fontNote, p.MutedText)
	if bottom-top > 130 && !w.state.Sealed() {
		for i, l := range []string{"opens after the criterion is sealed,", "or says in the record that it did not"} {
			p.centred(fontTiny.fit(l, wide-8), size.Width/2, bottom-26+float32(i)*14, fontTiny, p.MutedText)
		}
	}
}

// dashes draws the outline of a place in short strokes.
func (p *pen) dashes(x, y, w, h float32, c color.Color) {
	const on, step = 5, 9
	for at := float32(0); at < w; at += step {
		p.box(x+at, y, min(on, w-at), 1.2, c)
		p.box(x+at, y+h-1.2, min(on, w-at), 1.2, c)
	}
	for at := float32(0); at < h; at += step {
		p.box(x, y+at, 1.2, min(on, h-at), c)
		p.box(x+w-1.2, y+at, 1.2, min(on, h-at), c)
	}
}

// choiceWord is a word of a sentence that is a choice.
func (w *window) word(p *pen, b *button, text string, x, y float32) float32 {
	b.label = text
	wide := fontOverall.width(text) + 8
	p.put(b, x-4, y-19, wide, 26)
	b.Refresh()
	return x + wide - 4
}

// paintDraft draws the criterion while it is written.
func (w *window) paintDraft(p *pen, size fyne.Size) {
	const inset = 24
	v := w.drafted
	right := size.Width - inset
	p.text("The claim", inset, 30, fontHeading, p.MutedText)
	room := right - inset
	before, after := "in the "+v.Of+" of every characteristic, ", " only."
	x := p.text(fontBody.middle(v.Candidate, room/4)+" is ", inset, 54, fontBody, p.Text)
	if v.Sealed {
		x = p.text(v.Objective+" ", x, 54, fontStrong, p.Text)
	} else {
		x = w.word(p, w.act.objective, v.Objective, x+2, 54) + 6
	}
	x = p.text(fontBody.middle(v.Reference, room/4)+" ", x, 54, fontBody, p.Text)
	line := float32(54)
	if x+fontBody.width(before)+fontStrong.width(v.Claim)+fontBody.width(after)+4 > right {
		x, line = inset, 72
	}
	x = p.text(before, x, line, fontBody, p.Text)
	if v.Sealed {
		x = p.text(v.Claim, x, line, fontStrong, p.Text)
	} else {
		x = w.word(p, w.act.claim, v.Claim, x+2, line)
	}
	p.text(after, x, line, fontBody, p.Text)
	p.text("The margin", inset, 92, fontHeading, p.MutedText)
	x = inset - 6
	words, apart := desk.MarginKinds, float32(10)
	if size.Width < 700 {
		words, apart = desk.MarginKindsShort, 6
	}
	for i, b := range w.act.kinds {
		b.label = words[i]
		b.chosen, b.disabled = desk.MarginKind(i) == v.Kind, v.Sealed
		f := b.font()
		wide := f.width(b.label) + 12
		if x+wide > right {
			break
		}
		p.put(b, x, 97, wide, 28)
		b.Refresh()
		x += wide + apart
	}
	w.paintDraftLines(p, size.Width, inset, 142)
	w.paintDraftRows(p, size, inset, 204)
}

// paintDraftLines draws the lines that state the margin, and what holds for all characteristics.
func (w *window) paintDraftLines(p *pen, width, inset, y float32) {
	x, unit := inset, (width-2*inset)/7.6
	put := func(name, label, after string, share float32) {
		w.putLine(p, w.draft[name].line, label, after, x, y, unit*share-16)
		x += unit * share
	}
	switch w.drafted.Kind {
	case desk.PartOfTolerance:
		put("part", "part", "%", 1.1)
		w.putWord(p, w.act.of, "of the", x, y, unit*1.7-16)
		x += unit * 1.7
	case desk.InTheUnit:
		if _, ends := desk.Ways(w.state.Record.Plan); ends {
			put("from", "from", "", 0.75)
			put("to", "to", "", 0.75)
		} else {
			put("margin", "margin ±", "", 1.1)
		}
		w.putWord(p, w.act.of, "stated", x, y, inset+unit*2.8-x-16)
		x = inset + unit*2.8
	case desk.RatioOfMeans:
		if _, ends := desk.Ways(w.state.Record.Plan); ends {
			put("ratio from", "from", "", 0.75)
			put("ratio to", "to", "", 0.75)
		} else {
			put("ratio within", "within ±", "%", 1.1)
		}
		w.putWord(p, w.act.of, "stated", x, y, inset+unit*2.8-x-16)
		x = inset + unit*2.8
	case desk.KeepsPpk:
		put("Ppk", "Ppk", "", 1.1)
		x += unit * 1.7
	case desk.MultipleOfSD:
		put("times the SD", "times the SD", "", 1.4)
		x += unit * 1.4
	}
	put("alpha", "alpha", "", 1.2)
	w.putWord(p, w.act.method, "method", x, y, unit*1.5-16)
	x += unit * 1.5
	put("spread ratio at most", "spread ratio at most", "", 2)
}

// putWord places a choice as a line with its label above.
func (w *window) putWord(p *pen, b *button, label string, x, y, width float32) {
	p.text(label, x, y, fontTiny, p.MutedText)
	b.disabled = w.drafted.Sealed
	p.put(b, x, y+6, width, 28)
	b.Refresh()
	p.across(x, x+width, y+35, 1.2, p.Text)
}

// draftColumns are where the columns of the criterion's table begin.
type draftColumns struct{ lower, upper, margin, sd, permits, parts float32 }

func draftColumnsAt(width, inset float32) draftColumns {
	u := (width - 2*inset) / 696
	return draftColumns{lower: inset + 160*u, upper: inset + 228*u, margin: inset + 300*u, sd: inset + 466*u, permits: inset + 546*u, parts: inset + 630*u}
}

// paintDraftRows draws a line a characteristic, and below what they come to together or what is still lacking.
func (w *window) paintDraftRows(p *pen, size fyne.Size, inset, y float32) {
	v, c := w.drafted, draftColumnsAt(size.Width, inset)
	sd, permits := "planned sd", "permits Ppk"
	if size.Width < 700 {
		sd, permits = "sd", "Ppk"
	}
	for _, h := range []struct {
		text string
		at   float32
	}{{"characteristic", inset}, {"lower", c.lower}, {"upper", c.upper}, {"margin in the unit", c.margin}, {sd, c.sd}, {permits, c.permits}, {"parts a lot", c.parts}} {
		p.text(h.text, h.at, y, fontTiny, p.MutedText)
	}
	p.across(inset, size.Width-inset, y+8, 1.2, p.Text)
	foot := size.Height - 32
	w.draftRows.place(p, 0, y+9, size.Width, foot-y-9)
	b := w.act.characteristic
	b.disabled = v.Sealed
	note := v.Together
	if v.Lacks != "" && !v.Sealed {
		note = v.Lacks
	}
	for _, l := range w.draft {
		if l.fault != "" {
			note = l.fault
		}
	}
	room := size.Width - 2*inset
	if !v.Sealed {
		at := size.Width - inset + 6
		for _, b := range []*button{b, w.act.terms} {
			wide := b.wide()
			at -= wide
			p.put(b, at, foot+2, wide, 26)
			b.Refresh()
			at -= 6
		}
		room = at - inset - 6
	}
	p.text(fontNote.fit(note, room), inset, foot+20, fontNote, p.MutedText)
}

const draftRow = 27

func (w *window) newDraftRows() *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(len(w.drafted.Rows)) * draftRow },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			for i := max(0, int(top/draftRow)); i < len(w.drafted.Rows) && float32(i+1)*draftRow <= bottom+2; i++ {
				w.paintDraftRow(p, size.Width, i, out.content.focused)
			}
		},
		tapped: func(at fyne.Position) { w.onCharacteristic(int(at.Y / draftRow)) },
		key: func(k fyne.KeyName) {
			if k == fyne.KeyReturn || k == fyne.KeyEnter || k == fyne.KeySpace {
				w.askCharacteristic(w.state.Selected)
				return
			}
			w.spineKey(k)
			out.reveal(float32(w.state.Selected)*draftRow, float32(w.state.Selected+1)*draftRow)
		},
	})
	return out
}

// onCharacteristic looks at a characteristic; the one looked at is opened to be changed.
func (w *window) onCharacteristic(i int) {
	if i == w.state.Selected {
		w.askCharacteristic(i)
		return
	}
	w.apply(func(s desk.State) desk.State { return s.WithSelected(i) })
}

func (w *window) paintDraftRow(p *pen, width float32, i int, focused bool) {
	const inset = 24
	r, c, y := w.drafted.Rows[i], draftColumnsAt(width, inset), float32(i)*draftRow
	p.across(inset, width-inset, y+draftRow, 0.7, p.Rule)
	name := fontPlain
	if r.Selected {
		name = fontButton
		if focused {
			p.frame(inset-8, y+1, width-2*inset+16, draftRow-2, 1, p.Text)
		}
	}
	base := y + 18
	p.text(name.middle(r.Name, c.lower-inset-10), inset, base, name, p.Text)
	for _, t := range []struct {
		text     string
		at, next float32
	}{{r.Lower, c.lower, c.upper}, {r.Upper, c.upper, c.margin}, {r.Margin, c.margin, c.sd}, {r.SD, c.sd, c.permits}, {r.Permits, c.permits, c.parts}, {r.Parts, c.parts, width - inset}} {
		p.text(fontPlain.fit(t.text, t.next-t.at-6), t.at, base, fontPlain, p.Text)
	}
}

// paintPlanning draws how many parts are needed, and the lines that say what is expected.
func (w *window) paintPlanning(p *pen, size fyne.Size) {
	v := w.drafted
	p.across(0, size.Width, 0.6, 1.2, p.Text)
	divider := float32(int(size.Width * 0.489))
	end := p.text(fontName.middle(v.Name, divider-2*margin-260), margin, 28, fontName, p.Text)
	if _, ok := v.Looked.Curves(); ok {
		p.text(fontPlain.fit("how likely the study shows equivalence", divider-end-40), end+24, 28, fontPlain, p.MutedText)
		p.put(w.picture, margin, 42, divider-margin-18, size.Height-42-8)
	}
	p.down(divider, 16, size.Height-8, 1, p.Rule)
	lines := float32(58)
	if v.Name == "" {
		lines = 0
	}
	w.sentences.place(p, divider+1, 10, size.Width-divider-2, size.Height-14-lines)
	if v.Name == "" {
		return
	}
	unit, y := v.Looked.Characteristic.Unit, size.Height-46
	x, wide := divider+margin, min(120, (size.Width-divider-2*margin)/4)
	w.putLine(p, w.draft["standard deviation"].line, "standard deviation", unit, x, y, wide)
	w.putLine(p, w.draft["power"].line, "power", "", x+wide+30, y, wide-20)
	w.putLine(p, w.draft["true difference"].line, "true difference", unit, x+2*wide+40, y, wide)
}

// powerPicture is the power curves of the characteristic looked at.
func (w *window) powerPicture() func(width, height float64) figure.Figure {
	curves, ok := w.drafted.Looked.Curves()
	if !ok {
		return nil
	}
	return func(width, height float64) figure.Figure { return figure.PowerAt(curves, width, height) }
}
