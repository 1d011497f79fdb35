package cells

import (
	"encoding/binary"
	"errors"
	"io"
)

// inflater unpacks DEFLATE (RFC 1951). It is here beside compress/flate because unpacking is most of the time of a reading:
// it takes eight bytes of input at once and looks codes up in one or two steps. The zip package checks the sum of what it
// gives; the tests hold it against compress/flate.
type inflater struct {
	src      io.Reader
	in       [32 << 10]byte
	at, end  int    // in[at:end] is read and not yet taken
	padded   int    // bytes behind the end of the input, zeros, so that eight can always be taken at once
	hold     uint64 // bits taken from in
	bits     uint   // how many of hold are known
	out      [96 << 10]byte
	given    int // out[given:n] is unpacked and not yet given to the reader
	n        int
	stored   int // bytes left of a stored block
	inBlock  bool
	last     bool
	err      error
	literals huffman
	distance huffman
}

const history = 32 << 10

var errPacked = errors.New("damaged compressed data")

func newInflater(r io.Reader) io.ReadCloser { return &inflater{src: r} }

// Close has nothing to do.
func (z *inflater) Close() error { return nil }

// Read gives the next unpacked bytes.
func (z *inflater) Read(p []byte) (int, error) {
	for z.given == z.n {
		if z.err != nil {
			return 0, z.err
		}
		if len(p) == 0 {
			return 0, nil
		}
		if z.n > history { // what may be referred to moves to the front
			copy(z.out[:], z.out[z.n-history:z.n])
			z.n, z.given = history, history
		}
		z.err = z.step()
	}
	n := copy(p, z.out[z.given:z.n])
	z.given += n
	return n, nil
}

// step unpacks until the room is used or a block ends.
func (z *inflater) step() error {
	switch {
	case z.stored > 0:
		return z.copyStored()
	case z.inBlock:
		return z.codes()
	case z.last:
		return io.EOF
	}
	header, err := z.take(3)
	if err != nil {
		return err
	}
	z.last = header&1 != 0
	switch header >> 1 {
	case 0:
		return z.beginStored()
	case 1:
		z.fixed()
	case 2:
		if err := z.tables(); err != nil {
			return err
		}
	default:
		return errPacked
	}
	z.inBlock = true
	return nil
}

// more makes eight bytes of input ready to take.
func (z *inflater) more() error {
	if z.padded > 0 {
		return io.ErrUnexpectedEOF
	}
	z.end = copy(z.in[:], z.in[z.at:z.end])
	z.at = 0
	for empty := 0; z.end < 8; {
		n, err := z.src.Read(z.in[z.end : len(z.in)-16])
		z.end += n
		switch {
		case err == io.EOF:
			z.padded = 16
			clear(z.in[z.end : z.end+z.padded])
			z.end += z.padded
			return nil
		case err != nil:
			return err
		case n == 0:
			if empty++; empty == 100 {
				return io.ErrNoProgress
			}
		}
	}
	return nil
}

// need makes at least 56 bits known.
func (z *inflater) need() error {
	if z.end-z.at < 8 {
		if err := z.more(); err != nil {
			return err
		}
	}
	z.hold |= binary.LittleEndian.Uint64(z.in[z.at:]) << z.bits
	z.at += int(63-z.bits) >> 3
	z.bits |= 56
	return nil
}

// overrun says whether bits behind the end of the input were used.
func (z *inflater) overrun() bool { return z.padded > 0 && z.at-int(z.bits>>3) > z.end-z.padded }

// take takes up to 16 bits.
func (z *inflater) take(n uint) (int, error) {
	if err := z.need(); err != nil {
		return 0, err
	}
	v := int(z.hold & (1<<n - 1))
	z.hold >>= n
	z.bits -= n
	if z.overrun() {
		return 0, io.ErrUnexpectedEOF
	}
	return v, nil
}

func (z *inflater) beginStored() error {
	if _, err := z.take(z.bits & 7); err != nil { // to the next byte; what need adds are whole bytes
		return err
	}
	size, err := z.take(16)
	if err != nil {
		return err
	}
	check, err := z.take(16)
	if err != nil {
		return err
	}
	if check != size^0xffff {
		return errPacked
	}
	z.stored = size
	return nil
}

