package opcsign

import (
	"crypto"
	"crypto/ecdsa"
	"crypto/ed25519"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/rsa"
	"crypto/x509"
	"crypto/x509/pkix"
	"math/big"
	"strings"
	"testing"
	"time"
)

// TestCertificateWords wants every certificate that cannot sign, and every one that is not trusted, told in words that say why.
func TestCertificateWords(t *testing.T) {
	at := time.Date(2026, 6, 1, 12, 0, 0, 0, time.UTC)
	ec, err := ecdsa.GenerateKey(elliptic.P256(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	small, err := rsa.GenerateKey(rand.Reader, 1024) // too short, as it has to be here
	if err != nil {
		t.Fatal(err)
	}
	_, edwards, err := ed25519.GenerateKey(rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	odd, err := ecdsa.GenerateKey(elliptic.P224(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	made := func(of crypto.Signer, usage x509.KeyUsage, from, to int, parent *x509.Certificate, by crypto.Signer) *x509.Certificate {
		c := &x509.Certificate{
			SerialNumber: big.NewInt(7), Subject: pkix.Name{CommonName: "Ada Quill"}, BasicConstraintsValid: true, KeyUsage: usage,
			NotBefore: at.AddDate(from, 0, 0), NotAfter: at.AddDate(to, 0, 0), IsCA: usage&x509.KeyUsageCertSign != 0,
		}
		if c.IsCA {
			c.Subject.CommonName = "Works authority"
		}
		if parent == nil {
			parent = c
		}
		der, err := x509.CreateCertificate(rand.Reader, c, parent, of.Public(), by)
		if err != nil {
			t.Fatal(err)
		}
		out, err := x509.ParseCertificate(der)
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	const signs, ciphers, issues = x509.KeyUsageDigitalSignature, x509.KeyUsageKeyEncipherment, x509.KeyUsageCertSign
	good := made(ec, signs, -1, 1, nil, ec)
	st := Statement{Name: "Ada Quill", Meaning: "prepared", Time: at}
	for _, c := range []struct {
		name string
		key  crypto.Signer
		leaf *x509.Certificate
		want string
	}{
		{"good", ec, good, ""},
		{"non-repudiation alone", ec, made(ec, x509.KeyUsageContentCommitment, -1, 1, nil, ec), ""},
		{"no usage stated", ec, made(ec, 0, -1, 1, nil, ec), ""},
		{"expired", ec, made(ec, signs, -3, -1, nil, ec), "want one between 2023-06-01T12:00:00Z and 2025-06-01T12:00:00Z, when the certificate of \"Ada Quill\" is valid; do check the clock or renew the identity"},
		{"not yet valid", ec, made(ec, signs, 1, 3, nil, ec), "want one between 2027-06-01"},
		{"for enciphering only", ec, made(ec, ciphers, -1, 1, nil, ec), "key usage does not include signatures, want digital signature or non-repudiation"},
		{"short RSA key", small, made(small, signs, -1, 1, nil, small), "an RSA key of 1024 bits, want RSA of at least 2048 bits"},
		{"Ed25519", edwards, made(edwards, signs, -1, 1, nil, edwards), "want RSA of at least 2048 bits or ECDSA"},
		{"another curve", odd, made(odd, signs, -1, 1, nil, odd), "an ECDSA key on P-224"},
		{"another's certificate", small, good, "with another key"},
	} {
		err := checkSigner(c.key, []*x509.Certificate{c.leaf}, st)
		if (c.want == "") != (err == nil) || err != nil && !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}

	root := made(odd, issues, -3, 3, nil, odd)
	old := made(odd, issues, -3, -1, nil, odd)
	issued := made(ec, signs, -1, 1, root, odd)
	for _, c := range []struct {
		name         string
		chain, roots []*x509.Certificate
		want         string
	}{
		{"its own", []*x509.Certificate{good}, []*x509.Certificate{good}, ""},
		{"by the root", []*x509.Certificate{issued, root}, []*x509.Certificate{root}, ""},
		{"by nobody who is trusted", []*x509.Certificate{good}, []*x509.Certificate{root}, "none of the trusted certificates has issued the certificate, or is it"},
		{"expired", []*x509.Certificate{made(ec, signs, -3, -1, nil, ec)}, nil, "the certificate of CN=Ada Quill was valid from 2023-06-01T12:00:00Z to 2025-06-01T12:00:00Z, and not at the time of signing"},
		{"by a root that has expired", []*x509.Certificate{made(ec, signs, -1, 1, old, odd)}, []*x509.Certificate{old}, "the certificate of CN=Works authority was valid from"},
		{"for enciphering only", []*x509.Certificate{made(ec, ciphers, -1, 1, nil, ec)}, nil, "key usage does not include signatures"},
	} {
		roots := c.roots
		if roots == nil {
			roots = c.chain
		}
		if got := doubtOf(c.chain, roots, at); c.want == "" && got != "" || !strings.Contains(got, c.want) {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
	if got := doubtOf([]*x509.Certificate{good}, []*x509.Certificate{good}, time.Time{}); !strings.Contains(got, "time of signing") {
		t.Errorf("no time: got %q", got)
	}
}
