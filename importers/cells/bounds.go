package cells

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"
)

// The bounds of what is opened (contract: console).
const (
	MaxFile    = 256 << 20 // bytes of a file
	MaxPart    = 2 << 30   // bytes a part may unpack to, and all parts that are read together
	DenseFrom  = 64 << 20  // from here the ratio counts
	DenseRatio = 200       // unpacked to packed
	MaxParts   = 1 << 16   // parts of a package
	MaxCells   = 1 << 24   // cells, rows and merged areas of all sheets that are read; shared texts
	MaxText    = 1 << 20   // bytes of one text or tag
	MaxDepth   = 64        // elements inside one another
)

// BoundError says that a file or a part of it is larger than what is opened.
type BoundError struct {
	Part  string // empty for the file itself
	Found string
	Bound string
	Do    string // empty: use a smaller file
}

// Error names the part, the bound and what to do.
func (e *BoundError) Error() string {
	place := "the file"
	if e.Part != "" {
		place = "part " + e.Part
	}
	do := e.Do
	if do == "" {
		do = "use a smaller file"
	}
	return fmt.Sprintf("%s: found %s, want %s; %s", place, e.Found, e.Bound, do)
}

// FormatError says that a file is not a sound workbook.
type FormatError struct {
	Part  string // empty for the file itself
	Found string
	Want  string
	Do    string
}

// Error says what was found, what was wanted and what to do.
func (e *FormatError) Error() string {
	text := fmt.Sprintf("found %s, want %s; %s", e.Found, e.Want, e.Do)
	if e.Part != "" {
		return "part " + e.Part + ": " + text
	}
	return text
}

func damaged(part, format string, args ...any) error {
	return &FormatError{Part: part, Found: fmt.Sprintf(format, args...), Want: "a sound .xlsx workbook", Do: "open it in the spreadsheet program and save it again as .xlsx"}
}

// pack is an opened zip package: part names in lower case, without the leading slash, to parts.
type pack struct {
	parts map[string]*zip.File
	read  int64 // bytes unpacked so far
	whole int64 // bytes that the parts with cells and texts say they unpack to
	told  int64 // read when the watch was told last
	watch Watch
}

func openPack(data []byte, watch Watch) (*pack, error) {
	if len(data) > MaxFile {
		return nil, &BoundError{Found: fmt.Sprintf("%d bytes", len(data)), Bound: "at most 256 MiB"}
	}
	if err := notZip(data); err != nil {
		return nil, err
	}
	if n := bytes.Count(data, []byte("PK\x01\x02")); n > MaxParts { // the marks of the directory, before room is made for it
		return nil, &BoundError{Found: fmt.Sprintf("%d parts", n), Bound: fmt.Sprintf("at most %d", MaxParts)}
	}
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return nil, &FormatError{
			Found: "a damaged or cut-off zip package (" + strings.TrimPrefix(err.Error(), "zip: ") + ")",
			Want:  "a whole .xlsx workbook", Do: "copy the file again from where it came",
		}
	}
	z.RegisterDecompressor(zip.Deflate, newInflater)
	p := &pack{parts: map[string]*zip.File{}, watch: watch}
	for _, f := range z.File {
		if strings.HasSuffix(f.Name, "/") {
			continue
		}
		if err := bounded(f); err != nil {
			return nil, err
		}
		key := strings.ToLower(strings.TrimPrefix(f.Name, "/"))
		if _, twice := p.parts[key]; twice {
			return nil, damaged(f.Name, "the same part twice")
		}
		p.parts[key] = f
		if strings.HasSuffix(key, ".xml") {
			p.whole = min(p.whole+int64(f.UncompressedSize64), MaxPart)
		}
	}
	return p, nil
}

// bounded checks what a part says of itself; part.Read checks what it is.
func bounded(f *zip.File) error {
	if f.Flags&1 != 0 {
		return &FormatError{Part: f.Name, Found: "an encrypted part", Want: "a workbook without a password", Do: "save it without a password"}
	}
	return dense(f.Name, f.UncompressedSize64, f.CompressedSize64)
}

