package app

import (
	"image/color"
	"strings"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

const (
	sheetRow   = 27
	sheetFirst = 64 // where the first column begins
	rowWords   = 92 // room for the part of a row
)

// sheetColumn is where a column stands; at counts from 0.
type sheetColumn struct {
	at       int
	x, width float32
}

// sheetColumns places the columns from the first one that is shown, by what the first rows hold; more is how many have no room
// at the right.
func (w *window) sheetColumns(room float32) (out []sheetColumn, more int) {
	v := w.sheetSaid
	w.sheetFrom = max(0, min(w.sheetFrom, len(v.Columns)-1))
	const seen, most = 24, 40 // rows looked at, columns that could have room
	var rows []desk.RowView
	for k := range min(v.Rows, seen) {
		rows = append(rows, w.state.Sheet.RowPart(k, w.sheetFrom, most))
	}
	x := float32(sheetFirst)
	for i := w.sheetFrom; i < len(v.Columns) && i-w.sheetFrom < most; i++ {
		wide := max(52, fontLot11.width(v.Columns[i].Plays)+14)
		for _, r := range rows {
			if k := i - w.sheetFrom; k < len(r.Cells) {
				wide = max(wide, min(128, fontPlain.width(r.Cells[k].Text)+18))
			}
		}
		if x+wide > room-rowWords && len(out) > 0 {
			break
		}
		out = append(out, sheetColumn{i, x, wide})
		x += wide + 4
	}
	return out, len(v.Columns) - w.sheetFrom - len(out)
}

// moveColumns shows columns further to the right, or to the left.
func (w *window) moveColumns(by int) {
	w.sheetFrom = max(0, min(len(w.sheetSaid.Columns)-1, w.sheetFrom+by))
	w.sheet.Refresh()
}

// tint is the ground of a column's part: a little of the colour of its role.
func tint(p *pen, plays string) color.Color {
	switch plays {
	case importers.PlaysLot:
		return faint(p.Reference, 0x28)
	case importers.PlaysCharacteristic, importers.PlaysRepeat, "reading":
		return faint(p.Candidate, 0x28)
	case importers.PlaysNothing:
		return color.Transparent
	}
	return faint(p.Text, 0x18)
}

// paintSheet draws a file before anything is taken from it: its cells as they are with the parts they play, and what would be
// taken.
func (w *window) paintSheet(p *pen, size fyne.Size) {
	if w.state.Sheet == nil {
		return
	}
	v := w.sheetSaid
	status := p.ending(v.Status, size.Width-margin, 34, fontPlain, p.Text)
	p.text(fontTitle.middle(v.Title, status-2*margin), margin, 34, fontTitle, p.Text)
	p.text(fontPlain.fit(v.Sub, size.Width-2*margin), margin, 55, fontPlain, p.MutedText)
	p.across(0, size.Width, 70, 1.2, p.Text)
	read := fontPlain.atMost(fontPlain.wrap(v.ReadAs, size.Width-2*margin, size.Width-2*margin), 2, size.Width-2*margin)
	y := p.lines(read, margin, 98, 18, fontPlain, p.Text) + 4
	w.paintSheetChoices(p, y)
	divider := size.Width * 0.625
	bottom := size.Height - footHeight
	top := y + 20
	columns, more := w.sheetColumns(divider)
	for _, c := range columns {
		col := v.Columns[c.at]
		p.box(c.x, top, c.width, 40, tint(p, col.Plays))
		p.text(fontLot11.fit(col.Plays, c.width-8), c.x+6, top+16, fontLot11, p.Text)
		p.text(col.Letters, c.x+6, top+33, fontTiny, p.MutedText)
		b := w.partButton(c.at + 1)
		b.label = "column " + col.Letters + ": " + col.Plays
		p.put(b, c.x, top, c.width, 40)
		b.Refresh()
	}
	if w.sheetFrom > 0 {
		p.put(w.act.columnsLeft, 20, top+6, 36, 28)
		w.act.columnsLeft.Refresh()
	}
	if b := w.act.columnsRight; more > 0 {
		b.label = qa.Count(more, "more", "more") + " ›"
		p.put(b, divider-rowWords+2, top+6, rowWords-14, 28)
		b.Refresh()
	}
	w.sheetRows.place(p, 0, top+42, divider-12, bottom-top-50)
	p.down(divider, 134, bottom-12, 1, p.Rule)
	w.sheetLedger.place(p, divider+2, top-12, size.Width-divider-4, bottom-top+4)
	w.paintSheetFoot(p, size)
}

func (w *window) paintSheetFoot(p *pen, size fyne.Size) {
	top := size.Height - footHeight
	p.across(0, size.Width, top+0.6, 1.2, p.Text)
	right := size.Width - margin
	for _, b := range w.sheetButtons() {
		wide := b.wide()
		p.put(b, right-wide, top+10, wide, 28)
		b.Refresh()
		right -= wide + 14
	}
	text := "Click the part above a column, or a row, to change it."
	if w.state.Sheet.Masked {
		text = "The readings are masked."
	}
	p.text(fontBody.fit(text, right-2*margin), margin, top+30, fontBody, p.Text)
}

// sheetButtons are what can be done with the file, from the right.
func (w *window) sheetButtons() []*button {
	b := &w.act
	b.takeReadings.kind, b.takeHeadings.kind = plain, plain
	var out []*button
	switch s := w.state; {
	case s.Sealed():
		b.takeReadings.kind = main
		out = []*button{b.takeReadings}
	case s.Sheet.Masked:
		b.takeHeadings.kind = main
		out = []*button{b.takeHeadings, b.unmask}
	case len(s.Record.Plan.Characteristics) > 0 && len(s.Faults()) == 0:
		b.takeReadings.kind = main
		out = []*button{b.takeReadings, b.takeHeadings}
	default:
		b.takeHeadings.kind = main
		out = []*button{b.takeHeadings}
	}
	return append(out, b.leaveSheet, b.saveStart)
}

// partButton changes the part of a column.
func (w *window) partButton(column int) *button {
	b, ok := w.partButtons[column]
	if !ok {
		b = newButton(w.palette, "", bare, func() {
			w.offerColumnParts(column)
		})
		w.partButtons[column] = b
	}
	return b
}

func (w *window) newSheetRows() *scrolled {
	var out *scrolled
	out = newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(w.sheetSaid.Rows) * sheetRow },
		paint: func(p *pen, size fyne.Size, top, bottom float32) {
			if w.state.Sheet == nil {
				return
			}
			columns, _ := w.sheetColumns(size.Width + 12)
			for i := max(0, int(top/sheetRow)); i < w.sheetSaid.Rows && float32(i+1)*sheetRow <= bottom+2; i++ {
				paintSheetRow(p, size.Width, float32(i)*sheetRow, w.state.Sheet.RowPart(i, w.sheetFrom, len(columns)), columns)
				if out.content.focused && i == w.sheetCursor {
					p.frame(30, float32(i)*sheetRow+1, size.Width-38, sheetRow-2, 1, p.Text)
				}
			}
		},
		tapped: func(at fyne.Position) {
			w.sheetCursor = min(int(at.Y/sheetRow), w.sheetSaid.Rows-1)
			out.content.Refresh()
			w.offerRowParts(fyne.NewPos(at.X, at.Y-out.scroll.Offset.Y))
		},
		key: func(k fyne.KeyName) {
			by := map[fyne.KeyName]int{fyne.KeyDown: 1, fyne.KeyUp: -1, fyne.KeyPageDown: 12, fyne.KeyPageUp: -12, fyne.KeyHome: -1 << 30, fyne.KeyEnd: 1 << 30}[k]
			switch k {
			case fyne.KeyLeft:
				w.moveColumns(-1)
			case fyne.KeyRight:
				w.moveColumns(1)
			case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
				w.offerRowParts(fyne.NewPos(sheetFirst, float32(w.sheetCursor+1)*sheetRow-out.scroll.Offset.Y))
			}
			if by != 0 {
				w.sheetCursor = max(0, min(w.sheetSaid.Rows-1, w.sheetCursor+by))
				out.reveal(float32(w.sheetCursor)*sheetRow, float32(w.sheetCursor+1)*sheetRow)
				out.content.Refresh()
			}
		},
	})
	return out
}

