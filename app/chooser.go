package app

import (
	"os"
	"path/filepath"
	"slices"
	"sort"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"
)

// chooser is where a file is looked for: a line for its name, and below it what was opened last and what lies in the folder.
// Typing narrows the list, the arrows walk along it, return or a click takes a line: a folder is entered, a file is chosen.
type chooser struct {
	w       *window
	endings []string
	line    *pathLine
	rows    []choosable
	said    string // why a folder cannot be read
	cursor  int
	list    *scrolled
	chosen  func(path string)
	dialog  dialog.Dialog
	asked   int  // of the looks into folders, because the last may end first
	listed  int  // the look that the list shows
	pending bool // return was pressed before the list showed what was typed
}

// choosable is one line of the list.
type choosable struct {
	name, note string
	path       string
	folder     bool
}

// pathLine is the line for the name: the keys of the list work in it too.
type pathLine struct {
	widget.Entry
	key func(fyne.KeyName) bool
}

// TypedKey implements fyne.Focusable.
func (l *pathLine) TypedKey(e *fyne.KeyEvent) {
	if !l.key(e.Name) {
		l.Entry.TypedKey(e)
	}
}

const (
	chooserRow    = 30
	mostChoosable = 2000
	mostRecent    = 8
	recentFiles   = "recent files" // among the program's settings
)

// chooseFile asks for a file with one of the endings; it may lie over another dialog.
func (w *window) chooseFile(title string, endings []string, chosen func(path string)) {
	c := &chooser{w: w, endings: endings, chosen: chosen}
	c.line = &pathLine{key: c.key}
	c.line.ExtendBaseWidget(c.line)
	c.line.SetText(w.startFolder())
	c.line.OnChanged = func(string) { c.look() }
	c.list = newScrolled(&sheet{
		palette: w.palette,
		height:  func(float32) float32 { return float32(max(1, len(c.rows))) * chooserRow },
		paint:   c.paint,
		tapped: func(at fyne.Position) {
			w.win.Canvas().Focus(c.line)
			c.take(int(at.Y / chooserRow))
		},
		key: func(k fyne.KeyName) { c.key(k) },
	})
	d := dialog.NewCustomWithoutButtons(title, container.NewBorder(c.line, nil, nil, nil, c.list.scroll), w.win)
	d.SetButtons([]fyne.CanvasObject{newButton(w.palette, "Cancel", plain, d.Dismiss)})
	c.dialog = d
	w.present(d, 820, 560)
	w.win.Canvas().Focus(c.line)
	c.line.CursorColumn = len([]rune(c.line.Text))
	c.line.Refresh()
	c.look()
}

// startFolder is where files are looked for first: beside the record that is open, or beside the file that was opened last.
func (w *window) startFolder() string {
	at := ""
	if recent := w.recent(); len(recent) > 0 {
		at = filepath.Dir(recent[0])
	}
	if p := w.state.Path; filepath.IsAbs(p) {
		at = filepath.Dir(p)
	}
	if at == "" {
		at = homeFolder()
	}
	return strings.TrimSuffix(at, string(filepath.Separator)) + string(filepath.Separator)
}

func homeFolder() string {
	home, err := os.UserHomeDir()
	if err != nil {
		return "."
	}
	return home
}

// recent are the files that were opened last, the last first.
func (w *window) recent() []string { return w.app.Preferences().StringList(recentFiles) }

// opens keeps a file among those that were opened last.
func (w *window) opens(name string) {
	if !filepath.IsAbs(name) {
		return // the worked example is the program's own
	}
	all := append([]string{name}, slices.DeleteFunc(w.recent(), func(s string) bool { return s == name })...)
	w.app.Preferences().SetStringList(recentFiles, all[:min(len(all), mostRecent)])
}

// look lists what the line names, off the window's thread: a folder may lie far away.
func (c *chooser) look() {
	c.asked++
	mine, text, recent := c.asked, c.line.Text, c.w.recent()
	c.w.aside(func() func() {
		rows, said := choosables(text, c.endings, recent)
		return func() {
			if mine == c.asked {
				c.rows, c.said, c.cursor, c.listed = rows, said, 0, mine
				c.list.scroll.ScrollToTop()
				c.list.scroll.Refresh()
				if c.pending {
					c.pending = false
					c.take(0)
				}
			}
		}
	})
}

