package importers

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"lotpair/importers/cells"
)

// doubled says whether the second half of the lot's rows repeats the first exactly in every characteristic: four rows or more
// with three distinct ones. Attributes do not count.
func (s *lotSide) doubled(attribute func(k int) bool) (string, bool) {
	if !s.mayBeDoubled(attribute) {
		return "", false
	}
	keys := map[int]string{}
	for k, series := range s.lot.Series {
		if attribute(k) { // parts that pass are alike
			continue
		}
		place := s.places(k)
		for _, x := range series.Readings {
			if n, ok := place(x.Source.Cell); ok && x.Used() {
				keys[n] += series.Characteristic + "\x00" + strconv.FormatFloat(x.Value, 'g', -1, 64) + "\x00"
			}
		}
	}
	numbers := make([]int, 0, len(keys))
	for n := range keys {
		numbers = append(numbers, n)
	}
	slices.Sort(numbers)
	half := len(numbers) / 2
	if len(numbers) < 4 || len(numbers)%2 != 0 {
		return "", false
	}
	distinct := map[string]bool{}
	for i := range half {
		if keys[numbers[i]] != keys[numbers[half+i]] {
			return "", false
		}
		distinct[keys[numbers[i]]] = true
	}
	if len(distinct) < 3 {
		return "", false
	}
	if s.table.turned {
		return fmt.Sprintf("parts %d to %d and %d to %d", numbers[0]+1, numbers[half-1]+1, numbers[half]+1, numbers[len(numbers)-1]+1), true
	}
	var ranges []string
	for _, col := range s.cols {
		l := cells.Letters(col)
		ranges = append(ranges, fmt.Sprintf("%s%d:%s%d and %s%d:%s%d", l, numbers[0], l, numbers[half-1], l, numbers[half], l, numbers[len(numbers)-1]))
	}
	return join2(ranges), true
}

// mayBeDoubled says quickly of most lots that they are not: in one that is, each value stands an even number of times, so that
// the bits of all of them cancel out.
func (s *lotSide) mayBeDoubled(attribute func(k int) bool) bool {
	for k, series := range s.lot.Series {
		if attribute(k) {
			continue
		}
		bits := uint64(0)
		for _, x := range series.Readings {
			if x.Used() {
				bits ^= math.Float64bits(x.Value + 0) // -0 is 0
			}
		}
		if bits != 0 {
			return false
		}
	}
	return true
}

// places numbers the cells of one characteristic by their rows: of the sheet, or of a turned table by the parts in their order,
// where one cell may hold several.
func (s *lotSide) places(k int) func(cell string) (int, bool) {
	if !s.table.turned {
		return func(cell string) (int, bool) {
			_, n, ok := cells.Parse(cell)
			return n, ok
		}
	}
	at := map[string][]int{}
	for i, r := range s.rows {
		name := s.table.cell(r, s.cols[k]).Name()
		at[name] = append(at[name], i)
	}
	return func(cell string) (int, bool) {
		rows := at[cell]
		if len(rows) == 0 {
			return 0, false
		}
		at[cell] = rows[1:]
		return rows[0], true
	}
}
