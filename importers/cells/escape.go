package cells

import (
	"bytes"
	"unicode/utf16"
	"unicode/utf8"
)

// unescape turns _xHHHH_ into the character it stands for (ISO/IEC 29500-1, 22.9.2.19), in place: what it stands for is never longer.
func unescape(s []byte) []byte {
	from := bytes.Index(s, []byte("_x"))
	if from < 0 {
		return s
	}
	to := s[:from]
	for i := from; i < len(s); {
		u, ok := escaped(s[i:])
		if !ok {
			to = append(to, s[i])
			i++
			continue
		}
		i += 7
		if r := rune(u); utf16.IsSurrogate(r) {
			if low, ok := escaped(s[i:]); ok {
				if r := utf16.DecodeRune(r, rune(low)); r != utf8.RuneError {
					to = utf8.AppendRune(to, r)
					i += 7
					continue
				}
			}
		}
		to = utf8.AppendRune(to, rune(u))
	}
	return to
}

func escaped(s []byte) (uint16, bool) {
	if len(s) < 7 || s[0] != '_' || s[1] != 'x' || s[6] != '_' {
		return 0, false
	}
	var u uint16
	for _, c := range s[2:6] {
		switch {
		case c >= '0' && c <= '9':
			u = u<<4 | uint16(c-'0')
		case c|0x20 >= 'a' && c|0x20 <= 'f':
			u = u<<4 | uint16(c|0x20-'a'+10)
		default:
			return 0, false
		}
	}
	return u, true
}
