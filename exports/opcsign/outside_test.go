//go:build outside

package opcsign

import (
	"crypto/rand"
	"crypto/rsa"
	"crypto/x509"
	"crypto/x509/pkix"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/exports/identity"
)

// The verifiers of others: LibreOffice, Apache POI and xmlsec1. On Debian: libreoffice-calc python3-uno xmlsec1
// libapache-poi-java libxml-security-java libbcpkix-java libbcutil-java default-jdk-headless.
//
//	go test -tags outside -run Outside ./exports/opcsign

// outsider runs one verifier over a file and gives its lines, one for each signature.
type outsider struct {
	name  string
	valid string // what a line of a valid signature holds
	run   func(t *testing.T, file string) string
}

// outsiders are the three; all have to be there. The class path of POI is built in a folder of its own.
func outsiders(t *testing.T) []outsider {
	t.Helper()
	for _, tool := range []string{"soffice", "xmlsec1", "java", "/usr/bin/python3"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Fatalf("%s: found nothing, want the program; do install the packages named above", tool)
		}
	}
	here, err := filepath.Abs(filepath.Join("testdata", "outside"))
	if err != nil {
		t.Fatal(err)
	}
	poi := t.TempDir()
	b, err := os.ReadFile(filepath.Join(here, "mk_poi_types.sh"))
	if err != nil {
		t.Fatal(err)
	}
	write(t, filepath.Join(poi, "mk_poi_types.sh"), b)
	if out, err := exec.Command("sh", filepath.Join(poi, "mk_poi_types.sh")).CombinedOutput(); err != nil {
		t.Fatalf("types for POI: %v\n%s", err, out)
	}
	cp, err := os.ReadFile(filepath.Join(poi, "poi.cp"))
	if err != nil {
		t.Fatal(err)
	}
	call := func(name string, args ...string) func(*testing.T, string) string {
		return func(t *testing.T, file string) string {
			out, err := exec.Command(name, append(args, file)...).CombinedOutput()
			if err != nil && len(out) == 0 {
				t.Fatalf("%s: %v", name, err)
			}
			return string(out)
		}
	}
	return []outsider{
		{"LibreOffice", "valid=True", call("/usr/bin/python3", filepath.Join(here, "verify_lo.py"), "--each")},
		{"POI", "valid=true", call("java", "-cp", string(cp), filepath.Join(here, "VerifyPoi.java"))},
		{"xmlsec1", "valid=True", call("/usr/bin/python3", filepath.Join(here, "verify_xmlsec.py"))},
	}
}

// count counts the signatures that an output calls valid, and those it tells of.
func (o outsider) count(out string) (valid, all int) {
	return strings.Count(out, o.valid), strings.Count(strings.ToLower(out), "valid=true") + strings.Count(strings.ToLower(out), "valid=false") + strings.Count(out, "valid=error")
}

// rsaIdentity is an identity with an RSA key of 2048 bits, signed by itself.
func rsaIdentity(t *testing.T) identity.Identity {
	t.Helper()
	k, err := rsa.GenerateKey(rand.Reader, 2048)
	if err != nil {
		t.Fatal(err)
	}
	return identity.Identity{Key: k, Chain: []*x509.Certificate{issue(t, pkix.Name{CommonName: "RSA, Example"}, k, nil, []string{"leaf"}, k)}}
}

func TestOutsideValid(t *testing.T) {
	tools := outsiders(t)
	chain := key(t, "reviewed") // RSA, with an intermediate and a root
	for _, c := range []struct {
		name string
		ids  []identity.Identity
	}{
		{"ec1", []identity.Identity{key(t, "prepared")}},
		{"rsa1", []identity.Identity{rsaIdentity(t)}},
		{"ec3", []identity.Identity{key(t, "prepared"), key(t, "other"), key(t, "approved")}},
		{"rsa3", []identity.Identity{rsaIdentity(t), chain, rsaIdentity(t)}},
	} {
		b := workbook(t)
		for i, id := range c.ids {
			st := statement(id, people[i%3])
			if i == 1 {
				st.Title, st.Reason, st.Disposition, st.Zone = "", "", "", ""
			}
			var err error
			if b, err = Sign(b, id.Key, id.Chain, st); err != nil {
				t.Fatal(err)
			}
		}
		file := filepath.Join(t.TempDir(), c.name+".xlsx")
		write(t, file, b)
		for _, o := range tools {
			out := o.run(t, file)
			if valid, all := o.count(out); valid != len(c.ids) || all != len(c.ids) {
				t.Errorf("%s by %s: got %d of %d valid, want %d of %d:\n%s", c.name, o.name, valid, all, len(c.ids), len(c.ids), out)
			} else {
				t.Logf("%s by %s: %d of %d valid", c.name, o.name, valid, all)
			}
		}
	}
}

// TestOutsideInvalid shows that the three can say no: for these faults none of them may call both signatures valid.
func TestOutsideInvalid(t *testing.T) {
	tools := outsiders(t)
	want := map[string]bool{
		"cell": true, "shared string": true, "picture": true, "relationship retargeted": true, "hyperlink retargeted": true, "manifest digest and cell": true,
		"manifest reference and cell removed": true, "signature time": true, "comment shown": true, "role": true, "meaning": true, "signature value": true, "manifest emptied": true,
	}
	base := signed(t, 2)
	for i, c := range append(append([]fault{}, contentCases...), append(packageCases, signatureCases...)...) {
		if !want[c.name] {
			continue
		}
		p := takeApart(t, base)
		c.edit(p)
		file := filepath.Join(t.TempDir(), fmt.Sprintf("fault%d.xlsx", i))
		write(t, file, p.bytes())
		for _, o := range tools {
			if valid, _ := o.count(o.run(t, file)); valid > 1 {
				t.Errorf("%s by %s: got %d valid, want less than 2", c.name, o.name, valid)
			}
		}
		delete(want, c.name)
	}
	if len(want) > 0 {
		t.Errorf("got no cases for %v, want each", want)
	}
}
