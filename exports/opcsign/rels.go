package opcsign

import (
	"bytes"
	"fmt"
	"slices"
	"strconv"
	"strings"
)

const (
	relsSpace   = "http://schemas.openxmlformats.org/package/2006/relationships"
	originRel   = "http://schemas.openxmlformats.org/package/2006/relationships/digital-signature/origin"
	sigRel      = "http://schemas.openxmlformats.org/package/2006/relationships/digital-signature/signature"
	internal    = "Internal"
	external    = "External"
	getItAgain  = "; do get the file from its source again"
	relElements = `<Relationships xmlns="` + relsSpace + `">`
)

// relationship is one line of a .rels part; mode is Internal where the part says nothing.
type relationship struct{ id, typ, target, mode string }

// parseRels reads a .rels part.
func parseRels(part string, b []byte) ([]relationship, []Reason) {
	var reasons []Reason
	fault := func(code, format string, args ...any) {
		reasons = append(reasons, Reason{Code: code, Part: part, Text: fmt.Sprintf(format, args...) + getItAgain})
	}
	doc, err := parseXML(b)
	if err != nil {
		fault(codeRelForm, "found %v, want plain XML", err)
		return nil, reasons
	}
	list, clean := doc.root.elements()
	if !doc.root.is(relsSpace, "Relationships") || !clean || len(doc.root.attrs) > 0 {
		fault(codeRelForm, "found the element %q, want Relationships with nothing but relationships", doc.root.local)
	}
	seen := map[string]bool{}
	var out []relationship
	for _, n := range list {
		id, hasID := n.attr("Id")
		typ, hasType := n.attr("Type")
		target, hasTarget := n.attr("Target")
		mode, hasMode := n.attr("TargetMode")
		if !hasMode {
			mode = internal
		}
		if !n.is(relsSpace, "Relationship") || !hasID || id == "" || !hasType || !hasTarget || mode != internal && mode != external ||
			!n.only("Id", "Type", "Target", "TargetMode") || len(n.kids) > 0 {
			fault(codeRelForm, "found the element %q with the Id %q, want a relationship with Id, Type and Target", n.local, id)
			continue
		}
		if seen[id] {
			fault(codeRelDuplicate, "found the Id %q twice, want it once", id)
		}
		seen[id] = true
		out = append(out, relationship{id, typ, target, mode})
	}
	return out, reasons
}

// transformed is the octets that a signature covers when it names all of these relationships: the relationships
// transform of ECMA-376 part 2 (13.2.4.24), then Canonical XML. Sorted by Id in code points, with their mode written.
func transformed(rels []relationship) []byte {
	rels = slices.Clone(rels)
	slices.SortStableFunc(rels, func(a, b relationship) int { return strings.Compare(a.id, b.id) })
	var w bytes.Buffer
	w.WriteString(relElements)
	for _, r := range rels {
		w.WriteString("<Relationship Id")
		writeValue(&w, r.id)
		w.WriteString(" Target")
		writeValue(&w, r.target)
		w.WriteString(" TargetMode")
		writeValue(&w, r.mode)
		w.WriteString(" Type")
		writeValue(&w, r.typ)
		w.WriteString("></Relationship>")
	}
	w.WriteString("</Relationships>")
	return w.Bytes()
}

// relsBytes is a .rels part of these relationships.
func relsBytes(rels []relationship) []byte {
	var w bytes.Buffer
	w.WriteString(strings.TrimSuffix(xmlHead, "\n") + relElements)
	for _, r := range rels {
		w.WriteString("<Relationship Id")
		writeValue(&w, r.id)
		w.WriteString(" Type")
		writeValue(&w, r.typ)
		w.WriteString(" Target")
		writeValue(&w, r.target)
		if r.mode != internal {
			w.WriteString(" TargetMode")
			writeValue(&w, r.mode)
		}
		w.WriteString("/>")
	}
	w.WriteString("</Relationships>")
	return w.Bytes()
}

// freeID is the first rIdN that no relationship has, case apart.
func freeID(rels []relationship) string {
	taken := map[string]bool{}
	for _, r := range rels {
		taken[lower(r.id)] = true
	}
	for n := 1; ; n++ {
		if id := "rId" + strconv.Itoa(n); !taken[lower(id)] {
			return id
		}
	}
}
