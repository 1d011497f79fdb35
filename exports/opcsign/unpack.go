package opcsign

import (
	"bytes"
	"compress/flate"
	"errors"
	"fmt"
	"hash"
	"hash/crc32"
	"io"
)

// bounds says whether every part may be unpacked.
func (a *archive) bounds() error {
	var total int64
	for _, e := range a.entries {
		if err := e.bounds(); err != nil {
			return err
		}
		total += e.size
	}
	if total > maxTotal {
		return Reason{Code: codeTooLarge, Text: fmt.Sprintf("package: found parts of %d bytes together, want at most %d; do split the record", total, int64(maxTotal))}
	}
	return nil
}

func (e *entry) bounds() error {
	switch {
	case e.size > maxPart:
		return Reason{Code: codeTooLarge, Part: "/" + e.name, Text: fmt.Sprintf("found %d bytes unpacked, want at most %d; do split the record", e.size, int64(maxPart))}
	case e.size > easyPart && e.size > maxRatio*int64(e.packSize):
		return Reason{Code: codeTooLarge, Part: "/" + e.name, Text: fmt.Sprintf("found %d bytes packed into %d, want at most %d times the packed size; do get the file from its source again", e.size, e.packSize, maxRatio)}
	}
	return nil
}

// writeTo unpacks the entry.
func (e *entry) writeTo(w io.Writer) error {
	r, err := e.open()
	if err != nil {
		return err
	}
	_, err = io.Copy(w, r)
	return err
}

// open is the entry unpacked as it is read. The bytes have to have the size and the check sum of the directory, and the packed
// bytes have to be used up, so nothing can hide behind them; where that does not hold, reading to the end fails.
func (e *entry) open() (io.Reader, error) {
	if err := e.bounds(); err != nil {
		return nil, err
	}
	if e.flags&1 != 0 || e.method != 0 && e.method != 8 {
		return nil, e.damaged("another way of packing than deflate")
	}
	u := &unpacking{e: e, packed: bytes.NewReader(e.packed), sum: crc32.NewIEEE()}
	u.from = u.packed
	if e.method == 8 {
		u.from = flate.NewReader(u.packed)
	}
	return u, nil
}

// unpacking is an entry being unpacked.
type unpacking struct {
	e      *entry
	packed *bytes.Reader
	from   io.Reader
	sum    hash.Hash32
	n      int64
}

func (u *unpacking) Read(p []byte) (int, error) {
	n, err := u.from.Read(p)
	_, _ = u.sum.Write(p[:n]) // a hash does not fail
	u.n += int64(n)
	switch {
	case u.n > u.e.size:
		return 0, u.e.damaged(fmt.Sprintf("more than %d bytes where the directory says so many", u.e.size))
	case err == nil:
		return n, nil
	case !errors.Is(err, io.EOF):
		return 0, u.e.damaged(err.Error())
	case u.n != u.e.size:
		return 0, u.e.damaged(fmt.Sprintf("%d bytes where the directory says %d", u.n, u.e.size))
	case u.sum.Sum32() != u.e.crc:
		return 0, u.e.damaged(fmt.Sprintf("check sum %08x where the directory says %08x", u.sum.Sum32(), u.e.crc))
	case u.packed.Len() > 0:
		return 0, u.e.damaged(fmt.Sprintf("%d bytes after the packed content", u.packed.Len()))
	}
	return n, io.EOF
}

func (e *entry) damaged(what string) error {
	return Reason{Code: codeDamaged, Part: "/" + e.name, Text: "found " + what + ", want the part as it was written; do get the file from its source again"}
}

// read unpacks an entry that is to be parsed here, and therefore is small.
func (e *entry) read() ([]byte, error) {
	if e.size > maxParsed {
		return nil, Reason{Code: codeTooLarge, Part: "/" + e.name, Text: fmt.Sprintf("found %d bytes, want at most %d; do get the file from its source again", e.size, maxParsed)}
	}
	var b bytes.Buffer
	if err := e.writeTo(&b); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// ReadPart reads one part of a package, whether signed or not, within bounds: the file has at most 256 MiB, the part at
// most 2 GiB, and above 64 MiB at most 200 times its packed size. The name begins with a slash.
func ReadPart(pkg []byte, name string) ([]byte, error) {
	r, _, err := OpenPart(pkg, name)
	if err != nil {
		return nil, err
	}
	return io.ReadAll(r)
}

// OpenPart is ReadPart for a part that is read along: a reader and how many bytes it gives. Only reading to its end shows that
// the part is whole.
func OpenPart(pkg []byte, name string) (io.Reader, int64, error) {
	a, err := openArchive(pkg)
	if err != nil {
		return nil, 0, err
	}
	e := a.byName[trimSlash(name)]
	switch {
	case e == nil:
		return nil, 0, Reason{Code: codePartMissing, Part: name, Text: "found no such part, want it in the package; do choose a record made by this program"}
	case e.doubled:
		return nil, 0, Reason{Code: codeZipDuplicate, Part: name, Text: "found the part twice, want it once; do get the file from its source again"}
	}
	r, err := e.open()
	return r, e.size, err
}