func (z *inflater) copyStored() error {
	for z.stored > 0 && z.n < len(z.out) {
		b, err := z.take(8)
		if err != nil {
			return err
		}
		z.out[z.n] = byte(b)
		z.n++
		z.stored--
	}
	return nil
}

// Lengths and distances: base values and extra bits (RFC 1951, 3.2.5).
var (
	lengthBase  = [29]uint16{3, 4, 5, 6, 7, 8, 9, 10, 11, 13, 15, 17, 19, 23, 27, 31, 35, 43, 51, 59, 67, 83, 99, 115, 131, 163, 195, 227, 258}
	lengthExtra = [29]uint8{0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 2, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 4, 5, 5, 5, 5, 0}
	farBase     = [30]uint16{1, 2, 3, 4, 5, 7, 9, 13, 17, 25, 33, 49, 65, 97, 129, 193, 257, 385, 513, 769, 1025, 1537, 2049, 3073, 4097, 6145, 8193, 12289, 16385, 24577}
	farExtra    = [30]uint8{0, 0, 0, 0, 1, 1, 2, 2, 3, 3, 4, 4, 5, 5, 6, 6, 7, 7, 8, 8, 9, 9, 10, 10, 11, 11, 12, 12, 13, 13}
)

// codes unpacks a block of codes until it ends or the room is used. A length and a distance have at most 48 bits together.
func (z *inflater) codes() error {
	const longest = 258 + 7 // copied eight bytes at once
	for z.n <= len(z.out)-longest {
		if err := z.need(); err != nil {
			return err
		}
		n, hold, known := z.n, z.hold, z.bits
		e := z.literals.find(hold)
		for e.bits() != 0 && e.symbol() < 256 && n < len(z.out)-longest && known >= 2*15 { // this code and the next
			z.out[n] = byte(e.symbol())
			n++
			hold >>= e.bits()
			known -= e.bits()
			e = z.literals.find(hold)
		}
		z.n, z.hold, z.bits = n, hold>>e.bits(), known-e.bits()
		switch symbol := e.symbol(); {
		case e.bits() == 0:
			return z.cut(errPacked)
		case symbol < 256:
			z.out[z.n] = byte(symbol)
			z.n++
		case symbol == 256:
			z.inBlock = false
			return z.cut(nil)
		default:
			if err := z.repeat(symbol - 257); err != nil {
				return z.cut(err)
			}
		}
	}
	return z.cut(nil)
}

// cut gives the end of the input as the reason where there is one.
func (z *inflater) cut(err error) error {
	if z.overrun() {
		return io.ErrUnexpectedEOF
	}
	return err
}

// repeat copies what was unpacked before.
func (z *inflater) repeat(code int) error {
	if code >= len(lengthBase) {
		return errPacked
	}
	if z.bits < 48 {
		if err := z.need(); err != nil {
			return err
		}
	}
	hold, known := z.hold, z.bits
	extra := uint(lengthExtra[code])
	length := int(lengthBase[code]) + int(hold&(1<<extra-1))
	hold >>= extra
	known -= extra
	d := z.distance.find(hold)
	if d.bits() == 0 || d.symbol() >= len(farBase) {
		return errPacked
	}
	hold >>= d.bits()
	extra = uint(farExtra[d.symbol()])
	far := int(farBase[d.symbol()]) + int(hold&(1<<extra-1))
	z.hold, z.bits = hold>>extra, known-d.bits()-extra
	n := z.n
	if far > n {
		return errPacked
	}
	z.n = n + length
	from := n - far
	if far >= 8 {
		for ; n < z.n; n, from = n+8, from+8 {
			binary.LittleEndian.PutUint64(z.out[n:], binary.LittleEndian.Uint64(z.out[from:]))
		}
		return nil
	}
	for ; n < z.n; n, from = n+1, from+1 {
		z.out[n] = z.out[from]
	}
	return nil
}
