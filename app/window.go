package app

import (
	"crypto/x509"
	"encoding/json"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/driver/desktop"

	"lotpair/app/chart"
	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/exports"
	"lotpair/qa"
	"lotpair/qa/figure"
	"lotpair/qa/figure/draw"
)

// window is the one window: the state, what is shown of it, and the regions that show it.
type window struct {
	app   fyne.App
	win   fyne.Window
	build Build
	look  look
	jobs  jobs

	decimal desk.Decimal // in which numbers are shown and taken
	names   []string     // what the record calls things, where a name holds what looks like a number

	register *register.Register // nil where nothing is kept
	entry    register.Entry     // the record on the desk, as the register has it
	list     listing
	search   *search

	state desk.State
	view  view
	paged paged

	draft       draftLines
	drafted     desk.DraftView
	plans       desk.Planner
	shift       float64 // the true difference that is thought of while planning
	sheetSaid   desk.SheetView
	looked      []byte            // of the file that is looked at
	sheetFrom   int               // the first of its columns that is shown
	sheetCursor int               // the row that the keys are on
	bytes       map[string][]byte // of the files that were brought in, by their digest
	partButtons map[int]*button

	dialog  dialog.Dialog          // the one that is open, nil where none is
	trusted []*x509.Certificate    // of signers, or of those who issued theirs
	checked *exports.Qualification // the installation check of this window; nil where none was made

	root                                               *fyne.Container
	header, banner, left, spine, right, bench          *region
	start, foot, sheet, tip                            *region
	tipText                                            string // of the reading that the pointer is on
	leftRows, spineRows, rightRows, sentences, problem *scrolled
	listRows, draftRows, sheetRows, sheetLedger        *scrolled
	picture                                            *chart.Drawing         // of the bench
	lines                                              map[int]*chart.Drawing // of the spine, by characteristic, until the result changes
	said                                               saidAt                 // the sentences beside the bench as they are wrapped
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
	begin, particulars, seal, take, amend *button
	undo, redo                            *button
	objective, claim, method, of          *button
	characteristic, terms, more           *button
	kinds                                 [desk.MultipleOfSD + 1]*button
	sheet, decimal, unmask, leaveSheet    *button
	layout, nonDetect                     *button
	columnsLeft, columnsRight             *button
	savePlan, saveStart                   *button
	takeHeadings, takeReadings            *button
	openPlan, openWorkbook, openTheSample *button
	bringLeft, bringRight                 *button // the places where a file is dropped
}