// choosables are the files opened last, then the folders and files of the folder that the text names, as far as their names hold
// what follows it.
func choosables(text string, endings, recent []string) ([]choosable, string) {
	dir, part := filepath.Split(text)
	part = strings.ToLower(part)
	wanted := func(name string) bool {
		return slices.Contains(endings, strings.ToLower(filepath.Ext(name))) && strings.Contains(strings.ToLower(filepath.Base(name)), part)
	}
	var out, files []choosable
	for _, f := range recent {
		if _, err := os.Stat(f); err == nil && wanted(f) {
			out = append(out, choosable{name: filepath.Base(f), note: "opened before, in " + filepath.Dir(f), path: f})
		}
	}
	if up := filepath.Dir(filepath.Clean(dir)); part == "" && dir != "" && up != filepath.Clean(dir) {
		out = append(out, choosable{name: "..", note: "the folder above", path: up, folder: true})
	}
	entries, err := os.ReadDir(filepath.Clean(dir))
	if err != nil {
		return nil, err.Error()
	}
	for _, e := range entries {
		name, folder := e.Name(), e.IsDir()
		if e.Type()&os.ModeSymlink != 0 {
			if info, err := os.Stat(filepath.Join(dir, name)); err == nil {
				folder = info.IsDir()
			}
		}
		switch path := filepath.Join(dir, name); {
		case strings.HasPrefix(name, ".") && part == "":
		case folder && strings.Contains(strings.ToLower(name), part):
			out = append(out, choosable{name: name, note: "folder", path: path, folder: true})
		case !folder && wanted(name):
			files = append(files, choosable{name: name, path: path})
		}
	}
	sort.SliceStable(files, func(a, b int) bool { return strings.ToLower(files[a].name) < strings.ToLower(files[b].name) })
	out = append(out, files...)
	return out[:min(len(out), mostChoosable)], ""
}

// key walks along the list; return takes the line that the keys are on, or the file that is named in full.
func (c *chooser) key(k fyne.KeyName) bool {
	by := map[fyne.KeyName]int{fyne.KeyDown: 1, fyne.KeyUp: -1, fyne.KeyPageDown: 10, fyne.KeyPageUp: -10}[k]
	switch {
	case by != 0:
		c.cursor = max(0, min(len(c.rows)-1, c.cursor+by))
		c.list.reveal(float32(c.cursor)*chooserRow, float32(c.cursor+1)*chooserRow)
		c.list.content.Refresh()
	case k == fyne.KeyReturn || k == fyne.KeyEnter:
		if info, err := os.Stat(c.line.Text); err == nil && !info.IsDir() {
			c.choose(c.line.Text)
			return true
		}
		if c.listed != c.asked {
			c.pending = true
			return true
		}
		c.take(c.cursor)
	case k == fyne.KeyEscape:
		c.dialog.Dismiss()
	default:
		return false
	}
	return true
}

// take enters a folder or chooses a file.
func (c *chooser) take(i int) {
	if i < 0 || i >= len(c.rows) {
		return
	}
	if x := c.rows[i]; !x.folder {
		c.choose(x.path)
	} else {
		c.line.SetText(strings.TrimSuffix(x.path, string(filepath.Separator)) + string(filepath.Separator))
		c.line.CursorColumn = len([]rune(c.line.Text))
		c.line.Refresh()
	}
}

func (c *chooser) choose(path string) {
	c.dialog.Dismiss()
	c.chosen(path)
}

func (c *chooser) paint(p *pen, size fyne.Size, top, bottom float32) {
	if len(c.rows) == 0 {
		text := c.said
		if text == "" {
			text = "no file ending in " + strings.Join(c.endings, ", ") + " here"
		}
		p.text(fontPlain.fit(text, size.Width-16), 8, 20, fontPlain, p.MutedText)
		return
	}
	for i := max(0, int(top/chooserRow)); i < len(c.rows) && float32(i)*chooserRow < bottom; i++ {
		x, y := c.rows[i], float32(i)*chooserRow
		p.across(8, size.Width-8, y+chooserRow, 0.7, p.Rule)
		name := fontPlain
		if i == c.cursor {
			name = fontButton
			p.box(0, y, size.Width, chooserRow, faint(p.Text, 0x0D))
			p.box(0, y, 3, chooserRow, p.Text)
		}
		label := x.name
		if x.folder && label != ".." {
			label += string(filepath.Separator)
		}
		end := p.text(name.middle(label, size.Width*0.55), 12, y+20, name, p.Text)
		p.ending(fontNote.middle(x.note, size.Width-end-28), size.Width-12, y+20, fontNote, p.MutedText)
	}
}
