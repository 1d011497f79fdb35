package cells

import "math/bits"

// huffman looks codes up: the first ten bits in one table, longer codes in a second one that the first points to.
type huffman struct {
	first  [1 << firstBits]entry
	second []entry
}

const firstBits = 10

// entry is a symbol (from bit 16), the mark farther, where the symbol points into the second table, and how many bits the
// code has, 0 where there is none.
type entry uint32

const farther entry = 1 << 8

func newEntry(symbol int, bits uint8) entry { return entry(symbol)<<16 | entry(bits) }

func (e entry) symbol() int { return int(e >> 16) }

func (e entry) bits() uint { return uint(e & 15) }

func (h *huffman) find(hold uint64) entry {
	e := h.first[hold&(1<<firstBits-1)]
	if e&farther != 0 {
		return h.second[uint64(e>>16)<<5|hold>>firstBits&31]
	}
	return e
}

// build makes the tables from the lengths of the codes (RFC 1951, 3.2.2), at most 15. The codes must use all there are, but
// for one code of one bit, or none at all.
func (h *huffman) build(lengths []uint8) error {
	var count [16]int
	for _, l := range lengths {
		count[l]++
	}
	count[0] = 0
	clear(h.first[:])
	h.second = h.second[:0]
	code, left, codes := 0, 1, 0
	var next [16]int
	for l := 1; l <= 15; l++ {
		left = left<<1 - count[l]
		if left < 0 {
			return errPacked
		}
		code = (code + count[l-1]) << 1
		next[l] = code
		codes += count[l]
	}
	if codes > 0 && left > 0 && (codes > 1 || count[1] != 1) {
		return errPacked
	}
	for symbol, l := range lengths {
		if l == 0 {
			continue
		}
		c := int(bits.Reverse16(uint16(next[l]))) >> (16 - l)
		next[l]++
		e := newEntry(symbol, l)
		if l <= firstBits {
			for i := c; i < 1<<firstBits; i += 1 << l {
				h.first[i] = e
			}
			continue
		}
		p := &h.first[c&(1<<firstBits-1)]
		if *p&farther == 0 {
			*p = newEntry(len(h.second)>>5, 0) | farther
			h.second = append(h.second, make([]entry, 32)...)
		}
		for i := c >> firstBits; i < 32; i += 1 << (l - firstBits) {
			h.second[p.symbol()<<5|i] = e
		}
	}
	return nil
}

// fixed makes the tables of a block with the codes that RFC 1951 gives (3.2.6).
func (z *inflater) fixed() {
	var lengths [288]uint8
	for i := range lengths {
		switch {
		case i < 144, i >= 280:
			lengths[i] = 8
		case i < 256:
			lengths[i] = 9
		default:
			lengths[i] = 7
		}
	}
	var far [32]uint8
	for i := range far {
		far[i] = 5
	}
	_ = z.literals.build(lengths[:]) // complete by their making
	_ = z.distance.build(far[:])
}

// order is the order in which the lengths of the code of code lengths stand (RFC 1951, 3.2.7).
var order = [19]int{16, 17, 18, 0, 8, 7, 9, 6, 10, 5, 11, 4, 12, 3, 13, 2, 14, 1, 15}

// tables reads the codes of a block.
func (z *inflater) tables() error {
	head, err := z.take(14)
	if err != nil {
		return err
	}
	literals, far, n := head&31+257, head>>5&31+1, head>>10+4
	if literals > 286 || far > 30 {
		return errPacked
	}
	var small [19]uint8
	for _, i := range order[:n] {
		l, err := z.take(3)
		if err != nil {
			return err
		}
		small[i] = uint8(l)
	}
	if err := z.literals.build(small[:]); err != nil {
		return err
	}
	var lengths [286 + 30]uint8
	for i := 0; i < literals+far; {
		if err := z.need(); err != nil {
			return err
		}
		e := z.literals.find(z.hold)
		if e.bits() == 0 {
			return z.cut(errPacked)
		}
		if _, err := z.take(e.bits()); err != nil {
			return err
		}
		if e.symbol() < 16 {
			lengths[i] = uint8(e.symbol())
			i++
			continue
		}
		extra, base, value := uint(7), 11, uint8(0)
		switch e.symbol() {
		case 16:
			if i == 0 {
				return errPacked
			}
			extra, base, value = 2, 3, lengths[i-1]
		case 17:
			extra, base = 3, 3
		}
		times, err := z.take(extra)
		if err != nil {
			return err
		}
		if times += base; i+times > literals+far {
			return errPacked
		}
		for range times {
			lengths[i] = value
			i++
		}
	}
	if err := z.literals.build(lengths[:literals]); err != nil {
		return err
	}
	return z.distance.build(lengths[literals : literals+far])
}