func dense(name string, unpacked, packed uint64) error {
	if unpacked > MaxPart {
		return &BoundError{Part: name, Found: fmt.Sprintf("%d bytes unpacked", unpacked), Bound: "at most 2 GiB"}
	}
	if unpacked > DenseFrom && unpacked > DenseRatio*packed {
		return &BoundError{Part: name, Found: fmt.Sprintf("%d bytes from %d packed", unpacked, packed), Bound: "at most 64 MiB, or 200 times the packed size"}
	}
	return nil
}

// notZip recognises what is often named .xlsx and is none.
func notZip(data []byte) error {
	not := func(found, do string) error {
		return &FormatError{Found: found, Want: "an .xlsx workbook", Do: do}
	}
	start := data[:min(len(data), 512)]
	trimmed := bytes.ToLower(bytes.TrimLeft(bytes.TrimPrefix(start, []byte("\xef\xbb\xbf")), " \t\r\n"))
	switch {
	case len(data) == 0:
		return not("an empty file", "copy the file again from where it came")
	case bytes.HasPrefix(data, []byte("\xd0\xcf\x11\xe0")):
		return not("an old .xls (or password-protected) file", "this is an old .xls (or password-protected) file; save it as .xlsx")
	case bytes.HasPrefix(data, []byte("PK")):
		return nil
	case bytes.HasPrefix(trimmed, []byte("<!doctype html")), bytes.HasPrefix(trimmed, []byte("<html")), bytes.HasPrefix(trimmed, []byte("<table")):
		return not("a web page", "open it in the spreadsheet program and save it as .xlsx")
	case bytes.HasPrefix(trimmed, []byte("<?xml")):
		return not("an XML file", "open it in the spreadsheet program and save it as .xlsx")
	case !bytes.ContainsRune(start, 0) && utf8.Valid(bytes.ToValidUTF8(start, nil)) && printable(start):
		return not("a text file", "name it .csv, or save it as .xlsx from the spreadsheet program")
	}
	return not("a file of another kind", "save it as .xlsx from the spreadsheet program")
}

func printable(b []byte) bool {
	for _, c := range b {
		if c < ' ' && c != '\t' && c != '\n' && c != '\r' {
			return false
		}
	}
	return true
}

// open starts reading one part; nil without an error where the package has none of that name.
func (p *pack) open(name string) (io.ReadCloser, error) {
	f := p.parts[strings.ToLower(name)]
	if f == nil {
		return nil, nil
	}
	r, err := f.Open()
	if err != nil {
		return nil, damaged(name, "a part that cannot be unpacked (%s)", strings.TrimPrefix(err.Error(), "zip: "))
	}
	return &part{pack: p, file: f, r: r}, nil
}

// part counts what is really unpacked, so that a lie in the zip directory stops at the same bounds.
type part struct {
	pack *pack
	file *zip.File
	r    io.ReadCloser
	n    uint64
}

// Read unpacks on, within the bounds.
func (p *part) Read(b []byte) (int, error) {
	n, err := p.r.Read(b)
	p.n += uint64(n)
	p.pack.read += int64(n)
	if bound := dense(p.file.Name, p.n, p.file.CompressedSize64); bound != nil {
		return n, bound
	}
	if p.pack.read > MaxPart {
		return n, &BoundError{Part: p.file.Name, Found: "more than 2 GiB in all parts read so far", Bound: "at most 2 GiB"}
	}
	if stop := p.pack.tell(p.file.Name); stop != nil {
		return n, stop
	}
	if err != nil && err != io.EOF {
		return n, damaged(p.file.Name, "a part that cannot be unpacked (%s)", strings.TrimPrefix(err.Error(), "zip: "))
	}
	return n, err
}

// Close ends the reading of the part.
func (p *part) Close() error { return p.r.Close() }
