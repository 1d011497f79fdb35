package identity

import (
	"crypto/x509"
	"encoding/pem"
	"fmt"
)

// ParsePEM reads the certificates of a trust file: one or more PEM blocks, in any order.
func ParsePEM(b []byte) ([]*x509.Certificate, error) {
	var out []*x509.Certificate
	for n := 1; ; n++ {
		block, rest := pem.Decode(b)
		if block == nil {
			break
		}
		b = rest
		if block.Type != "CERTIFICATE" {
			return nil, fmt.Errorf("trust file, block %d: found %q, want CERTIFICATE; do keep only certificates in it, never a private key", n, block.Type)
		}
		c, err := x509.ParseCertificate(block.Bytes)
		if err != nil {
			return nil, fmt.Errorf("trust file, block %d: found a certificate that cannot be read (%w), want X.509; do export it again", n, err)
		}
		out = append(out, c)
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("trust file: found no certificate, want at least one PEM block; do save the certificates as PEM (base64)")
	}
	return out, nil
}
