package exports_test

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"io"
	"regexp"
	"slices"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// kit is a record's package taken apart, to be put together again with a fault.
type kit struct {
	t     testing.TB
	names []string
	data  map[string]string
}

func takeApart(t testing.TB, pkg []byte) *kit {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		t.Fatal(err)
	}
	k := &kit{t: t, data: map[string]string{}}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		k.set(f.Name, string(b))
	}
	return k
}

func (k *kit) set(name, content string) {
	if _, ok := k.data[name]; !ok {
		k.names = append(k.names, name)
	}
	k.data[name] = content
}

func (k *kit) remove(name string) {
	k.get(name)
	k.names = slices.DeleteFunc(k.names, func(n string) bool { return n == name })
	delete(k.data, name)
}

func (k *kit) get(name string) string {
	k.t.Helper()
	s, ok := k.data[name]
	if !ok {
		k.t.Fatalf("no part %s among %v", name, k.names)
	}
	return s
}

// swap replaces text that has to be there, once.
func (k *kit) swap(name, old, by string) {
	k.t.Helper()
	if !strings.Contains(k.get(name), old) {
		k.t.Fatalf("%s: no %q in it", name, old)
	}
	k.data[name] = strings.Replace(k.data[name], old, by, 1)
}

// match replaces what a pattern finds, at least one.
func (k *kit) match(name, pattern, by string) {
	k.t.Helper()
	re := regexp.MustCompile("(?s)" + pattern)
	if !re.MatchString(k.get(name)) {
		k.t.Fatalf("%s: no %s in it", name, pattern)
	}
	k.data[name] = re.ReplaceAllString(k.data[name], by)
}

// typed adds a part with its content type.
func (k *kit) typed(name, content, typ string) {
	k.set(name, content)
	k.swap(typesEntry, "</Types>", `<Override PartName="/`+name+`" ContentType="`+typ+`"/></Types>`)
}

