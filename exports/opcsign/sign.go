package opcsign

import (
	"crypto"
	"crypto/rand"
	"crypto/x509"
	"errors"
	"fmt"
	"slices"
	"strings"
)

// Sign adds a signature to a package. The first one prepares the package: docProps/core.xml goes (a common verifier
// refuses signatures that cover it), and the signature origin comes. Later ones change nothing but [Content_Types].xml,
// the relationships of the origin and their own part, so earlier signatures stay as they are; each names the earlier
// ones. The chain has the certificate of the key first. The name of the statement has to be the certificate's common
// name.
//
// A package that is not sound is refused, and what is returned has been verified.
func Sign(pkg []byte, key crypto.Signer, chain []*x509.Certificate, st Statement) ([]byte, error) {
	if err := checkSigner(key, chain, st); err != nil {
		return nil, err
	}
	c, err := openContainer(pkg)
	if err != nil {
		return nil, fmt.Errorf("signing: %w", err)
	}
	var changes []change
	if c.traces() {
		if r := c.verify(nil); !r.Sound() {
			return nil, refusal(r)
		}
	} else {
		if len(c.reasons) > 0 {
			return nil, refusal(Report{Reasons: c.reasons})
		}
		if err := c.checkTargets(); err != nil {
			return nil, err
		}
		if c, changes, err = c.prepare(); err != nil {
			return nil, fmt.Errorf("signing: %w", err)
		}
	}
	more, err := c.add(key, chain, st)
	if err != nil {
		return nil, fmt.Errorf("signing: %w", err)
	}
	out, err := rewrite(pkg, append(changes, more...))
	if err != nil {
		return nil, fmt.Errorf("signing: %w", err)
	}
	written, err := openContainer(out)
	if err != nil {
		return nil, fmt.Errorf("signing: %w", err)
	}
	written.know(c) // a million readings are not unpacked twice
	if r := written.verify(nil); !r.Sound() {
		return nil, refusal(r)
	}
	return out, nil
}

// refusal is the error of a package that is not sound; it wraps the first reason.
func refusal(r Report) error {
	reasons := r.Reasons
	for _, s := range r.Signatures {
		reasons = append(reasons, s.Reasons...)
	}
	if len(reasons) == 0 {
		return errors.New("signing: found a package that is not sound, want a sound one; do get the file from its source again")
	}
	return fmt.Errorf("signing: found %d faults in the package, want none, the first: %w", len(reasons), reasons[0])
}

// checkSigner refuses a key, chain or statement that would not make a sound signature.
func checkSigner(key crypto.Signer, chain []*x509.Certificate, st Statement) error {
	if key == nil || len(chain) == 0 {
		return errors.New("signing: found no key or no certificate, want both; do open an identity")
	}
	leaf := chain[0]
	if _, _, found := keyProblem(leaf.PublicKey); found != "" {
		return fmt.Errorf("signing: found %s, %s; do use another identity", found, wantKey)
	}
	pub, ok := key.Public().(interface{ Equal(crypto.PublicKey) bool })
	if !ok || !pub.Equal(leaf.PublicKey) {
		return fmt.Errorf("signing: found the certificate of %q with another key, want the certificate of the key; do open the identity again", leaf.Subject.CommonName)
	}
	if why := chainProblem(chain); why != "" {
		return fmt.Errorf("signing: found %s, want each certificate the issuer of the one before; do export the identity again", why)
	}
	if !keyUsageFits(leaf) {
		return fmt.Errorf("signing: found the certificate of %q whose key usage does not include signatures, want digital signature or non-repudiation; do use another identity", leaf.Subject.CommonName)
	}
	return checkStatement(leaf, st)
}

func checkStatement(leaf *x509.Certificate, st Statement) error {
	switch {
	case st.Name == "" || st.Name != leaf.Subject.CommonName:
		return fmt.Errorf("signing: found the name %q, want %q as in the certificate; do sign with the identity of the person", st.Name, leaf.Subject.CommonName)
	case strings.TrimSpace(st.Meaning) == "":
		return errors.New("signing: found no meaning, want one such as prepared, reviewed or approved; do give one")
	case st.Time.IsZero() || st.Time.Year() < 1 || st.Time.Year() > 9999:
		return errors.New("signing: found no time, want the time of signing; do give one")
	case st.Time.Before(leaf.NotBefore) || st.Time.After(leaf.NotAfter):
		return fmt.Errorf("signing: found the time %s, want one between %s and %s, when the certificate of %q is valid; do check the clock or renew the identity",
			st.Time.Format(timeForm), leaf.NotBefore.Format(timeForm), leaf.NotAfter.Format(timeForm), st.Name)
	}
	if _, offset := st.Time.Zone(); offset%60 != 0 {
		return fmt.Errorf("signing: found a time zone with an offset of %d seconds, want whole minutes; do choose a time zone of today", offset)
	}
	for _, s := range []string{st.Name, st.Title, st.Organization, st.Meaning, st.Reason, st.Disposition, st.Zone} {
		for _, r := range s {
			if !isChar(r) || r == '\r' || r == '\uFFFD' {
				return fmt.Errorf("signing: found the character %U in %q, want text; do remove it", r, clip(s, 40))
			}
		}
	}
	return nil
}

// checkTargets refuses relationships that common verifiers cannot digest: xmlsec1 1.2.37, and with it LibreOffice 7.4,
// writes their attributes without escaping, and then calls every signature of the package invalid.
func (c *container) checkTargets() error {
	for _, p := range c.parts() {
		for _, r := range c.rels[p] {
			if strings.ContainsAny(r.id+r.typ+r.target, "&<>\"") {
				return fmt.Errorf("signing: %w", Reason{Code: codeTarget, Part: p, Text: fmt.Sprintf(
					"found the link %q, want one without &, <, > and quotes, for which common verifiers would call the signature invalid; do write the link as text", clip(r.target, 120))})
			}
		}
	}
	return nil
}

// add makes the next signature of a prepared package: what has to change in it.
func (c *container) add(key crypto.Signer, chain []*x509.Certificate, st Statement) ([]change, error) {
	n := 1
	var before []previous
	for _, part := range c.signatures {
		k := &check{c: c, sig: Signature{Part: part}}
		k.run()
		before = append(before, previous{part, sum(crypto.SHA256, k.value)})
		n = number(part) + 1
	}
	st.Time = st.Time.Truncate(1e9)
	b, err := c.compose(n, key, chain, st, before)
	if err != nil {
		return nil, err
	}
	part := fmt.Sprintf("%ssig%d.xml", sigFolder, n)
	c.types.overrides[lower(part)] = override{part, sigType}
	rels := append(slices.Clone(c.rels[originRels]), relationship{freeID(c.rels[originRels]), sigRel, fmt.Sprintf("sig%d.xml", n), internal})
	return packed([]content{
		{typesEntry, c.types.bytes()},
		{trimSlash(originRels), relsBytes(rels)},
		{trimSlash(part), b},
	})
}

// signValue signs a digest and gives the value in the form of XML signatures.
func signValue(key crypto.Signer, digest []byte) ([]byte, error) {
	der, err := key.Sign(rand.Reader, digest, crypto.SHA256)
	if err != nil {
		return nil, fmt.Errorf("key: %w", err)
	}
	return flatten(key.Public(), der)
}
