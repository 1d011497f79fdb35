package exports

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"encoding/xml"
	"fmt"
	"io"
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

// pack puts the sheets' cells and the record's parts into a package as the spreadsheet library writes it, and writes every
// entry anew in a fixed order, so that the same record gives the same bytes.
func pack(pkg []byte, data map[string]func(io.Writer) error, record func(io.Writer) error) ([]byte, error) {
	in, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	parts := map[string][]byte{}
	for _, f := range in.File {
		b, err := readEntry(f)
		if err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", f.Name, err)
		}
		parts[f.Name] = b
	}
	const rels, types = "xl/_rels/workbook.xml.rels", "[Content_Types].xml"
	written := map[string]func(io.Writer) error{}
	if record != nil {
		parts["customXml/item1.xml"] = nil
		written["customXml/item1.xml"] = record
		parts["customXml/itemProps1.xml"] = []byte(recordProps)
		parts["customXml/_rels/item1.xml.rels"] = []byte(recordRels)
		if parts[rels], err = insertBefore(parts[rels], "</Relationships>", recordRelationship); err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", rels, err)
		}
	}
	if parts[types], err = contentTypes(parts[types], record != nil); err != nil {
		return nil, fmt.Errorf("workbook, part %s: %w", types, err)
	}
	for name, cells := range data {
		before, after, err := aroundCells(parts[name])
		if err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", name, err)
		}
		written[name] = func(w io.Writer) error {
			if _, err := w.Write(before); err != nil {
				return err
			}
			if err := cells(w); err != nil {
				return err
			}
			_, err := w.Write(after)
			return err
		}
	}
	return writeZip(parts, written)
}

func readEntry(f *zip.File) ([]byte, error) {
	r, err := f.Open()
	if err != nil {
		return nil, err
	}
	defer r.Close()
	return io.ReadAll(r)
}

// aroundCells is what stands before and after the <sheetData> element that the library wrote.
func aroundCells(part []byte) (before, after []byte, err error) {
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

// contentTypes sorts the content types, whose order the spreadsheet library leaves to chance, and adds the record's.
func contentTypes(b []byte, record bool) ([]byte, error) {
	var t struct {
		Defaults []struct {
			Extension   string `xml:"Extension,attr"`
			ContentType string `xml:"ContentType,attr"`
		} `xml:"Default"`
		Overrides []struct {
			PartName    string `xml:"PartName,attr"`
			ContentType string `xml:"ContentType,attr"`
		} `xml:"Override"`
	}
	if err := xml.Unmarshal(b, &t); err != nil {
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

// writeZip writes the parts in the order of their names; those in written write themselves. Packed fast: the difference in size
// is small and the one in time is not.
func writeZip(parts map[string][]byte, written map[string]func(io.Writer) error) ([]byte, error) {
	names := make([]string, 0, len(parts))
	for n := range parts {
		names = append(names, n)
	}
	sort.Strings(names) // "[Content_Types].xml" comes first, where programs look for it
	var out bytes.Buffer
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
		write := written[n]
		if write == nil {
			write = func(to io.Writer) error {
				_, err := to.Write(parts[n])
				return err
			}
		}
		if err := write(e); err != nil {
			return nil, fmt.Errorf("workbook, part %s: %w", n, err)
		}
	}
	if err := w.Close(); err != nil {
		return nil, fmt.Errorf("workbook: %w", err)
	}
	return out.Bytes(), nil
}
