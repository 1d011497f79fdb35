package opcsign

import (
	"bytes"
	"crypto"
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// container is a package that has been read: its parts, their types and relationships, and the signatures among them.
type container struct {
	*archive
	types      types
	rels       map[string][]relationship // by the name of the .rels part
	signatures []string                  // parts that the origin names, by their number
	apart      map[string]bool           // the origin, its relationships and the signatures: covered by no signature
	digests    map[digestOf][]byte       // those computed so far
}

// digestOf names one digest of one part.
type digestOf struct {
	part string
	hash crypto.Hash
}

// openContainer reads a package. Irregularities are reasons; an error means that it is no package.
func openContainer(pkg []byte) (*container, error) {
	a, err := openArchive(pkg)
	if err != nil {
		return nil, err
	}
	return newContainer(a)
}

func newContainer(a *archive) (*container, error) {
	if err := a.bounds(); err != nil {
		return nil, err
	}
	c := &container{archive: a, rels: map[string][]relationship{}, apart: map[string]bool{}, digests: map[digestOf][]byte{}}
	if a.byName[typesEntry] == nil || a.byName[trimSlash(rootRels)] == nil {
		return nil, notPackage("found an archive without %s and %s", typesEntry, trimSlash(rootRels))
	}
	b, err := a.byName[typesEntry].read()
	if err != nil {
		return nil, err
	}
	var reasons []Reason
	c.types, reasons = parseTypes(b)
	c.reasons = append(c.reasons, reasons...)
	if err := c.readRels(); err != nil {
		return nil, err
	}
	for _, p := range c.parts() {
		if c.types.of(p) == "" {
			c.note(codeContentMissing, p, typeMissText)
		}
	}
	return c, nil
}

func (c *container) note(code, part, format string, args ...any) {
	c.reasons = append(c.reasons, Reason{Code: code, Part: part, Text: fmt.Sprintf(format, args...)})
}

// parts are the names of all parts in the archive's order, each once.
func (c *container) parts() []string {
	var out []string
	for _, e := range c.entries {
		if e.name != typesEntry && c.byName[e.name] == e {
			out = append(out, "/"+e.name)
		}
	}
	return out
}

// readRels reads every .rels part.
func (c *container) readRels() error {
	for _, p := range c.parts() {
		source := relsSource(p)
		if source == "" {
			continue
		}
		b, err := c.byName[trimSlash(p)].read()
		if err != nil {
			return err
		}
		rels, reasons := parseRels(p, b)
		c.rels[p] = rels
		c.reasons = append(c.reasons, reasons...)
		if source != "/" && (c.byName[trimSlash(source)] == nil || relsSource(source) != "") {
			c.note(codeRelOrphan, p, "found relationships of %s, which is no part, want that part"+getItAgain, source)
		}
		if t := c.types.of(p); t != relsType && t != "" {
			c.note(codeContentForm, p, "found the content type %q, want %q"+getItAgain, t, relsType)
		}
	}
	return nil
}

// traces says whether anything in the package belongs to signatures.
func (c *container) traces() bool {
	for _, e := range c.entries {
		if strings.HasPrefix("/"+lower(e.name), sigFolder) {
			return true
		}
		if t := c.types.of("/" + e.name); t == originType || t == sigType {
			return true
		}
	}
	for _, rels := range c.rels {
		for _, r := range rels {
			if r.typ == originRel || r.typ == sigRel {
				return true
			}
		}
	}
	return false
}

// findSignatures follows the one origin to the signatures, and says what in the signature folder is none of them.
func (c *container) findSignatures() {
	var origins []string
	for p, rels := range c.rels {
		for _, r := range rels {
			switch {
			case r.typ == originRel && p == rootRels && r.mode == internal:
				origins = append(origins, resolve("/", r.target))
			case r.typ == originRel || r.typ == sigRel && p != originRels:
				c.note(codeOrigin, p, "found the relationship %q of a signature, want none here"+getItAgain, r.id)
			}
		}
	}
	e := c.byName[trimSlash(originPart)]
	if len(origins) != 1 || origins[0] != originPart || e == nil || e.size != 0 || c.types.of(originPart) != originType {
		c.note(codeOrigin, originPart, "found %d signature origins %v, want exactly one, empty, at this place"+getItAgain, len(origins), origins)
	}
	c.apart[originPart], c.apart[originRels] = true, true
	numbers := map[int]string{}
	for _, r := range c.rels[originRels] {
		part := resolve(originPart, r.target)
		n := number(part)
		if r.typ != sigRel || r.mode != internal || n == 0 || numbers[n] != "" || c.byName[trimSlash(part)] == nil || c.types.of(part) != sigType {
			c.note(codeStray, originRels, "found the relationship %q to %q, want one to each signature sigN.xml and no other"+getItAgain, r.id, r.target)
			continue
		}
		numbers[n] = part
		c.apart[part] = true
	}
	for _, part := range numbers {
		c.signatures = append(c.signatures, part)
	}
	slices.SortFunc(c.signatures, func(a, b string) int { return number(a) - number(b) })
	for _, p := range c.parts() {
		if !c.apart[p] && (strings.HasPrefix(lower(p), sigFolder) || c.types.of(p) == originType || c.types.of(p) == sigType) {
			c.note(codeStray, p, "found a part among the signatures that no relationship of the origin names, want none"+getItAgain)
		}
	}
	if len(c.signatures) == 0 {
		c.note(codeNoSignature, originPart, "found a signature origin without a signature, want a signature or no origin"+getItAgain)
	}
	for _, u := range c.types.unused(c.parts()) {
		c.note(codeContentUnused, "/"+typesEntry, "found a rule for %s, of which there is no part, want none"+getItAgain, u)
	}
}

// number is N of /_xmlsignatures/sigN.xml, 0 for every other name.
func number(part string) int {
	s, ok := strings.CutPrefix(part, sigFolder+"sig")
	s, end := strings.CutSuffix(s, ".xml")
	n, err := strconv.Atoi(s)
	if !ok || !end || err != nil || n < 1 || strconv.Itoa(n) != s {
		return 0
	}
	return n
}

// digest is the digest of an ordinary part's bytes, computed once.
func (c *container) digest(part string, h crypto.Hash) ([]byte, error) {
	key := digestOf{part, h}
	if d, ok := c.digests[key]; ok {
		return d, nil
	}
	e := c.byName[trimSlash(part)]
	w := h.New()
	if err := e.writeTo(w); err != nil {
		return nil, err
	}
	d := w.Sum(nil)
	c.digests[key] = d
	return d, nil
}

// know takes over the digests that another package has of the same packed bytes.
func (c *container) know(from *container) {
	for key, d := range from.digests {
		a, b := from.byName[trimSlash(key.part)], c.byName[trimSlash(key.part)]
		if a != nil && b != nil && a.method == b.method && a.crc == b.crc && a.size == b.size && bytes.Equal(a.packed, b.packed) {
			c.digests[key] = d
		}
	}
}
