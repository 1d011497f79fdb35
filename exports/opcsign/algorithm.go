package opcsign

import (
	"crypto"
	"crypto/ecdsa"
	"crypto/rsa"
	_ "crypto/sha256" // the digests that crypto.Hash.New gives
	_ "crypto/sha512" // the same
	"encoding/asn1"
	"fmt"
	"math/big"
)

const (
	dsSpace    = "http://www.w3.org/2000/09/xmldsig#"
	c14n       = "http://www.w3.org/TR/2001/REC-xml-c14n-20010315"
	relsFilter = "http://schemas.openxmlformats.org/package/2006/RelationshipTransform"
	moreSpace  = "http://www.w3.org/2001/04/xmldsig-more#"
	sha256URI  = "http://www.w3.org/2001/04/xmlenc#sha256"
	minRSA     = 2048
)

// digestMethods are the digests that are accepted; what is written is SHA-256.
var digestMethods = map[string]crypto.Hash{
	sha256URI:            crypto.SHA256,
	moreSpace + "sha384": crypto.SHA384,
	"http://www.w3.org/2001/04/xmlenc#sha512": crypto.SHA512,
}

// weak are the methods that are known and no longer enough.
var weak = map[string]bool{
	dsSpace + "sha1": true, dsSpace + "rsa-sha1": true, dsSpace + "dsa-sha1": true,
	moreSpace + "ecdsa-sha1": true, moreSpace + "md5": true, moreSpace + "rsa-md5": true,
}

// method is a way to sign.
type method struct {
	kind string // "rsa" (PKCS#1 v1.5) or "ecdsa"
	hash crypto.Hash
}

var signatureMethods = map[string]method{
	moreSpace + "rsa-sha256": {"rsa", crypto.SHA256}, moreSpace + "rsa-sha384": {"rsa", crypto.SHA384}, moreSpace + "rsa-sha512": {"rsa", crypto.SHA512},
	moreSpace + "ecdsa-sha256": {"ecdsa", crypto.SHA256}, moreSpace + "ecdsa-sha384": {"ecdsa", crypto.SHA384}, moreSpace + "ecdsa-sha512": {"ecdsa", crypto.SHA512},
}

// keyProblem says why a public key is not accepted: the code and what was found; "" when it is.
func keyProblem(pub crypto.PublicKey) (kind, code, found string) {
	switch k := pub.(type) {
	case *rsa.PublicKey:
		if bits := k.N.BitLen(); bits < minRSA {
			return "rsa", codeWeak, fmt.Sprintf("an RSA key of %d bits", bits)
		}
		return "rsa", "", ""
	case *ecdsa.PublicKey:
		switch name := k.Params().Name; name {
		case "P-256", "P-384", "P-521":
			return "ecdsa", "", ""
		default:
			return "ecdsa", codeAlgorithm, "an ECDSA key on " + name
		}
	}
	return "", codeAlgorithm, fmt.Sprintf("a key of type %T", pub)
}

// wantKey is what keyProblem lets through.
const wantKey = "want RSA of at least 2048 bits or ECDSA on P-256, P-384 or P-521"

// checkValue verifies a signature value over a digest. ECDSA values are r and s, each as long as the curve's order
// (XML Signature 1.1, 6.4.3).
func checkValue(pub crypto.PublicKey, h crypto.Hash, digest, value []byte) bool {
	switch k := pub.(type) {
	case *rsa.PublicKey:
		return rsa.VerifyPKCS1v15(k, h, digest, value) == nil
	case *ecdsa.PublicKey:
		n := (k.Params().N.BitLen() + 7) / 8
		if len(value) != 2*n {
			return false
		}
		return ecdsa.Verify(k, digest, new(big.Int).SetBytes(value[:n]), new(big.Int).SetBytes(value[n:]))
	}
	return false
}

// flatten turns an ECDSA signature from ASN.1 into r and s of the length of the curve's order; RSA stays as it is.
func flatten(pub crypto.PublicKey, sig []byte) ([]byte, error) {
	k, ok := pub.(*ecdsa.PublicKey)
	if !ok {
		return sig, nil
	}
	var rs struct{ R, S *big.Int }
	rest, err := asn1.Unmarshal(sig, &rs)
	n := (k.Params().N.BitLen() + 7) / 8
	if err != nil || len(rest) > 0 || rs.R.Sign() <= 0 || rs.S.Sign() <= 0 || rs.R.BitLen() > 8*n || rs.S.BitLen() > 8*n {
		return nil, fmt.Errorf("key: found an ECDSA signature of another form, want ASN.1; do use another identity")
	}
	out := make([]byte, 2*n)
	rs.R.FillBytes(out[:n])
	rs.S.FillBytes(out[n:])
	return out, nil
}
