package identity

import (
	"bytes"
	"crypto"
	"crypto/sha256"
	"crypto/x509"
	"encoding/asn1"
	"encoding/hex"
	"encoding/pem"
	"strings"
)

// oidTitle is the attribute "title" of a distinguished name (ITU-T X.520, 6.4.3).
var oidTitle = asn1.ObjectIdentifier{2, 5, 4, 12}

// Identity is a private key and the certificates that say whose it is, leaf first.
type Identity struct {
	Key   crypto.Signer
	Chain []*x509.Certificate
}

// Name is the common name of the certificate's subject.
func (id Identity) Name() string {
	if len(id.Chain) == 0 {
		return ""
	}
	return id.Chain[0].Subject.CommonName
}

// Title is the subject's title (job title), "" where the certificate gives none.
func (id Identity) Title() string {
	if len(id.Chain) == 0 {
		return ""
	}
	for _, a := range id.Chain[0].Subject.Names {
		if s, ok := a.Value.(string); ok && a.Type.Equal(oidTitle) {
			return s
		}
	}
	return ""
}

// Organization is the subject's organization; several are joined by a comma.
func (id Identity) Organization() string {
	if len(id.Chain) == 0 {
		return ""
	}
	return strings.Join(id.Chain[0].Subject.Organization, ", ")
}

// Fingerprint is the SHA-256 of the leaf certificate's DER form, 64 lower-case hexadecimal digits.
func (id Identity) Fingerprint() string {
	if len(id.Chain) == 0 {
		return ""
	}
	sum := sha256.Sum256(id.Chain[0].Raw)
	return hex.EncodeToString(sum[:])
}

// PEM is the chain, leaf first, as PEM blocks: what others need to trust this identity. The key is not in it.
func (id Identity) PEM() []byte {
	var b bytes.Buffer
	for _, c := range id.Chain {
		b.Write(pem.EncodeToMemory(&pem.Block{Type: "CERTIFICATE", Bytes: c.Raw}))
	}
	return b.Bytes()
}
