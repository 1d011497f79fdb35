package opcsign

import (
	"path"
	"strings"
)

const (
	typesEntry = "[Content_Types].xml"
	rootRels   = "/_rels/.rels"
	originPart = "/_xmlsignatures/origin.sigs"
	originRels = "/_xmlsignatures/_rels/origin.sigs.rels"
	sigFolder  = "/_xmlsignatures/"
)

// nameProblem says what is wrong with the name of an entry, "" when it can be a part name. Names are kept to what
// writers use: letters, digits and a few marks of ASCII. So two programs cannot read two names in one.
func nameProblem(name string) string {
	if name == typesEntry {
		return ""
	}
	if name == "" {
		return "an empty name"
	}
	for _, seg := range strings.Split(name, "/") {
		if seg == "" {
			return "an empty segment"
		}
		if strings.HasSuffix(seg, ".") {
			return "a segment that ends in a dot"
		}
	}
	for i := range len(name) {
		c := name[i]
		ok := c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c >= '0' && c <= '9' || strings.IndexByte("/._-()@$!,;=~+", c) >= 0
		if !ok {
			return "a character outside letters, digits and ._-()@$!,;=~+"
		}
	}
	return ""
}

// lower folds ASCII only: part names are equal when they are equal in this form.
func lower(s string) string {
	return strings.Map(func(r rune) rune {
		if r >= 'A' && r <= 'Z' {
			return r + 'a' - 'A'
		}
		return r
	}, s)
}

// relsSource is the part whose relationships a part holds: "/" for the package itself, "" when it holds none.
func relsSource(part string) string {
	dir, file := path.Split(part)
	if !strings.HasSuffix(dir, "/_rels/") || !strings.HasSuffix(file, ".rels") {
		return ""
	}
	return strings.TrimSuffix(dir, "_rels/") + strings.TrimSuffix(file, ".rels")
}

// resolve is the part that a relationship of a source names.
func resolve(source, target string) string {
	target, _, _ = strings.Cut(target, "#")
	if target == "" {
		return source
	}
	if !strings.HasPrefix(target, "/") {
		target = path.Join(path.Dir(source), target)
	}
	return path.Clean(target)
}

// trimSlash is the name of the entry of a part.
func trimSlash(part string) string { return strings.TrimPrefix(part, "/") }
