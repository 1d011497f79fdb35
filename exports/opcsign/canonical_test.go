package opcsign

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// canonicalDocument is a whole document in canonical form: the root with what stands around it.
func canonicalDocument(d *document) []byte {
	var w bytes.Buffer
	for _, n := range d.before {
		if n.kind == instruction {
			writeInstruction(&w, n)
			w.WriteByte('\n')
		}
	}
	w.Write(canonical(d.root))
	for _, n := range d.after {
		if n.kind == instruction {
			w.WriteByte('\n')
			writeInstruction(&w, n)
		}
	}
	return w.Bytes()
}

// byID is the element with an Id.
func byID(root *node, id string) *node {
	var found *node
	root.walk(func(n *node) {
		if v, ok := n.attr("Id"); ok && v == id {
			found = n
		}
	})
	return found
}

// TestCanonical compares with what libxml2 made of the corpus, see testdata/canonical/make.py.
func TestCanonical(t *testing.T) {
	files, err := filepath.Glob(filepath.Join("testdata", "canonical", "*.xml"))
	if err != nil || len(files) < 20 {
		t.Fatalf("got %d cases, %v, want at least 20", len(files), err)
	}
	subtrees := 0
	for _, f := range files {
		b, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		doc, err := parseXML(b)
		if err != nil {
			t.Errorf("%s: got %v, want a document", f, err)
			continue
		}
		want, err := os.ReadFile(strings.TrimSuffix(f, "xml") + "doc")
		if err != nil {
			t.Fatal(err)
		}
		if got := canonicalDocument(doc); !bytes.Equal(got, want) {
			t.Errorf("%s: got\n%q, want\n%q", f, got, want)
		}
		want, err = os.ReadFile(strings.TrimSuffix(f, "xml") + "sub")
		if errors.Is(err, os.ErrNotExist) {
			continue
		}
		subtrees++
		if got := canonical(byID(doc.root, "x")); !bytes.Equal(got, want) {
			t.Errorf("%s, subtree: got\n%q, want\n%q", f, got, want)
		}
	}
	if subtrees < 15 {
		t.Errorf("got %d subtrees, want at least 15", subtrees)
	}
}

// notXML are documents that the parser has to refuse.
var notXML = []string{
	"", " ", "text", "<a>", "</a>", "<a></b>", "<a><b></a></b>", "<a/><b/>", "<a/>text", "<a b/>", "<a b=c/>", "<a b='1'c='2'/>", "<a b='<'/>",
	"<a b='1' b='2'/>", "<a xmlns:p='u' xmlns:q='u' p:b='1' q:b='2'/>", "<p:a/>", "<a p:b=''/>", "<a xmlns:p=''/>", "<a xmlns:xml='u'/>", "<a xmlns:xmlns='u'/>",
	"<a xmlns:p='http://www.w3.org/2000/xmlns/'/>", "<a xmlns:p='http://www.w3.org/XML/1998/namespace'/>", "<a xmlns='u' xmlns='u'/>", "<a>&b;</a>", "<a>&#0;</a>",
	"<a>&#xD800;</a>", "<a>&#x110000;</a>", "<a>&amp</a>", "<a>]]></a>", "<a><!-- -- --></a>", "<a><!-- </a>", "<a><?xml?></a>", "<a><?XML b?></a>", "<a><![CDATA[</a>",
	"<!DOCTYPE a><a/>", "<a><!DOCTYPE a></a>", "<a>\x00</a>", "<a>\xff</a>", "<a>\ufffe</a>", "<?xml version='1.1'?><a/>", "<?xml version='1.0' encoding='UTF-16'?><a/>", " <?xml version='1.0'?><a/>",
	"<1/>", "<é/>", "<a:b:c xmlns:a='u'/>", "<:a/>", "<a:/>", "<a b:='1'/>", "<a><?p:q?></a>", "<a><?pq!?></a>", "< a/>", strings.Repeat("<a>", 300) + strings.Repeat("</a>", 300),
}

func TestParseRefuses(t *testing.T) {
	for _, s := range notXML {
		if _, err := parseXML([]byte(s)); err == nil {
			t.Errorf("%.80q: got a document, want a refusal", s)
		}
	}
}

// FuzzCanonical: what the parser reads, encoding/xml reads as well; and the canonical form is read to the same form.
func FuzzCanonical(f *testing.F) {
	files, err := filepath.Glob(filepath.Join("testdata", "canonical", "*.xml"))
	if err != nil {
		f.Fatal(err)
	}
	for _, name := range files {
		b, err := os.ReadFile(name)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(b)
	}
	for _, s := range notXML {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, b []byte) {
		doc, err := parseXML(b)
		if err != nil {
			return
		}
		form := canonicalDocument(doc)
		again, err := parseXML(form)
		if err != nil {
			t.Fatalf("%q: canonical form %q is refused: %v", b, form, err)
		}
		if second := canonicalDocument(again); !bytes.Equal(form, second) {
			t.Fatalf("%q: got %q from %q", b, second, form)
		}
		d := xml.NewDecoder(bytes.NewReader(form))
		for {
			if _, err := d.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%q: encoding/xml: %v", form, err)
			}
		}
	})
}
