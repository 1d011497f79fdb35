package app

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"lotpair/app/desk"
)

// shortcut is a key that does an act together with the control key.
type shortcut struct {
	key fyne.KeyName
	act func()
}

// shortcuts are the window's own.
func (w *window) shortcuts() []shortcut {
	return []shortcut{
		{fyne.KeyO, w.askOpen},
		{fyne.KeyE, w.act.export.act},
		{fyne.KeyL, w.leave},
		{fyne.KeyM, w.offerMore},
		{fyne.KeyReturn, w.next},
		{fyne.KeyQ, w.win.Close},
	}
}

// next does the one next thing, as the foot names it: what was typed is an act first.
func (w *window) next() {
	if w.dialog != nil || w.state.Job.Name != "" {
		return
	}
	w.win.Canvas().Unfocus()
	switch {
	case w.state.Sheet != nil:
		w.sheetButtons()[0].act()
		return
	case !w.state.Open:
		w.act.begin.act()
		return
	}
	for _, b := range []*button{w.act.seal, w.act.take, w.act.compare, w.act.sign} {
		if b.label != "" {
			b.act()
			return
		}
	}
}

// copyBench copies what the bench says of the characteristic looked at.
func (w *window) copyBench() {
	if w.state.Open && w.dialog == nil {
		w.app.Clipboard().SetContent(w.shown(w.state.CopiedBench()))
		w.say("Copied what is said of the characteristic.")
	}
}

// copyTable copies all characteristics as a table.
func (w *window) copyTable() {
	if w.state.Open && w.dialog == nil {
		w.app.Clipboard().SetContent(tabbed(w.tableShown(w.state.CopiedTable())))
		w.say("Copied all characteristics as a table.")
	}
}

// say says something in the foot.
func (w *window) say(text string) {
	w.apply(func(s desk.State) desk.State {
		s.Said = text
		return s
	})
}

// undo takes the last act back.
func (w *window) undo() {
	if w.state.Job.Name == "" && w.dialog == nil && w.state.Sheet == nil {
		w.apply(func(s desk.State) desk.State { return s.Undone(person(), now()) })
	}
}

// redo does again what was undone last.
func (w *window) redo() {
	if w.state.Job.Name == "" && w.dialog == nil && w.state.Sheet == nil {
		w.apply(func(s desk.State) desk.State { return s.Redone(person(), now()) })
	}
}

// shortcut does what a shortcut stands for; false where it is none of the window's. The toolkit gives shortcuts to a line that
// has the keys and not to the window.
func (w *window) shortcut(s fyne.Shortcut) bool {
	x, ok := s.(*desktop.CustomShortcut)
	if !ok || x.Modifier != fyne.KeyModifierShortcutDefault {
		return false
	}
	for _, k := range w.shortcuts() {
		if k.key == x.KeyName {
			k.act()
			return true
		}
	}
	return false
}
