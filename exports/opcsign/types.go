package opcsign

import (
	"bytes"
	"fmt"
	"maps"
	"path"
	"slices"
	"strings"
)

const (
	typesSpace   = "http://schemas.openxmlformats.org/package/2006/content-types"
	relsType     = "application/vnd.openxmlformats-package.relationships+xml"
	originType   = "application/vnd.openxmlformats-package.digital-signature-origin"
	sigType      = "application/vnd.openxmlformats-package.digital-signature-xmlsignature+xml"
	coreType     = "application/vnd.openxmlformats-package.core-properties+xml"
	xmlHead      = `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + "\n"
	typeMissText = "found no content type for it, want one in [Content_Types].xml; do get the file from its source again"
)

// types are the rules of [Content_Types].xml. Keys are folded to lower case.
type types struct {
	defaults  map[string]string // by ending
	overrides map[string]override
}

type override struct{ part, typ string }

// parseTypes reads [Content_Types].xml.
func parseTypes(b []byte) (types, []Reason) {
	t := types{map[string]string{}, map[string]override{}}
	var reasons []Reason
	fault := func(code, format string, args ...any) {
		reasons = append(reasons, Reason{Code: code, Part: "/" + typesEntry, Text: fmt.Sprintf(format, args...) + "; do get the file from its source again"})
	}
	doc, err := parseXML(b)
	if err != nil {
		fault(codeContentForm, "found %v, want plain XML", err)
		return t, reasons
	}
	list, clean := doc.root.elements()
	if !doc.root.is(typesSpace, "Types") || !clean || len(doc.root.attrs) > 0 {
		fault(codeContentForm, "found the element %q, want Types with nothing but rules", doc.root.local)
	}
	for _, n := range list {
		typ, hasType := n.attr("ContentType")
		ending, isDefault := n.attr("Extension")
		part, isOverride := n.attr("PartName")
		switch {
		case n.is(typesSpace, "Default") && hasType && isDefault && n.only("ContentType", "Extension") && len(n.kids) == 0:
			if _, twice := t.defaults[lower(ending)]; twice {
				fault(codeContentDuplicate, "found two rules for the ending %q, want one", ending)
				continue
			}
			t.defaults[lower(ending)] = typ
		case n.is(typesSpace, "Override") && hasType && isOverride && n.only("ContentType", "PartName") && len(n.kids) == 0:
			if _, twice := t.overrides[lower(part)]; twice {
				fault(codeContentDuplicate, "found two rules for %q, want one", part)
				continue
			}
			t.overrides[lower(part)] = override{part, typ}
		default:
			fault(codeContentForm, "found the element %q, want Default or Override with their two attributes", n.local)
		}
	}
	return t, reasons
}

func ending(part string) string { return lower(strings.TrimPrefix(path.Ext(part), ".")) }

// of is the content type of a part, "" when no rule gives one.
func (t types) of(part string) string {
	if o, ok := t.overrides[lower(part)]; ok {
		return o.typ
	}
	return t.defaults[ending(part)]
}

// unused are the rules that apply to none of the parts, in words.
func (t types) unused(parts []string) []string {
	named, ends := map[string]bool{}, map[string]bool{}
	for _, p := range parts {
		named[lower(p)] = true
		if _, ok := t.overrides[lower(p)]; !ok {
			ends[ending(p)] = true
		}
	}
	var out []string
	for _, k := range slices.Sorted(maps.Keys(t.overrides)) {
		if !named[k] {
			out = append(out, t.overrides[k].part)
		}
	}
	for _, k := range slices.Sorted(maps.Keys(t.defaults)) {
		if !ends[k] {
			out = append(out, "*."+k)
		}
	}
	return out
}

// prune takes away the rules that apply to none of the parts.
func (t types) prune(parts []string) {
	for _, u := range t.unused(parts) {
		if rest, ok := strings.CutPrefix(u, "*."); ok {
			delete(t.defaults, rest)
		} else {
			delete(t.overrides, lower(u))
		}
	}
}

// bytes is the rules as [Content_Types].xml, sorted, so that equal rules are equal bytes.
func (t types) bytes() []byte {
	var w bytes.Buffer
	w.WriteString(xmlHead + `<Types xmlns="` + typesSpace + `">`)
	for _, k := range slices.Sorted(maps.Keys(t.defaults)) {
		w.WriteString("<Default Extension")
		writeValue(&w, k)
		w.WriteString(" ContentType")
		writeValue(&w, t.defaults[k])
		w.WriteString("/>")
	}
	for _, k := range slices.Sorted(maps.Keys(t.overrides)) {
		w.WriteString("<Override PartName")
		writeValue(&w, t.overrides[k].part)
		w.WriteString(" ContentType")
		writeValue(&w, t.overrides[k].typ)
		w.WriteString("/>")
	}
	w.WriteString("</Types>")
	return w.Bytes()
}
