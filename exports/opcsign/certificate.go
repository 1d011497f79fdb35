package opcsign

import (
	"bytes"
	"crypto/x509"
	"errors"
	"fmt"
	"strings"
	"time"
)

// readKeyInfo reads the certificates: one X509Data of the leaf and the certificates that issued one another.
func (k *check) readKeyInfo() {
	list, clean := k.keyInfo.elements()
	if !clean || !k.keyInfo.only("Id") || len(list) != 1 || !list[0].is(dsSpace, "X509Data") || len(list[0].attrs) > 0 {
		k.form(codeForm, "found a KeyInfo of %d elements, want one X509Data", len(list))
		return
	}
	list, clean = list[0].elements()
	if !clean || len(list) == 0 {
		k.form(codeForm, "found an X509Data of %d elements, want certificates", len(list))
		return
	}
	var chain []*x509.Certificate
	for _, n := range list {
		der, ok := decode(n)
		if !n.is(dsSpace, "X509Certificate") || !ok || len(n.attrs) > 0 {
			k.form(codeForm, "found the element %q in X509Data, want certificates only", clip(n.local, 40))
			return
		}
		c, err := x509.ParseCertificate(der)
		if err != nil {
			k.form(codeCertificate, "found a certificate that cannot be read (%v), want X.509", err)
			return
		}
		chain = append(chain, c)
	}
	if why := chainProblem(chain); why != "" {
		k.form(codeCertificate, "found %s, want the signer's certificate first and each next one the issuer of the one before", why)
	}
	k.sig.Certificate, k.sig.Chain = chain[0], chain
}

// chainProblem says why certificates, leaf first, are no chain; "" when they are.
func chainProblem(chain []*x509.Certificate) string {
	for i := 1; i < len(chain); i++ {
		if !bytes.Equal(chain[i-1].RawIssuer, chain[i].RawSubject) || chain[i-1].CheckSignatureFrom(chain[i]) != nil || chain[i].Equal(chain[i-1]) {
			return "the certificate of " + clip(chain[i].Subject.String(), 80) + ", which did not issue the one before it"
		}
	}
	return ""
}

// keyUsageFits says whether a certificate may be used for signatures.
func keyUsageFits(c *x509.Certificate) bool {
	return c.KeyUsage == 0 || c.KeyUsage&(x509.KeyUsageDigitalSignature|x509.KeyUsageContentCommitment) != 0
}

// doubtOf says why a chain is not trusted, "" when it is: it has to lead to one of the roots, or its leaf has to be one
// of them, at the time of signing.
func doubtOf(chain, roots []*x509.Certificate, at time.Time) string {
	if at.IsZero() {
		return "the time of signing is not known"
	}
	trusted, between := x509.NewCertPool(), x509.NewCertPool()
	for _, r := range roots {
		trusted.AddCert(r)
	}
	for _, c := range chain[1:] {
		between.AddCert(c)
	}
	_, err := chain[0].Verify(x509.VerifyOptions{Roots: trusted, Intermediates: between, CurrentTime: at, KeyUsages: []x509.ExtKeyUsage{x509.ExtKeyUsageAny}})
	var invalid x509.CertificateInvalidError
	var unknown x509.UnknownAuthorityError
	switch {
	case errors.As(err, &invalid) && invalid.Reason == x509.Expired:
		return fmt.Sprintf("the certificate of %s was valid from %s to %s, and not at the time of signing", clip(invalid.Cert.Subject.String(), 80),
			invalid.Cert.NotBefore.UTC().Format(timeForm), invalid.Cert.NotAfter.UTC().Format(timeForm))
	case errors.As(err, &unknown):
		return "none of the trusted certificates has issued the certificate, or is it"
	case err != nil:
		return strings.TrimPrefix(err.Error(), "x509: ")
	case !keyUsageFits(chain[0]):
		return "the certificate's key usage does not include signatures"
	}
	return ""
}
