package opcsign

import "slices"

const (
	coreRel       = "http://schemas.openxmlformats.org/package/2006/relationships/metadata/core-properties"
	coreRelOffice = "http://schemas.openxmlformats.org/officedocument/2006/relationships/metadata/core-properties"
)

// prepare makes an unsigned package ready for its first signature: without core properties, .rels parts that say
// nothing and rules for parts that are not there, and with the signature origin. It gives the package as it will be and the
// changes that make it so; nothing is copied.
func (c *container) prepare() (*container, []change, error) {
	drop := map[string]bool{}
	for _, p := range c.parts() {
		if c.types.of(p) == coreType {
			drop[p] = true
		}
		if relsSource(p) != "" && p != rootRels && len(c.rels[p]) == 0 {
			drop[p] = true
		}
	}
	for _, r := range c.rels[rootRels] {
		if (r.typ == coreRel || r.typ == coreRelOffice) && r.mode == internal {
			drop[resolve("/", r.target)] = true
		}
	}
	root := slices.DeleteFunc(slices.Clone(c.rels[rootRels]), func(r relationship) bool {
		return r.mode == internal && (r.typ == coreRel || r.typ == coreRelOffice || drop[resolve("/", r.target)])
	})
	root = append(root, relationship{freeID(root), originRel, trimSlash(originPart), internal})

	var kept []string
	for _, p := range c.parts() {
		if !drop[p] {
			kept = append(kept, p)
		}
	}
	c.types.overrides[lower(originRels)] = override{originRels, relsType}
	if c.types.defaults["rels"] == relsType {
		delete(c.types.overrides, lower(originRels))
	}
	c.types.defaults["sigs"] = originType
	delete(c.types.overrides, lower(originPart))
	c.types.prune(append(kept, originPart, originRels))

	contents := []content{
		{typesEntry, c.types.bytes()},
		{trimSlash(rootRels), relsBytes(root)},
		{trimSlash(originPart), []byte{}},
		{trimSlash(originRels), relsBytes(nil)},
	}
	for p := range drop {
		contents = append(contents, content{trimSlash(p), nil})
	}
	changes, err := packed(contents)
	if err != nil {
		return nil, nil, err
	}
	ready, err := newContainer(c.with(changes))
	if err != nil {
		return nil, nil, err
	}
	ready.apart[originPart], ready.apart[originRels] = true, true
	return ready, changes, nil
}
