package importers

import (
	"math"
	"strconv"
	"strings"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// limit is one cell of a limit row.
type limit struct {
	means string
	cell  cells.Cell
}

// takeLimits keeps the cells of a row of limits or nominal values.
func (t *table) takeLimits(at int, means string) {
	r := t.sheet.Rows[at]
	t.mark(at, roleLimit)
	t.say("row %d holds limits or nominal values (%s).", r.Number, means)
	for _, c := range r.Cells {
		if stored(c) {
			t.limits[c.Col] = append(t.limits[c.Col], limit{means: means, cell: c})
		}
	}
}

// limitsOf are the limits that the sheet states for a column. A cell that cannot be read as a number, and two limits of one
// kind that differ, are faults.
func (t *table) limitsOf(col int, unit string, decimal byte) (qa.Characteristic, error) {
	if err := t.unclear[col]; err != nil {
		return qa.Characteristic{}, err
	}
	values := map[string]*float64{}
	places := map[string]int{}
	signed := false
	for _, l := range t.limits[col] {
		taken := takeCell(l.cell, t.book.IsText, unit, decimal)
		if taken.isMissing {
			continue
		}
		if !taken.isValue {
			return qa.Characteristic{}, planError(t.cellPlace(l.cell), "found %s, want a number as the %s limit or nominal value; correct the cell", quoted(l.cell.Text), l.means)
		}
		if had := values[l.means]; had != nil && *had != taken.value {
			return qa.Characteristic{}, planError(t.cellPlace(l.cell), "found %s, want %s as in the row above that says the same (%s); correct the sheet or state the limits in the plan",
				quoted(l.cell.Text), strconv.FormatFloat(*had, 'g', -1, 64), l.means)
		}
		v := taken.value
		values[l.means], places[l.means] = &v, taken.decimals
		signed = signed || l.means == lowerTol && strings.HasPrefix(trimmed(l.cell.Text), "+")
	}
	c := qa.Characteristic{Lower: values[lowerLabel], Target: values[nominalLabel], Upper: values[upperLabel]}
	if nominal := c.Target; nominal != nil {
		sum := func(tol string, v float64) *float64 {
			x := roundTo(*nominal+v, max(places[nominalLabel], places[tol]))
			return &x
		}
		if tol := values[upperTol]; tol != nil && c.Upper == nil {
			c.Upper = sum(upperTol, *tol)
		}
		if tol := values[lowerTol]; tol != nil && c.Lower == nil {
			v := -math.Abs(*tol) // a minus tolerance may be written without its sign
			if signed {
				v = *tol
			}
			c.Lower = sum(lowerTol, v)
		}
		if tol := values[bothTol]; tol != nil {
			if c.Upper == nil {
				c.Upper = sum(bothTol, math.Abs(*tol))
			}
			if c.Lower == nil {
				c.Lower = sum(bothTol, -math.Abs(*tol))
			}
		}
	}
	if c.Target == nil && (values[upperTol] != nil || values[lowerTol] != nil || values[bothTol] != nil) {
		t.warn("limits-incomplete", "%s has tolerances without a nominal value; no limits are taken from them.", t.columnText(col))
	}
	return c, nil
}

// roundTo takes the rounding of a sum of decimals off again: 12 - 0.05 is 11.95.
func roundTo(x float64, decimals int) float64 {
	v, err := strconv.ParseFloat(strconv.FormatFloat(x, 'f', decimals, 64), 64)
	if err != nil {
		return x
	}
	return v
}

// mergeLimits lets the plan's limits win over the sheet's, which is a warning where they differ. Two sheets that differ, with
// no word in the plan, are a fault: they may be of two revisions of the drawing.
func (t *table) mergeLimits(c *qa.Characteristic, plan, file qa.Characteristic) error {
	var taken []string
	for _, l := range []struct {
		name       string
		is         **float64
		plan, file *float64
	}{
		{"lower limit", &c.Lower, plan.Lower, file.Lower},
		{"target", &c.Target, plan.Target, file.Target},
		{"upper limit", &c.Upper, plan.Upper, file.Upper},
	} {
		switch {
		case l.file == nil:
		case *l.is == nil:
			*l.is = l.file
			taken = append(taken, l.name+" "+qa.Plain(*l.file))
		case **l.is == *l.file:
		case l.plan != nil:
			t.warn("limits-differ", "%s: the %s is %s in the plan and %s in the sheet; the plan's is taken.", c.Name, l.name, qa.Plain(*l.plan), qa.Plain(*l.file))
		default:
			return t.refuse("characteristic %s: found the %s %s here and %s in the other lot's sheet, want the same; state the limits in the plan", quoted(c.Name), l.name, qa.Plain(*l.file), qa.Plain(**l.is))
		}
	}
	if len(taken) > 0 {
		t.say("%s: taken from the sheet: %s.", c.Name, strings.Join(taken, ", "))
	}
	return nil
}

// planned is what the plan itself says of a characteristic.
func (r *reader) planned(i int) qa.Characteristic {
	if i < len(r.plan.Characteristics) {
		return r.plan.Characteristics[i]
	}
	return qa.Characteristic{}
}
