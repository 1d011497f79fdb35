package app

import "fyne.io/fyne/v2"

// Heights of the window's parts, in points.
const (
	headerHeight = 70
	footHeight   = 48
	rowHeight    = 44 // a line of the spine
	spineFoot    = 30
)

// The smallest window in which nothing is cut.
var leastWindow = fyne.NewSize(1024, 700)

// windowLayout places the regions as the drawing of the window does at 1280 by 800, and lets them grow from there: the pages
// a little, the spine and the bench with what is left. The spine gets the room that its lines want as long as the bench
// keeps enough for its picture.
type windowLayout struct{ w *window }

// MinSize implements fyne.Layout.
func (windowLayout) MinSize([]fyne.CanvasObject) fyne.Size { return leastWindow }

// Layout implements fyne.Layout.
func (l windowLayout) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	w := l.w
	place := func(r *region, x, y, width, height float32, shown bool) {
		if !shown || height <= 0 {
			r.Hide()
			return
		}
		r.Move(fyne.NewPos(x, y))
		r.Resize(fyne.NewSize(width, height))
		r.Show()
	}
	over := w.state.Sheet != nil // a file lies over the window
	open := w.state.Open && !over
	top, bottom := float32(headerHeight), size.Height-footHeight
	place(w.header, 0, 0, size.Width, headerHeight, !over)
	place(w.foot, 0, bottom, size.Width, footHeight, !over)
	banner := w.bannerHeight(size.Width)
	place(w.banner, 0, top, size.Width, banner, banner > 0)
	top += banner
	place(w.start, 0, top, size.Width, bottom-top, !open && !over)
	page := pageWidth(size.Width)
	middle := w.spineHeight(size.Width-2*page, bottom-top)
	place(w.left, 0, top, page, middle, open)
	place(w.spine, page, top, size.Width-2*page, middle, open)
	place(w.right, size.Width-page, top, page, middle, open)
	place(w.bench, 0, top+middle, size.Width, bottom-top-middle, open)
	at := float32(0)
	if banner > 0 {
		at = banner // what went wrong stays in sight
		w.banner.Move(fyne.NewPos(0, 0))
		if !over {
			w.banner.Move(fyne.NewPos(0, headerHeight))
		}
	}
	place(w.sheet, 0, at, size.Width, size.Height-at, over)
}

// pageWidth is 268 in the drawing; pages grow less than the window.
func pageWidth(window float32) float32 {
	return max(226, min(400, 268+(window-1280)*0.17))
}

// spineHeight shares the room between spine and bench: at least 60 in 100 for what the spine wants, and the bench never less
// than its picture and a few sentences need.
func (w *window) spineHeight(width, room float32) float32 {
	wanted := w.spineHeadHeight(width) + float32(len(w.view.spine.Rows))*rowHeight + spineFoot
	if w.state.Drafting {
		wanted = 382
	}
	wanted = max(wanted, 360, room/2) // where there is more room, the readings on the pages have half of it
	bench := max(250, room*0.4)
	return max(200, min(wanted, room-bench))
}
