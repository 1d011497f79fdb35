package opcsign

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"slices"
)

// Bounds on what is read. A part within the last two is unpacked; beyond, the package is refused as unreadable.
const (
	maxFile   = 256 << 20 // bytes of a package
	maxPart   = 2 << 30   // bytes of an unpacked part
	maxTotal  = 4 << 30   // bytes of all unpacked parts together
	easyPart  = 64 << 20  // up to here any ratio is accepted
	maxRatio  = 200       // unpacked to packed size, beyond easyPart
	maxParsed = 16 << 20  // bytes of a part that is read as XML here
)

// entry is one file of the archive.
type entry struct {
	name     string // as in the directory, without a leading slash
	method   uint16
	flags    uint16
	crc      uint32
	packed   []byte
	size     int64 // unpacked
	offset   int   // of the local header
	packSize int
	doubled  bool // another entry has the same name
}

// archive is a zip archive, read by its directory and held against its local headers.
type archive struct {
	entries []*entry
	byName  map[string]*entry // the first of a name
	reasons []Reason
}

// Signatures of the three zip records that are expected (APPNOTE.TXT 4.3.7, 4.3.12, 4.3.16) and of the descriptor
// (4.3.9).
var (
	localMark      = []byte("PK\x03\x04")
	directoryMark  = []byte("PK\x01\x02")
	endMark        = []byte("PK\x05\x06")
	descriptorMark = []byte("PK\x07\x08")
)

const (
	endSize       = 22
	directorySize = 46
	localSize     = 30
)

func notPackage(format string, args ...any) error {
	return Reason{Code: codeNotPackage, Text: fmt.Sprintf("package: "+format+", want a workbook (.xlsx); do choose another file", args...)}
}

func (a *archive) fault(code, name, format string, args ...any) {
	part := ""
	if name != "" {
		part = "/" + name
	}
	a.reasons = append(a.reasons, Reason{Code: code, Part: part, Text: fmt.Sprintf(format, args...)})
}

// openArchive reads the directory. Whatever is irregular but readable is a reason; an error means that the bytes are no
// archive at all.
func openArchive(pkg []byte) (*archive, error) {
	if len(pkg) > maxFile {
		return nil, Reason{Code: codeTooLarge, Text: fmt.Sprintf("package: found %d bytes, want at most %d; do split the record", len(pkg), maxFile)}
	}
	a := &archive{byName: map[string]*entry{}}
	end, err := a.findEnd(pkg)
	if err != nil {
		return nil, err
	}
	le := binary.LittleEndian
	rec := pkg[end:]
	count, size, offset := int(le.Uint16(rec[10:])), int(le.Uint32(rec[12:])), int(le.Uint32(rec[16:]))
	if le.Uint32(rec[4:]) != 0 || int(le.Uint16(rec[8:])) != count {
		return nil, notPackage("found an archive of several volumes")
	}
	base := end - size - offset
	if base < 0 {
		return nil, notPackage("found an archive whose directory lies outside it")
	}
	if base > 0 {
		a.fault(codeZipGap, "", "archive: found %d bytes that belong to no entry, want none; do get the file from its source again", base)
	}
	if err := a.readDirectory(pkg[end-size : end]); err != nil {
		return nil, err
	}
	if len(a.entries) != count {
		a.fault(codeZipMismatch, "", "archive: found %d entries in the directory, want %d as it says; do get the file from its source again", len(a.entries), count)
	}
	if err := a.readLocal(pkg, base, end-size); err != nil {
		return nil, err
	}
	a.checkNames()
	return a, nil
}

// findEnd looks for the end record. It has to be the last 22 bytes; elsewhere it is a reason.
func (a *archive) findEnd(pkg []byte) (int, error) {
	for i := len(pkg) - endSize; i >= 0 && i >= len(pkg)-endSize-0xffff; i-- {
		if !bytes.HasPrefix(pkg[i:], endMark) {
			continue
		}
		comment := int(binary.LittleEndian.Uint16(pkg[i+20:]))
		rest := len(pkg) - i - endSize - comment
		if rest < 0 {
			continue
		}
		if comment > 0 {
			a.fault(codeZipComment, "", "archive: found a comment of %d bytes, want none; do get the file from its source again", comment)
		}
		if rest > 0 {
			a.fault(codeZipTrailing, "", "archive: found %d bytes after its end, want none; do get the file from its source again", rest)
		}
		return i, nil
	}
	return 0, notPackage("found no zip archive")
}

