// Package identity is a person's signing key and certificate: it makes one, keeps it in a PKCS#12 file under a
// passphrase, opens one (its own or a company's), and describes it.
//
// Only keys that every verifier of signed workbooks accepts are let in: RSA of 2048 bits and up, and ECDSA on P-256,
// P-384 and P-521.
package identity