func (k *kit) bytes() []byte {
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, n := range k.names {
		e, err := w.Create(n)
		if err != nil {
			k.t.Fatal(err)
		}
		if _, err := io.WriteString(e, k.data[n]); err != nil {
			k.t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		k.t.Fatal(err)
	}
	return b.Bytes()
}

// unsign takes a signature away without a trace.
func (k *kit) unsign(name string) {
	k.t.Helper()
	k.remove("_xmlsignatures/" + name)
	k.match(originRels, `<Relationship [^>]*Target="`+name+`"/>`, "")
	k.match(typesEntry, `<Override PartName="/_xmlsignatures/`+name+`"[^>]*/>`, "")
}

// unsignAll takes all signatures away, and with them their origin.
func (k *kit) unsignAll() {
	k.t.Helper()
	for _, n := range slices.Clone(k.names) {
		if strings.HasPrefix(n, "_xmlsignatures/") {
			k.remove(n)
		}
	}
	k.match("_rels/.rels", `<Relationship [^>]*origin.sigs"/>`, "")
	k.match(typesEntry, `<Override PartName="/_xmlsignatures/[^>]*/>`, "")
	k.match(typesEntry, `<Default Extension="sigs"[^>]*/>`, "")
}

const (
	typesEntry = "[Content_Types].xml"
	originRels = "_xmlsignatures/_rels/origin.sigs.rels"
	sig1       = "_xmlsignatures/sig1.xml"
	sig2       = "_xmlsignatures/sig2.xml"
	item       = "customXml/item1.xml"
	bookRels   = "xl/_rels/workbook.xml.rels"
	sheetType  = "application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"
	office     = "http://schemas.openxmlformats.org/officeDocument/2006/relationships/"
)

// fault is one thing done to a record: edit changes parts, raw the bytes of the archive.
type fault struct {
	name  string
	state exports.State // changed where empty
	code  string        // of a reason
	edit  func(k *kit)
	raw   func(t testing.TB, pkg []byte) []byte
}

func (f fault) on(t testing.TB, pkg []byte) []byte {
	t.Helper()
	if f.edit != nil {
		k := takeApart(t, pkg)
		f.edit(k)
		pkg = k.bytes()
	}
	if f.raw != nil {
		pkg = f.raw(t, pkg)
	}
	return pkg
}

// twice is a record that needs two signatures and has them, and those who gave them.
func twice(t testing.TB) ([]byte, identity.Identity, identity.Identity) {
	t.Helper()
	rec := record(t)
	rec.Plan.Signatures = []qa.Required{{Meaning: "prepared"}, {Meaning: "reviewed"}}
	ada, bert := person(t, "Ada Quill"), person(t, "Bert Oakes")
	pkg, err := exports.SignFirst(rec, ada, opcsign.Statement{Meaning: "prepared", Reason: "a reason", Time: when, Zone: "CET"})
	if err != nil {
		t.Fatal(err)
	}
	if pkg, err = exports.Sign(pkg, bert, opcsign.Statement{Meaning: "reviewed", Disposition: "released", Time: when.AddDate(0, 0, 1)}); err != nil {
		t.Fatal(err)
	}
	return pkg, ada, bert
}

func hasCode(v exports.Verification, code string) bool {
	return slices.ContainsFunc(v.Reasons, func(r opcsign.Reason) bool { return r.Code == code })
}

// TestTamper does one thing a case to a record signed twice, and wants it refused with the state and the reason that are right.
func TestTamper(t *testing.T) {
	pkg, _, _ := twice(t)
	if v := exports.Verify(pkg, nil); v.State != exports.Intact || !v.Rebuilt {
		t.Fatalf("untouched: got %s, %v, rebuilt %v; want it intact and rebuilt", v.State, v.Reasons, v.Rebuilt)
	}
	cases := slices.Concat(cellFaults, recordFaults, pageFaults, packageFaults, archiveFaults, signatureFaults, stateFaults)
	t.Logf("%d kinds", len(cases))
	seen := map[string]bool{}
	for _, c := range cases {
		if seen[c.name] {
			t.Errorf("%s: got two cases of this name, want one", c.name)
		}
		seen[c.name] = true
		t.Run(c.name, func(t *testing.T) {
			want := c.state
			if want == "" {
				want = exports.Changed
			}
			v := exports.Verify(c.on(t, pkg), nil)
			if v.State != want {
				t.Errorf("got %s, want %s; reasons %v", v.State, want, v.Reasons)
			}
			if c.code != "" && !hasCode(v, c.code) {
				t.Errorf("got the reasons %v, want %s", v.Reasons, c.code)
			}
			if c.code == "" && len(v.Reasons)+len(v.MissingMeanings) == 0 && v.State != exports.Unsigned {
				t.Errorf("got %s without a reason", v.State)
			}
		})
	}
}

// TestTamperSigned does the same to a record before it is signed, and has it signed past our own checks: the signature is right,
// and the workbook is not what its record gives.
func TestTamperSigned(t *testing.T) {
	ada := person(t, "Ada Quill")
	rec := record(t)
	rec.Signer = &qa.Signer{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when, Fingerprint: ada.Fingerprint()}
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	sign := func(pkg []byte) []byte {
		out, err := opcsign.Sign(pkg, ada.Key, ada.Chain, opcsign.Statement{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: "prepared", Time: when})
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	if v := exports.Verify(sign(pkg), nil); v.State != exports.Intact || !v.Rebuilt {
		t.Fatalf("untouched: got %s, %v", v.State, v.Reasons)
	}
	cases := slices.Concat(cellFaults, pageFaults, signedFaults)
	t.Logf("%d kinds", len(cases))
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			v := exports.Verify(sign(c.on(t, pkg)), nil)
			if v.State != exports.Disagrees || len(v.Differences) == 0 || v.Rebuilt {
				t.Errorf("got %s, %v, rebuilt %v; want it to disagree", v.State, v.Differences, v.Rebuilt)
			}
			if !hasCode(v, "sheets-differ") && !hasCode(v, "parts-differ") && !hasCode(v, "record-form") {
				t.Errorf("got the reasons %v, want that sheets or parts differ", v.Reasons)
			}
		})
	}
}

// insert puts bytes at a place before the directory and moves the directory's offsets behind it.
func insert(pkg []byte, at int, extra []byte) []byte {
	const endSize, directorySize = 22, 46
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
