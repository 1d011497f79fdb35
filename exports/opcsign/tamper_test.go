package opcsign

import (
	"archive/zip"
	"bytes"
	"crypto"
	"encoding/binary"
	"io"
	"regexp"
	"slices"
	"strings"
	"testing"

	"lotpair/exports/identity"
)

// pack is a package taken apart, to be put together again with a fault.
type pack struct {
	t     testing.TB
	names []string
	data  map[string]string
}

func takeApart(t testing.TB, pkg []byte) *pack {
	t.Helper()
	r, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	p := &pack{t: t, data: map[string]string{}}
	for _, f := range r.File {
		e, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(e)
		if err != nil {
			t.Fatal(err)
		}
		p.set(f.Name, string(b))
	}
	return p
}

func (p *pack) set(name, content string) {
	if _, ok := p.data[name]; !ok {
		p.names = append(p.names, name)
	}
	p.data[name] = content
}

func (p *pack) remove(name string) {
	p.names = slices.DeleteFunc(p.names, func(n string) bool { return n == name })
	delete(p.data, name)
}

func (p *pack) get(name string) string {
	p.t.Helper()
	s, ok := p.data[name]
	if !ok {
		p.t.Fatalf("no part %s among %v", name, p.names)
	}
	return s
}

// swap replaces text that has to be there.
func (p *pack) swap(name, old, by string) {
	p.t.Helper()
	s := p.get(name)
	if !strings.Contains(s, old) {
		p.t.Fatalf("%s: no %q in %s", name, old, s)
	}
	p.data[name] = strings.Replace(s, old, by, 1)
}

// swapAll replaces what a pattern finds, at least one.
func (p *pack) swapAll(name, pattern, by string) {
	p.t.Helper()
	re := regexp.MustCompile("(?s)" + pattern)
	if !re.MatchString(p.get(name)) {
		p.t.Fatalf("%s: no %s in %s", name, pattern, p.get(name))
	}
	p.data[name] = re.ReplaceAllString(p.data[name], by)
}

