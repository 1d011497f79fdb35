package figure

import (
	"fmt"
	"math"

	"lotpair/qa"
)

// Order is the readings of both lots in the order of the file at the usual size.
func Order(c qa.Comparison, r qa.Readings) Figure {
	return OrderAt(c, r, FacingWidth, FacingHeight)
}

// OrderAt sets the readings in the order of the file, the reference left of the axis and the candidate right of it, each from
// left to right, joined by a line. Limits, margin and means stand as in the facing plot. Where a mark a reading has no room
// each stroke spans the readings that stand in a row.
func OrderAt(c qa.Comparison, r qa.Readings, width, height float64) Figure {
	ref, cand := r.Reference.Of(c.Name), r.Candidate.Of(c.Name)
	f := newFacing(c, points(ref), points(cand), width, height, foot)
	f.Title = fmt.Sprintf("%s: readings of both lots in the order of the file, %d reference, %d candidate", c.Name, c.Reference.N, c.Candidate.N)
	f.level(qa.Reference, c.Reference.Mean)
	f.level(qa.Candidate, c.Candidate.Mean)
	f.run(qa.Reference, ref.Readings)
	f.run(qa.Candidate, cand.Readings)
	f.sayMargin(f.Width)
	f.place()
	f.names(r)
	f.follow(qa.Reference, c.Checks.Reference.Lag1)
	f.follow(qa.Candidate, c.Checks.Candidate.Lag1)
	return f.Figure
}

// pane is where one lot's readings stand, from left to right, the room for labels kept free.
func (f *facing) pane(side qa.Side) (from, to float64) {
	if side == qa.Reference {
		return edge + f.words, f.axis - gap
	}
	return f.axis + gap, f.right - f.words
}

// level draws a lot's mean across its pane and names it at its outer end.
func (f *facing) level(side qa.Side, mean *float64) {
	if mean == nil || !f.inside(*mean) {
		return
	}
	from, to := f.pane(side)
	y := f.y(*mean)
	m := Mark{Kind: Line, Name: string(side) + " mean", Role: roleOf(side), X: from - 6, Y: y, X2: f.axis - 6, Y2: y, Size: 1.4}
	l := Mark{Kind: Label, Name: string(side) + " mean label", Role: roleOf(side), X: edge, Y: y + 4, Size: 11.5, Text: f.meanText(mean)}
	if side == qa.Candidate {
		m.X, m.X2 = f.axis+6, to+6
		l.X = to + 11
		f.rights = append(f.rights, l)
	} else {
		f.left = append(f.left, l)
	}
	f.add(m)
}

func roleOf(side qa.Side) Role {
	if side == qa.Candidate {
		return Candidate
	}
	return Reference
}

// readingMark is one reading of a lot: a filled dot for the reference, an open diamond for the candidate, an open mark that
// stands back for one left out.
func readingMark(side qa.Side, r *qa.Reading, x, y, radius float64) Mark {
	m := Mark{Kind: Dot, Name: "reference reading", Role: Reference, X: x, Y: y, Size: radius, Reading: r}
	if side == qa.Candidate {
		m = Mark{Kind: Diamond, Name: "candidate reading", Role: Candidate, X: x, Y: y, Size: radius + 0.8, Open: true, Reading: r}
	}
	if !r.Used() {
		m.Name, m.Role, m.Open = string(side)+" left out", Muted, true
	}
	return m
}

// run draws one lot's readings in their order.
func (f *facing) run(side qa.Side, all []qa.Reading) {
	from, to := f.pane(side)
	if len(all) == 0 || to <= from {
		return
	}
	step := 0.0
	if len(all) > 1 {
		step = (to - from) / float64(len(all)-1)
	}
	x := func(i int) float64 { return from + float64(i)*step }
	const least = 2.4 // points a reading, below which marks hide each other
	if len(all) > 1 && step < least {
		f.strokes(side, all, from, to)
		return
	}
	last := -1
	for i := range all {
		if !all[i].Used() || !f.inside(all[i].Value) {
			continue
		}
		if last >= 0 {
			f.add(Mark{Kind: Line, Name: string(side) + " order", Role: roleOf(side), X: x(last), Y: f.y(all[last].Value), X2: x(i), Y2: f.y(all[i].Value), Size: 0.7})
		}
		last = i
	}
	beyond := 0
	for i := range all {
		if !f.inside(all[i].Value) {
			beyond++
			continue
		}
		f.add(readingMark(side, &all[i], x(i), f.y(all[i].Value), math.Min(3, math.Max(1.6, step*0.42))))
	}
	f.sayBeyond(side, beyond)
}

func (f *facing) sayBeyond(side qa.Side, n int) {
	if n > 0 {
		f.note = joined(f.note, fmt.Sprintf("%d left out of the %s lies outside the picture", n, side))
	}
}

// strokes draws upright strokes from the lowest to the highest of the readings in use that share one place.
func (f *facing) strokes(side qa.Side, all []qa.Reading, from, to float64) {
	const wide = 2.0
	places := max(1, int((to-from)/wide))
	for p := range places {
		first, end := p*len(all)/places, (p+1)*len(all)/places
		low, high := math.Inf(1), math.Inf(-1)
		for _, r := range all[first:end] {
			if r.Used() {
				low, high = math.Min(low, r.Value), math.Max(high, r.Value)
			}
		}
		if low > high {
			continue
		}
		x, top, bottom := from+(float64(p)+0.5)*wide, f.y(high), f.y(low)
		if bottom-top < 1.2 {
			middle := (top + bottom) / 2
			top, bottom = middle-0.6, middle+0.6
		}
		f.add(Mark{Kind: Line, Name: string(side) + " stroke", Role: roleOf(side), X: x, Y: top, X2: x, Y2: bottom, Size: 1.3})
	}
	f.note = joined(f.note, fmt.Sprintf("each stroke spans about %d readings of the %s in a row", (len(all)+places-1)/places, side))
}

// follow says how each reading goes with the next, below the pane where there is room.
func (f *facing) follow(side qa.Side, lag *float64) {
	if lag == nil {
		return
	}
	l := Mark{Kind: Label, Name: string(side) + " next", Role: Muted, X: edge, Y: f.Height - 6, Size: 10.5, Text: "with the next: r = " + qa.Fixed(*lag, 2)}
	room := f.axis - edge - 110
	if side == qa.Candidate {
		l.X, l.Anchor = f.right, End
		room = f.right - f.axis - 110
	}
	if room >= length([]string{l.Text}, l.Size) {
		f.add(l)
	}
}
