package cells

import (
	"bytes"
	"fmt"
	"path"
	"strings"
)

// tab is one sheet as the workbook part lists it.
type tab struct {
	name, part string
	hidden     bool
}

// outline is what the workbook part says, before any sheet is read.
type outline struct {
	pack     *pack
	tabs     []tab
	strings  []string
	styles   []style
	marks    []Marks // of each style
	date1904 bool
	counted  int  // cells, rows and merged areas so far
	slow     bool // every cell by its tokens
}

// Read reads every worksheet of an .xlsx file. The error is a *BoundError or a *FormatError.
func Read(data []byte) (Workbook, error) { return Watch(nil).Read(data) }

// Read reads as the function of the name does, under the watch.
func (watch Watch) Read(data []byte) (Workbook, error) {
	o, err := openOutline(data, watch)
	if err != nil {
		return Workbook{}, err
	}
	return o.read()
}

func (o *outline) read() (Workbook, error) {
	w := Workbook{Date1904: o.date1904, Macros: o.pack.parts["xl/vbaproject.bin"] != nil}
	for _, t := range o.tabs {
		s, err := o.sheet(t)
		if err == nil {
			err = o.readComments(t.part, &s)
		}
		if err != nil {
			return Workbook{}, err
		}
		w.Sheets = append(w.Sheets, s)
	}
	return w, nil
}

// ReadSheet reads one worksheet by its name, the others unread. The error is a *BoundError or a *FormatError.
func ReadSheet(data []byte, name string) (Sheet, error) {
	o, err := openOutline(data, nil)
	if err != nil {
		return Sheet{}, err
	}
	var names []string
	for _, t := range o.tabs {
		if t.name == name {
			s, err := o.sheet(t)
			if err == nil {
				err = o.readComments(t.part, &s)
			}
			return s, err
		}
		names = append(names, fmt.Sprintf("%q", t.name))
	}
	return Sheet{}, &FormatError{Found: "the sheets " + strings.Join(names, ", "), Want: fmt.Sprintf("a sheet %q", name), Do: "name a sheet that the file has"}
}

func openOutline(data []byte, watch Watch) (*outline, error) {
	p, err := openPack(data, watch)
	if err != nil {
		return nil, err
	}
	root, err := relations(p, "")
	if err != nil {
		return nil, err
	}
	book := ""
	for _, r := range root {
		if strings.HasSuffix(r.kind, "/officeDocument") {
			book = r.target
		}
	}
	if book == "" || p.parts[strings.ToLower(book)] == nil {
		return nil, &FormatError{Found: "a zip package without a workbook", Want: "an .xlsx workbook", Do: "save it as .xlsx from the spreadsheet program"}
	}
	o := &outline{pack: p}
	rels, err := relations(p, book)
	if err != nil {
		return nil, err
	}
	for _, r := range rels {
		switch {
		case strings.HasSuffix(r.kind, "/sharedStrings"):
			o.strings, err = readStrings(p, r.target)
		case strings.HasSuffix(r.kind, "/styles"):
			o.styles, o.marks, err = readStyles(p, r.target)
		}
		if err != nil {
			return nil, err
		}
	}
	return o, o.readBook(book, rels)
}

func (o *outline) readBook(book string, rels map[string]relation) error {
	r, err := o.pack.open(book)
	if err != nil {
		return err
	}
	defer func() { _ = r.Close() }()
	x := newScanner(book, r)
	if err := x.root("workbook"); err != nil {
		return err
	}
	seen := map[string]bool{}
	err = x.children(func() error {
		switch string(x.local()) {
		case "workbookPr":
			o.date1904 = yes(x.attr("date1904"))
		case "sheets":
			return x.children(func() error { return o.tab(x, rels, seen) })
		}
		return nil
	})
	if err == nil {
		err = x.rest()
	}
	if err == nil && len(o.tabs) == 0 {
		return damaged(book, "no worksheet")
	}
	return err
}

// tab reads one child of <sheets>.
func (o *outline) tab(x *scanner, rels map[string]relation, seen map[string]bool) error {
	if !x.is("sheet") {
		return nil
	}
	name, state := string(x.attr("name")), string(x.attr("state"))
	rel := rels[relID(x)]
	switch {
	case rel.kind == "":
		return damaged(x.part, "the sheet %q without its part", name)
	case !strings.HasSuffix(rel.kind, "/worksheet"): // chart and dialog sheets hold no cells
		return nil
	case seen[strings.ToLower(name)]:
		return damaged(x.part, "the sheet name %q twice", name)
	}
	seen[strings.ToLower(name)] = true
	o.tabs = append(o.tabs, tab{name: name, part: rel.target, hidden: state == "hidden" || state == "veryHidden"})
	return nil
}

// relID is the sheet's relationship id: the attribute r:id, whatever its prefix; the sheet's own "id" has none.
func relID(x *scanner) string {
	for _, a := range x.attrs {
		if prefix, local, ok := bytes.Cut(a.name, []byte(":")); ok && string(local) == "id" && string(prefix) != "xml" {
			return string(a.value)
		}
	}
	return ""
}

type relation struct{ kind, target string }

// relations are the internal relationships of a part by id; of the package itself where the part is empty. External ones
// are left out: nothing outside the file is ever opened.
func relations(p *pack, part string) (map[string]relation, error) {
	dir, base := path.Split(part)
	name := dir + "_rels/" + base + ".rels"
	r, err := p.open(name)
	if err != nil || r == nil {
		return nil, err
	}
	defer func() { _ = r.Close() }()
	rels := map[string]relation{}
	x := newScanner(name, r)
	if err := x.root("Relationships"); err != nil {
		return nil, err
	}
	err = x.children(func() error {
		if !x.is("Relationship") || string(x.attr("TargetMode")) == "External" {
			return nil
		}
		if len(rels) == MaxParts {
			return damaged(name, "more than %d relationships", MaxParts)
		}
		target := string(x.attr("Target"))
		if strings.HasPrefix(target, "/") {
			target = path.Clean(target)[1:]
		} else {
			target = path.Join(dir, target)
		}
		rels[string(x.attr("Id"))] = relation{kind: string(x.attr("Type")), target: target}
		return nil
	})
	if err == nil {
		err = x.rest()
	}
	return rels, err
}

// readStrings reads the shared strings, plain and rich.
func readStrings(p *pack, name string) ([]string, error) {
	r, err := p.open(name)
	if err != nil || r == nil {
		return nil, err
	}
	defer func() { _ = r.Close() }()
	var all []string
	var texts slab
	var value []byte
	x := newScanner(name, r)
	if err := x.root("sst"); err != nil {
		return nil, err
	}
	err = x.children(func() error {
		if !x.is("si") {
			return nil
		}
		if len(all) == MaxCells {
			return &BoundError{Part: name, Found: "more than 16777216 shared texts", Bound: "at most 16777216", Do: "split the file"}
		}
		var err error
		value, err = x.rich(value[:0])
		all = append(all, texts.keep(unescape(value)))
		return err
	})
	if err == nil {
		err = x.rest()
	}
	return all, err
}
