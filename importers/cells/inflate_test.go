package cells

import (
	"bytes"
	"compress/flate"
	"io"
	"math/rand/v2"
	"strings"
	"testing"
	"testing/iotest"
)

// unpack gives what a reader makes of packed bytes.
func unpack(r io.Reader) ([]byte, bool) {
	b, err := io.ReadAll(io.LimitReader(r, 1<<22))
	return b, err == nil
}

// samples are texts of every likeness, some longer than the history.
func samples() [][]byte {
	random := rand.New(rand.NewPCG(3, 9))
	noise := make([]byte, 100000)
	skewed := make([]byte, 300000)
	for i := range noise {
		noise[i] = byte(random.Uint32())
	}
	for i := range skewed { // symbols of very unlike frequency make long codes
		skewed[i] = byte(random.ExpFloat64() * 12)
	}
	sheet, _, _ := func() (string, string, []Cell) { _, a, b, c := makeSheet(5); return a, b, c }()
	return [][]byte{
		nil, []byte("a"), []byte("abcabcabc"), bytes.Repeat([]byte("x"), 70000), noise, skewed, []byte(strings.Repeat(sheet, 300)),
		append(bytes.Clone(noise[:40000]), append(bytes.Clone(skewed[:60000]), noise[:40000]...)...),
	}
}

func TestInflate(t *testing.T) {
	for i, want := range samples() {
		for level := flate.HuffmanOnly; level <= flate.BestCompression; level++ {
			var b bytes.Buffer
			w, err := flate.NewWriter(&b, level)
			if err != nil {
				t.Fatal(err)
			}
			half := len(want) / 2
			for _, part := range [][]byte{want[:half], want[half:]} {
				if _, err := w.Write(part); err != nil {
					t.Fatal(err)
				}
				if err := w.Flush(); err != nil { // ends a block and begins a stored one
					t.Fatal(err)
				}
			}
			if err := w.Close(); err != nil {
				t.Fatal(err)
			}
			for name, r := range map[string]io.Reader{"whole": bytes.NewReader(b.Bytes()), "bytes": iotest.OneByteReader(bytes.NewReader(b.Bytes())), "end with the data": iotest.DataErrReader(bytes.NewReader(b.Bytes()))} {
				if got, ok := unpack(newInflater(r)); !ok || !bytes.Equal(got, want) {
					t.Errorf("sample %d, level %d, %s: got %d bytes, %v, want %d", i, level, name, len(got), ok, len(want))
				}
			}
			for _, n := range []int{0, b.Len() / 3, b.Len() - 1} {
				if _, ok := unpack(newInflater(bytes.NewReader(b.Bytes()[:n]))); ok {
					t.Errorf("sample %d, level %d: got no error from the first %d of %d bytes", i, level, n, b.Len())
				}
			}
		}
	}
}

// FuzzInflate holds damaged data against compress/flate: the same bytes, and an error where it has one.
func FuzzInflate(f *testing.F) {
	for _, s := range samples() {
		for _, level := range []int{flate.HuffmanOnly, 0, 1, 9} {
			var b bytes.Buffer
			w, err := flate.NewWriter(&b, level)
			if err != nil {
				f.Fatal(err)
			}
			_, _ = w.Write(s[:min(len(s), 2000)])
			_ = w.Close()
			f.Add(b.Bytes())
		}
	}
	f.Fuzz(func(t *testing.T, packed []byte) {
		want, wantOK := unpack(flate.NewReader(bytes.NewReader(packed)))
		got, ok := unpack(newInflater(bytes.NewReader(packed)))
		if ok != wantOK || ok && !bytes.Equal(got, want) {
			t.Fatalf("got %d bytes, %v, want %d, %v", len(got), ok, len(want), wantOK)
		}
	})
}
