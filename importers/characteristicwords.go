package importers

import (
	"regexp"
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
	if m := characteristicWords[strings.TrimSpace(name)]; m != "" || name == w {
		return m
	}
	return labelWords[word(name)]
}

// splitHeadings are the headings, and in the place of a tolerance that is merged over columns with their own texts below, such as
// + and -, both texts together.
func (s *characteristicSheet) splitHeadings() []cells.Cell {
	head := s.sheet.Rows[s.at]
	if s.at+1 == len(s.sheet.Rows) || s.sheet.Rows[s.at+1].Number != head.Number+1 {
		return head.Cells
	}
	var out []cells.Cell
	for _, c := range head.Cells {
		area, ok := s.mergedAt(c)
		if !ok || area.LastRow > area.FirstRow || rowColumnMeans(filledText(c)) != requirementHeading {
			out = append(out, c)
			continue
		}
		n := len(out)
		for col := area.FirstCol; col <= area.LastCol; col++ {
			sub := s.sheet.Rows[s.at+1].At(col)
			if sub.Text = filledText(c) + " " + filledText(sub); isLimit(rowColumnMeans(sub.Text)) {
				out, s.split[col], s.below = append(out, sub), true, s.at+1
			}
		}
		if len(out) == n {
			out = append(out, c)
		}
	}
	return out
}

// isLimit says whether a row or column holds nominal values, limits or tolerances.
func isLimit(means string) bool {
	switch means {
	case nominalLabel, upperLabel, lowerLabel, upperTol, lowerTol, bothTol:
		return true
	}
	return false
}