func paintSheetRow(p *pen, width, y float32, r desk.RowView, columns []sheetColumn) {
	base := y + 18
	p.ending(qa.Plain(float64(r.Number)), 54, base, fontTiny, p.MutedText)
	p.across(34, width-8, y+sheetRow, 0.7, p.Rule)
	p.text(fontTiny.fit(r.Part, rowWords-14), width-rowWords+8, base, fontTiny, p.MutedText)
	for i, c := range columns {
		if i >= len(r.Cells) || r.Cells[i].Text == "" {
			continue
		}
		x := r.Cells[i]
		f, ink := fontPlain, color.Color(p.Text)
		if x.Heading {
			f = fontButton
		}
		if r.Part != "" {
			ink = p.MutedText
		}
		text := f.fit(x.Text, c.width-12)
		from := c.x + 4
		if x.Number {
			from = c.x + c.width - 8 - f.width(text)
		}
		to := p.text(text, from, base, f, ink)
		if x.Struck {
			p.across(from-1, to+1, base-4.5, 1, ink)
		}
		if x.Boxed {
			p.frame(c.x, y+3, c.width, sheetRow-6, 1.4, p.Text)
		}
	}
}

// newSheetLedger is what would be taken, and every cell that is not taken as it stands.
func (w *window) newSheetLedger() *scrolled {
	return newScrolled(&sheet{
		palette: w.palette,
		height: func(width float32) float32 {
			p := &pen{Palette: w.palette()}
			return w.paintLedger(p, width) + 10
		},
		paint: func(p *pen, size fyne.Size, _, _ float32) { w.paintLedger(p, size.Width) },
	})
}

