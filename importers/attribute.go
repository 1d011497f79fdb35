package importers

import (
	"math"
	"slices"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// kindAttribute is the kind of a characteristic whose parts fail or not.
const kindAttribute = "attribute"

func (r *reader) isAttribute(k int) bool { return r.out.Characteristics[k].Kind == kindAttribute }

// takeAttribute reads one cell of an attribute: 1 where it says what the plan's failed lists, else 0. Words are compared without
// case, after joining white space, and numbers as numbers: a failed part that is written otherwise must not pass. A word that
// the plan lists is no missing mark. What cannot be seen in the cell (an error, a formula without a value, a date) is a problem.
func takeAttribute(c cells.Cell, failed []string) taken {
	want := "a word or number for a part that is good or failed"
	switch c.Kind {
	case cells.Blank:
		return taken{isMissing: true}
	case cells.FormulaNoValue:
		return taken{problem: problem(FormulaWithoutValue, c.Text, want+", not a formula without a stored value")}
	case cells.Error:
		return taken{problem: problem(ErrorValue, c.Text, want+", not an error value")}
	case cells.Date:
		return taken{problem: problem(DateValue, c.Text, want+", not a date")}
	}
	switch {
	case slices.ContainsFunc(failed, func(f string) bool { return sameWord(f, c.Text) }):
		return taken{isValue: true, value: 1}
	case missing(c.Text):
		return taken{isMissing: true}
	}
	return taken{isValue: true}
}

// sameWord compares two words or numbers.
func sameWord(a, b string) bool {
	if strings.EqualFold(qa.JoinSpace(a), qa.JoinSpace(b)) {
		return true
	}
	x, _, err1 := ParseNumber(a, '.')
	y, _, err2 := ParseNumber(b, '.')
	return err1 == nil && err2 == nil && math.Abs(x-y) == 0
}

// sayAttributes says which words were taken for a failed part and which for a good one: a word that the plan forgot is seen here.
func (r *reader) sayAttributes() {
	for _, c := range r.out.Characteristics {
		if c.Kind != kindAttribute {
			continue
		}
		var words [2][]string // good, failed
		for _, s := range r.sides {
			for _, x := range s.lot.Of(c.Name).Readings {
				i := 0
				if x.Value > 0 {
					i = 1
				}
				if w := quoted(qa.JoinSpace(x.Source.Text)); !slices.Contains(words[i], w) {
					words[i] = append(words[i], w)
				}
			}
		}
		for i := range words {
			if len(words[i]) == 0 {
				words[i] = []string{"none"}
			}
		}
		r.out.Said = append(r.out.Said, c.Name+": taken for failed parts: "+join2(words[1])+"; for good parts: "+join2(words[0])+".")
	}
}

// Headings of columns that count parts: how many were looked at, and how many of them failed.
var (
	lookedAt   = words(means("", "inspected|n inspected|no inspected|number inspected|parts inspected|checked|tested|sample size|geprüft|anzahl geprüft|prüfumfang"))
	failedOnes = words(means("", "nonconforming|non-conforming|nonconformities|defective|defectives|defects|rejects|rejected|failed|failures|nok|bad|fehlerhaft|ausschuss|schlecht|n.i.o"))
)

// countsOfParts refuses a sheet of counts: how many parts were inspected and how many failed are no readings.
func (t *table) countsOfParts() error {
	var inspected, failed int
	for _, c := range t.columns {
		w := word(c.name)
		if _, ok := lookedAt[w]; ok {
			inspected = c.col
		}
		if _, ok := failedOnes[w]; ok {
			failed = c.col
		}
	}
	if inspected == 0 || failed == 0 {
		return nil
	}
	return t.refuse("found counts of parts in %s and %s, want a row a part with a word such as OK or NOK in it; write the parts out, and state kind = \"attribute\" and failed of the characteristic in the plan", t.columnText(inspected), t.columnText(failed))
}
