package importers

import "strings"

// nearest is the known word with the smallest edit distance, the first of equals; empty where there is none.
func nearest(word string, known []string) string {
	best, least := "", 0
	for _, k := range known {
		if d := distance(word, k); best == "" || d < least {
			best, least = k, d
		}
	}
	return best
}

// distance is the number of single-character changes between two words, letters compared without case (Levenshtein 1966).
func distance(a, b string) int {
	x, y := []rune(strings.ToLower(a)), []rune(strings.ToLower(b))
	if len(x) > 200 {
		x = x[:200]
	}
	if len(y) > 200 {
		y = y[:200]
	}
	row := make([]int, len(y)+1)
	for j := range row {
		row[j] = j
	}
	for i := range x {
		diagonal := row[0]
		row[0] = i + 1
		for j := range y {
			change := diagonal
			if x[i] != y[j] {
				change++
			}
			diagonal = row[j+1]
			row[j+1] = min(change, row[j]+1, diagonal+1)
		}
	}
	return row[len(y)]
}

// swapped says whether two words differ by two neighbouring characters changed about.
func swapped(a, b string) bool {
	x, y := []rune(a), []rune(b)
	if len(x) != len(y) {
		return false
	}
	for i := 0; i+1 < len(x); i++ {
		if x[i] != y[i] {
			return x[i] == y[i+1] && x[i+1] == y[i] && string(x[i+2:]) == string(y[i+2:])
		}
	}
	return false
}

// spelling is a lot's name without case, white space and marks but those between two digits, without the zeros that a number
// has or lacks, and with one character for those that look alike: names that agree in it may be one lot.
func spelling(name string) string {
	var out []rune
	s := []rune(strings.ToLower(joined(name)))
	for i, r := range s {
		switch r {
		case ' ', '\t', '\n', '\r', '\u00a0', '\u202f', '\u2009', '\u200b', '\ufeff', '\u2060', '\u00ad':
			continue
		case '-', '\u2010', '\u2011', '\u2012', '\u2013', '\u2014', '\u2212', '_', '.', '/', '#':
			if i == 0 || i == len(s)-1 || !digit(s[i-1]) || !digit(s[i+1]) {
				continue
			}
			if r != '.' {
				r = '-'
			}
		case 'o':
			r = '0'
		case 'i', 'l':
			r = '1'
		}
		out = append(out, r)
	}
	text := string(out)
	if whole, zeros, ok := strings.Cut(text, "."); ok && strings.Trim(whole, "0123456789") == "" && strings.Trim(zeros, "0") == "" {
		text = whole // 118.0
	}
	if strings.Trim(text, "0123456789") == "" && strings.Trim(text, "0") != "" {
		text = strings.TrimLeft(text, "0")
	}
	return text
}

func digit(r rune) bool { return r >= '0' && r <= '9' }
