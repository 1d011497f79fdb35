package importers

import (
	"maps"
	"regexp"
	"slices"
	"strings"

	"lotpair/importers/cells"
)

// The parts of the columns where a row is a characteristic, beside those of labelWords.
const (
	nameHeading        = "characteristic"
	numberHeading      = "number"
	requirementHeading = "requirement"
	resultHeading      = "result"
)

// characteristicWords say what a column is where a row is a characteristic.
var characteristicWords = words(
	means(nameHeading, "characteristic|characteristics|characteristic name|feature|feature name|dimension|dimension/specification|dimension / specification|"+
		"description|parameter|measurement|merkmal|merkmale|prüfmerkmal|prüfmerkmale|merkmalsbezeichnung|bezeichnung|benennung|maß|mass|charakteristik"),
	means(numberHeading, "no|nr|#|item|item no|pos|position|char no|char. no|char no.|characteristic no|characteristic number|feature no|balloon|balloon no|bubble|"+
		"lfd nr|lfd. nr|merkmal nr|merkmal-nr"),
	means(requirementHeading, "requirement|requirements|specification|spec|spec limits|specification limits|limits|tolerance|tolerances|drawing requirement|"+
		"anforderung|anforderungen|vorgabe|toleranz|toleranzen"),
	means(resultHeading, "result|results|actual|actuals|actual value|measured|measured value|measured values|observed|ist|istwert|istwerte|istmaß|messwert|messwerte|ergebnis|ergebnisse"),
)

// fieldNumber is the number of a form's field before its heading: "8 Requirement".
var fieldNumber = regexp.MustCompile(`^\d+[a-z]? +`)

// partNumbered is the heading of a column of one part: 1, S1, R12, Part 3, #4.
var partNumbered = regexp.MustCompile(`^(|#|\pL[\pL.# -]{0,11}?[ .#-]?)(\d{1,5})$`)

// rowColumnMeans is the part of a column where a row is a characteristic; empty for a part's column or anything else.
func rowColumnMeans(heading string) string {
	w := word(heading)
	if bare := fieldNumber.ReplaceAllString(w, ""); bare != "" {
		w = bare
	}
	if m := characteristicWords[w]; m != "" {
		return m
	}
	if m := labelWords[w]; m != "" {
		return m
	}
	name, _ := splitUnit(w)
	return characteristicWords[strings.TrimSpace(name)]
}

// characteristicColumn are the headings of a column that names what each row measured.
var characteristicColumn = words(means(nameHeading, "characteristic|characteristics|characteristic name|feature|feature name|dimension|parameter|merkmal|prüfmerkmal|"+
	"merkmalsbezeichnung|charakteristik"))

// oneCharacteristic refuses a sheet with a row a part and a characteristic: one column would hold readings of several.
func (t *table) oneCharacteristic() error {
	for _, c := range t.columns {
		if c.col == t.lot || c.col == t.group || characteristicColumn[word(c.name)] == "" || t.planned(c) {
			continue
		}
		seen := map[string]int{}
		rows := 0
		for _, r := range t.wanted() {
			if cell := t.cell(r, c.col); cell.Kind == cells.Text && filledText(cell) != "" && !numeric(cell) {
				seen[filledText(cell)]++
				rows++
			}
		}
		if len(seen) > 1 && rows >= 2*len(seen) {
			names := slices.Sorted(maps.Keys(seen))
			return t.refuse("%s: found the characteristics %s below each other, want a column (or a row) for each; bring the sheet into such a form, or keep the rows of one characteristic alone", t.columnText(c.col), list(names))
		}
	}
	return nil
}
