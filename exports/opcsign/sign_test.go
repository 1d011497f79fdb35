package opcsign

import (
	"bytes"
	"crypto"
	"crypto/ecdsa"
	"crypto/ed25519"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/x509"
	"crypto/x509/pkix"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"

	"lotpair/exports/identity"
)

func TestSign(t *testing.T) {
	for n := 1; n <= 3; n++ {
		b := signed(t, n)
		r, err := Verify(b, roots(t))
		if err != nil || !r.Sound() || len(r.Signatures) != n {
			t.Fatalf("%d signatures: got %v, %+v, want a sound package", n, err, r)
		}
		for i, s := range r.Signatures {
			id := key(t, people[i])
			want := statement(id, people[i])
			if !s.Statement.Time.Equal(want.Time) || s.Statement.Time.Format(timeForm) != want.Time.Format(timeForm) {
				t.Errorf("signature %d: got the time %v, want %v", i+1, s.Statement.Time, want.Time)
			}
			want.Time = s.Statement.Time
			if s.Statement != want {
				t.Errorf("signature %d: got %+v, want %+v", i+1, s.Statement, want)
			}
			if got, want := *s.Trusted, people[i] == "reviewed"; got != want {
				t.Errorf("signature %d: got trusted %v (%s), want %v", i+1, got, s.Doubt, want)
			}
		}
	}
}

// TestSignKeepsTheRest: a later signature changes three entries, and leaves the packed bytes of all others alone.
func TestSignKeepsTheRest(t *testing.T) {
	before := signed(t, 1)
	after := signAs(t, before, "reviewed", "reviewed")
	a, err := openArchive(before)
	if err != nil {
		t.Fatal(err)
	}
	b, err := openArchive(after)
	if err != nil {
		t.Fatal(err)
	}
	var changed []string
	for _, e := range b.entries {
		if old := a.byName[e.name]; old == nil || !bytes.Equal(old.packed, e.packed) {
			changed = append(changed, e.name)
		}
	}
	if got, want := strings.Join(changed, " "), "[Content_Types].xml _xmlsignatures/_rels/origin.sigs.rels _xmlsignatures/sig2.xml"; got != want {
		t.Errorf("got the entries %s changed, want %s", got, want)
	}
	for _, gone := range []string{"docProps/core.xml"} {
		if a.byName[gone] != nil || strings.Contains(string(must(t, before, rootRels)), gone) || strings.Contains(string(must(t, before, "/"+typesEntry)), gone) {
			t.Errorf("got %s, want it gone", gone)
		}
	}
}

