package opcsign

import (
	"bytes"
	"cmp"
	"maps"
	"slices"
	"strings"
)

// canonical is the subtree of an element in the form of Canonical XML 1.0 without comments (W3C recommendation of
// 15 March 2001, http://www.w3.org/TR/2001/REC-xml-c14n-20010315), as a document subset: the namespaces in force at the
// element are written on it, and it inherits the attributes xml:* of its ancestors.
func canonical(apex *node) []byte {
	scope, attrs := map[string]string{}, map[string]attr{}
	var up []*node
	for a := apex.parent; a != nil; a = a.parent {
		up = append(up, a)
	}
	slices.Reverse(up)
	for _, a := range up {
		for _, d := range a.decls {
			scope[d.prefix] = d.uri
		}
		for _, at := range a.attrs {
			if at.space == xmlSpace {
				attrs[at.local] = at
			}
		}
	}
	for _, at := range apex.attrs {
		if at.space == xmlSpace {
			delete(attrs, at.local)
		}
	}
	for _, d := range apex.decls {
		scope[d.prefix] = d.uri
	}
	var shown []decl
	for prefix, uri := range scope {
		if uri != "" {
			shown = append(shown, decl{prefix, uri})
		}
	}
	var w bytes.Buffer
	writeElement(&w, apex, shown, append(slices.Collect(maps.Values(attrs)), apex.attrs...), scope)
	return w.Bytes()
}

// writeElement writes an element with the declarations and attributes that show on it.
func writeElement(w *bytes.Buffer, n *node, decls []decl, attrs []attr, scope map[string]string) {
	w.WriteByte('<')
	writeName(w, n.prefix, n.local)
	decls = slices.DeleteFunc(slices.Clone(decls), func(d decl) bool { return d.prefix == "xml" })
	slices.SortFunc(decls, func(a, b decl) int { return strings.Compare(a.prefix, b.prefix) })
	for _, d := range decls {
		w.WriteString(" xmlns")
		if d.prefix != "" {
			w.WriteByte(':')
			w.WriteString(d.prefix)
		}
		writeValue(w, d.uri)
	}
	attrs = slices.Clone(attrs)
	slices.SortFunc(attrs, func(a, b attr) int {
		return cmp.Or(strings.Compare(a.space, b.space), strings.Compare(a.local, b.local))
	})
	for _, a := range attrs {
		w.WriteByte(' ')
		writeName(w, a.prefix, a.local)
		writeValue(w, a.value)
	}
	w.WriteByte('>')
	for _, k := range n.kids {
		writeKid(w, k, scope)
	}
	w.WriteString("</")
	writeName(w, n.prefix, n.local)
	w.WriteByte('>')
}

// writeKid writes a node below the apex; scope is what is in force at its parent.
func writeKid(w *bytes.Buffer, k *node, scope map[string]string) {
	switch k.kind {
	case text:
		textEscape.WriteString(w, k.text)
	case instruction:
		writeInstruction(w, k)
	case element:
		var shown []decl
		inner := scope
		for _, d := range k.decls {
			if scope[d.prefix] == d.uri {
				continue
			}
			if len(shown) == 0 {
				inner = maps.Clone(scope)
			}
			shown = append(shown, d)
			inner[d.prefix] = d.uri
		}
		writeElement(w, k, shown, k.attrs, inner)
	}
}

func writeInstruction(w *bytes.Buffer, k *node) {
	w.WriteString("<?")
	w.WriteString(k.local)
	if k.text != "" {
		w.WriteByte(' ')
		w.WriteString(k.text)
	}
	w.WriteString("?>")
}

func writeName(w *bytes.Buffer, prefix, local string) {
	if prefix != "" {
		w.WriteString(prefix)
		w.WriteByte(':')
	}
	w.WriteString(local)
}

func writeValue(w *bytes.Buffer, value string) {
	w.WriteString(`="`)
	valueEscape.WriteString(w, value)
	w.WriteByte('"')
}

// replacer writes text with the characters replaced that canonical form replaces.
type replacer struct{ *strings.Replacer }

// WriteString cannot fail on a buffer, so nothing is returned.
func (r replacer) WriteString(w *bytes.Buffer, s string) { w.WriteString(r.Replace(s)) }

var (
	textEscape  = replacer{strings.NewReplacer("&", "&amp;", "<", "&lt;", ">", "&gt;", "\r", "&#xD;")}
	valueEscape = replacer{strings.NewReplacer("&", "&amp;", "<", "&lt;", `"`, "&quot;", "\t", "&#x9;", "\n", "&#xA;", "\r", "&#xD;")}
)
