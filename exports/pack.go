package exports

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"slices"
	"sort"
	"strings"
)

// The custom XML part of the record: its own part, its properties with a fixed item id, and the relationships that reach them
// (ECMA-376 Part 1, 15.2.4 and 15.2.5).
const (
	recordPropsType = "application/vnd.openxmlformats-officedocument.customXmlProperties+xml"
	recordProps     = xml.Header + `<ds:datastoreItem xmlns:ds="http://schemas.openxmlformats.org/officeDocument/2006/customXml" ds:itemID="{6B1C4E0A-9D57-4B0E-8C53-5A0C6F2E7D11}">` +
		`<ds:schemaRefs><ds:schemaRef ds:uri="` + recordNamespace + `"/></ds:schemaRefs></ds:datastoreItem>`
	recordRels = xml.Header + `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">` +
		`<Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/customXmlProps" Target="itemProps1.xml"/></Relationships>`
	recordRelationship = `<Relationship Id="rIdRecord" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/customXml" Target="../customXml/item1.xml"/>`
)

// part is one part of a package: its bytes, or what writes them where they are many.
type part struct {
	bytes []byte
	write func(io.Writer) error
}

func (p part) to(w io.Writer) error {
	if p.write != nil {
		return p.write(w)
	}
	_, err := w.Write(p.bytes)
	return err
}

// The parts that are written anew when a package is signed, besides the core properties, which are then removed.
const (
	contentTypesPart = "[Content_Types].xml"
	corePart         = "docProps/core.xml"
)

// collector takes the parts that the spreadsheet library writes as they are, in the place of a zip archive.
type collector map[string]*bytes.Buffer

// Create begins a part.
func (c collector) Create(name string) (io.Writer, error) {
	c[name] = &bytes.Buffer{}
	return c[name], nil
}

// AddFS is of no use here; the library's interface asks for it.
func (c collector) AddFS(fs.FS) error { return errors.ErrUnsupported }

// Close ends the package.
func (c collector) Close() error { return nil }

// assemble puts the sheets' cells and the record's parts among the parts that the spreadsheet library wrote, and the content
// types in order, so that the same record gives the same bytes.
func assemble(written collector, data map[string]sheetWriter, record func(io.Writer) error) (map[string]part, error) {
	parts := map[string]part{}
	for name, b := range written {
		parts[name] = part{bytes: b.Bytes()}
	}
	if record != nil {
		const rels = "xl/_rels/workbook.xml.rels"
		parts["customXml/item1.xml"] = part{write: record}
		parts["customXml/itemProps1.xml"] = part{bytes: []byte(recordProps)}
		parts["customXml/_rels/item1.xml.rels"] = part{bytes: []byte(recordRels)}
		b, err := insertBefore(parts[rels].bytes, "</Relationships>", recordRelationship)
		if err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", rels, err)
		}
		parts[rels] = part{bytes: b}
	}
	types, err := contentTypes(parts[contentTypesPart].bytes, record != nil)
	if err != nil {
		return nil, fmt.Errorf("workbook, part %s: %w", contentTypesPart, err)
	}
	parts[contentTypesPart] = part{bytes: types}
	for name, s := range data {
		before, after, err := aroundCells(parts[name].bytes)
		if err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", name, err)
		}
		parts[name] = part{write: func(w io.Writer) error {
			if _, err := w.Write(before); err != nil {
				return err
			}
			if _, err := w.Write(s.columns); err != nil {
				return err
			}
			if err := s.cells(w); err != nil {
				return err
			}
			_, err := w.Write(after)
			return err
		}}
	}
	return parts, nil
}

func readEntry(f *zip.File) ([]byte, error) {
	r, err := f.Open()
	if err != nil {
		return nil, err
	}
	defer r.Close()
	return io.ReadAll(r)
}

// sheetWriter is what of a sheet is not the library's.
type sheetWriter struct {
	columns []byte // the <cols> element
	cells   func(io.Writer) error
}

