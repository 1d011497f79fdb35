package opcsign

import (
	"bytes"
	"crypto"
	"crypto/ecdsa"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/rsa"
	"crypto/x509"
	"crypto/x509/pkix"
	"flag"
	"image"
	"image/png"
	"math/big"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"

	"lotpair/exports/identity"
)

var update = flag.Bool("update", false, "write the golden files and the test identities anew")

// when is the time of every signature of the tests.
var when = time.Date(2026, 12, 1, 9, 0, 0, 0, time.FixedZone("", 3600))

// people are the signers of the tests, by file name in testdata/keys. They are made by TestMakeKeys with -update, are
// for tests only, and their passphrase lies beside them.
var people = []string{"prepared", "reviewed", "approved", "other"}

func key(t testing.TB, name string) identity.Identity {
	t.Helper()
	b, err := os.ReadFile(filepath.Join("testdata", "keys", name+".p12"))
	if err != nil {
		t.Fatal(err)
	}
	pass, err := os.ReadFile(filepath.Join("testdata", "keys", "passphrase.txt"))
	if err != nil {
		t.Fatal(err)
	}
	id, err := identity.Open(b, strings.TrimSpace(string(pass)))
	if err != nil {
		t.Fatal(err)
	}
	return id
}

func roots(t testing.TB) []*x509.Certificate {
	t.Helper()
	b, err := os.ReadFile(filepath.Join("testdata", "keys", "root.pem"))
	if err != nil {
		t.Fatal(err)
	}
	list, err := identity.ParsePEM(b)
	if err != nil {
		t.Fatal(err)
	}
	return list
}

// TestMakeKeys makes the test identities with -update, and checks that they open.
func TestMakeKeys(t *testing.T) {
	if *update {
		makeKeys(t)
	}
	for _, p := range people {
		if id := key(t, p); id.Name() == "" {
			t.Errorf("%s: got no name, want one", p)
		}
	}
}

func makeKeys(t *testing.T) {
	t.Helper()
	begin := time.Date(2026, 1, 1, 0, 0, 0, 0, time.UTC)
	const pass = "only for tests"
	save := func(name string, id identity.Identity) {
		b, err := id.Encode(pass, rand.Reader)
		if err != nil {
			t.Fatal(err)
		}
		write(t, filepath.Join("testdata", "keys", name+".p12"), b)
	}
	write(t, filepath.Join("testdata", "keys", "passphrase.txt"), []byte(pass+"\n"))
	for _, p := range [][4]string{{"prepared", "Ada Lindqvist", "Quality engineer", "Example Works"}, {"other", "Mallory Example", "", ""}} {
		id, err := identity.New(p[1], p[2], p[3], begin, rand.Reader)
		if err != nil {
			t.Fatal(err)
		}
		save(p[0], id)
	}
	rootKey, _ := rsa.GenerateKey(rand.Reader, 2048)
	root := issue(t, pkix.Name{CommonName: "Example Root"}, rootKey, nil, nil, rootKey)
	midKey, _ := ecdsa.GenerateKey(elliptic.P384(), rand.Reader)
	mid := issue(t, pkix.Name{CommonName: "Example Issuing"}, midKey, root, nil, rootKey)
	leafKey, _ := rsa.GenerateKey(rand.Reader, 2048)
	leaf := issue(t, pkix.Name{CommonName: "Béla Ödön & Söhne <QA>"}, leafKey, mid, []string{"leaf"}, midKey)
	save("reviewed", identity.Identity{Key: leafKey, Chain: []*x509.Certificate{leaf, mid, root}})
	lastKey, _ := ecdsa.GenerateKey(elliptic.P384(), rand.Reader)
	last := issue(t, pkix.Name{CommonName: "Chen Wei"}, lastKey, nil, []string{"leaf"}, lastKey)
	save("approved", identity.Identity{Key: lastKey, Chain: []*x509.Certificate{last}})
	write(t, filepath.Join("testdata", "keys", "root.pem"), identity.Identity{Chain: []*x509.Certificate{root}}.PEM())
}

