//go:build outside

package exports_test

import (
	"crypto"
	"crypto/ecdsa"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/rsa"
	"crypto/x509"
	"crypto/x509/pkix"
	"fmt"
	"math/big"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// The verifiers of others are described in opcsign/outside_test.go.

// certify makes a certificate, signed by the last of the chain or by itself, and puts it at the chain's head.
func certify(t *testing.T, name string, key crypto.Signer, leaf bool, by identity.Identity) identity.Identity {
	t.Helper()
	serial, err := rand.Int(rand.Reader, new(big.Int).Lsh(big.NewInt(1), 120))
	if err != nil {
		t.Fatal(err)
	}
	c := &x509.Certificate{
		SerialNumber: serial, Subject: pkix.Name{CommonName: name, Organization: []string{"Invented works"}}, BasicConstraintsValid: true, IsCA: !leaf,
		NotBefore: when.AddDate(-1, 0, 0), NotAfter: when.AddDate(9, 0, 0), KeyUsage: x509.KeyUsageDigitalSignature,
	}
	if !leaf {
		c.KeyUsage = x509.KeyUsageCertSign
	}
	parent, signer := c, key
	if by.Key != nil {
		parent, signer = by.Chain[0], by.Key
	}
	der, err := x509.CreateCertificate(rand.Reader, c, parent, key.Public(), signer)
	if err != nil {
		t.Fatal(err)
	}
	made, err := x509.ParseCertificate(der)
	if err != nil {
		t.Fatal(err)
	}
	return identity.Identity{Key: key, Chain: append([]*x509.Certificate{made}, by.Chain...)}
}

// newKeys are a key of each kind that a person may sign with.
func newKeys(t *testing.T) map[string]func() crypto.Signer {
	t.Helper()
	ec := func(c elliptic.Curve) func() crypto.Signer {
		return func() crypto.Signer {
			k, err := ecdsa.GenerateKey(c, rand.Reader)
			if err != nil {
				t.Fatal(err)
			}
			return k
		}
	}
	rsaOf := func(bits int) func() crypto.Signer {
		return func() crypto.Signer {
			k, err := rsa.GenerateKey(rand.Reader, bits)
			if err != nil {
				t.Fatal(err)
			}
			return k
		}
	}
	return map[string]func() crypto.Signer{"EC P-256": ec(elliptic.P256()), "EC P-384": ec(elliptic.P384()), "RSA 2048": rsaOf(2048), "RSA 3072": rsaOf(3072)}
}

// TestOutsideVerifiers has LibreOffice, Apache POI and xmlsec1 check records with every kind of key, self-signed and by a chain of
// a root and an issuing certificate, with one, two and three signatures.
func TestOutsideVerifiers(t *testing.T) {
	kinds := []string{"EC P-256", "EC P-384", "RSA 2048", "RSA 3072"}
	keys := newKeys(t)
	var people []identity.Identity
	for i, kind := range kinds {
		people = append(people, certify(t, "Self "+kind, keys[kind](), true, identity.Identity{}))
		root := certify(t, "Root "+kind, keys[kinds[(i+1)%len(kinds)]](), false, identity.Identity{})
		issuing := certify(t, "Issuing "+kind, keys[kind](), false, root)
		people = append(people, certify(t, "Chained "+kind, keys[kind](), true, issuing))
	}
	meanings := []string{"prepared", "reviewed", "approved"}
	dir := t.TempDir()
	var files []string
	signatures := 0
	for n := 1; n <= len(meanings); n++ {
		for i := range people {
			rec := record(t)
			rec.Plan.Signatures = nil
			for _, m := range meanings[:n] {
				rec.Plan.Signatures = append(rec.Plan.Signatures, qa.Required{Meaning: m})
			}
			pkg, err := exports.SignFirst(rec, people[i], opcsign.Statement{Meaning: meanings[0], Time: when})
			for k := 1; k < n && err == nil; k++ {
				pkg, err = exports.Sign(pkg, people[(i+3*k)%len(people)], opcsign.Statement{Meaning: meanings[k], Time: when.AddDate(0, 0, k)})
			}
			if err != nil {
				t.Fatal(err)
			}
			if v := exports.Verify(pkg, nil); v.State != exports.Intact || len(v.Signatures) != n {
				t.Fatalf("%d signatures, first by %s: got %s, %v", n, people[i].Name(), v.State, v.Reasons)
			}
			file := filepath.Join(dir, fmt.Sprintf("record-%d-%d.xlsx", n, i))
			if err := os.WriteFile(file, pkg, 0o600); err != nil {
				t.Fatal(err)
			}
			files = append(files, file)
			signatures += n
		}
	}
	here, err := filepath.Abs(filepath.Join("opcsign", "testdata", "outside"))
	if err != nil {
		t.Fatal(err)
	}
	script, err := os.ReadFile(filepath.Join(here, "mk_poi_types.sh"))
	if err != nil {
		t.Fatal(err)
	}
	poi := filepath.Join(t.TempDir(), "mk_poi_types.sh")
	if err := os.WriteFile(poi, script, 0o600); err != nil {
		t.Fatal(err)
	}
	command(t, "sh", poi)
	classes, err := os.ReadFile(filepath.Join(filepath.Dir(poi), "poi.cp"))
	if err != nil {
		t.Fatal(err)
	}
	for name, call := range map[string][]string{
		"LibreOffice": {"/usr/bin/python3", filepath.Join(here, "verify_lo.py"), "--each"},
		"Apache POI":  {"java", "-cp", string(classes), filepath.Join(here, "VerifyPoi.java")},
		"xmlsec1":     {"/usr/bin/python3", filepath.Join(here, "verify_xmlsec.py")},
	} {
		out, err := exec.Command(call[0], append(call[1:], files...)...).CombinedOutput()
		if err != nil && len(out) == 0 {
			t.Fatalf("%s: %v", name, err)
		}
		low := strings.ToLower(string(out))
		valid, not := strings.Count(low, "valid=true"), strings.Count(low, "valid=false")+strings.Count(low, "valid=error")
		if valid != signatures || not != 0 {
			t.Errorf("%s: got %d valid and %d not, want all %d valid in %d records:\n%s", name, valid, not, signatures, len(files), out)
		} else {
			t.Logf("%s: all %d signatures of %d records valid", name, valid, len(files))
		}
	}
}
