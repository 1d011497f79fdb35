package app

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
)

// showText shows paragraphs, which can be marked and copied, one or all.
func (w *window) showText(title string, paragraphs []string, more ...fyne.CanvasObject) {
	box := container.NewVBox()
	for _, t := range paragraphs {
		box.Add(wrapped(t))
	}
	w.showBox(title, box, func() string { return strings.Join(paragraphs, "\n\n") }, more...)
}

// showTable shows a table below some paragraphs. It is copied as columns with tabs between them, as spreadsheets take them.
func (w *window) showTable(title string, above []string, rows [][]string, more ...fyne.CanvasObject) {
	box := container.NewVBox()
	for _, t := range above {
		box.Add(wrapped(t))
	}
	for i, r := range rows {
		var cells []string
		for _, c := range r {
			if c != "" {
				cells = append(cells, c)
			}
		}
		l := wrapped(strings.Join(cells, "  ·  "))
		l.TextStyle.Bold = i == 0
		box.Add(l)
	}
	w.showBox(title, box, func() string { return tabbed(rows) }, more...)
}

// tabbed is a table as text.
func tabbed(rows [][]string) string {
	lines := make([]string, 0, len(rows))
	for _, r := range rows {
		clean := make([]string, len(r))
		for i, c := range r {
			clean[i] = strings.NewReplacer("\t", " ", "\n", " ").Replace(c)
		}
		lines = append(lines, strings.Join(clean, "\t"))
	}
	return strings.Join(lines, "\n")
}

// showScrolled shows what scrolls by itself.
func (w *window) showScrolled(title string, rows *scrolled, text func() string) {
	w.showOver(title, rows.scroll, text)
}

// showBox shows what can be looked through, copied and left.
func (w *window) showBox(title string, box fyne.CanvasObject, text func() string, more ...fyne.CanvasObject) {
	w.showOver(title, container.NewVScroll(box), text, more...)
}

func (w *window) showOver(title string, over fyne.CanvasObject, text func() string, more ...fyne.CanvasObject) {
	if w.dialog != nil {
		return
	}
	d := dialog.NewCustomWithoutButtons(title, over, w.win)
	close := newButton(w.palette, "Close", main, d.Hide)
	copied := newButton(w.palette, "Copy", plain, func() { w.app.Clipboard().SetContent(text()) })
	all := append([]fyne.CanvasObject{copied}, more...)
	d.SetButtons([]fyne.CanvasObject{container.NewHBox(append(all, close)...)})
	size := w.win.Canvas().Size()
	w.present(d, min(820, size.Width-60), min(560, size.Height-60))
	w.win.Canvas().Focus(close)
}
