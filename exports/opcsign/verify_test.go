package opcsign

import (
	"bytes"
	"encoding/binary"
	"strings"
	"testing"
)

func TestUnsigned(t *testing.T) {
	b := workbook(t)
	r, err := Verify(b, nil)
	if err != nil || len(r.Signatures)+len(r.Reasons)+len(r.UnsignedParts) > 0 || r.Sound() || HasSignature(b) {
		t.Errorf("got %+v, %v, signature %v, want an empty report that is not sound", r, err, HasSignature(b))
	}
}

func TestLastRemoved(t *testing.T) {
	p := takeApart(t, signed(t, 3))
	removeSignature(p, "sig3.xml")
	if r, err := Verify(p.bytes(), nil); err != nil || !r.Sound() || len(r.Signatures) != 2 {
		t.Errorf("got %v, %v, want a sound package of two signatures: the missing meaning is for the record to say", codes(r), err)
	}
}

func TestUnreadable(t *testing.T) {
	for name, b := range map[string][]byte{
		"nothing": nil, "text": []byte("PK hello"), "cut off": workbook(t)[:2000], "empty archive": append([]byte("PK\x05\x06"), make([]byte, 18)...),
	} {
		if r, err := Verify(b, nil); err == nil {
			t.Errorf("%s: got %+v, want an error", name, r)
		} else if reason, ok := err.(Reason); !ok || reason.Code != codeNotPackage {
			t.Errorf("%s: got %v, want %s", name, err, codeNotPackage)
		}
	}
}

func TestHasSignature(t *testing.T) {
	b := signed(t, 1)
	for name, b := range map[string][]byte{"sound": b, "cut off": b[:len(b)-400], "in capitals": bytes.ReplaceAll(b, []byte("_xmlsignatures"), []byte("_XMLSIGNATURES"))} {
		if !HasSignature(b) {
			t.Errorf("%s: got none, want one", name)
		}
	}
}

func TestReadPart(t *testing.T) {
	b := signed(t, 1)
	if got, err := ReadPart(b, "/docProps/custom.xml"); err != nil || !strings.Contains(string(got), "47-B") {
		t.Errorf("got %q, %v, want the part", got, err)
	}
	for _, name := range []string{"/none.xml", "", "/", "/docProps/core.xml"} {
		if _, err := ReadPart(b, name); err == nil {
			t.Errorf("%q: got a part, want an error", name)
		}
	}
	p := takeApart(t, b)
	p.set("xl/bomb.xml", strings.Repeat(" ", easyPart+1))
	p.set("xl/large.xml", strings.Repeat(" ", easyPart))
	bomb := p.bytes()
	_, err := ReadPart(bomb, "/xl/bomb.xml")
	reason, ok := err.(Reason)
	if !ok || reason.Code != codeTooLarge || reason.Part != "/xl/bomb.xml" || !strings.Contains(reason.Text, "200") {
		t.Errorf("got %v, want a refusal that names the part and the bound", err)
	}
	if got, err := ReadPart(bomb, "/xl/large.xml"); err != nil || len(got) != easyPart {
		t.Errorf("got %d bytes, %v, want %d", len(got), err, easyPart)
	}
	if _, err := Verify(bomb, nil); err == nil {
		t.Error("got a report, want an error")
	}
	// A directory that says a smaller size than there is does not help.
	i := bytes.LastIndex(b, []byte("docProps/custom.xml")) - directorySize
	small := bytes.Clone(b)
	binary.LittleEndian.PutUint32(small[i+24:], 3)
	if got, err := ReadPart(small, "/docProps/custom.xml"); err == nil {
		t.Errorf("got %q, want an error", got)
	}
}

// FuzzVerify: no bytes make it panic, and what is sound was signed.
func FuzzVerify(f *testing.F) {
	f.Add(signed(f, 2))
	f.Add(workbook(f))
	for _, c := range signatureCases {
		p := takeApart(f, signed(f, 2))
		c.edit(p)
		f.Add(p.bytes())
	}
	f.Fuzz(func(_ *testing.T, b []byte) {
		HasSignature(b)
		if _, err := Verify(b, nil); err == nil {
			_, _ = ReadPart(b, "/xl/workbook.xml")
		}
	})
}

// FuzzSignaturePart puts any bytes in the place of a signature.
func FuzzSignaturePart(f *testing.F) {
	base := takeApart(f, signed(f, 1))
	f.Add(base.data[sig1])
	for _, c := range signatureCases {
		p := takeApart(f, signed(f, 2))
		c.edit(p)
		f.Add(p.data[sig1])
	}
	f.Fuzz(func(t *testing.T, s string) {
		p := &pack{t: t, names: base.names, data: map[string]string{}}
		for k, v := range base.data {
			p.data[k] = v
		}
		p.data[sig1] = s
		if _, err := Verify(p.bytes(), nil); err != nil {
			t.Errorf("got %v, want a report", err)
		}
	})
}

func BenchmarkSign(b *testing.B) {
	book, id := workbook(b), key(b, "prepared")
	for b.Loop() {
		if _, err := Sign(book, id.Key, id.Chain, statement(id, "prepared")); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkVerify(b *testing.B) {
	book := signed(b, 3)
	for b.Loop() {
		if r, err := Verify(book, nil); err != nil || !r.Sound() {
			b.Fatal(err, codes(r))
		}
	}
}
