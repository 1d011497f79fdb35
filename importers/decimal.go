package importers

import (
	"iter"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// mark is how the decimal mark of a column's texts was settled.
type mark struct {
	decimal byte
	said    string       // how a comma was settled; empty for the point
	unclear []cells.Cell // the cells that leave it open; empty where it is settled

	grouping *cells.Cell // the first number with a point, where each of them could have it as a thousands mark
}

// settleDecimal settles the decimal mark of one column's texts: by the plan; by the texts themselves where every one with a
// comma can only be a decimal comma; by the limits where all texts lie near them when read in one way and none when read in
// the other. Numbers that a spreadsheet stored as numbers have no mark and no say. Else it stays open.
func settleDecimal(texts iter.Seq[cells.Cell], plan string, lower, upper *float64) mark {
	if plan != "" {
		return mark{decimal: plan[0]}
	}
	var commas, open []cells.Cell
	points, could := 0, 0
	var grouping cells.Cell
	found := func(thousands bool, c cells.Cell) {
		points++
		if thousands {
			if could++; could == 1 {
				grouping = c
			}
		}
	}
	for c := range texts {
		if point, thousands, ok := pointOf(c.Text); ok {
			if point {
				found(thousands, c)
			}
			continue
		}
		number, _, _ := cutUnit(unsigned(c.Text))
		w, err := splitNumber(number, 0)
		switch {
		case err != nil && err.Code == DecimalAmbiguous:
			open = append(open, c)
		case err != nil:
		case nonDetect(c.Text): // a bound that can be read in one way only says nothing of the readings' mark
		case w.comma:
			commas = append(commas, c)
		case w.fraction != "" || w.grouped:
			_, could := ungroup(strings.TrimLeft(trimmed(number), "+-\u2212"), ".")
			found(could, c)
		}
	}
	switch {
	case len(open) == 0 && len(commas) == 0:
		if points == 0 || could < points {
			return mark{decimal: '.'}
		}
		return mark{decimal: '.', grouping: &grouping}
	case points > 0:
		return mark{unclear: append(append([]cells.Cell{}, open...), commas...)}
	case len(open) == 0:
		return mark{decimal: ',', said: "every number with a comma there can only have a decimal comma"}
	}
	if lower != nil && upper != nil && *upper > *lower {
		asDecimal, asThousands := near(open, ',', *lower, *upper), near(open, '.', *lower, *upper)
		switch {
		case asDecimal == len(open) && asThousands == 0:
			return mark{decimal: ',', said: "only so do the readings lie near the specification limits"}
		case asThousands == len(open) && asDecimal == 0 && len(commas) == 0:
			return mark{decimal: '.', said: "only with thousands marks do the readings lie near the specification limits"}
		}
	}
	return mark{unclear: open}
}

// warnGrouping tells of a column between semicolons whose every number has a point and three digits behind it: where semicolons
// stand because the comma is the decimal mark, 12.500 may be twelve thousand. Limits in the plan speak for the point.
func (t *table) warnGrouping(m mark, plan qa.Characteristic, col int) {
	if m.grouping == nil || !t.book.IsText || t.book.Delimiter != ";" || plan.Lower != nil || plan.Target != nil || plan.Upper != nil {
		return
	}
	value, _, err := ParseNumber(m.grouping.Text, '.')
	if err != nil {
		return
	}
	t.warn("decimal-assumed", "%s: every number has a point and three digits behind it; it is read as a decimal point, %s in %s as %s. If the point groups thousands, state decimal = \",\" under [reading]; decimal = \".\" settles it as read.",
		t.columnText(col), quoted(m.grouping.Text), m.grouping.Name(), qa.Plain(value))
}

// pointOf says quickly of a plain number without a comma whether it has a point, and whether that could be a thousands mark.
func pointOf(text string) (point, thousands, ok bool) {
	if !plainNumber(text) || strings.IndexByte(text, ',') >= 0 {
		return false, false, false
	}
	if text[0] == '-' {
		text = text[1:]
	}
	mark := strings.IndexByte(text, '.')
	return mark > 0, mark > 0 && mark <= 3 && text[0] != '0' && len(text)-mark == 4, true
}

// near counts the cells whose value lies within the limits or one tolerance beyond them.
func near(texts []cells.Cell, decimal byte, lower, upper float64) int {
	n := 0
	width := upper - lower
	for _, c := range texts {
		number, _, _ := cutUnit(unsigned(c.Text))
		if v, _, err := ParseNumber(number, decimal); err == nil && v >= lower-width && v <= upper+width {
			n++
		}
	}
	return n
}