// readDirectory reads the central directory.
func (a *archive) readDirectory(dir []byte) error {
	le := binary.LittleEndian
	for len(dir) > 0 {
		if len(dir) < directorySize || !bytes.HasPrefix(dir, directoryMark) {
			return notPackage("found a damaged directory after %d entries", len(a.entries))
		}
		n, x, c := int(le.Uint16(dir[28:])), int(le.Uint16(dir[30:])), int(le.Uint16(dir[32:]))
		if len(dir) < directorySize+n+x+c {
			return notPackage("found a damaged directory after %d entries", len(a.entries))
		}
		e := &entry{
			name: string(dir[directorySize : directorySize+n]), flags: le.Uint16(dir[8:]), method: le.Uint16(dir[10:]), crc: le.Uint32(dir[16:]),
			packSize: int(le.Uint32(dir[20:])), size: int64(le.Uint32(dir[24:])), offset: int(le.Uint32(dir[42:])),
		}
		if c > 0 {
			a.fault(codeZipComment, e.name, "archive entry: found a comment of %d bytes, want none; do get the file from its source again", c)
		}
		a.checkExtra(e.name, dir[directorySize+n:directorySize+n+x])
		a.entries = append(a.entries, e)
		dir = dir[directorySize+n+x+c:]
	}
	return nil
}

// checkExtra refuses the extra fields that give an entry another name or size (Unicode path 0x7075, zip64 0x0001).
func (a *archive) checkExtra(name string, x []byte) {
	for len(x) >= 4 {
		id, n := binary.LittleEndian.Uint16(x), int(binary.LittleEndian.Uint16(x[2:]))
		if id == 0x7075 || id == 0x0001 || n > len(x)-4 {
			a.fault(codeZipMismatch, name, "archive entry: found the extra field %#04x, want none that renames or resizes; do get the file from its source again", id)
			return
		}
		x = x[4+n:]
	}
	if len(x) > 0 {
		a.fault(codeZipMismatch, name, "archive entry: found %d bytes after its extra fields, want none; do get the file from its source again", len(x))
	}
}

// readLocal holds the local headers against the directory. In order of their offsets the entries have to tile the bytes
// from the start of the archive to the directory.
func (a *archive) readLocal(pkg []byte, base, dir int) error {
	sorted := slices.Clone(a.entries)
	slices.SortStableFunc(sorted, func(x, y *entry) int { return x.offset - y.offset })
	pos := base
	for _, e := range sorted {
		at := base + e.offset
		if at > dir-localSize || !bytes.HasPrefix(pkg[at:], localMark) {
			return notPackage("found no entry where the directory puts %q", e.name)
		}
		if at != pos {
			a.fault(codeZipGap, e.name, "archive: found the entry at byte %d, want it at %d where the one before ends; do get the file from its source again", at, pos)
		}
		end, err := a.readOne(pkg[:dir], at, e)
		if err != nil {
			return err
		}
		pos = end
	}
	if pos != dir {
		a.fault(codeZipGap, "", "archive: found the directory at byte %d, want it at %d where the last entry ends; do get the file from its source again", dir, pos)
	}
	return nil
}

// readOne reads the local header at a place and gives the place after the entry.
func (a *archive) readOne(pkg []byte, at int, e *entry) (int, error) {
	le := binary.LittleEndian
	h := pkg[at:]
	n, x := int(le.Uint16(h[26:])), int(le.Uint16(h[28:]))
	data := localSize + n + x
	if len(h) < data+e.packSize {
		return 0, notPackage("found the entry %q cut off", e.name)
	}
	e.packed = h[data : data+e.packSize : data+e.packSize]
	a.checkExtra(e.name, h[localSize+n:data])
	described := e.flags&8 != 0
	crc, packed, size := le.Uint32(h[14:]), int(le.Uint32(h[18:])), int64(le.Uint32(h[22:]))
	blank := described && crc == 0 && packed == 0 && size == 0
	same := crc == e.crc && packed == e.packSize && size == e.size
	if string(h[localSize:localSize+n]) != e.name || le.Uint16(h[6:]) != e.flags || le.Uint16(h[8:]) != e.method || !blank && !same {
		a.fault(codeZipMismatch, e.name, "archive entry: found a local header that differs from the directory, want the same; do get the file from its source again")
	}
	end := data + e.packSize
	if described {
		d := bytes.TrimPrefix(h[end:], descriptorMark)
		if len(d) < 12 || le.Uint32(d) != e.crc || int(le.Uint32(d[4:])) != e.packSize || int64(le.Uint32(d[8:])) != e.size {
			a.fault(codeZipMismatch, e.name, "archive entry: found a descriptor that differs from the directory, want the same; do get the file from its source again")
			return at + end, nil
		}
		end = len(h) - len(d) + 12
	}
	return at + end, nil
}

// checkNames refuses doubled names and names that are no part names.
func (a *archive) checkNames() {
	seen := map[string]*entry{}
	for _, e := range a.entries {
		if problem := nameProblem(e.name); problem != "" {
			a.fault(codeZipName, e.name, "archive entry %q: found %s, want a part name; do get the file from its source again", e.name, problem)
		}
		if e.flags&1 != 0 || e.method != 0 && e.method != 8 {
			a.fault(codeZipMethod, e.name, "archive entry: found method %d and flags %#x, want stored or deflate without encryption; do save the file again", e.method, e.flags)
		}
		low := lower(e.name)
		if first := seen[low]; first != nil {
			first.doubled, e.doubled = true, true
			a.fault(codeZipDuplicate, e.name, "archive: found the names %q and %q, want each name once, case apart; do get the file from its source again", first.name, e.name)
			continue
		}
		seen[low] = e
		a.byName[e.name] = e
	}
}
