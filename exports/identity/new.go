package identity

import (
	"crypto/ecdsa"
	"crypto/elliptic"
	"crypto/x509"
	"crypto/x509/pkix"
	"fmt"
	"io"
	"math/big"
	"strings"
	"time"
	"unicode/utf8"
)

// years is how long a certificate made here is valid.
const years = 10

// longest is the upper bound of the attributes common name, title and organization (RFC 5280, appendix A.1:
// ub-common-name, ub-title and ub-organization-name are all 64).
const longest = 64

// New makes an identity: a new ECDSA P-256 key and a certificate signed by that key, valid for ten years from now.
// Title and organization may be empty. The key usage is digital signature and content commitment; there is no extended
// key usage, since some verifiers refuse every one that exists for signing documents.
func New(name, title, organization string, now time.Time, random io.Reader) (Identity, error) {
	for _, f := range []struct{ what, value string }{{"name", name}, {"title", title}, {"organization", organization}} {
		if err := fits(f.what, f.value); err != nil {
			return Identity{}, err
		}
	}
	if name == "" {
		return Identity{}, fmt.Errorf("identity name: found nothing, want the person's name; do give the name as it shall stand in signed records")
	}
	key, err := ecdsa.GenerateKey(elliptic.P256(), random)
	if err != nil {
		return Identity{}, fmt.Errorf("identity key: %w", err)
	}
	serial, err := newSerial(random)
	if err != nil {
		return Identity{}, err
	}
	subject := pkix.Name{CommonName: name}
	if title != "" {
		subject.ExtraNames = []pkix.AttributeTypeAndValue{{Type: oidTitle, Value: title}}
	}
	if organization != "" {
		subject.Organization = []string{organization}
	}
	begin := now.UTC().Truncate(time.Second)
	template := &x509.Certificate{
		SerialNumber:          serial,
		Subject:               subject,
		NotBefore:             begin,
		NotAfter:              begin.AddDate(years, 0, 0),
		KeyUsage:              x509.KeyUsageDigitalSignature | x509.KeyUsageContentCommitment,
		BasicConstraintsValid: true,
	}
	der, err := x509.CreateCertificate(random, template, template, key.Public(), key)
	if err != nil {
		return Identity{}, fmt.Errorf("identity certificate: %w", err)
	}
	cert, err := x509.ParseCertificate(der)
	if err != nil {
		return Identity{}, fmt.Errorf("identity certificate: %w", err)
	}
	return Identity{Key: key, Chain: []*x509.Certificate{cert}}, nil
}

// fits says whether a value can stand in a distinguished name.
func fits(what, value string) error {
	switch {
	case !utf8.ValidString(value):
		return fmt.Errorf("identity %s: found bytes that are no UTF-8 text, want text; do type it again", what)
	case utf8.RuneCountInString(value) > longest:
		return fmt.Errorf("identity %s: found %d characters, want at most %d; do shorten it", what, utf8.RuneCountInString(value), longest)
	case strings.TrimSpace(value) != value:
		return fmt.Errorf("identity %s: found %q, want no space at its ends; do remove it", what, value)
	}
	for _, r := range value {
		if r < ' ' || r == 0x7f {
			return fmt.Errorf("identity %s: found the control character %U, want printable text; do remove it", what, r)
		}
	}
	return nil
}

// newSerial draws a serial number of 127 random bits, never zero.
func newSerial(random io.Reader) (*big.Int, error) {
	b := make([]byte, 16)
	for {
		if _, err := io.ReadFull(random, b); err != nil {
			return nil, fmt.Errorf("identity serial number: %w", err)
		}
		b[0] &= 0x7f
		if n := new(big.Int).SetBytes(b); n.Sign() > 0 {
			return n, nil
		}
	}
}
