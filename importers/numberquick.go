package importers

import "strconv"

// quickNumber reads what most cells hold without taking it apart: perhaps a minus sign, digits, perhaps the known decimal
// mark and more digits. Everything else, and what is wrong, is left to splitNumber; both give the same.
func quickNumber(text string, decimal byte) (value float64, decimals int, ok bool) {
	var b [24]byte
	if len(text) > len(b) {
		return 0, 0, false
	}
	mark, digits := -1, 0
	for i := range len(text) {
		switch c := text[i]; {
		case c >= '0' && c <= '9':
			b[i] = c
			digits++
		case c == decimal && c != 0 && mark < 0 && digits > 0:
			b[i] = '.'
			mark = i
		case c == '-' && i == 0:
			b[i] = c
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
	value, err := strconv.ParseFloat(string(b[:len(text)]), 64)
	return value, decimals, err == nil
}