// mostLedger is how many lines of the ledger are shown before anything is taken; the record holds all.
const mostLedger = 300

func (w *window) paintLedger(p *pen, width float32) float32 {
	v, room := w.sheetSaid, width-2*margin
	y := float32(22)
	if v.Unfit != "" {
		p.text("What of the plan no longer fits", margin, y, fontHeading, p.Text)
		y += 20
		for _, s := range strings.Split(v.Unfit, "\n") {
			y = p.lines(fontNote.wrap(s, room, room), margin, y, 16, fontNote, p.Text) + 4
		}
		p.across(margin, width-margin, y-6, 1, p.Rule)
		y += 18
	}
	p.text("What will be taken", margin, y, fontHeading, p.MutedText)
	y += 26
	for _, t := range v.Taken {
		x := float32(margin)
		if t.Side != "" {
			p.put(w.mark(t.Side), x-4, y-13, 16, 16)
		}
		x = p.text(fontStrong.middle(t.Lot, room*0.5), x+18, y, fontStrong, p.Text)
		p.text(fontPlain.fit(t.Text, width-margin-x-16), max(x+14, margin+80), y, fontPlain, p.Text)
		y += 26
	}
	y = p.lines(fontNote.wrap(v.Counted, room, room), margin, y+2, 17, fontNote, p.MutedText)
	if len(v.Limits) > 0 {
		y = p.lines(fontPlain.wrap("Limits found: check them against the drawing.", room, room), margin, y+10, 18, fontPlain, p.Text)
		for _, l := range v.Limits {
			y = p.lines(fontNote.wrap(l, room, room), margin, y, 17, fontNote, p.MutedText)
		}
	}
	p.across(margin, width-margin, y+2, 1, p.Rule)
	y += 26
	p.text("Ledger", margin, y, fontHeading, p.MutedText)
	y += 24
	if len(v.Ledger) == 0 {
		p.text(fontNote.fit("every cell of measurements is a plain number", room), margin, y, fontNote, p.MutedText)
		y += 20
	}
	const place = 92
	for i, l := range v.Ledger {
		if i == mostLedger {
			p.text(qa.Count(len(v.Ledger)-i, "cell", "cells")+" more", margin, y, fontNote, p.MutedText)
			y += 24
			break
		}
		p.text(fontLot11.middle(l.Place, place-8), margin, y, fontLot11, p.Text)
		y = p.lines(fontNote.wrap(l.Found, room-place, room-place), margin+place, y, 16, fontNote, p.Text)
		y = p.lines(fontTiny.wrap(l.Taken, room-place, room-place), margin+place, y, 15, fontTiny, p.MutedText)
		p.across(margin, width-margin, y-6, 0.7, p.Rule)
		y += 14
	}
	for _, s := range v.Said {
		y = p.lines(fontNote.wrap(s, room, room), margin, y+4, 16, fontNote, p.Text)
	}
	if len(v.Reasons) > 0 {
		p.text("Why it is read so", margin, y+20, fontHeading, p.MutedText)
		y += 38
		for _, s := range v.Reasons {
			y = p.lines(fontNote.wrap(s, room, room), margin, y+4, 16, fontNote, p.MutedText)
		}
	}
	return y
}
