package app

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"fyne.io/fyne/v2"
)

// font is how a text is set.
type font struct {
	size float32
	bold bool
}

// The fonts of the window, as its drawings have them; their halves are rounded up, because the toolkit spaces letters for the
// next whole size and draws them at the half one.
var (
	fontTitle   = font{19, true}
	fontLot     = font{20, true}
	fontVerdict = font{17, true}
	fontName    = font{16, true}
	fontOverall = font{15, true}
	fontBody    = font{14, false}
	fontStrong  = font{14, true}
	fontPlain   = font{13, false}
	fontButton  = font{13, true}
	fontNote    = font{12, false}
	fontHeading = font{12, true}
	fontTiny    = font{11, false}
	fontAxis    = font{12, false}
	fontLot11   = font{11, true}
)

func (f font) style() fyne.TextStyle { return fyne.TextStyle{Bold: f.bold} }

// width is how wide a text is in this font.
func (f font) width(s string) float32 { return fyne.MeasureText(s, f.size, f.style()).Width }

// rise is how far below the top of its box the text's baseline lies.
func (f font) rise() float32 {
	_, baseline := fyne.CurrentApp().Driver().RenderedTextSize("Hg", f.size, f.style(), nil)
	return baseline
}

// fit is s as it has room in width, its end replaced by "…" where it has not.
func (f font) fit(s string, width float32) string {
	if f.width(s) <= width {
		return s
	}
	r := []rune(s)
	low, high := 0, len(r)
	for low < high {
		middle := (low + high + 1) / 2
		if f.width(cut(r, middle)) <= width {
			low = middle
		} else {
			high = middle - 1
		}
	}
	return cut(r, low)
}

func cut(r []rune, n int) string { return strings.TrimRight(string(r[:n]), " ,;.") + "…" }

// wrap breaks s into lines of at most width. first is the room of the first line, where something stands before it. A word
// that is wider than a line is broken where it must be: nothing is ever cut off.
func (f font) wrap(s string, first, width float32) []string {
	var out []string
	room, line, length := first, "", float32(0)
	space := f.width(" ")
	for _, word := range words(s) {
		// Words are measured alone, because most come again; a line is measured whole only where it is nearly full.
		next, longer := word, f.width(word)
		if line != "" {
			next, longer = line+" "+word, length+space+longer
		}
		if longer > room-4 {
			longer = f.width(next)
		}
		if longer <= room {
			line, length = next, longer
			continue
		}
		if line != "" || len(out) == 0 && first < width {
			out, room, line = append(out, line), width, ""
		}
		for f.width(word) > width && utf8.RuneCountInString(word) > 1 {
			head := f.broken(word, width)
			out, word = append(out, head), strings.TrimPrefix(word, head)
		}
		line, length = word, f.width(word)
	}
	return append(out, line)
}

// words are the words of s; a number keeps its unit, or whatever short word follows it.
func words(s string) []string {
	const short = 5
	var out []string
	for _, f := range strings.Fields(s) {
		if n := len(out); n > 0 && utf8.RuneCountInString(f) <= short && endsInDigit(out[n-1]) && !unicode.IsDigit([]rune(f)[0]) {
			out[n-1] += " " + f
			continue
		}
		out = append(out, f)
	}
	return out
}

func endsInDigit(s string) bool {
	r, _ := utf8.DecodeLastRuneInString(s)
	return unicode.IsDigit(r)
}

// broken is as much of a word as has room, at least one letter.
func (f font) broken(word string, width float32) string {
	r := []rune(word)
	n := 1
	for n < len(r) && f.width(string(r[:n+1])) <= width {
		n++
	}
	return string(r[:n])
}

// twoLines sets a name in at most two lines; what has no room is left out before its end, because names often differ there.
func (f font) twoLines(s string, width float32) []string {
	lines := f.wrap(s, width, width)
	if len(lines) <= 2 {
		return lines
	}
	r := []rune(strings.TrimPrefix(strings.Join(strings.Fields(s), " "), lines[0]))
	low, high := 0, len(r)
	for low < high { // the longest end that has room
		middle := (low + high) / 2
		if f.width("… "+strings.TrimSpace(string(r[middle:]))) <= width {
			high = middle
		} else {
			low = middle + 1
		}
	}
	if low > 0 && r[low-1] != ' ' { // from the next whole word, where there is one
		for i := low; i < len(r); i++ {
			if r[i] == ' ' {
				low = i
				break
			}
		}
	}
	return []string{lines[0], "… " + strings.TrimSpace(string(r[low:]))}
}

// middle is s as it has room in width, its middle replaced by "…" where it has not.
func (f font) middle(s string, width float32) string {
	if f.width(s) <= width {
		return s
	}
	r := []rune(s)
	kept := func(n int) string { return string(r[:(n+1)/2]) + "…" + string(r[len(r)-n/2:]) }
	low, high := 0, len(r)-1
	for low < high {
		at := (low + high + 1) / 2
		if f.width(kept(at)) <= width {
			low = at
		} else {
			high = at - 1
		}
	}
	return kept(low)
}

// smaller is the font, or as much of it as lets s have room, down to a least size.
func (f font) smaller(s string, width, least float32) font {
	for f.size > least && f.width(s) > width {
		f.size--
	}
	return f
}

// atMost keeps the first n lines and ends the last one with "…" where there were more.
func (f font) atMost(lines []string, n int, width float32) []string {
	if len(lines) <= n {
		return lines
	}
	out := append([]string{}, lines[:n]...)
	out[n-1] = f.fit(out[n-1]+" "+lines[n], width)
	return out
}
