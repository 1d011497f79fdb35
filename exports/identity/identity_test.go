package identity

import (
	"crypto/ecdsa"
	"crypto/ed25519"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/x509"
	"encoding/pem"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"software.sslmate.com/src/go-pkcs12"
)

var now = time.Date(2026, 12, 1, 8, 0, 0, 0, time.UTC)

func file(t testing.TB, name string) []byte {
	t.Helper()
	b, err := os.ReadFile(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestNew(t *testing.T) {
	id, err := New("Ada Lindqvist", "Quality engineer", "Example Works", now, rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	if id.Name() != "Ada Lindqvist" || id.Title() != "Quality engineer" || id.Organization() != "Example Works" {
		t.Errorf("got %q, %q, %q", id.Name(), id.Title(), id.Organization())
	}
	c := id.Chain[0]
	if want := x509.KeyUsageDigitalSignature | x509.KeyUsageContentCommitment; c.KeyUsage != want || len(c.ExtKeyUsage) > 0 || c.IsCA {
		t.Errorf("got the usage %b, extended %v, CA %v, want %b, none, false", c.KeyUsage, c.ExtKeyUsage, c.IsCA, want)
	}
	if !c.NotBefore.Equal(now) || !c.NotAfter.Equal(now.AddDate(10, 0, 0)) {
		t.Errorf("got valid from %v to %v, want ten years from %v", c.NotBefore, c.NotAfter, now)
	}
	if c.SerialNumber.Sign() <= 0 || c.SerialNumber.BitLen() > 127 {
		t.Errorf("got the serial number %v, want a positive one of at most 127 bits", c.SerialNumber)
	}
	if k, ok := id.Key.(*ecdsa.PrivateKey); !ok || k.Curve != elliptic.P256() {
		t.Errorf("got the key %T, want ECDSA on P-256", id.Key)
	}
	if len(id.Fingerprint()) != 64 || strings.ToLower(id.Fingerprint()) != id.Fingerprint() {
		t.Errorf("got the fingerprint %q, want 64 lower-case digits", id.Fingerprint())
	}
	if bare, err := New("A", "", "", now, rand.Reader); err != nil || bare.Title() != "" || bare.Organization() != "" {
		t.Errorf("got %v, %q, %q, want no title and no organization", err, bare.Title(), bare.Organization())
	}
}

func TestNewRefuses(t *testing.T) {
	for _, c := range [][3]string{{"", "", ""}, {" A", "", ""}, {"A\n", "", ""}, {"A", "\x00", ""}, {"A", "", "\xff"}, {strings.Repeat("ä", 65), "", ""}} {
		if _, err := New(c[0], c[1], c[2], now, rand.Reader); err == nil {
			t.Errorf("%q: got an identity, want a refusal", c)
		}
	}
	if _, err := New(strings.Repeat("ä", 64), "", "", now, rand.Reader); err != nil {
		t.Errorf("64 characters: got %v, want an identity", err)
	}
}

func TestRoundTrip(t *testing.T) {
	id, err := New("Ada Lindqvist", "", "", now, rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	b, err := id.Encode("päss wörd", rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	got, err := Open(b, "päss wörd")
	if err != nil || got.Fingerprint() != id.Fingerprint() || !id.Key.(*ecdsa.PrivateKey).Equal(got.Key) {
		t.Errorf("got %v, %v, want the identity", got.Fingerprint(), err)
	}
	for _, wrong := range []string{"", "pass word", "päss wörd "} {
		if _, err := Open(b, wrong); !errors.Is(err, ErrPassphrase) {
			t.Errorf("passphrase %q: got %v, want %v", wrong, err, ErrPassphrase)
		}
	}
	if _, err := id.Encode("", rand.Reader); err == nil {
		t.Error("empty passphrase: got a file, want a refusal")
	}
	if _, err := (Identity{}).Encode("x", rand.Reader); err == nil {
		t.Error("no identity: got a file, want a refusal")
	}
}

func TestOpen(t *testing.T) {
	for _, c := range []struct {
		name  string
		chain []string
	}{
		{"chain", []string{"Dana Fields", "Issuing", "Root"}}, // the foreign certificate is left out
		{"legacy", []string{"Dana Fields", "Issuing"}},
		{"rsa", []string{"Rae"}},
	} {
		id, err := Open(file(t, c.name+".p12"), "pass")
		if err != nil {
			t.Errorf("%s: got %v, want an identity", c.name, err)
			continue
		}
		var got []string
		for _, x := range id.Chain {
			got = append(got, x.Subject.CommonName)
		}
		if strings.Join(got, "/") != strings.Join(c.chain, "/") {
			t.Errorf("%s: got the chain %v, want %v", c.name, got, c.chain)
		}
	}
	id, err := Open(file(t, "chain.p12"), "pass")
	if err != nil || id.Title() != "Analyst" || id.Organization() != "Example Works" {
		t.Errorf("got %v, %q, %q, want Analyst of Example Works", err, id.Title(), id.Organization())
	}
}

// TestOpenForeignFirst: the decoder takes the first certificate of a file for the leaf, we the one of the key.
func TestOpenForeignFirst(t *testing.T) {
	id, err := Open(file(t, "chain.p12"), "pass")
	if err != nil {
		t.Fatal(err)
	}
	other, err := New("Foreign", "", "", now, rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	certs := append([]*x509.Certificate{id.Chain[2], id.Chain[1]}, id.Chain[0])
	b, err := pkcs12.Modern2023.Encode(id.Key, other.Chain[0], certs, "pass")
	if err != nil {
		t.Fatal(err)
	}
	got, err := Open(b, "pass")
	if err != nil || len(got.Chain) != 3 || got.Fingerprint() != id.Fingerprint() {
		t.Errorf("got %v, %v, want the chain of %s", got.Chain, err, id.Name())
	}
	if b, err = pkcs12.Modern2023.Encode(id.Key, other.Chain[0], nil, "pass"); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(b, "pass"); !errors.Is(err, ErrUnusable) || !strings.Contains(err.Error(), "none for its private key") {
		t.Errorf("got %v, want a refusal of the foreign certificate", err)
	}
}

func TestOpenRefuses(t *testing.T) {
	for _, c := range []struct{ name, want string }{
		{"ed25519", "Ed25519"},
		{"rsa1024", "RSA of 1024 bits"},
		{"p224", "P-224"},
		{"nokey", "no private key"},
		{"nocert", "no certificate"},
		{"nomac", "no integrity check"},
		{"noname", "without a common name"},
		{"usage", "key usage without digital signature"},
	} {
		_, err := Open(file(t, c.name+".p12"), "pass")
		if !errors.Is(err, ErrUnusable) || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), "want ") || !strings.Contains(err.Error(), "; do ") {
			t.Errorf("%s: got %v, want a refusal that says %q, what is wanted and what to do", c.name, err, c.want)
		}
	}
	for _, b := range [][]byte{nil, []byte("PK\x03\x04"), file(t, "make.sh")} {
		if _, err := Open(b, "pass"); !errors.Is(err, ErrUnusable) {
			t.Errorf("%.10q: got %v, want a refusal", b, err)
		}
	}
}

func TestPEM(t *testing.T) {
	id, err := Open(file(t, "chain.p12"), "pass")
	if err != nil {
		t.Fatal(err)
	}
	list, err := ParsePEM(append([]byte("comment\n"), id.PEM()...))
	if err != nil || len(list) != 3 || !list[0].Equal(id.Chain[0]) {
		t.Errorf("got %d certificates, %v, want 3", len(list), err)
	}
	_, private, err := ed25519.GenerateKey(rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	der, err := x509.MarshalPKCS8PrivateKey(private)
	if err != nil {
		t.Fatal(err)
	}
	for name, b := range map[string][]byte{
		"nothing": nil, "text": []byte("hello"), "a key": pem.EncodeToMemory(&pem.Block{Type: "PRIVATE KEY", Bytes: der}),
		"damaged": pem.EncodeToMemory(&pem.Block{Type: "CERTIFICATE", Bytes: []byte{1}}),
	} {
		if got, err := ParsePEM(b); err == nil {
			t.Errorf("%s: got %d certificates, want a refusal", name, len(got))
		}
	}
}

// TestDecodeError: a file with two keys cannot be made with the tools at hand, so the decoder's words stand for it.
func TestDecodeError(t *testing.T) {
	err := decodeError(errors.New("pkcs12: expected exactly one key bag"))
	if !errors.Is(err, ErrUnusable) || !strings.Contains(err.Error(), "more than one private key") {
		t.Errorf("got %v, want a refusal of two keys", err)
	}
}
