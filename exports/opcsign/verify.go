package opcsign

import (
	"crypto/x509"
	"slices"
)

// Verify checks every signature of a package and that nothing in it is left unsigned. Roots are the certificates that
// are trusted; with nil, trust is not judged. An error means that the bytes are no readable package. An unsigned package
// gives a report without signatures and without reasons.
func Verify(pkg []byte, roots []*x509.Certificate) (Report, error) {
	c, err := openContainer(pkg)
	if err != nil {
		return Report{}, err
	}
	return c.verify(roots), nil
}

func (c *container) verify(roots []*x509.Certificate) Report {
	if !c.traces() {
		return Report{}
	}
	c.findSignatures()
	var checks []*check
	for _, part := range c.signatures {
		k := &check{c: c, sig: Signature{Part: part}}
		k.run()
		checks = append(checks, k)
	}
	for i, k := range checks {
		k.checkPrevious(checks[:i])
	}
	r := Report{Reasons: c.reasons}
	left := map[string]bool{}
	for _, k := range checks {
		k.conclude(roots)
		r.Signatures = append(r.Signatures, k.sig)
		for _, p := range k.left {
			left[p] = true
		}
	}
	for p := range left {
		r.UnsignedParts = append(r.UnsignedParts, p)
	}
	slices.Sort(r.UnsignedParts)
	return r
}

// conclude draws the verdicts from the reasons.
func (k *check) conclude(roots []*x509.Certificate) {
	s := &k.sig
	s.Valid, s.CoversAll = true, k.covered && len(k.left) == 0
	for _, r := range s.Reasons {
		if !coverage[r.Code] {
			s.Valid = false
		}
	}
	if roots != nil {
		doubt := "no certificate"
		if s.Certificate != nil {
			doubt = doubtOf(s.Chain, roots, s.Statement.Time)
		}
		trusted := doubt == ""
		s.Trusted, s.Doubt = &trusted, doubt
	}
}
