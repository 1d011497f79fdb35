package exports_test

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"flag"
	"io"
	"slices"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/opcsign"
)

var sweepStep = flag.Int("sweep", 997, "flip a bit of every so many bytes of a signed record")

// TestVerifyByteFlips flips a bit of every n-th byte of a signed file and never wants it called intact. (Of the zip's own fields
// some carry no content, such as times; a strict reader still refuses or finds all parts the same.) Run with -sweep 97 or less
// before a release.
func TestVerifyByteFlips(t *testing.T) {
	pkg := signedOnce(t)
	intact, same := 0, 0
	for i := 0; i < len(pkg); i += *sweepStep {
		for _, bit := range []byte{1, 0x80} {
			b := bytes.Clone(pkg)
			b[i] ^= bit
			v := exports.Verify(b, nil)
			if v.State != exports.Intact && v.State != exports.Incomplete {
				continue
			}
			intact++
			if sameContent(t, pkg, b) {
				same++
				continue
			}
			t.Errorf("byte %d, bit %#x: called %s, and the content differs", i, bit, v.State)
		}
	}
	t.Logf("%d bytes, every %dth twice; %d called intact, all %d with the same content", len(pkg), *sweepStep, intact, same)
}

// TestVerifyEveryPart changes, drops and doubles the content of every part of a signed record, one at a time.
func TestVerifyEveryPart(t *testing.T) {
	pkg := signedOnce(t)
	for part := range unzip(t, pkg) {
		for what, edit := range map[string]func([]byte) []byte{
			"a byte more":    func(b []byte) []byte { return append(bytes.Clone(b), ' ') },
			"a byte less":    func(b []byte) []byte { return bytes.Clone(b[:max(0, len(b)-1)]) },
			"another byte":   func(b []byte) []byte { return flipped(b) },
			"no such part":   func([]byte) []byte { return nil },
			"nothing inside": func([]byte) []byte { return []byte{} },
		} {
			changed := false
			b := rezip(t, pkg, func(name string, b []byte) []byte {
				if name != part {
					return b
				}
				out := edit(b)
				changed = out == nil || !bytes.Equal(out, b)
				return out
			})
			v := exports.Verify(b, nil)
			if changed && (v.State == exports.Intact || v.State == exports.Incomplete) && !harmless(part, what) {
				t.Errorf("%s, %s: called %s", part, what, v.State)
			}
			if changed && len(v.Reasons) == 0 && !harmless(part, what) {
				t.Errorf("%s, %s: no reason", part, what)
			}
		}
	}
}

// harmless are changes that carry no content: white space after the end of a document that no signature covers by its bytes.
func harmless(part, what string) bool {
	return what == "a byte more" && (part == "[Content_Types].xml" || strings.HasSuffix(part, ".rels") || strings.HasPrefix(part, "_xmlsignatures/sig"))
}

func flipped(b []byte) []byte {
	out := bytes.Clone(b)
	if len(out) > 0 {
		out[len(out)/2] ^= 0x20
	}
	return out
}

// sameContent says whether two archives hold the same entries with the same bytes.
func sameContent(t *testing.T, a, b []byte) bool {
	t.Helper()
	x, y := unzip(t, a), unzip(t, b)
	if len(x) != len(y) {
		return false
	}
	for name, content := range x {
		if other, ok := y[name]; !ok || !bytes.Equal(content, other) {
			return false
		}
	}
	return true
}

func unzip(t *testing.T, pkg []byte) map[string][]byte {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][]byte{}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		out[f.Name] = b
	}
	return out
}

// TestVerifyReordered changes what says nothing: the order of relationships, of content types and of the archive, and space
// between them.
func TestVerifyReordered(t *testing.T) {
	k := takeApart(t, signedOnce(t))
	slices.Reverse(k.names)
	for _, rels := range []string{"_rels/.rels", bookRels} {
		k.match(rels, `(<Relationship [^>]*?(?:/>|></Relationship>))(.*)</Relationships>`, "$2\n\t$1</Relationships>")
	}
	k.match(typesEntry, `(<Override [^>]*/>)(.*)</Types>`, "$2\n$1</Types>")
	if v := exports.Verify(k.bytes(), nil); v.State != exports.Intact || !v.Rebuilt {
		t.Errorf("got %s, %v, rebuilt %v; want it intact", v.State, v.Reasons, v.Rebuilt)
	}
}

// TestVerifyRezip packs a signed record anew in harmless ways: another compression, none, another order. All stay intact, and a
// further signature can be given.
func TestVerifyRezip(t *testing.T) {
	pkg := signedOnce(t)
	in, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name    string
		method  uint16
		level   int
		reverse bool
	}{{"stored", zip.Store, 0, false}, {"packed tighter", zip.Deflate, flate.BestCompression, false}, {"packed fast", zip.Deflate, flate.BestSpeed, false}, {"in reverse", zip.Deflate, -1, true}} {
		t.Run(c.name, func(t *testing.T) {
			var out bytes.Buffer
			w := zip.NewWriter(&out)
			w.RegisterCompressor(zip.Deflate, func(o io.Writer) (io.WriteCloser, error) { return flate.NewWriter(o, c.level) })
			content := unzip(t, pkg)
			for i := range in.File {
				f := in.File[i]
				if c.reverse {
					f = in.File[len(in.File)-1-i]
				}
				e, err := w.CreateHeader(&zip.FileHeader{Name: f.Name, Method: c.method})
				if err != nil {
					t.Fatal(err)
				}
				if _, err := e.Write(content[f.Name]); err != nil {
					t.Fatal(err)
				}
			}
			if err := w.Close(); err != nil {
				t.Fatal(err)
			}
			if v := exports.Verify(out.Bytes(), nil); v.State != exports.Intact {
				t.Fatalf("got %s, %v", v.State, v.Reasons)
			}
			twice, err := exports.Sign(out.Bytes(), person(t, "Bert"), opcsign.Statement{Meaning: "reviewed", Time: when})
			if err != nil {
				t.Fatal(err)
			}
			if v := exports.Verify(twice, nil); v.State != exports.Intact || len(v.Signatures) != 2 {
				t.Errorf("signed again: got %s, %v", v.State, v.Reasons)
			}
		})
	}
}
