package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"lotpair/app/desk"
)

// listing is what is seen of the register.
type listing struct {
	rows   []desk.ListRow
	all    int // how many records there are
	cursor int
}

// mostListed is how many records the list shows; a word more in the search finds the others.
const mostListed = 200

// search is the line in which the register is searched: the keys of the list and of the window work in it too.
type search struct {
	widget.Entry
	key      func(fyne.KeyName) bool // false where the list has no use for the key
	shortcut func(fyne.Shortcut) bool
}

func newSearch(changed func(), key func(fyne.KeyName) bool, shortcut func(fyne.Shortcut) bool) *search {
	s := &search{key: key, shortcut: shortcut}
	s.ExtendBaseWidget(s)
	s.SetPlaceHolder("Search: title, lots, verdict, signer")
	s.OnChanged = func(string) { changed() }
	s.OnSubmitted = func(string) { key(fyne.KeyReturn) }
	return s
}

// TypedKey implements fyne.Focusable.
func (s *search) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		passed(s, e)
	} else if !s.key(e.Name) {
		s.Entry.TypedKey(e)
	}
}

// TypedShortcut implements fyne.Shortcutable.
func (s *search) TypedShortcut(x fyne.Shortcut) {
	if !s.shortcut(x) {
		s.Entry.TypedShortcut(x)
	}
}

// find lists the records that hold what was typed.
func (w *window) find() {
	if w.register == nil {
		return
	}
	found, err := w.register.Search(w.search.Text, mostListed)
	if err == nil {
		w.list.all, err = w.register.Count()
	}
	if err != nil {
		w.apply(failed("Searching", err))
		return
	}
	entries := make([]desk.ListEntry, 0, len(found))
	for _, e := range found {
		entries = append(entries, desk.ListEntry{
			ID: e.ID, Title: e.Title, Supports: e.Supports, Reference: e.Reference, Candidate: e.Candidate, Verdict: e.Verdict, Signatures: e.Signatures, Changed: e.Changed,
		})
	}
	w.list.rows = desk.List(entries)
	w.list.cursor = max(0, min(w.list.cursor, len(w.list.rows)-1))
}

// listKey walks the list; return opens the record the keys are on.
func (w *window) listKey(k fyne.KeyName) bool {
	by := map[fyne.KeyName]int{fyne.KeyDown: 1, fyne.KeyUp: -1, fyne.KeyPageDown: 10, fyne.KeyPageUp: -10}[k]
	switch {
	case by != 0:
		w.list.cursor = max(0, min(len(w.list.rows)-1, w.list.cursor+by))
		w.listRows.reveal(float32(w.list.cursor)*rowHeight, float32(w.list.cursor+1)*rowHeight)
		w.listRows.content.Refresh()
	case k == fyne.KeyReturn || k == fyne.KeyEnter:
		w.openListed(w.list.cursor)
	default:
		return false
	}
	return true
}

func (w *window) openListed(i int) {
	if i >= 0 && i < len(w.list.rows) {
		w.list.cursor = i
		w.reopen(w.list.rows[i].ID)
	}
}

func (w *window) newListRows() *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(len(w.list.rows)) * rowHeight },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			for i := max(0, int(top/rowHeight)); i < len(w.list.rows) && float32(i+1)*rowHeight <= bottom+2; i++ {
				w.paintListRow(p, size.Width, i, out.content.focused)
			}
		},
		tapped: func(at fyne.Position) { w.openListed(int(at.Y / rowHeight)) },
		key:    func(k fyne.KeyName) { w.listKey(k) },
	})
	return out
}

// listColumns are where the columns of the list begin.
type listColumns struct{ lots, verdict, signed, changed float32 }

func listColumnsAt(width float32) listColumns {
	room := width - 2*margin
	return listColumns{lots: margin + room*0.36, verdict: margin + room*0.54, signed: margin + room*0.67, changed: width - margin - 118}
}

func (w *window) paintListRow(p *pen, width float32, i int, focused bool) {
	r, c, y := w.list.rows[i], listColumnsAt(width), float32(i)*rowHeight
	p.across(margin, width-margin, y+rowHeight, 0.7, p.Rule)
	title := fontBody
	if i == w.list.cursor {
		title = fontStrong
		p.box(margin-12, y, width-2*margin+24, rowHeight, faint(p.Text, 0x0D))
		p.box(margin-14, y, 3, rowHeight, p.Text)
		if focused {
			p.frame(margin-13, y+1, width-2*margin+26, rowHeight-2, 1, p.Text)
		}
	}
	const apart = 12
	p.text(title.fit(r.Title, c.lots-margin-apart), margin, y+20, title, p.Text)
	p.text(fontTiny.fit(r.Supports, c.lots-margin-apart), margin, y+36, fontTiny, p.MutedText)
	p.text(fontPlain.fit(r.Lots, c.verdict-c.lots-apart), c.lots, y+27, fontPlain, p.Text)
	p.text(fontPlain.fit(r.Verdict, c.signed-c.verdict-apart), c.verdict, y+27, fontPlain, p.Text)
	p.text(fontPlain.fit(r.Sign, c.changed-c.signed-apart), c.signed, y+27, fontPlain, p.Text)
	p.text(fontPlain.fit(r.Changed, width-margin-c.changed), c.changed, y+27, fontPlain, p.Text)
}

// paintList draws the register: the first thing seen.
func (w *window) paintList(p *pen, size fyne.Size) {
	right := size.Width - margin
	for _, b := range []*button{w.act.openTheSample, w.act.openWorkbook, w.act.openPlan, w.act.begin} {
		wide := b.font().width(b.label) + 36
		p.put(b, right-wide, 22, wide, 32)
		b.Refresh()
		right -= wide + 12
	}
	p.put(w.search, margin, 20, min(right-margin-24, 520), 36)
	y := float32(92)
	p.text(desk.ListTitle(len(w.list.rows), w.list.all, mostListed, w.search.Text), margin, y, fontNote, p.MutedText)
	if w.list.all == 0 {
		for i, s := range startSentences {
			p.text(fontPlain.fit(s, size.Width-2*margin), margin, y+30+float32(i)*20, fontPlain, p.MutedText)
		}
		return
	}
	c := listColumnsAt(size.Width)
	y += 28
	for _, h := range []struct {
		text string
		at   float32
	}{{"record", margin}, {"lots", c.lots}, {"verdict", c.verdict}, {"signed", c.signed}, {"last change", c.changed}} {
		p.text(h.text, h.at, y, fontHeading, p.MutedText)
	}
	p.across(margin, size.Width-margin, y+8, 1, p.Text)
	w.listRows.place(p, 0, y+9, size.Width, size.Height-y-9)
}

// leave goes back to the register. Every act was kept: nothing is asked.
func (w *window) leave() {
	if w.state.Job.Name != "" || w.dialog != nil || !w.state.Open {
		return
	}
	w.apply(desk.State.Left)
	if w.search != nil && w.register != nil {
		w.win.Canvas().Focus(w.search)
	}
}
