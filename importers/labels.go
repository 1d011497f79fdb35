package importers

import (
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// labelFinder finds what rows are for by the texts in them.
type labelFinder struct {
	*table
	parts []int          // the columns of parts' ids
	seen  map[int]string // the last text of a column that is no label
	aside map[int]bool   // what apart said of a column
}

// label is what a row's label makes of it, and whether the label is short: such a one may be a part's id just as well.
// Labels stand in the lot column, in the part column, or in the first cell of a row without a lot, else beside the readings.
func (t *labelFinder) label(r cells.Row) (means string, short bool) {
	at := make([]cells.Cell, 0, 3)
	lot := ""
	if t.lot > 0 {
		lot = filledText(r.At(t.lot))
		if slices.ContainsFunc(t.hints.lots, func(l string) bool { return qa.JoinSpace(l) == lot }) {
			lot = "\x00"
		} else {
			at = append(at, r.At(t.lot))
		}
	}
	named := false
	for _, col := range t.parts {
		c := r.At(col)
		at = append(at, c)
		named = named || filledText(c) != ""
	}
	if lot == "" {
		for _, c := range r.Cells {
			if filledText(c) != "" {
				at = append(at, c)
				break
			}
		}
	}
	for _, c := range at {
		if c.Kind != cells.Text {
			continue
		}
		w := word(c.Text)
		if m := labelWords[w]; m != "" && m != unitLabel {
			return m, utf8.RuneCountInString(w) <= 2 && w[0] < utf8.RuneSelf || w == "max" // also a person's name
		}
		if summaryPhrase(w) {
			return summaryLabel, false
		}
		if first, _, ok := strings.Cut(w, " "); ok && labelWords[first] == summaryLabel && utf8.RuneCountInString(first) > 3 && lot == "" {
			return summaryLabel, false // "Mean of lot"
		}
	}
	return t.beside(r, named)
}

// beside is what a summary's label in another column makes of a row: one under no heading or in a column of remarks; in any
// column where the row has no part's id.
func (t *labelFinder) beside(r cells.Row, named bool) (means string, short bool) {
	for _, c := range r.Cells {
		if c.Kind != cells.Text || c.Col == t.lot || c.Text == "" || c.Text[0] >= '+' && c.Text[0] <= '9' || len(c.Text) > 60 || named && !t.apart(c.Col) { // numbers above all
			continue
		}
		if seen, ok := t.seen[c.Col]; ok && seen == c.Text {
			continue
		}
		w := word(c.Text)
		if labelWords[w] == summaryLabel || summaryPhrase(w) {
			return summaryLabel, !statistics[w] && !summaryPhrase(w)
		}
		t.seen[c.Col] = c.Text
	}
	return "", false
}

// summaryNumbered says whether a heading that ends in a number names a summary and no part: "Mean of 5".
func summaryNumbered(heading string) bool {
	m := partNumbered.FindStringSubmatch(heading)
	if m == nil {
		return false
	}
	w := word(strings.TrimRight(m[1], " .#-"))
	first, _, _ := strings.Cut(w, " ")
	return utf8.RuneCountInString(first) > 2 && labelWords[first] == summaryLabel
}

// summaryHeading says whether a row below the readings begins a table of summaries: no number stands in it, and the name of a
// summary in a column of numbers.
func (t *table) summaryHeading(r, above cells.Row) bool {
	found := false
	for _, c := range r.Cells {
		switch {
		case c.Kind == cells.FormulaNoValue || numeric(c):
			return false
		case c.Kind == cells.Text && len(c.Text) <= 60 && numeric(above.At(c.Col)):
			w := word(c.Text)
			found = found || statistics[w] || summaryPhrase(w)
		}
	}
	lot := filledText(r.At(max(1, t.lot)))
	return found && !(t.lot > 0 && slices.ContainsFunc(t.hints.lots, func(l string) bool { return qa.JoinSpace(l) == lot }))
}

// apart says whether a column stands under no heading or is one of remarks.
func (t *labelFinder) apart(col int) bool {
	is, ok := t.aside[col]
	if !ok {
		heading := t.column(col).heading
		is = heading == "" || remarkHeadings[word(heading)]
		t.aside[col] = is
	}
	return is
}

// remarkHeadings are the headings of a column of remarks.
var remarkHeadings = known("remark|remarks|comment|comments|note|notes|bemerkung|bemerkungen|kommentar|anmerkung|hinweis|remarque|remarques|commentaire|observaciones|observación|nota|note|備考|备注")

// statistics are the words of summaries that say nothing else of a row, in whatever column they stand.
var statistics = known("mean|average|avg|mean value|arithmetic mean|grand mean|x-bar|xbar|std|stdev|std dev|std. dev|standard deviation|stdabw|std.-abw|standardabweichung|median|" +
	"cp|cpk|pp|ppk|cm|cmk|mittelwert|durchschnitt|moyenne|écart-type|ecart-type|écart type|ecart type|promedio|平均|平均値|平均值|標準偏差|标准偏差|标准差")

// summaryFillers are the words that may stand beside those of a summary without making it something else.
var summaryFillers = known("of|the|lot|lots|batch|value|values|overall|total|grand|all|readings|samples|parts|subgroup|size|wert|werte|gesamt|der|des|von|quer|and|und|n-1|x|x̄|x̅|s|σ|r|")

func known(words string) map[string]bool {
	out := map[string]bool{}
	for _, w := range strings.Split(words, "|") {
		out[w] = true
	}
	return out
}

// summaryPhrase says whether a text of several words names a summary: one of them does, and the others say no more, as in
// "Lot mean", "Max. value" or "Mean ± SD".
func summaryPhrase(w string) bool {
	if !strings.ContainsAny(w, " /(") || len(w) > 60 {
		return false
	}
	names, count := false, 0
	for _, p := range strings.FieldsFunc(w, func(r rune) bool { return strings.ContainsRune(" /()±,;+&:=", r) }) {
		p = strings.Trim(p, ".")
		summary := labelWords[p] == summaryLabel
		if !summary && !summaryFillers[p] {
			return false
		}
		names = names || summary && !summaryFillers[p] && utf8.RuneCountInString(p) > 2
		count++
	}
	return names && count > 1
}

// takeLabelled takes the limit and summary rows out. A short label counts only beside a long one in the same block of rows.
func (t *table) takeLabelled(data []row) []row {
	type labelled struct {
		means string
		short bool
	}
	var parts []int // columns
	for _, c := range t.columns {
		if c.col == t.part || t.part == 0 && c.col != t.lot && headingMeans(c.heading) == partHeading {
			parts = append(parts, c.col)
		}
	}
	finder := labelFinder{table: t, parts: parts, seen: map[int]string{}, aside: map[int]bool{}}
	labels := make([]labelled, len(data))
	for i, d := range data {
		labels[i].means, labels[i].short = finder.label(t.sheet.Rows[d.at])
	}
	for i := 0; i < len(data); {
		j, long := i, false
		for ; j < len(data) && labels[j].means != ""; j++ {
			long = long || !labels[j].short
		}
		for ; i < j; i++ {
			if !long {
				labels[i].means = ""
			}
		}
		i = j + 1
	}
	if !slices.ContainsFunc(labels, func(l labelled) bool { return l.means != "" }) {
		return data
	}
	var rest []row
	var summaries []string
	for i, d := range data {
		r := t.sheet.Rows[d.at]
		switch labels[i].means {
		case "":
			rest = append(rest, d)
		case summaryLabel:
			t.summary = append(t.summary, d.at)
			summaries = append(summaries, strconv.Itoa(r.Number))
		default:
			t.takeLimits(d.at, labels[i].means)
		}
	}
	if len(summaries) > 0 {
		t.say("%s not taken as readings: %s.", qa.Count(len(summaries), "summary row", "summary rows"), join2(summaries))
	}
	return rest
}