// issue makes a certificate; parent nil makes it self-signed, leaf empty a certificate authority.
func issue(t testing.TB, name pkix.Name, of crypto.Signer, parent *x509.Certificate, leaf []string, by crypto.Signer) *x509.Certificate {
	t.Helper()
	c := &x509.Certificate{
		SerialNumber: big.NewInt(time.Now().UnixNano()), Subject: name, BasicConstraintsValid: true, IsCA: len(leaf) == 0,
		NotBefore: time.Date(2026, 1, 1, 0, 0, 0, 0, time.UTC), NotAfter: time.Date(2036, 1, 1, 0, 0, 0, 0, time.UTC),
		KeyUsage: x509.KeyUsageDigitalSignature | x509.KeyUsageContentCommitment,
	}
	if c.IsCA {
		c.KeyUsage = x509.KeyUsageCertSign | x509.KeyUsageCRLSign
	}
	if parent == nil {
		parent = c
	}
	der, err := x509.CreateCertificate(rand.Reader, c, parent, of.Public(), by)
	if err != nil {
		t.Fatal(err)
	}
	out, err := x509.ParseCertificate(der)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func write(t testing.TB, name string, b []byte) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(name), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(name, b, 0o644); err != nil {
		t.Fatal(err)
	}
}

// workbook is an unsigned workbook with what records have: sheets, numbers, text, a picture, a chart, a comment, links
// inside and outside, and custom properties.
func workbook(t testing.TB) []byte {
	t.Helper()
	f := excelize.NewFile()
	must := func(err error) {
		if err != nil {
			t.Fatal(err)
		}
	}
	must(f.SetSheetName("Sheet1", "Summary"))
	_, err := f.NewSheet("Readings")
	must(err)
	must(f.SetCellValue("Summary", "A1", "Lot 47-B & friends"))
	must(f.SetCellValue("Summary", "A2", 12.5))
	for i := range 20 {
		cell, err := excelize.CoordinatesToCellName(1, i+1)
		must(err)
		must(f.SetCellValue("Readings", cell, float64(i)*1.25))
	}
	must(f.SetCellHyperLink("Summary", "A2", "https://example.org/?lot=47-B", "External"))
	must(f.SetCellHyperLink("Summary", "A1", "Readings!A1", "Location"))
	must(f.AddComment("Summary", excelize.Comment{Cell: "A2", Author: "Ada", Text: "checked"}))
	var picture bytes.Buffer
	must(png.Encode(&picture, image.NewGray(image.Rect(0, 0, 8, 8))))
	must(f.AddPictureFromBytes("Readings", "C3", &excelize.Picture{Extension: ".png", File: picture.Bytes(), Format: &excelize.GraphicOptions{AltText: "dots"}}))
	must(f.AddChart("Summary", "D4", &excelize.Chart{Type: excelize.Line, Series: []excelize.ChartSeries{{Name: "r", Values: "Readings!$A$1:$A$20"}}}))
	must(f.SetCustomProps(excelize.CustomProperty{Name: "record", Value: "47-B"}))
	b, err := f.WriteToBuffer()
	must(err)
	return b.Bytes()
}

// statement is what a person of the tests declares.
func statement(id identity.Identity, meaning string) Statement {
	return Statement{
		Name: id.Name(), Title: "Engineer \"A\" & B", Organization: "Example Works", Meaning: meaning, Reason: "readings <checked>\nagainst the sheets",
		Disposition: "release", Time: when, Zone: "Europe/Berlin",
	}
}

// signed is the workbook with the first n signatures: prepared, reviewed, approved.
func signed(t testing.TB, n int) []byte {
	t.Helper()
	b := workbook(t)
	for _, p := range people[:n] {
		b = signAs(t, b, p, p)
	}
	return b
}

func signAs(t testing.TB, b []byte, person, meaning string) []byte {
	t.Helper()
	id := key(t, person)
	out, err := Sign(b, id.Key, id.Chain, statement(id, meaning))
	if err != nil {
		t.Fatal(err)
	}
	return out
}