// aroundCells is what stands before and after the <cols> and <sheetData> elements that the library wrote.
func aroundCells(part []byte) (before, after []byte, err error) {
	if i, j := bytes.Index(part, []byte("<cols>")), bytes.Index(part, []byte("</cols>")); i >= 0 && j > i {
		part = slices.Concat(part[:i], part[j+len("</cols>"):])
	}
	const open, shut, empty = "<sheetData>", "</sheetData>", "<sheetData/>"
	if i := bytes.Index(part, []byte(empty)); i >= 0 {
		return part[:i], part[i+len(empty):], nil
	}
	i, j := bytes.Index(part, []byte(open)), bytes.LastIndex(part, []byte(shut))
	if i < 0 || j < i {
		return nil, nil, fmt.Errorf("found no %s", open)
	}
	return part[:i], part[j+len(shut):], nil
}

func insertBefore(b []byte, mark, what string) ([]byte, error) {
	i := bytes.LastIndex(b, []byte(mark))
	if i < 0 {
		return nil, fmt.Errorf("found no %s", mark)
	}
	return append(append(append([]byte{}, b[:i]...), what...), b[i:]...), nil
}

// typesXML is [Content_Types].xml.
type typesXML struct {
	Defaults []struct {
		Extension   string `xml:"Extension,attr"`
		ContentType string `xml:"ContentType,attr"`
	} `xml:"Default"`
	Overrides []struct {
		PartName    string `xml:"PartName,attr"`
		ContentType string `xml:"ContentType,attr"`
	} `xml:"Override"`
}

func parseContentTypes(b []byte) (typesXML, error) {
	var t typesXML
	err := xml.Unmarshal(b, &t)
	return t, err
}

// contentTypes sorts the content types, whose order the spreadsheet library leaves to chance, and adds the record's.
func contentTypes(b []byte, record bool) ([]byte, error) {
	t, err := parseContentTypes(b)
	if err != nil {
		return nil, err
	}
	var lines []string
	for _, d := range t.Defaults {
		lines = append(lines, fmt.Sprintf(`<Default Extension="%s" ContentType="%s"/>`, escape(d.Extension), escape(d.ContentType)))
	}
	for _, o := range t.Overrides {
		lines = append(lines, fmt.Sprintf(`<Override PartName="%s" ContentType="%s"/>`, escape(o.PartName), escape(o.ContentType)))
	}
	if record {
		lines = append(lines, fmt.Sprintf(`<Override PartName="/customXml/itemProps1.xml" ContentType="%s"/>`, recordPropsType))
	}
	sort.Strings(lines)
	return []byte(xml.Header + `<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types">` + strings.Join(lines, "") + `</Types>`), nil
}

func escape(s string) string {
	var b strings.Builder
	// Writing into a strings.Builder cannot fail.
	_ = xml.EscapeText(&b, []byte(s))
	return b.String()
}

// writeZip writes the parts in the order of their names; packed fast: the difference in size is small and the one in time is
// not. It begins with room for so many bytes.
func writeZip(parts map[string]part, room int) ([]byte, error) {
	names := make([]string, 0, len(parts))
	for n := range parts {
		names = append(names, n)
	}
	sort.Strings(names) // "[Content_Types].xml" comes first, where programs look for it
	var out bytes.Buffer
	out.Grow(room)
	w := zip.NewWriter(&out)
	packer, err := flate.NewWriter(io.Discard, flate.BestSpeed)
	if err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	w.RegisterCompressor(zip.Deflate, func(to io.Writer) (io.WriteCloser, error) { // one after the other: all share one
		packer.Reset(to)
		return packer, nil
	})
	for _, n := range names {
		e, err := w.Create(n)
		if err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", n, err)
		}
		if err := parts[n].to(e); err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", n, err)
		}
	}
	if err := w.Close(); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	return out.Bytes(), nil
}
