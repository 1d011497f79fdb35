package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// paintSheetChoices draws what a person may say of the whole file: sheet, layout, decimal mark, what a non-detect counts as.
func (w *window) paintSheetChoices(p *pen, y float32) {
	v, x := w.sheetSaid, float32(margin)
	choice := func(name string, b *button, value string, changes bool) {
		if value == "" {
			return
		}
		x = p.text(name+" ", x, y, fontTiny, p.MutedText)
		if changes {
			x = w.word(p, b, value, x+4, y+2) + 20
			return
		}
		x = p.text(value, x, y, fontPlain, p.Text) + 24
	}
	choice("sheet", w.act.sheet, v.Sheet, len(w.state.Sheet.Sheets()) > 1)
	choice("layout", w.act.layout, v.Layout, true)
	choice("decimal mark", w.act.decimal, v.Decimal, true)
	choice("below a limit", w.act.nonDetect, v.NonDetect, true)
}

// restate reads the file that is looked at again, as it is stated.
func (w *window) restate(t desk.Stated) {
	x, data := w.state.Sheet, w.looked
	const place = "Reading the file again"
	w.work(place, func(watch qa.Watch) change {
		next, err := desk.LookedInto(watch, x.File.Name, data, t, x.Masked)
		if err != nil {
			return failed(place, err)
		}
		next.Side = x.Side
		return func(s desk.State) desk.State { return s.WithSheet(&next) }
	})
}

// states reads the file again where what is stated can be.
func (w *window) states(t desk.Stated, err error) {
	if err != nil {
		w.apply(failed("Changing a part", err))
		return
	}
	w.restate(t)
}

// offerColumnParts offers the parts that a column can play.
func (w *window) offerColumnParts(column int) {
	if w.busy() || w.state.Sheet == nil {
		return
	}
	var items []*fyne.MenuItem
	for _, part := range desk.ColumnParts {
		item := fyne.NewMenuItem(part, func() { w.states(w.state.Playing(column, part)) })
		item.Checked = w.sheetSaid.Columns[column-1].Plays == part
		items = append(items, item)
	}
	w.offer(w.partButton(column), items...)
}

// offerRowParts offers the parts that the row of the cursor can play, at a place of the rows.
func (w *window) offerRowParts(at fyne.Position) {
	if w.busy() || w.state.Sheet == nil {
		return
	}
	row := w.state.Sheet.RowPart(w.sheetCursor, 0, 0)
	var items []*fyne.MenuItem
	for _, part := range desk.RowParts {
		item := fyne.NewMenuItem(part, func() { w.states(w.state.Sheet.RowPlaying(row.Number, part)) })
		item.Checked = row.Part == part || row.Part == "" && part == desk.RowReading
		items = append(items, item)
	}
	showMenu(fyne.NewMenu("", items...), w.win.Canvas(), fyne.CurrentApp().Driver().AbsolutePositionForObject(w.sheetRows.scroll).Add(at))
}

// offerSheets offers the other sheets of the file.
func (w *window) offerSheets() {
	var items []*fyne.MenuItem
	for _, name := range w.state.Sheet.Sheets() {
		items = append(items, fyne.NewMenuItem(name, func() { w.restate(w.state.Sheet.Stated.WithSheetNamed(name)) }))
	}
	w.offer(w.act.sheet, items...)
}

// offerLayouts offers the layouts.
func (w *window) offerLayouts() {
	var items []*fyne.MenuItem
	for _, layout := range importers.Layouts {
		items = append(items, fyne.NewMenuItem(desk.LayoutText(layout), func() { w.restate(w.state.Sheet.Stated.WithLayout(layout)) }))
	}
	w.offer(w.act.layout, items...)
}

// offerDecimal offers the decimal marks of a text file.
func (w *window) offerDecimal() {
	item := func(name, mark string) *fyne.MenuItem {
		return fyne.NewMenuItem(name, func() { w.restate(w.state.Sheet.Stated.WithDecimal(mark)) })
	}
	w.offer(w.act.decimal, item("point", "."), item("comma", ","))
}

// offerNonDetects offers what a reading below a detection limit counts as.
func (w *window) offerNonDetects() {
	var items []*fyne.MenuItem
	for _, as := range []string{qa.NonDetectExclude, qa.NonDetectLimit, qa.NonDetectHalfLimit, qa.NonDetectZero} {
		items = append(items, fyne.NewMenuItem(as, func() { w.restate(w.state.Sheet.Stated.WithNonDetect(as)) }))
	}
	w.offer(w.act.nonDetect, items...)
}

var showMenu = widget.ShowPopUpMenuAtPosition
