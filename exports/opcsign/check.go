package opcsign

import (
	"crypto"
	"encoding/base64"
	"errors"
	"fmt"
	"strings"
)

// check is the examination of one signature.
type check struct {
	c        *container
	sig      Signature
	root     *node
	info     *node            // SignedInfo
	keyInfo  *node            // KeyInfo
	objects  []*node          // Object elements
	ids      map[string]*node // elements by their Id
	signed   map[*node]bool   // elements that SignedInfo names and whose digest holds
	named    map[*node]bool   // elements that SignedInfo names
	value    []byte           // decoded SignatureValue
	previous []previous
	covered  bool     // the manifest could be read
	left     []string // parts and relationships that are not covered
}

// previous is what a statement says of an earlier signature.
type previous struct {
	part   string
	digest []byte
}

// maxReasons keeps the report of a hostile package short.
const maxReasons = 1000

func (k *check) fail(code, part, format string, args ...any) {
	if len(k.sig.Reasons) >= maxReasons {
		return
	}
	k.sig.Reasons = append(k.sig.Reasons, Reason{Code: code, Part: part, Text: fmt.Sprintf(format, args...) + getItAgain})
}

// form notes a fault of the signature part itself.
func (k *check) form(code, format string, args ...any) { k.fail(code, k.sig.Part, format, args...) }

func (k *check) run() {
	if !k.parse() || !k.shape() {
		return
	}
	k.readKeyInfo()
	k.readSignedInfo()
	k.checkUnreferenced()
	k.readPackageObject()
	k.readStatement()
	k.readProperties()
	k.compare()
}

// parse reads the part and refuses what could make two readers see two things.
func (k *check) parse() bool {
	b, err := k.c.byName[trimSlash(k.sig.Part)].read()
	if err != nil {
		k.sig.Reasons = append(k.sig.Reasons, asReason(err, k.sig.Part))
		return false
	}
	doc, err := parseXML(b)
	if err != nil {
		code := codeXML
		var x *xmlError
		if errors.As(err, &x) && x.dtd {
			code = codeDTD
		}
		k.form(code, "found %v, want plain XML", err)
		return false
	}
	k.root, k.ids, k.signed, k.named = doc.root, map[string]*node{}, map[*node]bool{}, map[*node]bool{}
	for _, n := range append(doc.before, doc.after...) {
		k.refuse(n)
	}
	doc.root.walk(k.refuse)
	return true
}

// refuse looks at one node for what has no place in a signature, and notes Ids.
func (k *check) refuse(n *node) {
	switch n.kind {
	case comment:
		k.form(codeComment, "found the comment %q, want none", clip(n.text, 40))
	case instruction:
		k.form(codeInstruction, "found the instruction %q, want none", clip(n.local, 40))
	case element:
		if n != k.root && n.is(dsSpace, "Signature") {
			k.form(codeNested, "found a Signature inside the signature, want one")
		}
		for _, a := range n.attrs {
			if !strings.EqualFold(a.local, "id") {
				continue
			}
			if k.ids[a.value] != nil {
				k.form(codeDuplicateID, "found the Id %q twice, want it once", clip(a.value, 60))
			}
			k.ids[a.value] = n
		}
	}
}

// shape reads the children of the root: SignedInfo, SignatureValue, KeyInfo, then Objects.
func (k *check) shape() bool {
	list, clean := k.root.elements()
	if !k.root.is(dsSpace, "Signature") {
		k.form(codeForm, "found the root element %q, want Signature", clip(k.root.local, 40))
		return false
	}
	if !clean || !k.root.only("Id") || len(list) < 4 || !list[0].is(dsSpace, "SignedInfo") || !list[1].is(dsSpace, "SignatureValue") || !list[2].is(dsSpace, "KeyInfo") {
		k.form(codeForm, "found %d elements in the signature, want SignedInfo, SignatureValue, KeyInfo and Objects in this order and nothing else", len(list))
		return false
	}
	for _, n := range list[3:] {
		if !n.is(dsSpace, "Object") {
			k.form(codeForm, "found the element %q after KeyInfo, want Objects only", clip(n.local, 40))
			return false
		}
	}
	k.info, k.keyInfo, k.objects = list[0], list[2], list[3:]
	value, ok := decode(list[1])
	if !ok || !list[1].only("Id") {
		k.form(codeForm, "found a SignatureValue that is no base64, want base64")
	}
	k.value = value
	return true
}

// decode is the octets of an element that holds base64; line breaks are allowed.
func decode(n *node) ([]byte, bool) {
	s, ok := n.leaf()
	if !ok {
		return nil, false
	}
	s = strings.NewReplacer("\n", "", "\r", "", "\t", "", " ", "").Replace(s)
	b, err := base64.StdEncoding.Strict().DecodeString(s)
	return b, err == nil && len(b) > 0
}

// asReason makes an error of reading a reason.
func asReason(err error, part string) Reason {
	var r Reason
	if errors.As(err, &r) {
		return r
	}
	return Reason{Code: codeDamaged, Part: part, Text: err.Error()}
}

// reference is a Reference of SignedInfo or of the manifest.
type reference struct {
	uri        string
	transforms []*node
	hash       crypto.Hash
	digest     []byte
}

// readReference reads a Reference; false when it is not usable, which has been noted then.
func (k *check) readReference(n *node) (reference, bool) {
	var r reference
	list, clean := n.elements()
	var has bool
	r.uri, has = n.attr("URI")
	if len(list) > 0 && list[0].is(dsSpace, "Transforms") {
		inner, pure := list[0].elements()
		clean = clean && pure && len(inner) > 0
		r.transforms, list = inner, list[1:]
	}
	if !clean || !has || !n.only("URI", "Type", "Id") || len(list) != 2 || !list[0].is(dsSpace, "DigestMethod") || !list[1].is(dsSpace, "DigestValue") {
		k.form(codeReference, "found the reference %q that is not of the standard's form, want Transforms, DigestMethod and DigestValue", clip(r.uri, 120))
		return r, false
	}
	alg, _ := list[0].attr("Algorithm")
	var ok bool
	if r.hash, ok = digestMethods[alg]; !ok {
		code := codeAlgorithm
		if weak[alg] {
			code = codeWeak
		}
		k.form(code, "found the digest %q for %q, want SHA-256, SHA-384 or SHA-512", clip(alg, 80), clip(r.uri, 120))
		return r, false
	}
	if r.digest, ok = decode(list[1]); !ok {
		k.form(codeReference, "found a digest of %q that is no base64, want base64", clip(r.uri, 120))
		return r, false
	}
	return r, true
}

// plain says whether a transform is Canonical XML 1.0 without anything in it.
func plain(t *node) bool {
	alg, _ := t.attr("Algorithm")
	return t.is(dsSpace, "Transform") && alg == c14n && t.only("Algorithm") && len(t.kids) == 0
}
