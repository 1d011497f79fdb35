package figure

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"sort"

	"lotpair/qa"
)

// point is a reading as the plot needs it: no copy, because there may be a million.
type point struct{ *qa.Reading }

func (p point) leftOut() bool { return p.LeftOut != "" }

// points are a lot's readings in the order of the file.
func points(s qa.Series) []point {
	out := make([]point, 0, len(s.Readings))
	for i := range s.Readings {
		out = append(out, point{&s.Readings[i]})
	}
	return out
}

// byValue puts readings in order of value, those in use first among equals.
func byValue(p []point) {
	slices.SortStableFunc(p, func(a, b point) int {
		switch {
		case a.Value != b.Value:
			return cmp.Compare(a.Value, b.Value)
		case a.leftOut() == b.leftOut():
			return 0
		case a.leftOut():
			return 1
		}
		return -1
	})
}

// radii are tried from the largest; where even the smallest has no room the readings are drawn as bars.
var radii = []float64{3.6, 3.0, 2.4, 1.9}

// stacks draws both lots' readings and says how far from the axis they reach, reference first.
func (f *facing) stacks(ref, cand []point) [2]float64 {
	ref, cand = f.visible("reference", ref), f.visible("candidate", cand)
	room := f.axis - edge - gap - f.words
	// More readings than the smallest marks have room for on all rows are bars, without trying.
	least := 2 * radii[len(radii)-1]
	rows, row := (f.bottom-head)/(least*0.8)+2, room/(least+0.6)+1
	if float64(max(len(ref), len(cand))) > rows*row {
		return f.bars(ref, cand, room)
	}
	for _, r := range radii {
		a, b := f.stacked(ref, 2*r), f.stacked(cand, 2*r)
		most := float64(max(tallest(a), tallest(b)))
		if most <= 1 || room/(most-1) >= 2*r+0.6 {
			pitch := 11.0
			if most > 1 {
				pitch = math.Min(pitch, room/(most-1))
			}
			return [2]float64{f.dots(qa.Reference, a, r, pitch), f.dots(qa.Candidate, b, r, pitch)}
		}
	}
	return f.bars(ref, cand, room)
}

// visible drops the readings that lie outside the picture, which only those left out can, and notes how many.
func (f *facing) visible(side string, all []point) []point {
	outside := func(p point) bool { return !f.inside(p.Value) }
	if !slices.ContainsFunc(all, outside) {
		return all // a million readings are not copied
	}
	out := slices.DeleteFunc(slices.Clone(all), outside)
	f.note = joined(f.note, fmt.Sprintf("%d left out of the %s lies outside the picture", len(all)-len(out), side))
	return out
}

// stack is readings that stand side by side.
type stack struct {
	y   float64
	all []point
}

// stacked puts readings within a dot's height of the lowest one side by side, at the height of their mean (Wilkinson 1999, The
// American Statistician 53, 276-281, from memory). Where that sets two stacks on each other, every reading goes to the
// nearest of rows that lie a dot's height apart.
func (f *facing) stacked(ps []point, height float64) []stack {
	out := f.gathered(ps, height)
	for i := 1; i < len(out); i++ {
		if out[i-1].y-out[i].y < height*0.8 {
			return f.ruled(ps, height*0.95)
		}
	}
	return out
}

// ruled sets readings on rows of equal distance, counted from the bottom of the plot.
func (f *facing) ruled(ps []point, height float64) []stack {
	var out []stack
	for _, p := range ps {
		y := f.bottom - (math.Floor((f.bottom-f.y(p.Value))/height)+0.5)*height
		if n := len(out); n == 0 || out[n-1].y != y {
			out = append(out, stack{y: y})
		}
		last := &out[len(out)-1]
		last.all = append(last.all, p)
	}
	for _, s := range out {
		sort.SliceStable(s.all, func(a, b int) bool { return !s.all[a].leftOut() && s.all[b].leftOut() })
	}
	return out
}

func (f *facing) gathered(ps []point, height float64) []stack {
	var out []stack
	for i := 0; i < len(ps); {
		first := f.y(ps[i].Value)
		s := stack{}
		sum := 0.0
		for ; i < len(ps) && first-f.y(ps[i].Value) < height*0.85; i++ {
			s.all = append(s.all, ps[i])
			sum += f.y(ps[i].Value)
		}
		s.y = sum / float64(len(s.all))
		sort.SliceStable(s.all, func(a, b int) bool { return !s.all[a].leftOut() && s.all[b].leftOut() })
		out = append(out, s)
	}
	return out
}

func tallest(ss []stack) int {
	n := 0
	for _, s := range ss {
		n = max(n, len(s.all))
	}
	return n
}

// dots draws a mark a reading and returns how far they reach from the axis's gap.
func (f *facing) dots(side qa.Side, ss []stack, radius, pitch float64) float64 {
	reach := 0.0
	for _, s := range ss {
		for i, p := range s.all {
			away := gap + float64(i)*pitch
			m := Mark{Kind: Dot, Name: "reference reading", Role: Reference, X: f.axis - away, Y: s.y, Size: radius, Reading: p.Reading}
			if side == qa.Candidate {
				m = Mark{Kind: Diamond, Name: "candidate reading", Role: Candidate, X: f.axis + away, Y: s.y, Size: radius + 0.8, Open: true, Reading: p.Reading}
			}
			if p.leftOut() {
				m.Name, m.Role, m.Open = string(side)+" left out", Muted, true
			}
			f.add(m)
			reach = math.Max(reach, float64(i)*pitch+radius)
		}
	}
	return reach
}

// bars draws counts instead of readings: bars of one height on both sides, as long as the count, on one scale of counts.
func (f *facing) bars(ref, cand []point, room float64) [2]float64 {
	const tall = 5.0
	n := max(1, int((f.bottom-head)/tall))
	count := func(ps []point) []int {
		k := make([]int, n)
		for _, p := range ps {
			if !p.leftOut() {
				k[min(n-1, int((f.y(p.Value)-head)/tall))]++
			}
		}
		return k
	}
	a, b := count(ref), count(cand)
	most := 1
	for i := range a {
		most = max(most, a[i], b[i])
	}
	reach := [2]float64{}
	for i := range a {
		top := head + float64(i)*tall
		for side, k := range []int{a[i], b[i]} {
			if k == 0 {
				continue
			}
			length := math.Max(0.5, room*float64(k)/float64(most))
			reach[side] = math.Max(reach[side], length)
			m := Mark{Kind: Box, Name: "reference bar", Role: Reference, X: f.axis - 6 - length, Y: top + 0.5, X2: f.axis - 6, Y2: top + tall - 0.5}
			if side == 1 {
				m = Mark{Kind: Box, Name: "candidate bar", Role: Candidate, X: f.axis + 6, Y: top + 0.5, X2: f.axis + 6 + length, Y2: top + tall - 0.5, Open: true}
			}
			f.add(m)
		}
	}
	f.note = joined(f.note, fmt.Sprintf("bars count readings, the longest %d", most))
	return reach
}
