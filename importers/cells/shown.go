package cells

import "strings"

// Shown is what a number format shows of a number beside the number itself.
type Shown struct {
	Places   int    // decimals; -1 where the format leaves them open
	Percent  bool   // a hundredfold
	Thousand int    // how many times the number is divided by a thousand
	Currency string // "€"; empty where there is none
	Text     string // literal text: " mm"
}

// ShownBy takes the first section of a format's code apart (ISO/IEC 29500-1, 18.8.31).
func ShownBy(code string) Shown {
	s := Shown{Places: -1}
	if code == "" {
		return s
	}
	var digits, text strings.Builder
	for i := 0; i < len(code); i++ {
		switch c := code[i]; c {
		case ';':
			i = len(code)
		case '"':
			end := strings.IndexByte(code[i+1:], '"')
			if end < 0 {
				end = len(code) - i - 1
			}
			text.WriteString(code[i+1 : min(i+1+end, len(code))])
			i += end + 1
		case '\\':
			if i+1 < len(code) {
				text.WriteByte(code[i+1])
			}
			i++
		case '_', '*':
			i++
		case '[':
			end := strings.IndexByte(code[i:], ']')
			if end < 0 {
				i = len(code)
				break
			}
			if in, ok := strings.CutPrefix(code[i:i+end], "[$"); ok {
				s.Currency, _, _ = strings.Cut(in, "-")
			}
			i += end
		case '%':
			s.Percent = true
		case '0', '#', '?', '.', ',', 'E', 'e', '/':
			digits.WriteByte(c)
		case '$':
			s.Currency = "$"
		}
	}
	for _, symbol := range []string{"€", "£", "¥"} {
		if s.Currency == "" && strings.Contains(code, symbol) {
			s.Currency = symbol
		}
	}
	s.Text = strings.TrimSpace(text.String())
	d := digits.String()
	if d == "" || strings.ContainsAny(d, "eE/") {
		return s
	}
	for strings.HasSuffix(d, ",") {
		d = d[:len(d)-1]
		s.Thousand++
	}
	_, fraction, _ := strings.Cut(d, ".")
	s.Places = len(fraction)
	return s
}
