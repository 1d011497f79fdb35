package app

import (
	"encoding/json"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/driver/desktop"

	"lotpair/app/chart"
	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/qa"
	"lotpair/qa/figure/draw"
)

// window is the one window: the state, what is shown of it, and the regions that show it.
type window struct {
	app   fyne.App
	win   fyne.Window
	build Build
	look  look
	jobs  jobs

	register *register.Register // nil where nothing is kept
	entry    register.Entry     // the record on the desk, as the register has it
	list     listing
	search   *search

	state  desk.State
	view   view
	dialog dialog.Dialog // the one that is open, nil where none is

	root                                               *fyne.Container
	paper, header, banner, left, spine, right, bench   *region
	start, foot                                        *region
	leftRows, spineRows, rightRows, sentences, problem *scrolled
	listRows                                           *scrolled
	picture                                            *chart.Drawing         // of the bench
	lines                                              map[int]*chart.Drawing // of the spine, by characteristic
	cursor                                             map[qa.Side]int        // the reading that the keys are on
	rows                                               map[qa.Side]*pageRows  // as they stand, until the state changes
	act                                                buttons
}

// view is everything the screens say of one state.
type view struct {
	header desk.HeaderView
	pages  map[qa.Side]desk.PageView
	spine  desk.SpineView
	bench  desk.BenchView
	foot   desk.FootView
}

// buttons are the controls of the window.
type buttons struct {
	looks                                 [desk.Limits + 1]*button
	order, picture, read, cancel, leave   *button
	compare, signatures, export, sign     *button
	openPlan, openWorkbook, openTheSample *button
}

// newWindow makes the window; without a register nothing is kept.
func newWindow(a fyne.App, b Build, l look, r *register.Register) *window {
	w := &window{app: a, build: b, look: l, register: r, cursor: map[qa.Side]int{}, lines: map[int]*chart.Drawing{}, rows: map[qa.Side]*pageRows{}}
	a.Settings().SetTheme(l)
	w.win = a.NewWindow("Lotpair")
	w.win.SetPadded(false)
	w.makeButtons()
	// The toolkit's own ground is a shade off its theme's colour.
	w.paper = newRegion(w.palette, func(p *pen, s fyne.Size) { p.box(0, 0, s.Width, s.Height, p.Paper) })
	w.header = newRegion(w.palette, w.paintHeader)
	w.banner = newRegion(w.palette, w.paintBanner)
	w.left = newRegion(w.palette, func(p *pen, s fyne.Size) { w.paintPage(p, s, qa.Reference) })
	w.right = newRegion(w.palette, func(p *pen, s fyne.Size) { w.paintPage(p, s, qa.Candidate) })
	w.spine = newRegion(w.palette, w.paintSpine)
	w.bench = newRegion(w.palette, w.paintBench)
	w.foot = newRegion(w.palette, w.paintFoot)
	w.start = newRegion(w.palette, w.paintStart)
	w.leftRows, w.rightRows = w.newPageRows(qa.Reference), w.newPageRows(qa.Candidate)
	w.spineRows = w.newSpineRows()
	w.sentences = w.newSentences()
	w.problem = w.newProblem()
	w.listRows = w.newListRows()
	w.search = newSearch(func() { w.find(); w.start.Refresh() }, w.listKey, w.shortcut)
	w.picture = chart.New(nil, w.palette())
	// The order of the objects is the order of the Tab key.
	w.root = container.New(windowLayout{w}, w.paper, w.header, w.banner, w.left, w.spine, w.right, w.bench, w.start, w.foot)
	w.win.SetContent(w.root)
	w.win.Resize(fyne.NewSize(1280, 800))
	w.win.Canvas().SetOnTypedKey(w.typed)
	for _, k := range w.shortcuts() {
		w.win.Canvas().AddShortcut(&desktop.CustomShortcut{KeyName: k.key, Modifier: fyne.KeyModifierShortcutDefault}, func(fyne.Shortcut) { k.act() })
	}
	w.win.SetOnDropped(func(_ fyne.Position, files []fyne.URI) {
		if len(files) > 0 && w.dialog == nil {
			w.open(files[0].Path(), readFile)
		}
	})
	a.Settings().AddListener(func(fyne.Settings) { w.show() })
	w.find()
	w.show()
	return w
}

