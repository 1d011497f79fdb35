package exports

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"path"
	"strings"

	"lotpair/exports/opcsign"
)

// sheetFormulas reads the formulas of one sheet: cell name to formula. One that is more than a formula of its own cell (shared
// with others, over an area, a table of data) is marked, so that it equals none of ours (ISO/IEC 29500-1, 18.3.1.40).
func sheetFormulas(pkg []byte, name string) (map[string]string, error) {
	part, err := sheetPart(pkg, name)
	if err != nil {
		return nil, err
	}
	b, err := opcsign.ReadPart(pkg, part)
	if err != nil {
		return nil, fmt.Errorf("sheet %s: %w", name, err)
	}
	found, at, inside := map[string]string{}, "", false
	d := xml.NewDecoder(bytes.NewReader(b))
	for {
		t, err := d.Token()
		if errors.Is(err, io.EOF) {
			return found, nil
		}
		if err != nil {
			return nil, fmt.Errorf("sheet %s: %w", name, err)
		}
		switch t := t.(type) {
		case xml.StartElement:
			switch t.Name.Local {
			case "c":
				at = attribute(t, "r")
			case "f":
				inside = true
				mark := ""
				if _, twice := found[at]; twice || len(t.Attr) > 0 {
					mark = "not of one cell: "
				}
				found[at] += mark
			}
		case xml.EndElement:
			if t.Name.Local == "f" {
				inside = false
			}
		case xml.CharData:
			if inside {
				found[at] += string(t)
			}
		}
	}
}

func attribute(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

// relationsXML is a relationships part.
type relationsXML struct {
	List []struct {
		ID     string `xml:"Id,attr"`
		Type   string `xml:"Type,attr"`
		Target string `xml:"Target,attr"`
	} `xml:"Relationship"`
}

// sheetPart finds the part of a sheet the way every program does: from the package's relationships to the workbook, from there
// by the sheet's relationship.
func sheetPart(pkg []byte, name string) (string, error) {
	var root, rels relationsXML
	if err := readXML(pkg, "/_rels/.rels", &root); err != nil {
		return "", err
	}
	book := ""
	for _, r := range root.List {
		if strings.HasSuffix(r.Type, "/officeDocument") {
			if book != "" {
				return "", errors.New("package: found two workbooks, want one")
			}
			book = path.Join("/", r.Target)
		}
	}
	var w struct {
		Sheets []struct {
			Name string `xml:"name,attr"`
			ID   string `xml:"http://schemas.openxmlformats.org/officeDocument/2006/relationships id,attr"`
		} `xml:"sheets>sheet"`
	}
	if err := readXML(pkg, book, &w); err != nil {
		return "", err
	}
	if err := readXML(pkg, path.Join(path.Dir(book), "_rels", path.Base(book)+".rels"), &rels); err != nil {
		return "", err
	}
	for _, s := range w.Sheets {
		for _, r := range rels.List {
			if s.Name != name || r.ID != s.ID {
				continue
			}
			if strings.HasPrefix(r.Target, "/") {
				return path.Clean(r.Target), nil
			}
			return path.Join(path.Dir(book), r.Target), nil
		}
	}
	return "", fmt.Errorf("sheet %s: found none, want the one that the record gives", name)
}

func readXML(pkg []byte, part string, to any) error {
	b, err := opcsign.ReadPart(pkg, part)
	if err != nil {
		return fmt.Errorf("part %s: %w", part, err)
	}
	if err := xml.Unmarshal(b, to); err != nil {
		return fmt.Errorf("part %s: %w", part, err)
	}
	return nil
}