func (p *pack) bytes() []byte {
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, n := range p.names {
		e, err := w.Create(n)
		if err != nil {
			p.t.Fatal(err)
		}
		if _, err := io.WriteString(e, p.data[n]); err != nil {
			p.t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		p.t.Fatal(err)
	}
	return b.Bytes()
}

// sign makes digests and value of a signature right again: what somebody does who has a key and signs bad content.
func (p *pack) sign(name string, id identity.Identity) {
	p.t.Helper()
	ref := regexp.MustCompile(`(<Reference [^>]*URI="#([^"]*)">.*?<DigestValue>)[^<]*(</DigestValue>)`)
	value := regexp.MustCompile(`<SignatureValue>[^<]*`)
	tree := func() *node {
		doc, err := parseXML([]byte(p.get(name)))
		if err != nil {
			p.t.Fatal(err)
		}
		return doc.root
	}
	root := tree()
	head, tail, _ := strings.Cut(p.data[name], "</SignedInfo>")
	head = ref.ReplaceAllStringFunc(head, func(s string) string {
		m := ref.FindStringSubmatch(s)
		var target *node
		root.walk(func(n *node) {
			if v, ok := n.attr("Id"); ok && v == m[2] {
				target = n
			}
		})
		if target == nil {
			return s
		}
		return m[1] + b64(sum(crypto.SHA256, canonical(target))) + m[3]
	})
	p.data[name] = head + "</SignedInfo>" + tail
	v, err := signValue(id.Key, sum(crypto.SHA256, canonical(tree().find(dsSpace, "SignedInfo")[0])))
	if err != nil {
		p.t.Fatal(err)
	}
	p.data[name] = value.ReplaceAllString(p.data[name], "<SignatureValue>"+b64(v))
}

const (
	sig1  = "_xmlsignatures/sig1.xml"
	sig2  = "_xmlsignatures/sig2.xml"
	sheet = "xl/worksheets/sheet2.xml"
	book  = "xl/_rels/workbook.xml.rels"
)

// removeSignature takes a whole signature away, as one who wants it unseen would.
func removeSignature(p *pack, name string) {
	p.t.Helper()
	p.remove("_xmlsignatures/" + name)
	p.swapAll("_xmlsignatures/_rels/origin.sigs.rels", `<Relationship [^>]*Target="`+name+`"/>`, "")
	p.swapAll(typesEntry, `<Override PartName="/_xmlsignatures/`+name+`"[^>]*/>`, "")
}

// entryBytes is an archive of one entry without its directory: a local entry to hide in another archive.
func entryBytes(t testing.TB, name, content string) []byte {
	t.Helper()
	p := &pack{t: t, data: map[string]string{}}
	p.set(name, content)
	b := p.bytes()
	return b[:binary.LittleEndian.Uint32(b[len(b)-6:])]
}

// insert puts bytes at a place before the directory and moves the directory's offsets behind it.
func insert(pkg []byte, at int, extra []byte) []byte {
	le := binary.LittleEndian
	out := slices.Concat(pkg[:at], extra, pkg[at:])
	end := len(out) - endSize
	dir := int(le.Uint32(out[end+16:])) + len(extra)
	le.PutUint32(out[end+16:], uint32(dir))
	for i := dir; i < end; {
		if off := int(le.Uint32(out[i+42:])); off >= at {
			le.PutUint32(out[i+42:], uint32(off+len(extra)))
		}
		i += directorySize + int(le.Uint16(out[i+28:])) + int(le.Uint16(out[i+30:])) + int(le.Uint16(out[i+32:]))
	}
	return out
}

func codes(r Report) []string {
	var out []string
	for _, x := range r.Reasons {
		out = append(out, x.Code)
	}
	for _, s := range r.Signatures {
		for _, x := range s.Reasons {
			out = append(out, x.Code)
		}
	}
	return out
}

// TestRepacked is what may happen to an archive on its way without being a change.
func TestRepacked(t *testing.T) {
	b := signed(t, 3)
	p := takeApart(t, b)
	slices.Reverse(p.names)
	p.swapAll(book, `(<Relationship [^>]*/>|<Relationship [^>]*></Relationship>)(.*)</Relationships>`, "$2$1</Relationships>")
	p.swap(book, "><Relationship ", ">\n\t<Relationship ")
	if r, err := Verify(p.bytes(), nil); err != nil || !r.Sound() {
		t.Errorf("repacked in another order: got %v, %v, want a sound package", err, codes(r))
	}
}

// TestTamper puts one fault into a sound package and expects its reason.
func TestTamper(t *testing.T) {
	base := map[int][]byte{}
	for n := 1; n <= 3; n++ {
		base[n] = signed(t, n)
	}
	for _, c := range slices.Concat(contentCases, packageCases, archiveCases, signatureCases, signerCases) {
		t.Run(c.name, func(t *testing.T) {
			n := c.signatures
			if n == 0 {
				n = 2
			}
			pkg := base[n]
			if c.edit != nil {
				p := takeApart(t, pkg)
				c.edit(p)
				pkg = p.bytes()
			}
			if c.raw != nil {
				pkg = c.raw(t, pkg)
			}
			r, err := Verify(pkg, nil)
			if err != nil {
				t.Fatalf("got the error %v, want a report", err)
			}
			got := codes(r)
			if r.Sound() || !slices.Contains(got, c.code) {
				t.Errorf("got sound %v and the reasons %v, want %s", r.Sound(), got, c.code)
			}
			if !HasSignature(pkg) {
				t.Error("got no signature seen, want one")
			}
			id := key(t, "approved")
			if _, err := Sign(pkg, id.Key, id.Chain, statement(id, "approved")); err == nil {
				t.Error("got another signature on it, want a refusal")
			}
		})
	}
}

// fault is a case of TestTamper: edit changes parts, raw the archive's bytes.
type fault struct {
	name       string
	signatures int // of the base, 2 where 0
	edit       func(p *pack)
	raw        func(t testing.TB, pkg []byte) []byte
	code       string
}
