package cells

import (
	"bytes"
	"errors"
	"strings"
)

// odsReader reads content.xml of an OpenDocument spreadsheet (OASIS OpenDocument 1.3, part 3: Schema) in one pass.
type odsReader struct {
	*outline
	x      *scanner
	rename map[string]string // the file's prefix of a name space to the usual one; nil where they are the usual ones
	styles map[string]odsStyle
	last   struct { // the style asked for last: most cells have that of the one before
		known bool
		name  string
		style odsStyle
	}
	hides   map[string]bool // table styles of hidden sheets
	repeats int

	sheet   Sheet
	texts   slab
	block   block
	spans   []span // the styles that columns give their cells
	number  int    // rows so far
	col     int    // columns so far: of the row being read, or of the column definitions
	rowOf   string // the style that the row gives its cells
	text    []byte
	comment bool
	plain   bool // the text of the cell being read is passed over
}

// span is a run of columns with one default style.
type span struct {
	last  int
	style string
}

const odsType = "application/vnd.oasis.opendocument.spreadsheet"

// ReadODS reads every sheet of an .ods file. The error is a *BoundError or a *FormatError.
func ReadODS(data []byte) (Workbook, error) { return Watch(nil).ReadODS(data) }

// ReadODS reads as the function of the name does, under the watch.
func (watch Watch) ReadODS(data []byte) (Workbook, error) {
	w, err := readODS(data, watch)
	var format *FormatError
	if errors.As(err, &format) { // the package and its XML are read as those of the other format are
		format.Want = strings.ReplaceAll(format.Want, ".xlsx", ".ods")
		format.Do = strings.ReplaceAll(format.Do, ".xlsx", ".ods")
	}
	var bound *BoundError
	if errors.As(err, &bound) {
		bound.Do = strings.ReplaceAll(bound.Do, ".xlsx", ".ods")
	}
	return w, err
}

func readODS(data []byte, watch Watch) (Workbook, error) {
	p, err := openPack(data, watch)
	if err != nil {
		return Workbook{}, err
	}
	if err := odsSound(p); err != nil {
		return Workbook{}, err
	}
	o := &odsReader{outline: &outline{pack: p}, styles: map[string]odsStyle{}, hides: map[string]bool{}}
	w := Workbook{}
	for name := range p.parts {
		w.Macros = w.Macros || strings.HasPrefix(name, "basic/") || strings.HasPrefix(name, "scripts/")
	}
	err = o.document("styles.xml", "document-styles", func() error { return nil })
	if err != nil {
		return Workbook{}, err
	}
	found := false
	err = o.document("content.xml", "document-content", func() error {
		if !o.is("office:body") {
			return nil
		}
		return o.x.children(func() error {
			if !o.is("office:spreadsheet") {
				return nil
			}
			found = true
			return o.x.children(func() error {
				if !o.is("table:table") {
					return nil
				}
				return o.table(&w)
			})
		})
	})
	switch {
	case err != nil:
		return Workbook{}, err
	case !found:
		return Workbook{}, &FormatError{Found: "a package without a spreadsheet (content.xml)", Want: "an .ods spreadsheet", Do: "save it as .ods or .xlsx from the spreadsheet program"}
	case len(w.Sheets) == 0:
		return Workbook{}, damaged("content.xml", "no sheet")
	}
	return w, nil
}

// odsSound refuses what is no spreadsheet, or is encrypted.
func odsSound(p *pack) error {
	r, err := p.open("mimetype")
	if err != nil {
		return err
	}
	if r != nil {
		defer func() { _ = r.Close() }()
		kind := make([]byte, 200)
		n, _ := r.Read(kind)
		if kind := strings.TrimSpace(string(kind[:n])); kind != odsType && kind != odsType+"-template" {
			return &FormatError{Found: "an OpenDocument file of the kind " + string(clip([]byte(kind))), Want: "an .ods spreadsheet", Do: "save the readings as .ods or .xlsx"}
		}
	}
	encrypted := p.parts["encrypted-package"] != nil
	m, err := p.open("META-INF/manifest.xml")
	if err != nil {
		return err
	}
	if m != nil {
		defer func() { _ = m.Close() }()
		x := newScanner("META-INF/manifest.xml", m)
		if err := x.root("manifest"); err != nil {
			return err
		}
		for {
			t, err := x.next()
			if err != nil {
				return err
			}
			if t == endOfPart {
				break
			}
			encrypted = encrypted || t == startTag && x.is("encryption-data")
		}
	}
	if encrypted {
		return &FormatError{Found: "a file that is encrypted with a password", Want: "an .ods spreadsheet without a password", Do: "open it in the spreadsheet program and save it without a password"}
	}
	return nil
}

// document reads one part with its styles; f is called for each other child of the root.
func (o *odsReader) document(name, root string, f func() error) error {
	r, err := o.pack.open(name)
	if err != nil {
		return err
	}
	if r == nil {
		return nil
	}
	defer func() { _ = r.Close() }()
	o.x = newScanner(name, r)
	if err := o.x.root(root); err != nil {
		return err
	}
	o.spaces()
	err = o.x.children(func() error {
		if o.is("office:styles") || o.is("office:automatic-styles") {
			return o.readStyles()
		}
		return f()
	})
	if err == nil {
		err = o.x.rest()
	}
	return err
}

// odsSpaces are the usual prefixes of the name spaces that are looked at.
var odsSpaces = map[string]string{
	"urn:oasis:names:tc:opendocument:xmlns:office:1.0":                     "office",
	"urn:oasis:names:tc:opendocument:xmlns:table:1.0":                      "table",
	"urn:oasis:names:tc:opendocument:xmlns:text:1.0":                       "text",
	"urn:oasis:names:tc:opendocument:xmlns:style:1.0":                      "style",
	"urn:oasis:names:tc:opendocument:xmlns:datastyle:1.0":                  "number",
	"urn:oasis:names:tc:opendocument:xmlns:xsl-fo-compatible:1.0":          "fo",
	"urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0": "calcext",
}

// spaces finds the prefixes that the root declares.
func (o *odsReader) spaces() {
	o.rename, o.last.known = nil, false
	for _, a := range o.x.attrs {
		prefix, ok := bytes.CutPrefix(a.name, []byte("xmlns:"))
		if usual := odsSpaces[string(a.value)]; ok && usual != "" && usual != string(prefix) {
			if o.rename == nil {
				o.rename = map[string]string{}
			}
			o.rename[string(prefix)] = usual
		}
	}
}

// usual is a name with the usual prefix.
func (o *odsReader) usual(name []byte) []byte {
	if o.rename == nil {
		return name
	}
	prefix, local, ok := bytes.Cut(name, []byte(":"))
	if to := o.rename[string(prefix)]; ok && to != "" {
		return []byte(to + ":" + string(local))
	}
	return name
}

// is says whether the element just begun has the name.
func (o *odsReader) is(name string) bool { return string(o.usual(o.x.name)) == name }

// attr is an attribute of the element just begun; nil where there is none.
func (o *odsReader) attr(name string) []byte {
	for _, a := range o.x.attrs {
		if string(o.usual(a.name)) == name {
			return a.value
		}
	}
	return nil
}

// count is a number of repetitions, 1 where it is left out.
func (o *odsReader) repeated(v []byte) (int, error) {
	if v == nil {
		return 1, nil
	}
	n, ok := whole(v)
	if !ok || n < 1 {
		return 0, damaged(o.x.part, "the repetition %q in row %d", clip(v), o.number+1)
	}
	return n, nil
}
