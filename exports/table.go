package exports

import (
	"math"
	"strings"
	"unicode/utf8"
)

// table is a table of figures, a column a figure: the columns of all rows together, in the order in which the result format
// has them; a figure that a row does not have is an empty cell.
type table struct {
	names []string
	at    map[string]int
	rows  []map[string]figureRow
	fixed int     // the first columns stay where they are
	least float64 // the narrowest column, where more than headings and values need
}

// head fixes the first columns, whether or not a row has them.
func (t *table) head(names ...string) {
	for _, n := range names {
		t.column(n, len(t.names))
	}
	t.fixed = len(t.names)
}

// column is the place of a name, put in at place where it is new.
func (t *table) column(name string, place int) int {
	if t.at == nil {
		t.at = map[string]int{}
	}
	if i, ok := t.at[name]; ok {
		return i
	}
	t.names = append(t.names, "")
	copy(t.names[place+1:], t.names[place:])
	t.names[place] = name
	for i := place; i < len(t.names); i++ {
		t.at[t.names[i]] = i
	}
	return place
}

// add adds a row. A figure that no row before had comes after the figure that it follows here.
func (t *table) add(figures []figureRow) {
	row := make(map[string]figureRow, len(figures))
	last := t.fixed - 1
	for _, f := range figures {
		last = max(last, t.column(f.name, last+1))
		row[f.name] = f
	}
	t.rows = append(t.rows, row)
}

// to writes the table under its headings: the names of the result format, and under them what each means in plain words.
func (t *table) to(s *sheet, meaning func(name string) string) {
	var names, words []cell
	tall, nameTall := 1.0, 1.0
	for i, n := range t.names {
		look, wordLook := headPlainLook, headLook
		w := meaning(n)
		width := math.Max(t.least, headWidth(n, w))
		if i > 0 && t.numeric(n) {
			look, wordLook = headPlainRightLook, headRightLook
		}
		for _, r := range t.rows {
			width = math.Max(width, math.Min(40, float64(len([]rune(r[n].text)))+2))
		}
		tall, nameTall = math.Max(tall, wordLines(w, int(width)-1)), math.Max(nameTall, lines(n, int(width)-1))
		s.widths = append(s.widths, width)
		names, words = append(names, text(n, look)), append(words, text(w, wordLook))
	}
	s.addTall(nameTall*11.5+4, names...)
	s.addTall(tall*12.5+3, words...)
	s.frozen, s.heads, s.columns, s.filter, s.filterTo = len(s.rows), len(s.rows), 1, len(s.rows), len(s.rows)+len(t.rows)
	for _, r := range t.rows {
		line := make([]cell, len(t.names))
		most := 1.0
		for i, n := range t.names {
			line[i] = cell{look: ruledLook}
			if f, ok := r[n]; ok {
				line[i] = f.value()
				most = math.Max(most, lines(f.text, int(s.widths[i])))
			}
		}
		line[0].look = ruledStrongLook
		s.addTall(most*13.5+3, line...)
	}
}

func (t *table) numeric(name string) bool {
	for _, r := range t.rows {
		if f, ok := r[name]; ok {
			return f.number != nil
		}
	}
	return false
}

// headWidth is the narrowest column in which a name and its meaning take few lines, because all headings are as tall as the
// tallest. It still is narrow: a table of a hundred columns has to stay within few pages.
func headWidth(name, words string) float64 {
	const (
		mostNameLines, mostWordLines = 2, 4
		least, whole, widest         = 11, 15, 27 // characters; whole: what shorter is stands in one line
		air                          = 2
	)
	width := max(least, min(whole, utf8.RuneCountInString(name)+air))
	for _, word := range strings.Fields(words) {
		width = max(width, min(whole, utf8.RuneCountInString(word)+air))
	}
	for width < widest && (lines(name, width-1) > mostNameLines || wordLines(words, width-1) > mostWordLines) {
		width++
	}
	return float64(width)
}

// wordLines is how many lines a text takes that breaks between words; a word longer than a line breaks inside.
func wordLines(s string, room int) float64 {
	n, at := 1, 0
	for _, word := range strings.Fields(s) {
		size := utf8.RuneCountInString(word)
		if at > 0 && at+1+size > room {
			n, at = n+1, 0
		} else if at > 0 {
			at++
		}
		for size > room {
			n, size = n+1, size-room
		}
		at += size
	}
	return float64(n)
}
