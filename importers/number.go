package importers

import (
	"math"
	"strconv"
	"strings"
)

// ParseNumber reads the text of a cell as one decimal number, whole or not at all: sign, digits, one decimal mark, an
// exponent. The decimal mark is '.' or ','; 0 where it is not known, and then only a text that can be read in one way is
// read. The minus sign U+2212 is a sign like the hyphen. Groups of three digits are read where they cannot be anything else:
// with a decimal mark behind them, several of them, or with the mark that the plan says is not the decimal mark.
// The value is rounded once (strconv, to nearest even); decimals are the decimal places written.
func ParseNumber(text string, decimal byte) (value float64, decimals int, err *Problem) {
	if value, decimals, ok := quickNumber(text, decimal); ok {
		return value, decimals, nil
	}
	return parseNumber(text, decimal)
}

func parseNumber(text string, decimal byte) (value float64, decimals int, err *Problem) {
	n, err := splitNumber(text, decimal)
	if err != nil {
		return 0, 0, err
	}
	value, convErr := strconv.ParseFloat(n.plain(), 64)
	zero := strings.Trim(n.whole+n.fraction, "0") == ""
	if convErr != nil || math.IsInf(value, 0) || value == 0 && !zero {
		return 0, 0, problem(OutOfRange, text, "a number within 4.9e-324 and 1.8e308 in size")
	}
	return value, max(0, len(n.fraction)-n.exponent), nil
}

// written is a number as text, taken apart.
type written struct {
	sign, whole, fraction string
	exponent              int
	grouped               bool // thousands marks were left out
	comma                 bool // the decimal mark is a comma
}

// plain is the number in the form strconv reads.
func (w written) plain() string {
	whole := w.whole
	if whole == "" {
		whole = "0"
	}
	return w.sign + whole + "." + w.fraction + "0e" + strconv.Itoa(w.exponent)
}

// trimmed is a cell's text without white space at its ends.
func trimmed(text string) string { return strings.Trim(text, " \t\r\n\u00a0\u202f\u2009") }

func splitNumber(text string, decimal byte) (written, *Problem) {
	want := "a number"
	switch decimal {
	case '.':
		want = "a number with a decimal point"
	case ',':
		want = "a number with a decimal comma"
	}
	bad := func() (written, *Problem) { return written{}, problem(NotANumber, text, want) }
	var w written
	s := trimmed(text)
	switch strings.ToLower(strings.TrimLeft(s, "+-\u2212")) {
	case "nan", "inf", "infinity":
		return written{}, problem(NotFinite, text, "a finite number")
	}
	for _, sign := range []string{"-", "\u2212", "+"} { // one at most: a second is left, and is no digit
		if rest, signed := strings.CutPrefix(s, sign); signed {
			if s = rest; sign != "+" {
				w.sign = "-"
			}
			break
		}
	}
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		exponent, ok := wholeNumber(strings.Replace(s[i+1:], "\u2212", "-", 1))
		if !ok {
			return bad()
		}
		w.exponent, s = exponent, s[:i]
	}
	if s == "" || len(s) > 400 {
		return bad()
	}
	for _, space := range []string{"\u00a0", "\u202f", "\u2009"} {
		if strings.Contains(s, space) {
			head, tail := cutDecimal(s, decimal)
			joined, ok := ungroup(head, space)
			if !ok || !digits(tail.text) {
				return bad()
			}
			w.whole, w.fraction, w.grouped, w.comma = joined, tail.text, true, tail.mark == ","
			return w, nil
		}
	}
	dots, commas := strings.Count(s, "."), strings.Count(s, ",")
	switch {
	case dots == 0 && commas == 0:
		w.whole = s
	case dots > 0 && commas > 0: // the last mark is the decimal one, the other groups
		mark, group := ",", "."
		if strings.LastIndex(s, ".") > strings.LastIndex(s, ",") {
			mark, group = ".", ","
		}
		head, tail, _ := strings.Cut(s, mark)
		joined, ok := ungroup(head, group)
		if strings.Count(s, mark) > 1 || !ok || decimal != 0 && mark[0] != decimal {
			return bad()
		}
		w.whole, w.fraction, w.grouped, w.comma = joined, tail, true, mark == ","
	default:
		mark := "."
		if commas > 0 {
			mark = ","
		}
		joined, grouping := ungroup(s, mark)
		switch {
		case dots+commas > 1 && grouping && (decimal == 0 || mark[0] != decimal):
			w.whole, w.grouped = joined, true
		case dots+commas > 1:
			return bad()
		case decimal == 0 && mark == "," && grouping:
			return written{}, problem(DecimalAmbiguous, text, "a number whose decimal mark is known")
		case decimal == 0 || mark[0] == decimal:
			w.whole, w.fraction, _ = strings.Cut(s, mark)
			w.comma = mark == ","
		case grouping:
			w.whole, w.grouped = joined, true
		default:
			return bad()
		}
	}
	if w.whole == "" && w.fraction == "" || w.comma && w.fraction == "" || !digits(w.whole) || !digits(w.fraction) {
		return bad()
	}
	return w, nil
}

// ungroup joins groups of three digits behind one to three, the first not beginning with 0: what a thousands mark stands between.
func ungroup(s, mark string) (string, bool) {
	groups := strings.Split(s, mark)
	for i, g := range groups {
		if !digits(g) || i == 0 && (len(g) < 1 || len(g) > 3 || g[0] == '0') || i > 0 && len(g) != 3 {
			return "", false
		}
	}
	return strings.Join(groups, ""), len(groups) > 1
}

type tail struct{ mark, text string }

func cutDecimal(s string, decimal byte) (string, tail) {
	for _, mark := range []string{".", ","} {
		if decimal != 0 && mark[0] != decimal {
			continue
		}
		if head, rest, ok := strings.Cut(s, mark); ok {
			return head, tail{mark: mark, text: rest}
		}
	}
	return s, tail{}
}

func digits(s string) bool {
	for i := range len(s) {
		if s[i] < '0' || s[i] > '9' {
			return false
		}
	}
	return true
}

// wholeNumber reads an exponent: at most six digits with a sign.
func wholeNumber(s string) (int, bool) {
	unsigned := strings.TrimLeft(s, "+-")
	if len(s)-len(unsigned) > 1 || unsigned == "" || len(unsigned) > 6 || !digits(unsigned) {
		return 0, false
	}
	n, err := strconv.Atoi(s)
	return n, err == nil
}

// storedDecimals are the decimals of a number that a spreadsheet stored in binary: of its 15 significant digits, which is
// what was typed (12.003 is stored as 12.003000000000001 by some programs). The text is the number's as stored.
func storedDecimals(text string, value float64) int {
	if n, ok := shortDecimals(text); ok {
		return n
	}
	s := strconv.FormatFloat(value, 'e', 14, 64)
	mantissa, exponent, _ := strings.Cut(s, "e")
	e, err := strconv.Atoi(exponent)
	if err != nil {
		return 0
	}
	_, fraction, _ := strings.Cut(strings.TrimRight(mantissa, "0"), ".")
	return max(0, len(fraction)-e)
}
