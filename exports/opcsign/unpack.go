package opcsign

import (
	"bytes"
	"compress/flate"
	"fmt"
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

// writeTo unpacks the entry. The bytes have to have the size and the check sum of the directory, and the packed bytes
// have to be used up, so nothing can hide behind them.
func (e *entry) writeTo(w io.Writer) error {
	if err := e.bounds(); err != nil {
		return err
	}
	packed := bytes.NewReader(e.packed)
	var r io.Reader = packed
	if e.method == 8 {
		r = flate.NewReader(packed)
	}
	sum := crc32.NewIEEE()
	n, err := io.Copy(io.MultiWriter(w, sum), io.LimitReader(r, e.size+1))
	switch {
	case e.flags&1 != 0 || e.method != 0 && e.method != 8:
		return e.damaged("another way of packing than deflate")
	case err != nil:
		return e.damaged(err.Error())
	case n != e.size:
		return e.damaged(fmt.Sprintf("%d bytes or more where the directory says %d", n, e.size))
	case sum.Sum32() != e.crc:
		return e.damaged(fmt.Sprintf("check sum %08x where the directory says %08x", sum.Sum32(), e.crc))
	case packed.Len() > 0:
		return e.damaged(fmt.Sprintf("%d bytes after the packed content", packed.Len()))
	}
	return nil
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
	a, err := openArchive(pkg)
	if err != nil {
		return nil, err
	}
	e := a.byName[trimSlash(name)]
	switch {
	case e == nil:
		return nil, Reason{Code: codePartMissing, Part: name, Text: "found no such part, want it in the package; do choose a record made by this program"}
	case e.doubled:
		return nil, Reason{Code: codeZipDuplicate, Part: name, Text: "found the part twice, want it once; do get the file from its source again"}
	}
	var b bytes.Buffer
	if err := e.writeTo(&b); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}