func must(t *testing.T, pkg []byte, part string) []byte {
	t.Helper()
	b, err := ReadPart(pkg, part)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// TestSignSame: but for the randomness of ECDSA, equal inputs give equal bytes; RSA has none.
func TestSignSame(t *testing.T) {
	book := workbook(t)
	if a, b := signAs(t, book, "reviewed", "prepared"), signAs(t, book, "reviewed", "prepared"); !bytes.Equal(a, b) {
		t.Error("RSA: got different bytes, want the same")
	}
	value := regexp.MustCompile(`<SignatureValue>[^<]*`)
	a, b := takeApart(t, signAs(t, book, "prepared", "prepared")), takeApart(t, signAs(t, book, "prepared", "prepared"))
	for _, n := range a.names {
		if value.ReplaceAllString(a.get(n), "") != value.ReplaceAllString(b.get(n), "") {
			t.Errorf("ECDSA, %s: got different content, want the same", n)
		}
	}
}

func TestSignKeys(t *testing.T) {
	k521, err := ecdsa.GenerateKey(elliptic.P521(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	leaf := []string{"leaf"}
	id := identity.Identity{Key: k521, Chain: []*x509.Certificate{issue(t, pkix.Name{CommonName: "P-521"}, k521, nil, leaf, k521)}}
	for range 20 { // r and s are short at times
		out, err := Sign(workbook(t), id.Key, id.Chain, statement(id, "prepared"))
		if err != nil {
			t.Fatal(err)
		}
		if r, err := Verify(out, id.Chain); err != nil || !r.Sound() || !*r.Signatures[0].Trusted {
			t.Fatalf("got %v, %v, want a sound package, trusted by its own certificate", codes(r), err)
		}
	}
	p224, err := ecdsa.GenerateKey(elliptic.P224(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	_, ed, err := ed25519.GenerateKey(rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	for want, k := range map[string]crypto.Signer{"P-224": p224, "ed25519": ed} {
		id := identity.Identity{Key: k, Chain: []*x509.Certificate{issue(t, pkix.Name{CommonName: "X"}, k, nil, leaf, k)}}
		if _, err := Sign(workbook(t), id.Key, id.Chain, statement(id, "prepared")); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v, want a refusal", want, err)
		}
	}
}

func TestSignRefuses(t *testing.T) {
	id, other, chain := key(t, "prepared"), key(t, "other"), key(t, "reviewed")
	for name, c := range map[string]struct {
		key   crypto.Signer
		chain []*x509.Certificate
		edit  func(s *Statement)
		want  string
	}{
		"no key":             {nil, id.Chain, nil, "no key"},
		"no certificate":     {id.Key, nil, nil, "no certificate"},
		"another's key":      {other.Key, id.Chain, nil, "another key"},
		"broken chain":       {id.Key, append(slices.Clone(id.Chain), chain.Chain[1]), nil, "did not issue"},
		"another name":       {id.Key, id.Chain, func(s *Statement) { s.Name = "Eva" }, "as in the certificate"},
		"no meaning":         {id.Key, id.Chain, func(s *Statement) { s.Meaning = " " }, "no meaning"},
		"no time":            {id.Key, id.Chain, func(s *Statement) { s.Time = time.Time{} }, "no time"},
		"too early":          {id.Key, id.Chain, func(s *Statement) { s.Time = when.AddDate(-1, 0, 0) }, "is valid"},
		"too late":           {id.Key, id.Chain, func(s *Statement) { s.Time = when.AddDate(11, 0, 0) }, "is valid"},
		"odd offset":         {id.Key, id.Chain, func(s *Statement) { s.Time = when.In(time.FixedZone("", 3599)) }, "whole minutes"},
		"control character":  {id.Key, id.Chain, func(s *Statement) { s.Reason = "a\x01" }, "U+0001"},
		"carriage return":    {id.Key, id.Chain, func(s *Statement) { s.Reason = "a\r\nb" }, "U+000D"},
		"no text":            {id.Key, id.Chain, func(s *Statement) { s.Zone = "\xff" }, "U+FFFD"},
		"no package":         {id.Key, id.Chain, nil, "no zip archive"},
		"link with &":        {id.Key, id.Chain, nil, "without &"},
		"duplicate in a zip": {id.Key, id.Chain, nil, "each name once"},
	} {
		st := statement(id, "prepared")
		if c.edit != nil {
			c.edit(&st)
		}
		p := takeApart(t, workbook(t))
		b := p.bytes()
		switch name {
		case "no package":
			b = []byte("text")
		case "link with &":
			p.swap("xl/worksheets/_rels/sheet1.xml.rels", "lot=47-B", "lot=47-B&amp;x=1")
			b = p.bytes()
		case "duplicate in a zip":
			p.set("XL/styles.xml", "<a/>")
			b = p.bytes()
		}
		if _, err := Sign(b, c.key, c.chain, st); err == nil || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), "; do ") {
			t.Errorf("%s: got %v, want a refusal with %q", name, err, c.want)
		}
	}
}

// TestComment: the field that office programs show holds 255 characters; our statement holds all.
func TestComment(t *testing.T) {
	id := key(t, "prepared")
	st := statement(id, "reviewed")
	st.Reason = strings.Repeat("ä", 300)
	out, err := Sign(workbook(t), id.Key, id.Chain, st)
	if err != nil {
		t.Fatal(err)
	}
	r, err := Verify(out, nil)
	if err != nil || !r.Sound() || r.Signatures[0].Statement.Reason != st.Reason {
		t.Errorf("got %v, %v, want the whole reason", codes(r), err)
	}
	want := "<SignatureComments>reviewed: " + strings.Repeat("ä", 245) + "</SignatureComments>"
	if !strings.Contains(string(must(t, out, "/"+sig1)), want) {
		t.Error("got another comment, want it cut to 255 characters")
	}
}

// TestZone: the time is read with its offset wherever the program runs.
func TestZone(t *testing.T) {
	for _, offset := range []int{0, 3600, -12600, 50400} {
		id := key(t, "prepared")
		st := statement(id, "prepared")
		st.Time = when.In(time.FixedZone("", offset)).Add(999 * time.Millisecond)
		out, err := Sign(workbook(t), id.Key, id.Chain, st)
		if err != nil {
			t.Fatal(err)
		}
		r, err := Verify(out, nil)
		if err != nil {
			t.Fatal(err)
		}
		if got, want := r.Signatures[0].Statement.Time.Format(timeForm), st.Time.Format(timeForm); got != want {
			t.Errorf("got %s, want %s", got, want)
		}
	}
}
