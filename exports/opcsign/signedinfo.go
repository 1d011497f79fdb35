package opcsign

import (
	"bytes"
	"crypto"
	"strings"
)

const (
	packageID   = "idPackageObject"
	xadesSpace  = "http://uri.etsi.org/01903/v1.3.2#"
	opcSpace    = "http://schemas.openxmlformats.org/package/2006/digital-signature"
	officeSpace = "http://schemas.microsoft.com/office/2006/digsig"
)

// readSignedInfo verifies the signature value and the digest of every object.
func (k *check) readSignedInfo() {
	list, clean := k.info.elements()
	if !clean || !k.info.only("Id") || len(list) < 3 || !list[0].is(dsSpace, "CanonicalizationMethod") || !list[1].is(dsSpace, "SignatureMethod") {
		k.form(codeForm, "found a SignedInfo of %d elements, want CanonicalizationMethod, SignatureMethod and References", len(list))
		return
	}
	if alg, _ := list[0].attr("Algorithm"); alg != c14n || len(list[0].kids) > 0 {
		k.form(codeTransform, "found the canonicalisation %q, want %q", clip(alg, 80), c14n)
		return
	}
	k.checkMethod(list[1])
	packages := 0
	for _, n := range list[2:] {
		if !n.is(dsSpace, "Reference") {
			k.form(codeForm, "found the element %q in SignedInfo, want References", clip(n.local, 40))
			continue
		}
		if r, ok := k.readReference(n); ok {
			k.checkObject(r)
			if r.uri == "#"+packageID {
				packages++
			}
		}
	}
	if packages != 1 {
		k.form(codePackage, "found %d references to the package object, want one", packages)
	}
}

// checkMethod verifies the value with the certificate's key.
func (k *check) checkMethod(n *node) {
	alg, _ := n.attr("Algorithm")
	m, ok := signatureMethods[alg]
	if !ok || len(n.kids) > 0 {
		code := codeAlgorithm
		if weak[alg] {
			code = codeWeak
		}
		k.form(code, "found the signature method %q, want RSA (PKCS#1 v1.5) or ECDSA with SHA-256, SHA-384 or SHA-512", clip(alg, 80))
		return
	}
	if k.sig.Certificate == nil {
		return // noted where the certificate was read
	}
	kind, code, found := keyProblem(k.sig.Certificate.PublicKey)
	if code != "" {
		k.form(code, "found %s, %s", found, wantKey)
		return
	}
	if kind != m.kind {
		k.form(codeAlgorithm, "found the method %q with a certificate for %s, want method and key of one kind", alg, kind)
		return
	}
	if !checkValue(k.sig.Certificate.PublicKey, m.hash, sum(m.hash, canonical(k.info)), k.value) {
		k.form(codeValue, "found a signature value that the certificate's key does not verify, want one that it does")
	}
}

func sum(h crypto.Hash, b []byte) []byte {
	w := h.New()
	w.Write(b)
	return w.Sum(nil)
}

// checkObject resolves a reference of SignedInfo, which may only name an Object of this signature or the signed
// properties of XAdES in one, and compares the digest.
func (k *check) checkObject(r reference) {
	id, local := strings.CutPrefix(r.uri, "#")
	n := k.ids[id]
	switch {
	case !local || id == "" || n == nil:
		k.form(codeReference, "found the reference %q, want one to an object of this signature", clip(r.uri, 120))
		return
	case n.is(dsSpace, "Object") && n.parent == k.root:
	case n.is(xadesSpace, "SignedProperties") && n.parent.is(xadesSpace, "QualifyingProperties") && n.parent.parent.is(dsSpace, "Object") && n.parent.parent.parent == k.root:
	case id == packageID:
		k.form(codePackage, "found the package object at the element %q, want an Object directly in the signature", clip(n.local, 40))
		return
	default:
		k.form(codeReference, "found the reference %q to the element %q, want an object or the signed properties", clip(r.uri, 120), clip(n.local, 40))
		return
	}
	if v, ok := n.attr("Id"); !ok || v != id {
		k.form(codeReference, "found the reference %q to an element whose Id is in another attribute, want Id", clip(r.uri, 120))
		return
	}
	if k.named[n] {
		k.form(codeTwice, "found the reference %q twice, want it once", clip(r.uri, 120))
		return
	}
	k.named[n] = true
	if len(r.transforms) > 1 || len(r.transforms) == 1 && !plain(r.transforms[0]) {
		k.form(codeTransform, "found a transform of %q other than Canonical XML 1.0, want that or none", clip(r.uri, 120))
		return
	}
	if !bytes.Equal(sum(r.hash, canonical(n)), r.digest) {
		k.form(codeDigest, "found %q changed since it was signed, want it as signed", clip(r.uri, 120))
		return
	}
	k.signed[n] = true
}

// checkUnreferenced refuses what stands in the signature unsigned. Besides the parts that make the signature itself,
// that may only be the frame of the XAdES properties, with time stamps of the signature.
func (k *check) checkUnreferenced() {
	for _, o := range k.objects {
		if k.named[o] || k.frame(o) {
			continue
		}
		id, _ := o.attr("Id")
		k.form(codeUnreferenced, "found the object %q that is not signed, want every object signed", clip(id, 60))
	}
}

// frame says whether an object is the unsigned frame of signed XAdES properties.
func (k *check) frame(o *node) bool {
	list, clean := o.elements()
	if !clean || !o.only("Id") || len(list) != 1 || !list[0].is(xadesSpace, "QualifyingProperties") || !list[0].only("Target", "Id") {
		return false
	}
	id, _ := k.root.attr("Id")
	if target, _ := list[0].attr("Target"); target != "#"+id {
		return false
	}
	inner, clean := list[0].elements()
	if !clean || len(inner) == 0 || len(inner) > 2 || !k.named[inner[0]] {
		return false
	}
	return len(inner) == 1 || stamps(inner[1])
}

// stamps says whether unsigned properties hold nothing but time stamps.
func stamps(n *node) bool {
	list, clean := n.elements()
	if !n.is(xadesSpace, "UnsignedProperties") || !clean || len(list) != 1 || !list[0].is(xadesSpace, "UnsignedSignatureProperties") {
		return false
	}
	list, clean = list[0].elements()
	for _, s := range list {
		clean = clean && s.is(xadesSpace, "SignatureTimeStamp")
	}
	return clean
}

// signedElements are the elements of a name inside signed objects.
func (k *check) signedElements(space, local string) []*node {
	var out []*node
	for _, o := range k.objects {
		if k.signed[o] {
			out = append(out, o.find(space, local)...)
			continue
		}
		for _, p := range o.find(xadesSpace, "SignedProperties") {
			if k.signed[p] {
				out = append(out, p.find(space, local)...)
			}
		}
	}
	return out
}
