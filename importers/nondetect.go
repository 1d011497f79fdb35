package importers

import (
	"strings"

	"lotpair/qa"
)

// boundSigns are the signs before a detection limit, the longer ones first.
var boundSigns = []struct {
	sign  string
	above bool
}{{"<=", false}, {">=", true}, {"<", false}, {">", true}, {"≤", false}, {"≥", true}}

// unsigned is a text without the sign of a bound.
func unsigned(text string) string {
	if text != "" && text[0] >= '0' && text[0] <= '9' { // most cells
		return text
	}
	s := trimmed(text)
	for _, b := range boundSigns {
		if rest, ok := strings.CutPrefix(s, b.sign); ok {
			return rest
		}
	}
	return text
}

// takeBound reads a non-detect: the limit behind the sign as any other number, in the unit; a word states none.
func takeBound(text, unit string, decimal byte, want string) taken {
	got := taken{isBelow: true, text: text}
	rest := unsigned(text)
	for _, b := range boundSigns {
		if strings.HasPrefix(trimmed(text), b.sign) {
			got.above = b.above
			break
		}
	}
	if number, _, _ := cutUnit(rest); rest == text || !isNumber(number) { // a word: below a limit that is not stated
		return got
	}
	number := takeText(trimmed(rest), true, unit, decimal, want)
	if number.problem != nil && number.problem.Code == NotANumber { // "< 0,05" in a column of points: only one reading is possible
		number = takeText(trimmed(rest), true, unit, 0, want)
	}
	if number.problem != nil {
		number.problem.Text = text
		return taken{problem: number.problem}
	}
	got.limit, got.decimals = &number.value, number.decimals
	return got
}

// takeNonDetect keeps a cell that states only a bound, and takes it for a reading where the plan says what for.
func (r *reader) takeNonDetect(series *qa.Series, entry *qa.Entry, got taken, t *table, row row) {
	of := t.ofRow(row, qa.Reading{Source: entry.Source, Decimals: got.decimals})
	n := qa.NonDetect{Source: entry.Source, Part: of.Part, Group: of.Group, Limit: got.limit, Above: got.above, Decimals: got.decimals}
	rule := r.plan.Reading.NonDetect
	n.Substitute = n.SubstituteFor(rule)
	series.NonDetected = append(series.NonDetected, n)
	entry.TakenAs = qa.TakenNonDetect
	if n.Substitute == nil {
		series.NonDetects++
		if rule == qa.NonDetectExclude {
			entry.Reason = "not among the readings (non_detect = \"exclude\")"
		}
		return
	}
	v := *n.Substitute
	entry.Value, entry.Reason = &v, "taken for this value (non_detect = "+tomlText(rule)+")"
	of.Value = v
	if rule == qa.NonDetectHalfLimit {
		of.Decimals++
	}
	series.Readings = append(series.Readings, of)
}

// ofRow gives a reading what its row says beside the value: part, group, pair and order.
func (t *table) ofRow(row row, x qa.Reading) qa.Reading {
	if t.part > 0 {
		x.Part = filledText(t.cell(row, t.part))
	}
	if t.group > 0 {
		x.Group = filledText(t.merged(row, t.group))
	}
	if t.pair > 0 {
		x.Pair = filledText(t.cell(row, t.pair))
	}
	if t.order > 0 {
		x.Order = filledText(t.cell(row, t.order))
	}
	return x
}
