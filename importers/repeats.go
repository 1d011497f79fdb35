package importers

import (
	"fmt"
	"math/big"
	"strconv"
	"strings"

	"lotpair/qa"
)

// maxRepeats is how many readings of one part are averaged: a column that says the same in every row is no part's id.
const maxRepeats = 500

// averageRepeats makes one reading of several rows of one part in a lot, where the plan names the column of the parts: their
// mean, with the cells and texts of all of them. A reading left out has no part in it; those of a part that one entry of the
// plan leaves out together are one reading left out. Repeats beyond the first are counted.
func (r *reader) averageRepeats() error {
	if r.plan.Reading.PartColumn == "" {
		return nil
	}
	for i := range r.sides {
		s := &r.sides[i]
		most, least := 0, 0
		for k := range s.lot.Series {
			series := &s.lot.Series[k]
			by := map[repeatOf][]int{}
			for j, x := range series.Readings {
				if of, ok := r.repeatOf(s.table, x); ok {
					by[of] = append(by[of], j)
				}
			}
			for _, n := range series.NonDetected {
				if at := by[repeatOf{part: [2]string{n.Group, n.Part}}]; len(at) > 1 || len(at) == 1 && n.Substitute == nil {
					return planError(n.Source.String(), "found %s among the repeat readings of the part %s, want numbers to average; name the cell or the part's others under exclude with a reason", quoted(n.Source.Text), quoted(n.Part))
				}
			}
			if len(by) == len(series.Readings) {
				continue
			}
			averaged, err := r.average(s, series, by)
			if err != nil {
				return err
			}
			for of, at := range by {
				if of.entry > 0 {
					continue
				}
				if most = max(most, len(at)); least == 0 || len(at) < least {
					least = len(at)
				}
			}
			series.Readings = averaged
		}
		if most < 2 {
			continue
		}
		s.lot.Rows = s.countParts()
		s.table.say("%s: repeat readings of a part are averaged, %d a part at most; a part counts once.", s.lot.Name, most)
		if least < most {
			s.table.warn("unequal-repeats", "%s: the parts have %d to %d readings each, averaged to one; means of fewer readings vary more.", s.lot.Name, least, most)
		}
	}
	return nil
}

// partOf is a part's id within its group.
func partOf(x qa.Reading) [2]string { return [2]string{x.Group, x.Part} }

// repeatOf is what readings have in common that are averaged: the part, and the entry of the plan that leaves them out
// together; 0 for readings used.
type repeatOf struct {
	part  [2]string
	entry int
}

// repeatOf says with which others a reading is averaged; not where it alone is left out.
func (r *reader) repeatOf(t *table, x qa.Reading) (repeatOf, bool) {
	if x.Used() {
		return repeatOf{part: partOf(x)}, true
	}
	n := r.entryOf(t, x.Source)
	return repeatOf{part: partOf(x), entry: n}, n > 0
}

// average replaces the readings of each part by their mean, in the place of the first.
func (r *reader) average(s *lotSide, series *qa.Series, by map[repeatOf][]int) ([]qa.Reading, error) {
	var out []qa.Reading
	for j, x := range series.Readings {
		of, ok := r.repeatOf(s.table, x)
		at := by[of]
		switch {
		case !ok || len(at) == 1:
			out = append(out, x)
			continue
		case x.Part == "":
			return nil, planError(x.Source.String(), "found a reading without a part's id under part_column, want the id in each row; write it there, or name the cell under exclude with a reason")
		case len(at) > maxRepeats:
			return nil, s.table.refuse("reading.part_column: found %d readings of the part %s in the lot %s, want at most %d; name the column of the parts' ids", len(at), quoted(x.Part), quoted(s.lot.Name), maxRepeats)
		case at[0] != j:
			continue
		}
		values, cellNames, texts := make([]float64, len(at)), make([]string, len(at)), make([]string, len(at))
		for i, k := range at {
			one := series.Readings[k]
			if one.Pair != x.Pair {
				return nil, planError(one.Source.String(), "found the pair %s, want %s as of the part's other readings (%s); correct the file, or part_column or pair_column in the plan", quoted(one.Pair), quoted(x.Pair), x.Source.Place())
			}
			values[i], cellNames[i], texts[i] = one.Value, one.Source.Cell, one.Source.Text
			x.Decimals = max(x.Decimals, one.Decimals)
		}
		x.Value = exactMean(values)
		x.Source.Cell, x.Source.Text = strings.Join(cellNames, ", "), strings.Join(texts, "; ")
		series.Repeats += len(at) - 1
		out = append(out, x)
	}
	return out, nil
}

// exactMean is the double nearest to the exact mean of the values as decimals in their shortest form: the mean of 11.997 and
// 11.998 is 11.9975.
func exactMean(values []float64) float64 {
	sum, x := new(big.Rat), new(big.Rat)
	for _, v := range values {
		if _, ok := x.SetString(strconv.FormatFloat(v, 'e', -1, 64)); ok { // readings are finite
			sum.Add(sum, x)
		}
	}
	mean, _ := sum.Quo(sum, new(big.Rat).SetInt64(int64(len(values)))).Float64()
	return mean
}

// countParts counts the parts among the lot's rows.
func (s *lotSide) countParts() int {
	ids, unnamed := map[string]bool{}, 0
	for _, r := range s.rows {
		id := ""
		if s.table.part > 0 {
			id = filledText(s.table.cell(r, s.table.part))
		}
		if id == "" {
			unnamed++
			continue
		}
		group := ""
		if s.table.group > 0 {
			group = filledText(s.table.cell(r, s.table.group))
		}
		ids[fmt.Sprintf("%q %q", group, id)] = true
	}
	return len(ids) + unnamed
}
