package importers

import (
	"fmt"
	"strings"

	"lotpair/importers/cells"
)

// taken is what one cell of measurements was taken as. Exactly one of the ways holds: a value, missing, a non-detect, or a
// problem.
type taken struct {
	value     float64
	decimals  int
	isValue   bool
	isMissing bool
	isBelow   bool // a non-detect: below a limit, or above one
	above     bool
	limit     *float64 // of a non-detect; nil where it states none
	text      string   // as found
	converted string   // why the value goes into the ledger; empty for a plain number
	thousands bool     // one mark was taken for a thousands mark because of the plan's decimal mark
	problem   *Problem
}

// takeCell reads one cell. The unit is that of the characteristic; decimal is the mark settled for the column's texts.
func takeCell(c cells.Cell, isText bool, unit string, decimal byte) taken {
	got := takeValue(c, isText, unit, decimal)
	if got.isValue && c.Kind == cells.Number {
		got.decimals = storedDecimals(c.Text, got.value)
	}
	return got
}

// takeValue does so and leaves the decimals of stored numbers open: to find them takes longer than all the rest.
func takeValue(c cells.Cell, isText bool, unit string, decimal byte) taken {
	switch c.Kind {
	case cells.Blank:
		return taken{isMissing: true}
	case cells.Number:
		v, _, err := ParseNumber(c.Text, '.')
		if err != nil {
			return taken{problem: err}
		}
		if u := formatUnit(c.Format); u != "" && unit != "" && unitKey(u) != unitKey(unit) {
			return taken{problem: problem(OtherUnit, c.Text, "a number in "+unit+"; its number format shows "+u)}
		}
		return taken{isValue: true, value: v}
	case cells.Text:
		if v, decimals, ok := quickNumber(c.Text, decimal); ok {
			got := taken{isValue: true, value: v, decimals: decimals}
			if !isText {
				got.converted = storedAsText
			}
			return got
		}
	}
	want := "a number"
	if unit != "" {
		want += " in " + unit
	}
	switch c.Kind {
	case cells.FormulaNoValue:
		return taken{problem: problem(FormulaWithoutValue, c.Text, want+", not a formula without a stored value")}
	case cells.Error:
		return taken{problem: problem(ErrorValue, c.Text, want+", not an error value")}
	case cells.Bool:
		return taken{problem: problem(BooleanValue, c.Text, want+", not a truth value")}
	case cells.Date:
		return taken{problem: problem(DateValue, c.Text, want+fmt.Sprintf(", not a date (the cell's format is %s)", quoted(c.Format)))}
	}
	switch {
	case missing(c.Text):
		return taken{isMissing: true}
	case nonDetect(c.Text):
		return takeBound(c.Text, unit, decimal, want)
	}
	return takeText(c.Text, isText, unit, decimal, want)
}

const storedAsText = "a number stored as text"

func takeText(text string, isText bool, unit string, decimal byte, want string) taken {
	v, decimals, err := ParseNumber(text, decimal)
	reason := ""
	number := text
	if err != nil {
		n, u, ok := cutUnit(text)
		if !ok && err.Code == NotANumber && dateText(text) {
			return taken{problem: problem(DateValue, text, want+", not a date or time")}
		}
		if !ok {
			if odd := oddCharacter(text); odd != "" && err.Code == NotANumber {
				err.Want += " in the digits 0 to 9; it holds the character " + odd
			}
			return taken{problem: err}
		}
		if unit == "" || unitKey(u) != unitKey(unit) {
			if unit == "" {
				want += "; its unit is stated nowhere"
			}
			return taken{problem: problem(OtherUnit, text, want)}
		}
		if v, decimals, err = ParseNumber(n, decimal); err != nil {
			err.Text = text
			return taken{problem: err}
		}
		number, reason = n, fmt.Sprintf("the unit %s taken off", quoted(u))
	}
	var reasons []string
	thousands := false
	if !isText {
		reasons = append(reasons, storedAsText)
	}
	if w, err := splitNumber(number, decimal); err == nil && w.grouped {
		reasons = append(reasons, "thousands marks taken out")
		thousands = w.fraction == ""
	}
	if reason != "" {
		reasons = append(reasons, reason)
	}
	return taken{isValue: true, value: v, decimals: decimals, converted: strings.Join(reasons, "; "), thousands: thousands}
}

// numeric says whether a cell looks like a number or a non-detect, whatever the decimal mark.
func numeric(c cells.Cell) bool {
	switch c.Kind {
	case cells.Number:
		return true
	case cells.Text:
		if plainNumber(c.Text) || nonDetect(c.Text) {
			return true
		}
		number, _, _ := cutUnit(c.Text)
		return isNumber(number)
	}
	return false
}
