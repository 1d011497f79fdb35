package identity

import (
	"bytes"
	"crypto"
	"crypto/ecdsa"
	"crypto/ed25519"
	"crypto/rsa"
	"crypto/x509"
	"errors"
	"fmt"
	"strings"

	"software.sslmate.com/src/go-pkcs12"
)

// ErrPassphrase says that the passphrase does not open the file.
var ErrPassphrase = errors.New("identity passphrase: found one that does not open the file, want the passphrase it was saved with; do type it again")

// ErrUnusable is wrapped by every other refusal of Open: the file is no PKCS#12 file, or holds nothing that can sign.
var ErrUnusable = errors.New("unusable identity")

// unusable is a refusal in the usual words.
func unusable(format string, args ...any) error {
	return fmt.Errorf("%w: "+format, append([]any{ErrUnusable}, args...)...)
}

// minRSA is the shortest RSA key that is accepted, in bits.
const minRSA = 2048

// Open reads an identity from a PKCS#12 file. The leaf is the certificate whose public key belongs to the private key,
// wherever in the file it stands; the chain follows the issuers found in the file, and other certificates are left out.
func Open(p12 []byte, passphrase string) (Identity, error) {
	key, first, rest, err := pkcs12.DecodeChain(p12, passphrase)
	if err != nil {
		return Identity{}, decodeError(err)
	}
	signer, err := usableKey(key)
	if err != nil {
		return Identity{}, err
	}
	leaf, others := pickLeaf(signer, append([]*x509.Certificate{first}, rest...))
	if leaf == nil {
		return Identity{}, unusable("identity file: found %d certificates and none for its private key (%s), want the certificate of that key; do export the key together with its own certificate",
			1+len(rest), subjects(append([]*x509.Certificate{first}, rest...)))
	}
	if leaf.Subject.CommonName == "" {
		return Identity{}, unusable("identity certificate: found the subject %q without a common name, want the person's name in it; do ask for a certificate in the person's name", leaf.Subject)
	}
	if leaf.KeyUsage != 0 && leaf.KeyUsage&(x509.KeyUsageDigitalSignature|x509.KeyUsageContentCommitment) == 0 {
		return Identity{}, unusable("identity certificate of %q: found a key usage without digital signature, want digital signature or non-repudiation; do ask for a signing certificate", leaf.Subject.CommonName)
	}
	return Identity{Key: signer, Chain: chain(leaf, others)}, nil
}

// decodeError turns what the decoder says into what a person can act on.
func decodeError(err error) error {
	text := err.Error()
	switch {
	case errors.Is(err, pkcs12.ErrIncorrectPassword), errors.Is(err, pkcs12.ErrDecryption):
		return ErrPassphrase
	case strings.Contains(text, "private key missing"):
		return unusable("identity file: found no private key, want exactly one; do export the certificate together with its private key")
	case strings.Contains(text, "exactly one key bag"):
		return unusable("identity file: found more than one private key, want exactly one; do export the one to sign with alone")
	case strings.Contains(text, "certificate missing"):
		return unusable("identity file: found no certificate, want the certificate of its private key; do export the key together with its certificate")
	case strings.Contains(text, "no MAC in data"):
		return unusable("identity file: found no integrity check (MAC), want a file protected by its passphrase; do save it again with a passphrase")
	}
	if strings.Contains(text, "asn1") {
		return unusable("identity file: found something that is no PKCS#12 file, want one (.p12 or .pfx) with one key and its certificate; check the name")
	}
	return unusable("identity file: found %s, want a PKCS#12 file (.p12 or .pfx) with one key and its certificate; do export it again", strings.TrimPrefix(text, "pkcs12: "))
}

// usableKey lets in the kinds of key that every verifier accepts.
func usableKey(key any) (crypto.Signer, error) {
	const do = "want RSA of at least 2048 bits or ECDSA on P-256, P-384 or P-521; do use another identity"
	switch k := key.(type) {
	case *rsa.PrivateKey:
		if bits := k.N.BitLen(); bits < minRSA {
			return nil, unusable("identity key: found RSA of %d bits, %s", bits, do)
		}
		return k, nil
	case *ecdsa.PrivateKey:
		switch name := k.Params().Name; name {
		case "P-256", "P-384", "P-521":
			return k, nil
		default:
			return nil, unusable("identity key: found ECDSA on %s, %s", name, do)
		}
	case ed25519.PrivateKey:
		return nil, unusable("identity key: found Ed25519, which most verifiers of workbooks call invalid, %s", do)
	}
	return nil, unusable("identity key: found %T, %s", key, do)
}

// pickLeaf finds the certificate of the key; the decoder's own choice is only the first in the file.
func pickLeaf(key crypto.Signer, certs []*x509.Certificate) (leaf *x509.Certificate, others []*x509.Certificate) {
	pub, ok := key.Public().(interface{ Equal(crypto.PublicKey) bool })
	if !ok {
		return nil, certs
	}
	for _, c := range certs {
		switch {
		case !pub.Equal(c.PublicKey):
			others = append(others, c)
		case leaf == nil || selfSigned(leaf) && !selfSigned(c):
			// Of two certificates for one key the one that somebody else issued says more.
			leaf = c
		}
	}
	return leaf, others
}

// selfSigned says whether subject and issuer are the same.
func selfSigned(c *x509.Certificate) bool { return bytes.Equal(c.RawSubject, c.RawIssuer) }

// chain follows the issuers from the leaf as far as the certificates at hand go.
func chain(leaf *x509.Certificate, others []*x509.Certificate) []*x509.Certificate {
	out := []*x509.Certificate{leaf}
	for last := leaf; !selfSigned(last); last = out[len(out)-1] {
		next := issuer(last, others)
		if next == nil || contains(out, next) {
			break
		}
		out = append(out, next)
	}
	return out
}

func issuer(of *x509.Certificate, among []*x509.Certificate) *x509.Certificate {
	for _, c := range among {
		if bytes.Equal(of.RawIssuer, c.RawSubject) && of.CheckSignatureFrom(c) == nil {
			return c
		}
	}
	return nil
}

func contains(list []*x509.Certificate, c *x509.Certificate) bool {
	for _, x := range list {
		if x.Equal(c) {
			return true
		}
	}
	return false
}

func subjects(certs []*x509.Certificate) string {
	names := make([]string, len(certs))
	for i, c := range certs {
		names[i] = c.Subject.String()
	}
	return strings.Join(names, "; ")
}
