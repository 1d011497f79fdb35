package importers

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// windows1252 are the characters of the bytes 0x80 to 0x9f; 0 where none is assigned (Unicode mapping table CP1252).
var windows1252 = [32]rune{
	'€', 0, '‚', 'ƒ', '„', '…', '†', '‡', 'ˆ', '‰', 'Š', '‹', 'Œ', 0, 'Ž', 0,
	0, '‘', '’', '“', '”', '•', '–', '—', '˜', '™', 'š', '›', 'œ', 0, 'ž', 'Ÿ',
}

// decodeText turns the bytes of a text file into a string. A byte order mark decides; else the encoding that the plan
// states; else UTF-8 where all bytes are sound UTF-8, and Windows-1252 where not, which is said.
func decodeText(data []byte, declared string) (text, encoding, said string, err error) {
	want := ""
	switch strings.ToLower(declared) {
	case "":
	case "utf-8", "utf8":
		want = "utf-8"
	case "utf-16", "utf16", "utf-16le", "utf-16be":
		want = "utf-16"
	case "windows-1252", "cp1252", "latin-1", "latin1", "iso-8859-1":
		want = "windows-1252"
	default:
		return "", "", "", fmt.Errorf("found the encoding %q in the plan, want utf-8, utf-16 or windows-1252; correct reading.encoding", declared)
	}
	mark, rest := "", data
	var order binary.ByteOrder = binary.LittleEndian
	switch {
	case bytes.HasPrefix(data, []byte("\xef\xbb\xbf")):
		mark, rest = "utf-8", data[3:]
	case bytes.HasPrefix(data, []byte("\xff\xfe")):
		mark, rest = "utf-16", data[2:]
	case bytes.HasPrefix(data, []byte("\xfe\xff")):
		mark, rest, order = "utf-16", data[2:], binary.BigEndian
	}
	if mark != "" && want != "" && mark != want {
		return "", "", "", fmt.Errorf("found the byte order mark of %s, want %s as the plan states; correct reading.encoding", mark, want)
	}
	if encoding = want; mark != "" {
		encoding = mark
	} else if wide := wideText(data); want == "" && wide != "" {
		encoding, said = "utf-16", "no byte order mark, read as UTF-16 because every second byte is 0."
		if wide == "utf-16be" {
			order = binary.BigEndian
		}
	}
	switch encoding {
	case "utf-16":
		if strings.EqualFold(declared, "utf-16be") && mark == "" {
			order = binary.BigEndian
		}
		text, err = fromUTF16(rest, order)
	case "windows-1252":
		text, err = fromWindows(rest)
	default:
		if at := badUTF8(rest); at == 0 {
			text, encoding = string(rest), "utf-8"
		} else if encoding == "utf-8" {
			err = fmt.Errorf("line %d: found a byte that is not UTF-8, want UTF-8 text; state encoding = \"windows-1252\" under [reading] if it is that", at)
		} else {
			encoding, said = "windows-1252", "not UTF-8, read as Windows-1252."
			text, err = fromWindows(rest)
		}
	}
	if err == nil {
		if i := strings.IndexFunc(text, func(r rune) bool { return r < ' ' && r != '\t' && r != '\n' && r != '\r' }); i >= 0 {
			err = fmt.Errorf("line %d: found the control character %U, want text; export the readings as text or .xlsx", 1+strings.Count(text[:i], "\n"), text[i])
		}
	}
	return text, encoding, said, err
}

// wideText says whether text without a byte order mark is UTF-16 and in which order: at least nine of ten characters of its
// beginning are below U+0100, which no other text has; empty where it is not.
func wideText(data []byte) string {
	head := data[:min(len(data), 4<<10)&^1]
	if len(head) < 4 || len(data)%2 != 0 {
		return ""
	}
	var zeros [2]int
	for i, c := range head {
		if c == 0 {
			zeros[i%2]++
		}
	}
	half := len(head) / 2
	switch {
	case zeros[0] == 0 && 10*zeros[1] >= 9*half:
		return "utf-16le"
	case zeros[1] == 0 && 10*zeros[0] >= 9*half:
		return "utf-16be"
	}
	return ""
}

// badUTF8 is the line of the first byte that is not UTF-8; 0 where all are.
func badUTF8(data []byte) int {
	if utf8.Valid(data) {
		return 0
	}
	line := 1
	for len(data) > 0 {
		r, size := utf8.DecodeRune(data)
		if r == utf8.RuneError && size == 1 {
			break
		}
		if r == '\n' {
			line++
		}
		data = data[size:]
	}
	return line
}

func fromUTF16(data []byte, order binary.ByteOrder) (string, error) {
	if len(data)%2 != 0 {
		return "", fmt.Errorf("found an odd number of bytes, want UTF-16 text; copy the file again from where it came")
	}
	units := make([]uint16, len(data)/2)
	for i := range units {
		units[i] = order.Uint16(data[2*i:])
	}
	var b strings.Builder
	for i := 0; i < len(units); i++ {
		r := rune(units[i])
		if utf16.IsSurrogate(r) {
			pair := '\ufffd'
			if i+1 < len(units) {
				pair = utf16.DecodeRune(r, rune(units[i+1]))
			}
			if pair == '\ufffd' {
				return "", fmt.Errorf("found half a character at byte %d, want UTF-16 text; copy the file again from where it came", 2*i)
			}
			r = pair
			i++
		}
		b.WriteRune(r)
	}
	return b.String(), nil
}

func fromWindows(data []byte) (string, error) {
	var b strings.Builder
	b.Grow(len(data) + len(data)/8)
	line := 1
	for _, c := range data {
		r := rune(c)
		if c >= 0x80 && c < 0xa0 {
			if r = windows1252[c-0x80]; r == 0 {
				return "", fmt.Errorf("line %d: found the byte %#x, want UTF-8 or Windows-1252 text; save the file as UTF-8", line, c)
			}
		}
		if c == '\n' {
			line++
		}
		b.WriteRune(r)
	}
	return b.String(), nil
}
