package exports

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"maps"
	"slices"
	"strings"
)

// Layout numbers the way in which a workbook is made of its record. It is raised, once a release, whenever the same record gives
// other sheets, pictures or pages; TestLayout tells.
const Layout = 2

// laid holds what the file shows against what its record must give: a workbook of this layout has to be part for part what this
// program makes of the record, heads and feet of pages and pictures with it. One whose signatures are broken is laid beside it
// cell by cell, to tell what was changed. One of an earlier layout is held by its figures (olderRecord).
func (v *Verification) laid(pkg []byte, b book) {
	var parts []string
	if !v.broken {
		var err error
		if parts, err = b.partDifferences(pkg); err != nil {
			v.disagree("sheets-differ", "", err.Error())
			return
		}
		if v.Rebuilt = len(parts) == 0; v.Rebuilt {
			return
		}
	}
	inCells := false
	for _, t := range bookDifferences(pkg, b.sheets) {
		inCells = true
		v.disagree("sheets-differ", "", t)
	}
	for _, name := range parts {
		if name == trimmedRecordPart { // the record that was read is what the rest is held against
			v.disagree("record-form", recordPart, recordPart+": found content besides the record, want the record alone")
		} else if !inCells || !strings.HasPrefix(name, "xl/worksheets/") { // its cells are told already
			v.disagree("parts-differ", "/"+name, "/"+name+": found it other than the record gives it, or none")
		}
	}
}

const trimmedRecordPart = "customXml/item1.xml"

// partDifferences names the parts of a package that are not as the book gives them. What signing adds or writes anew is let
// pass as far as it says the same; that it is covered by the signatures is asked elsewhere.
func (b book) partDifferences(pkg []byte) ([]string, error) {
	parts, err := b.parts()
	if err != nil {
		return nil, err
	}
	z, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		return nil, err
	}
	var found []string
	have := map[string]*zip.File{}
	for _, f := range z.File {
		have[f.Name] = f
		if _, ok := parts[f.Name]; !ok && !strings.HasPrefix(f.Name, "_xmlsignatures/") {
			found = append(found, f.Name)
		}
	}
	for _, name := range slices.Sorted(maps.Keys(parts)) {
		if f := have[name]; f == nil && !droppable(name, parts[name]) || f != nil && !parts[name].same(f) {
			found = append(found, name)
		}
	}
	return found, nil
}

// droppable says whether a part may be left out when a package is signed.
func droppable(name string, p part) bool {
	return name == corePart || strings.HasSuffix(name, ".rels") && !bytes.Contains(p.bytes, []byte("<Relationship "))
}

// same says whether a part of a file is this one.
func (p part) same(f *zip.File) bool {
	rels := strings.HasSuffix(f.Name, ".rels")
	if rels || f.Name == contentTypesPart || strings.HasSuffix(f.Name, ".png") {
		b, err := readEntry(f)
		switch {
		case err != nil:
			return false
		case f.Name == contentTypesPart:
			return sameTypes(p.bytes, b)
		case rels:
			return slices.Equal(relationsIn(p.bytes), relationsIn(b))
		}
		return samePicture(p.bytes, b)
	}
	r, err := f.Open()
	if err != nil {
		return false
	}
	defer r.Close()
	c := &comparer{from: r}
	if err := p.to(c); err != nil {
		return false
	}
	n, err := io.ReadFull(r, c.room[:1])
	return n == 0 && errors.Is(err, io.EOF)
}

var errDiffers = errors.New("found other bytes")

// comparer takes what is written to it as long as it equals what it reads.
type comparer struct {
	from io.Reader
	room [1 << 15]byte
}

func (c *comparer) Write(p []byte) (int, error) {
	for left := p; len(left) > 0; {
		b := c.room[:min(len(left), len(c.room))]
		if _, err := io.ReadFull(c.from, b); err != nil {
			return 0, err
		}
		if !bytes.Equal(b, left[:len(b)]) {
			return 0, errDiffers
		}
		left = left[len(b):]
	}
	return len(p), nil
}

// relationsIn are the relationships of a .rels part, whose order says nothing, but for what signing adds and takes away.
func relationsIn(rels []byte) []string {
	var x struct {
		Relationships []struct {
			ID     string `xml:"Id,attr"`
			Type   string `xml:"Type,attr"`
			Target string `xml:"Target,attr"`
			Mode   string `xml:"TargetMode,attr"`
		} `xml:"Relationship"`
	}
	if err := xml.Unmarshal(rels, &x); err != nil {
		return []string{err.Error()}
	}
	var out []string
	for _, r := range x.Relationships {
		if r.Target != corePart && !strings.HasPrefix(r.Target, "_xmlsignatures/") {
			out = append(out, r.ID+" "+r.Type+" "+r.Target+" "+strings.TrimPrefix(r.Mode, "Internal"))
		}
	}
	slices.Sort(out)
	return out
}

// sameTypes says whether every part that the book types has the same content type in the file.
func sameTypes(want, got []byte) bool {
	a, err := parseContentTypes(want)
	if err != nil {
		return false
	}
	b, err := parseContentTypes(got)
	if err != nil {
		return false
	}
	types := map[string]string{}
	for _, o := range b.Overrides {
		types[o.PartName] = o.ContentType
	}
	for _, o := range a.Overrides {
		if o.PartName != "/"+corePart && types[o.PartName] != o.ContentType {
			return false
		}
	}
	return true
}