func (w *window) makeButtons() {
	b := &w.act
	b.order = newButton(w.palette, "", quiet, func() {
		w.apply(func(s desk.State) desk.State { return s.WithSortedBy(s.Sorted.Next()) })
	})
	for l := range b.looks {
		b.looks[l] = newButton(w.palette, desk.Look(l).String(), choice, func() {
			w.apply(func(s desk.State) desk.State { return s.WithLook(desk.Look(l)) })
		})
	}
	b.picture = newButton(w.palette, "Save picture", quiet, w.askPicture)
	b.leave = newButton(w.palette, "All records", quiet, w.leave)
	b.read = newButton(w.palette, "Close", quiet, func() { w.apply(desk.State.Read) })
	b.cancel = newButton(w.palette, "Cancel", plain, w.cancel)
	b.compare = newButton(w.palette, "", main, w.compare)
	b.signatures = newButton(w.palette, "", quiet, w.showSignatures)
	b.export = newButton(w.palette, "", plain, w.askExport)
	b.sign = newButton(w.palette, "", main, w.askSign)
	b.openPlan = newButton(w.palette, "Open a plan", main, w.askOpen)
	b.openWorkbook = newButton(w.palette, "Open a workbook", plain, w.askOpen)
	b.openTheSample = newButton(w.palette, "Open the worked example", plain, w.openSample)
}

// palette is the colours of the theme as it stands.
func (w *window) palette() draw.Palette {
	return palette(w.look.variant(w.app.Settings().ThemeVariant()))
}

// apply does an act: the state changes, and everything is shown anew.
func (w *window) apply(change func(desk.State) desk.State) {
	before := w.state
	w.state = w.acknowledged(before, change(before))
	if before.Path != w.state.Path || before.Selected != w.state.Selected {
		w.cursor = map[qa.Side]int{}
		if w.state.Open && w.win.Canvas().Focused() == w.search {
			w.win.Canvas().Unfocus()
		}
		for _, s := range []*scrolled{w.leftRows, w.rightRows, w.sentences} {
			s.scroll.ScrollToTop()
		}
	}
	w.show()
}

// acknowledged is the state that an act led to, once the act is kept. One that cannot be kept is not done, unless it has
// left the window already: that is said either way.
func (w *window) acknowledged(before, next desk.State) desk.State {
	var err error
	switch {
	case next.Number != before.Number:
		if err = w.keep(next); err != nil && next.Workbook.Path == before.Workbook.Path {
			next = before
		}
	case w.register == nil:
	case next.Open && next.View() != before.View():
		var view []byte
		if view, err = json.Marshal(next.View()); err == nil {
			err = w.register.SetView(w.entry.ID, view)
		}
	case before.Open && !next.Open:
		w.entry = register.Entry{}
		err = w.register.At(0)
		w.find()
	}
	if err != nil {
		return next.Failed("Keeping what was done", err)
	}
	return next
}

// show sets everything from the state.
func (w *window) show() {
	s := w.state
	w.view = view{
		header: s.Header(), spine: s.Spine(), bench: s.Bench(), foot: s.Foot(),
		pages: map[qa.Side]desk.PageView{qa.Reference: s.Page(qa.Reference), qa.Candidate: s.Page(qa.Candidate)},
	}
	title := "Lotpair"
	if s.Open {
		title = w.view.header.Title + " – Lotpair"
	}
	if w.win.Title() != title {
		w.win.SetTitle(title)
	}
	w.lines, w.rows = map[int]*chart.Drawing{}, map[qa.Side]*pageRows{}
	w.picture.SetPicture(w.benchPicture(), w.palette())
	b := &w.act
	b.order.label = w.view.spine.Order
	b.compare.label, b.signatures.label = w.view.foot.Compare, w.view.foot.Signatures
	b.export.label, b.sign.label = w.view.foot.Export, w.view.foot.Sign
	for _, l := range w.view.bench.Looks {
		b.looks[l.Look].chosen = l.Chosen
	}
	busy := s.Job.Name != ""
	for _, x := range []*button{b.picture, b.leave, b.compare, b.export, b.sign, b.openPlan, b.openWorkbook, b.openTheSample} {
		x.disabled = busy
	}
	if w.root.Size().Width > 0 {
		w.root.Layout.Layout(w.root.Objects, w.root.Size())
	}
	for _, r := range []*region{w.paper, w.header, w.banner, w.left, w.spine, w.right, w.bench, w.start, w.foot} {
		r.Refresh()
	}
	w.revealSelected()
}