// newWindow makes the window; without a register nothing is kept.
func newWindow(a fyne.App, b Build, l look, r *register.Register) *window {
	w := &window{app: a, build: b, look: l, register: r, jobs: jobs{hand: onThread}, cursor: map[qa.Side]int{}, lines: map[int]*chart.Drawing{}, rows: map[qa.Side]*pageRows{}, bytes: map[string][]byte{}, partButtons: map[int]*button{}}
	a.Settings().SetTheme(l)
	w.win = a.NewWindow("Lotpair")
	w.win.SetPadded(false)
	w.makeButtons()
	w.header = newRegion(w.palette, w.paintHeader)
	w.banner = newRegion(w.palette, w.paintBanner)
	// What stands in a region while the criterion is written, and what stands there once it is decided.
	either := func(draft, decided func(*pen, fyne.Size)) *region {
		return newRegion(w.palette, func(p *pen, s fyne.Size) {
			if w.state.Drafting {
				draft(p, s)
				return
			}
			decided(p, s)
		})
	}
	page := func(of qa.Side) *region {
		return either(func(p *pen, s fyne.Size) { w.paintDraftPage(p, s, of) }, func(p *pen, s fyne.Size) { w.paintPage(p, s, of) })
	}
	w.left, w.right = page(qa.Reference), page(qa.Candidate)
	w.spine, w.bench = either(w.paintDraft, w.paintSpine), either(w.paintPlanning, w.paintBench)
	w.foot = newRegion(w.palette, w.paintFoot)
	w.start = newRegion(w.palette, w.paintStart)
	w.leftRows, w.rightRows = w.newPageRows(qa.Reference), w.newPageRows(qa.Candidate)
	w.spineRows = w.newSpineRows()
	w.sentences = w.newSentences()
	w.problem = w.newProblem()
	w.listRows, w.draftRows, w.sheetRows, w.sheetLedger = w.newListRows(), w.newDraftRows(), w.newSheetRows(), w.newSheetLedger()
	w.draft = w.newDraftLines()
	w.sheet = newRegion(w.palette, w.paintSheet)
	w.search = newSearch(func() { w.find(); w.start.Refresh() }, w.listKey, w.shortcut)
	w.picture = chart.New(nil, w.palette())
	w.picture.OnPointed, w.picture.OnChosen = w.pointed, w.chosen
	w.tip = newRegion(w.palette, w.paintTip)
	w.tip.Hide()
	// The order of the objects is the order of the Tab key.
	w.root = container.New(windowLayout{w}, w.header, w.banner, w.left, w.spine, w.right, w.bench, w.start, w.foot, w.sheet, w.tip)
	w.win.SetContent(w.root)
	w.win.Resize(fyne.NewSize(1280, 800))
	w.win.Canvas().SetOnTypedKey(w.typed)
	for _, k := range w.shortcuts() {
		w.win.Canvas().AddShortcut(&desktop.CustomShortcut{KeyName: k.key, Modifier: fyne.KeyModifierShortcutDefault}, func(fyne.Shortcut) { k.act() })
	}
	w.win.Canvas().AddShortcut(&fyne.ShortcutCopy{}, func(fyne.Shortcut) { w.copyBench() })
	w.win.Canvas().AddShortcut(&desktop.CustomShortcut{KeyName: fyne.KeyC, Modifier: fyne.KeyModifierShortcutDefault | fyne.KeyModifierShift}, func(fyne.Shortcut) { w.copyTable() })
	w.win.Canvas().AddShortcut(&fyne.ShortcutPaste{}, func(fyne.Shortcut) { w.paste() })
	w.win.Canvas().AddShortcut(&fyne.ShortcutUndo{}, func(fyne.Shortcut) { w.undo() })
	w.win.Canvas().AddShortcut(&fyne.ShortcutRedo{}, func(fyne.Shortcut) { w.redo() })
	w.win.Canvas().AddShortcut(&desktop.CustomShortcut{KeyName: fyne.KeyZ, Modifier: fyne.KeyModifierShortcutDefault | fyne.KeyModifierShift}, func(fyne.Shortcut) { w.redo() })
	w.win.SetOnDropped(w.dropped)
	a.Settings().AddListener(func(fyne.Settings) { w.show() })
	w.find()
	w.show()
	if err := w.loadTrusted(); err != nil {
		w.apply(failed("The trusted certificates", err))
	}
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
	b.begin = newButton(w.palette, "New comparison", main, w.beginComparison)
	b.particulars = newButton(w.palette, "Particulars", quiet, w.askParticulars)
	b.seal = newButton(w.palette, "", main, w.sealDraft)
	b.amend = newButton(w.palette, "", quiet, w.askAmend)
	b.undo = newButton(w.palette, "Undo", quiet, w.undo)
	b.redo = newButton(w.palette, "Redo", quiet, w.redo)
	b.take = newButton(w.palette, "", main, w.takeKept)
	b.objective = newButton(w.palette, "", strong, w.offerObjective)
	b.method = newButton(w.palette, "", word, w.offerMethod)
	b.of = newButton(w.palette, "", word, w.offerWay)
	b.claim = newButton(w.palette, "", strong, w.offerClaim)
	b.terms = newButton(w.palette, "All terms", quiet, w.askTerms)
	b.more = newButton(w.palette, "More", quiet, w.offerMore)
	b.layout = newButton(w.palette, "", strong, w.offerLayouts)
	b.nonDetect = newButton(w.palette, "", strong, w.offerNonDetects)
	b.savePlan = newButton(w.palette, "", plain, w.askSavePlan)
	b.saveStart = newButton(w.palette, "Save as plan", plain, w.askSaveStart)
	b.columnsLeft = newButton(w.palette, "‹", plain, func() { w.moveColumns(-4) })
	b.columnsRight = newButton(w.palette, "›", plain, func() { w.moveColumns(4) })
	b.characteristic = newButton(w.palette, "Add a characteristic", quiet, func() { w.askCharacteristic(len(w.state.Record.Plan.Characteristics)) })
	for k := range b.kinds {
		b.kinds[k] = newButton(w.palette, desk.MarginKinds[k], choice, func() { w.chooseKind(desk.MarginKind(k)) })
	}
	b.sheet = newButton(w.palette, "", strong, w.offerSheets)
	b.decimal = newButton(w.palette, "", strong, w.offerDecimal)
	b.unmask = newButton(w.palette, "Show the readings", plain, func() {
		w.apply(func(s desk.State) desk.State { return s.WithSight(person(), now()) })
	})
	b.leaveSheet = newButton(w.palette, "Leave", plain, func() {
		w.apply(func(s desk.State) desk.State { return s.WithSheet(nil) })
	})
	b.takeHeadings = newButton(w.palette, "Take headings and limits only", plain, w.takeHeadings)
	b.takeReadings = newButton(w.palette, "Take these readings", main, w.takeReadings)
	b.bringLeft = newButton(w.palette, "readings of the reference", bare, func() { w.askBring(qa.Reference) })
	b.bringRight = newButton(w.palette, "readings of the candidate", bare, func() { w.askBring(qa.Candidate) })
	b.openPlan = newButton(w.palette, "Open a plan", plain, w.askOpen)
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

// paged says which pages were made last: they hold every reading and are made anew only when they say something else.
type paged struct {
	number, selected         int
	record                   int64
	path                     string
	open, compared, drafting bool
}

func (w *window) pages() map[qa.Side]desk.PageView {
	s := w.state
	now := paged{s.Number, s.Selected, w.entry.ID, s.Path, s.Open, s.Compared, s.Drafting}
	if w.view.pages == nil || now != w.paged {
		before := w.paged
		w.paged, w.rows = now, map[qa.Side]*pageRows{}
		if before.selected = now.selected; before != now {
			w.lines = map[int]*chart.Drawing{}
		}
		return map[qa.Side]desk.PageView{qa.Reference: s.Page(qa.Reference), qa.Candidate: s.Page(qa.Candidate)}
	}
	return w.view.pages
}

// showDraft sets what is said while the criterion is written and while a file is looked at.
func (w *window) showDraft() {
	s := w.state
	if s.Sheet != nil {
		w.sheetSaid = s.Sheet.View(s.Record.Plan)
		w.act.sheet.label = w.sheetSaid.Sheet
	}
	if !s.Drafting {
		w.drafted = desk.DraftView{}
		return
	}
	w.drafted = s.Draft(w.shift, &w.plans)
	w.laid(w.draft)
	for _, d := range w.draft {
		if d.name == "true difference" {
			continue
		}
		d.line.show(d.show(s.Record.Plan, s.Selected))
		if lots := d.name == "reference lot" || d.name == "candidate lot" || d.name == "reference source" || d.name == "candidate source"; !lots && s.Sealed() {
			d.Disable()
		} else {
			d.Enable()
		}
	}
	w.act.method.label = desk.MethodText(s.Record.Plan.Criterion.Method)
	w.act.of.label = ""
	if words, second := desk.Ways(s.Record.Plan); words != nil {
		w.act.of.label = words[0]
		if second {
			w.act.of.label = words[1]
		}
	}
}

// show sets everything from the state.
func (w *window) show() {
	s := w.state
	w.view = view{header: s.Header(), spine: s.Spine(), bench: s.Bench(), foot: s.FootBy(&w.plans), pages: w.pages()}
	title := "Lotpair"
	if s.Open {
		title = w.view.header.Title + " – Lotpair"
	}
	if w.win.Title() != title {
		w.win.SetTitle(title)
	}
	w.pointed(figure.Mark{}, fyne.Position{}, false)
	w.showDraft()
	w.showNumbers()
	w.said = saidAt{}
	w.picture.SetPicture(w.benchPicture(), w.palette())
	b := &w.act
	b.order.label = w.view.spine.Order
	b.compare.label, b.signatures.label = w.view.foot.Compare, w.view.foot.Signatures
	b.export.label, b.sign.label = w.view.foot.Export, w.view.foot.Sign
	for _, l := range w.view.bench.Looks {
		b.looks[l.Look].chosen = l.Chosen
	}
	b.seal.label, b.take.label, b.amend.label = w.view.foot.Seal, w.view.foot.Take, w.view.foot.Amend
	b.savePlan.label = w.view.foot.SavePlan
	b.undo.label, b.redo.label = "", ""
	if s.CanUndo() != "" {
		b.undo.label = "Undo"
	}
	if s.CanRedo() != "" {
		b.redo.label = "Redo"
	}
	busy := s.Job.Name != ""
	for _, x := range []*button{b.picture, b.leave, b.compare, b.export, b.sign, b.openPlan, b.openWorkbook, b.openTheSample, b.begin, b.particulars, b.seal, b.take, b.amend, b.undo, b.redo, b.takeHeadings, b.takeReadings, b.unmask, b.more, b.terms, b.savePlan, b.saveStart} {
		x.disabled = busy
	}
	if w.root.Size().Width > 0 {
		w.root.Layout.Layout(w.root.Objects, w.root.Size())
	}
	for _, r := range []*region{w.header, w.banner, w.left, w.spine, w.right, w.bench, w.start, w.foot, w.sheet} {
		if r.Visible() {
			r.Refresh()
		}
	}
	w.revealSelected()
}
