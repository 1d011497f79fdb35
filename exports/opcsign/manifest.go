package opcsign

import (
	"bytes"
	"strings"
)

// readPackageObject checks every part that the manifest names, and lists what it leaves out.
func (k *check) readPackageObject() {
	o := k.ids[packageID]
	if !o.is(dsSpace, "Object") || o.parent != k.root {
		k.form(codePackage, "found no package object directly in the signature, want one")
		return
	}
	list, clean := o.elements()
	if !clean || len(list) != 2 || !list[0].is(dsSpace, "Manifest") || !list[1].is(dsSpace, "SignatureProperties") {
		k.form(codePackage, "found %d elements in the package object, want one Manifest and then one SignatureProperties", len(list))
		return
	}
	refs, clean := list[0].elements()
	if !clean || len(refs) == 0 {
		k.form(codePackage, "found a manifest of %d references with other content, want references only and at least one", len(refs))
	}
	named, ids := map[string]bool{}, map[string]map[string]bool{}
	for _, n := range refs {
		if !n.is(dsSpace, "Reference") {
			k.form(codePackage, "found the element %q in the manifest, want references", clip(n.local, 40))
			continue
		}
		r, ok := k.readReference(n)
		if !ok {
			continue
		}
		part, typ, ok := splitURI(r.uri)
		if !ok {
			k.form(codeReference, "found the manifest's reference %q, want /part?ContentType=type", clip(r.uri, 120))
			continue
		}
		if named[part] {
			k.form(codeTwice, "found %s twice in the manifest, want it once", clip(part, 120))
			continue
		}
		named[part] = true
		k.checkPart(r, part, typ, ids)
	}
	k.covered = k.signed[o]
	k.checkCoverage(named, ids)
}

// splitURI takes a reference to a part apart.
func splitURI(uri string) (part, typ string, ok bool) {
	part, typ, ok = strings.Cut(uri, "?ContentType=")
	return part, typ, ok && strings.HasPrefix(part, "/") && nameProblem(part[1:]) == "" && part[1:] != typesEntry && typ != "" && !strings.ContainsAny(typ, "?#")
}

// checkPart compares a part with its reference; ids takes the relationships that are covered.
func (k *check) checkPart(r reference, part, typ string, ids map[string]map[string]bool) {
	e := k.c.byName[trimSlash(part)]
	switch {
	case e == nil:
		k.fail(codePartMissing, part, "found no such part, want it as it was signed")
		return
	case e.doubled:
		k.fail(codeZipDuplicate, part, "found the part twice, want it once")
		return
	}
	if now := k.c.types.of(part); now != typ {
		k.fail(codeType, part, "found the content type %q, want %q as it was signed", now, typ)
	}
	if relsSource(part) != "" {
		k.checkRels(r, part, ids)
		return
	}
	if len(r.transforms) > 0 {
		k.fail(codeTransform, part, "found a transform, want the part's bytes signed as they are")
		return
	}
	d, err := k.c.digest(part, r.hash)
	switch {
	case err != nil:
		k.sig.Reasons = append(k.sig.Reasons, asReason(err, part))
	case !bytes.Equal(d, r.digest):
		k.fail(codeDigest, part, "found it changed since it was signed, want it as signed")
	}
}

// checkRels compares the relationships that a reference names.
func (k *check) checkRels(r reference, part string, ids map[string]map[string]bool) {
	if len(r.transforms) != 2 || !plain(r.transforms[1]) {
		k.fail(codeTransform, part, "found %d transforms, want the relationships transform and then Canonical XML 1.0", len(r.transforms))
		return
	}
	filter := r.transforms[0]
	alg, _ := filter.attr("Algorithm")
	list, clean := filter.elements()
	if !filter.is(dsSpace, "Transform") || alg != relsFilter || !filter.only("Algorithm") || !clean || len(list) == 0 {
		k.fail(codeTransform, part, "found the transform %q, want the relationships transform with Ids", clip(alg, 80))
		return
	}
	there := make(map[string][]relationship, len(k.c.rels[part]))
	for _, rel := range k.c.rels[part] {
		there[rel.id] = append(there[rel.id], rel)
	}
	ids[part] = make(map[string]bool, len(list))
	var kept []relationship
	for _, n := range list {
		id, ok := n.attr("SourceId")
		if !ok || !n.is(opcSpace, "RelationshipReference") || !n.only("SourceId") || len(n.kids) > 0 {
			k.fail(codeTransform, part, "found the element %q in the relationships transform, want RelationshipReference with SourceId", clip(n.local, 40))
			return
		}
		if ids[part][id] {
			k.fail(codeTwice, part, "found the relationship %q signed twice, want it once", clip(id, 60))
			return
		}
		ids[part][id] = true
		kept = append(kept, there[id]...)
		if len(there[id]) == 0 {
			k.fail(codeRelMissing, part, "found no relationship %q, want it as it was signed", clip(id, 60))
		}
	}
	if !bytes.Equal(sum(r.hash, transformed(kept)), r.digest) {
		k.fail(codeDigest, part, "found the relationships changed since they were signed, want them as signed")
	}
}

// checkCoverage lists the parts and relationships that are not signed.
func (k *check) checkCoverage(named map[string]bool, ids map[string]map[string]bool) {
	for _, part := range k.c.parts() {
		if k.c.apart[part] {
			continue
		}
		if !named[part] {
			k.left = append(k.left, part)
			k.fail(codeUnsigned, part, "found a part that the signature does not cover, want every part covered")
			continue
		}
		for _, rel := range k.c.rels[part] {
			if !ids[part][rel.id] {
				k.left = append(k.left, part+"#"+rel.id)
				k.fail(codeRelUnsigned, part, "found the relationship %q that the signature does not cover, want every relationship covered", clip(rel.id, 60))
			}
		}
	}
}
