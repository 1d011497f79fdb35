package figure

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"lotpair/qa"
)

// Shape is the normal quantile plot of both lots at the usual size.
func Shape(c qa.Comparison, r qa.Readings) Figure {
	return ShapeAt(c, r, FacingWidth, FacingHeight)
}

// shapeFoot is kept free below the plot: the standard deviations, then the lots' names.
const shapeFoot = 36.0

// ShapeAt sets each reading at its value and at the place, in standard deviations, where a normal distribution has it; both
// lots back to back, the deviations growing outward. The straight line is the normal distribution of the lot's own mean and
// standard deviation: readings near it are near enough normal. Readings left out have no place in it.
func ShapeAt(c qa.Comparison, r qa.Readings, width, height float64) Figure {
	ref, cand := r.Reference.Of(c.Name), r.Candidate.Of(c.Name)
	f := newFacing(c, points(ref), points(cand), width, height, shapeFoot)
	f.Title = fmt.Sprintf("%s: normal quantile plot of both lots back to back, %d reference, %d candidate", c.Name, c.Reference.N, c.Candidate.N)
	most := 1.5
	for _, n := range []int{c.Reference.N, c.Candidate.N} {
		if n > 0 {
			most = math.Max(most, -quantile(n, 0))
		}
	}
	most *= 1.08
	f.deviations(qa.Reference, c.Reference, most)
	f.deviations(qa.Candidate, c.Candidate, most)
	f.quantiles(qa.Reference, ref.Readings, most)
	f.quantiles(qa.Candidate, cand.Readings, most)
	f.place()
	f.names(r)
	return f.Figure
}

// quantile is where a normal distribution has the i-th smallest of n readings, in standard deviations: the plotting position
// (i + 1 − 3/8)/(n + 1/4) with i from 0 (Blom 1958, from memory).
func quantile(n, i int) float64 {
	p := (float64(i) + 0.625) / (float64(n) + 0.25)
	return math.Sqrt2 * math.Erfinv(2*p-1)
}

// deviation is where so many standard deviations stand in a lot's pane.
func (f *facing) deviation(side qa.Side, z, most float64) float64 {
	from, to := f.pane(side)
	t := (z + most) / (2 * most)
	if side == qa.Reference {
		return to - t*(to-from)
	}
	return from + t*(to-from)
}

// deviations draws the scale of a pane and the straight line of its normal distribution.
func (f *facing) deviations(side qa.Side, s qa.SampleResult, most float64) {
	for z := -4.0; z <= 4; z += 2 {
		if math.Abs(z) > most {
			continue
		}
		x, text := f.deviation(side, z, most), "0"
		if z != 0 {
			text = qa.Fixed(z, 0) + " s"
			if z > 0 {
				text = "+" + text
			}
		}
		f.add(Mark{Kind: Line, Name: "deviation", Role: Rule, X: x, Y: head, X2: x, Y2: f.bottom, Size: 0.7},
			Mark{Kind: Label, Name: "deviation label", Role: Muted, X: x, Y: f.bottom + 13, Size: 10.5, Anchor: Middle, Text: text})
	}
	if s.Mean == nil || s.SD == nil || !(*s.SD > 0) {
		return
	}
	// The line is cut where it leaves the picture.
	low, high := math.Max(-most, (f.low-*s.Mean) / *s.SD), math.Min(most, (f.high-*s.Mean) / *s.SD)
	if !(low < high) {
		return
	}
	f.add(Mark{
		Kind: Line, Name: string(side) + " normal", Role: roleOf(side), Size: 1.2,
		X: f.deviation(side, low, most), Y: f.clamp(f.y(*s.Mean + low**s.SD)), X2: f.deviation(side, high, most), Y2: f.clamp(f.y(*s.Mean + high**s.SD)),
	})
}

// quantiles draws the readings in use. Of readings that would cover each other only the first is drawn, and the picture says so.
func (f *facing) quantiles(side qa.Side, all []qa.Reading, most float64) {
	used := make([]*qa.Reading, 0, len(all))
	for i := range all {
		if all[i].Used() {
			used = append(used, &all[i])
		}
	}
	slices.SortStableFunc(used, func(a, b *qa.Reading) int { return cmp.Compare(a.Value, b.Value) })
	const radius = 2.6
	apart := 0.0
	if len(used) > 400 {
		apart = radius
	}
	drawn, lastX, lastY := 0, math.Inf(1), math.Inf(1)
	for i, r := range used {
		x, y := f.deviation(side, quantile(len(used), i), most), f.y(r.Value)
		if math.Hypot(x-lastX, y-lastY) < apart {
			continue
		}
		drawn, lastX, lastY = drawn+1, x, y
		f.add(readingMark(side, r, x, y, radius))
	}
	if drawn < len(used) {
		f.note = joined(f.note, fmt.Sprintf("%d of %d of the %s drawn: the others would be covered", drawn, len(used), side))
	}
}
