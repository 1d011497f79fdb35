package importers

import "strconv"

// powers are the powers of ten that a float64 holds exactly.
var powers = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// quickNumber reads what most cells hold without taking it apart: perhaps a minus sign, digits, perhaps the known decimal
// mark and more digits. Everything else, and what is wrong, is left to splitNumber; both give the same. Up to 15 digits are a
// whole number that a float64 holds, and its quotient by a power of ten is rounded once (Clinger 1990, "How to read floating
// point numbers accurately"); more digits are left to strconv.
func quickNumber(text string, decimal byte) (value float64, decimals int, ok bool) {
	const most = 24
	if len(text) > most {
		return 0, 0, false
	}
	whole := uint64(0) // without meaning from 20 digits on, where it is not used
	mark, digits := -1, 0
	for i := range len(text) {
		switch c := text[i]; {
		case c-'0' < 10:
			whole = whole*10 + uint64(c-'0')
			digits++
		case c == decimal && c != 0 && mark < 0 && digits > 0:
			mark = i
		case c == '-' && i == 0:
		default:
			return 0, 0, false
		}
	}
	if mark >= 0 {
		decimals = len(text) - mark - 1
	}
	if digits == 0 || mark >= 0 && decimals == 0 {
		return 0, 0, false
	}
	if digits <= 15 {
		if value = float64(whole) / powers[decimals]; text[0] == '-' {
			value = -value
		}
		return value, decimals, true
	}
	if mark >= 0 && decimal != '.' {
		text = text[:mark] + "." + text[mark+1:]
	}
	value, err := strconv.ParseFloat(text, 64)
	return value, decimals, err == nil
}

// plainNumber says quickly that a text can only be a number: perhaps a minus sign, digits, and at most one mark with digits
// on both sides.
func plainNumber(text string) bool {
	if len(text) > 24 || text == "" {
		return false
	}
	mark := 0
	if text[0] == '-' {
		text = text[1:]
	}
	for i := range len(text) {
		switch c := text[i]; {
		case c-'0' < 10:
		case (c == '.' || c == ',') && mark == 0 && i > 0 && i < len(text)-1:
			mark = i
		default:
			return false
		}
	}
	return text != ""
}

// shortDecimals are the decimals of a number of at most 15 digits with a point or none, zeros at its end left off: as many
// digits as a float64 keeps as they were written.
func shortDecimals(text string) (int, bool) {
	mark, digits, last := -1, 0, -1 // last is where the last digit other than 0 stands
	for i := range len(text) {
		switch c := text[i]; {
		case c-'0' < 10:
			if c != '0' {
				last = i
			}
			if digits++; digits > 15 {
				return 0, false
			}
		case c == '.' && mark < 0 && digits > 0:
			mark = i
		case c == '-' && i == 0:
		default:
			return 0, false
		}
	}
	if mark < 0 || last < mark {
		return 0, digits > 0
	}
	return last - mark, true
}
