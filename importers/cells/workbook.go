package cells

import (
	"encoding/xml"
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
	date1904 bool
}

// Read reads every worksheet of an .xlsx file. The error is a *BoundError or a *FormatError.
func Read(data []byte) (Workbook, error) {
	o, err := openOutline(data)
	if err != nil {
		return Workbook{}, err
	}
	w := Workbook{Date1904: o.date1904, Macros: o.pack.parts["xl/vbaproject.bin"] != nil}
	for _, t := range o.tabs {
		s, err := o.sheet(t)
		if err != nil {
			return Workbook{}, err
		}
		w.Sheets = append(w.Sheets, s)
	}
	return w, nil
}

// ReadSheet reads one worksheet by its name, the others unread. The error is a *BoundError or a *FormatError.
func ReadSheet(data []byte, name string) (Sheet, error) {
	o, err := openOutline(data)
	if err != nil {
		return Sheet{}, err
	}
	var names []string
	for _, t := range o.tabs {
		if t.name == name {
			return o.sheet(t)
		}
		names = append(names, fmt.Sprintf("%q", t.name))
	}
	return Sheet{}, &FormatError{Found: "the sheets " + strings.Join(names, ", "), Want: fmt.Sprintf("a sheet %q", name), Do: "name a sheet that the file has"}
}

func openOutline(data []byte) (*outline, error) {
	p, err := openPack(data)
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
			o.styles, err = readStyles(p, r.target)
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
	seen := map[string]bool{}
	err = newWalker(book, r).each(func(e xml.StartElement) error {
		switch e.Name.Local {
		case "workbook":
		case "workbookPr":
			o.date1904 = yes(attr(e, "date1904"))
		case "sheet":
			rel := rels[relID(e)]
			if !strings.HasSuffix(rel.kind, "/worksheet") { // chart and dialog sheets hold no cells
				if rel.kind == "" {
					return damaged(book, "the sheet %q without its part", attr(e, "name"))
				}
				return nil
			}
			if key := strings.ToLower(attr(e, "name")); seen[key] {
				return damaged(book, "the sheet name %q twice", attr(e, "name"))
			} else {
				seen[key] = true
			}
			state := attr(e, "state")
			o.tabs = append(o.tabs, tab{name: attr(e, "name"), part: rel.target, hidden: state == "hidden" || state == "veryHidden"})
		}
		return nil
	})
	if err == nil && len(o.tabs) == 0 {
		return damaged(book, "no worksheet")
	}
	return err
}

// relID is the sheet's relationship id: the attribute r:id, whatever its prefix; the sheet's own "id" has none.
func relID(e xml.StartElement) string {
	for _, a := range e.Attr {
		if a.Name.Local == "id" && a.Name.Space != "" {
			return a.Value
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
	err = newWalker(name, r).each(func(e xml.StartElement) error {
		if e.Name.Local != "Relationship" || attr(e, "TargetMode") == "External" {
			return nil
		}
		target := attr(e, "Target")
		if strings.HasPrefix(target, "/") {
			target = path.Clean(target)[1:]
		} else {
			target = path.Join(dir, target)
		}
		rels[attr(e, "Id")] = relation{kind: attr(e, "Type"), target: target}
		return nil
	})
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
	w := newWalker(name, r)
	err = w.each(func(e xml.StartElement) error {
		if e.Name.Local != "si" {
			return nil
		}
		s, err := w.rich()
		all = append(all, s)
		return err
	})
	return all, err
}
