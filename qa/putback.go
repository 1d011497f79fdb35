package qa

import (
	"slices"
	"strings"
)

// mostSingleExclusions is how many readings left out are put back one by one; with more the block would hide what it shows.
const mostSingleExclusions = 20

// putBack compares with every reading that was left out put back, and with each of them alone: the effect of every exclusion.
func (c *comparison) putBack(ref, cand Series) {
	left := ref.leftOut() + cand.leftOut()
	if left == 0 {
		return
	}
	everyOne := func(int) bool { return true }
	c.variant("exclusions-put-back", ref.withBack(everyOne), cand.withBack(everyOne))
	if left == 1 || left > mostSingleExclusions {
		return
	}
	for i, r := range ref.Readings {
		if !r.Used() {
			c.single(r, ref.withBack(only(i)), cand)
		}
	}
	for i, r := range cand.Readings {
		if !r.Used() {
			c.single(r, ref, cand.withBack(only(i)))
		}
	}
}

func only(i int) func(int) bool { return func(j int) bool { return i == j } }

// single compares with one reading put back and names its cell.
func (c *comparison) single(r Reading, ref, cand Series) {
	before := len(c.Sensitivity)
	c.variant("exclusion-put-back", ref, cand)
	for i := before; i < len(c.Sensitivity); i++ {
		c.Sensitivity[i].Cell = r.Source.Place()
	}
}

// withBack is the series with the readings put back that were left out and are meant. What was left out of the repeat readings
// of a part goes back into the part's mean: a part counts once.
func (s Series) withBack(meant func(int) bool) Series {
	if s.leftOut() == 0 {
		return s
	}
	type part struct{ group, id string }
	at := map[part]int{} // where the part's reading stands
	for i, r := range s.Readings {
		if r.Used() && r.Part != "" {
			at[part{r.Group, r.Part}] = i
		}
	}
	out := s
	out.Readings = slices.Clone(s.Readings)
	for i := range out.Readings {
		r := &out.Readings[i]
		if r.Used() || !meant(i) {
			continue
		}
		if j, found := at[part{r.Group, r.Part}]; found && r.Part != "" {
			mean := &out.Readings[j]
			n, m := float64(mean.cells()), float64(r.cells())
			mean.Value += (r.Value - mean.Value) * (m / (n + m))
			mean.Source.Cell += cellsApart + r.Source.Cell
			continue // it is in the mean now
		}
		r.LeftOut = ""
		if r.Part != "" {
			at[part{r.Group, r.Part}] = i
		}
	}
	return out
}

// cellsApart stands between the cells of the mean of repeat readings.
const cellsApart = ", "

// cells is how many cells the reading is the mean of.
func (r Reading) cells() int { return 1 + strings.Count(r.Source.Cell, cellsApart) }
