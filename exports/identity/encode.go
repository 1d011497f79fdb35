package identity

import (
	"fmt"
	"io"

	"software.sslmate.com/src/go-pkcs12"
)

// Encode is the identity as a PKCS#12 file under a passphrase (AES-256, PBKDF2 and HMAC with SHA-256).
func (id Identity) Encode(passphrase string, random io.Reader) ([]byte, error) {
	switch {
	case id.Key == nil || len(id.Chain) == 0:
		return nil, fmt.Errorf("identity: found no key or no certificate, want both; do make or open an identity first")
	case passphrase == "":
		return nil, fmt.Errorf("identity passphrase: found nothing, want at least one character; do choose a passphrase")
	}
	b, err := pkcs12.Modern2023.WithRand(random).Encode(id.Key, id.Chain[0], id.Chain[1:], passphrase)
	if err != nil {
		return nil, fmt.Errorf("identity file: %w", err)
	}
	return b, nil
}
