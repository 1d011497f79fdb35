package opcsign

import (
	"archive/zip"
	"bytes"
	"io"
	"testing"
)

// FuzzArchive holds the strict reading of an archive against the standard library's: what passes without a fault must be, entry
// for entry and byte for byte, what that one reads, and the entries must tile the bytes from the first to the directory.
func FuzzArchive(f *testing.F) {
	f.Add([]byte("PK\x05\x06" + string(make([]byte, 18))))
	f.Add(signed(f, 1))
	small := func(method uint16, raw bool) []byte {
		var b bytes.Buffer
		w := zip.NewWriter(&b)
		for _, name := range []string{"[Content_Types].xml", "_rels/.rels", "xl/é.xml"} {
			create, content := w.CreateHeader, name+name
			if raw { // without a descriptor
				create, content = w.CreateRaw, ""
			}
			e, err := create(&zip.FileHeader{Name: name, Method: method})
			if err == nil {
				_, err = io.WriteString(e, content)
			}
			if err != nil {
				f.Fatal(err)
			}
		}
		if err := w.Close(); err != nil {
			f.Fatal(err)
		}
		return b.Bytes()
	}
	f.Add(small(zip.Deflate, false))
	f.Add(small(zip.Store, false))
	f.Add(small(zip.Store, true))
	f.Fuzz(func(t *testing.T, b []byte) {
		a, err := openArchive(b)
		if err != nil || len(a.reasons) > 0 || a.bounds() != nil {
			return
		}
		z, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
		if err != nil {
			t.Fatalf("passed, and the standard library says %v", err)
		}
		if len(z.File) != len(a.entries) {
			t.Fatalf("got %d entries, the standard library %d", len(a.entries), len(z.File))
		}
		for i, e := range a.entries {
			g := z.File[i]
			if e.name != g.Name || e.method != g.Method || e.crc != g.CRC32 || uint64(e.size) != g.UncompressedSize64 || uint64(e.packSize) != g.CompressedSize64 {
				t.Fatalf("entry %d: got %q %d %08x %d, the standard library %+v", i, e.name, e.method, e.crc, e.size, g.FileHeader)
			}
			at, err := g.DataOffset()
			if err != nil || !bytes.Equal(b[at:at+int64(e.packSize)], e.packed) {
				t.Fatalf("entry %q: got other packed bytes than the standard library, %v", e.name, err)
			}
			if e.size > 1<<22 { // a fuzzer is to try many small ones
				continue
			}
			var ours bytes.Buffer
			if e.writeTo(&ours) != nil {
				continue
			}
			r, err := g.Open()
			if err != nil {
				t.Fatalf("entry %q: passed, and the standard library says %v", e.name, err)
			}
			theirs, err := io.ReadAll(r)
			if err != nil || !bytes.Equal(ours.Bytes(), theirs) {
				t.Fatalf("entry %q: got %d bytes, the standard library %d, %v", e.name, ours.Len(), len(theirs), err)
			}
		}
	})
}
