package draw

import (
	"image"
	"math"
)

type vertex struct{ x, y float64 }

// polygon is a closed convex outline, clockwise on the screen.
type polygon []vertex

// circle is a circle as a polygon fine enough for pixels: its sides leave the arc by less than a hundredth of the radius.
func circle(x, y, radius float64) polygon {
	const sides = 32
	p := make(polygon, sides)
	for i := range p {
		s, c := math.Sincos(2 * math.Pi * float64(i) / sides)
		p[i] = vertex{x + radius*c, y + radius*s}
	}
	return p
}

// grown moves every side outward by d (inward where d is negative): vertices move along the bisector from the centre, which
// is exact for boxes, diamonds and regular polygons.
func (p polygon) grown(d float64) polygon {
	out := make(polygon, len(p))
	n := len(p)
	for i, v := range p {
		before, after := p[(i+n-1)%n], p[(i+1)%n]
		ax, ay := normal(before, v)
		bx, by := normal(v, after)
		// The corner moves by d along both sides' normals: the mitre of the two.
		k := d / (1 + ax*bx + ay*by)
		out[i] = vertex{v.x + k*(ax+bx), v.y + k*(ay+by)}
	}
	return out
}

// normal is the unit vector that points out of a clockwise side.
func normal(a, b vertex) (x, y float64) {
	dx, dy := b.x-a.x, b.y-a.y
	l := math.Hypot(dx, dy)
	if l == 0 {
		return 0, 0
	}
	return dy / l, -dx / l
}

func (p polygon) reversed() polygon {
	out := make(polygon, len(p))
	for i, v := range p {
		out[len(p)-1-i] = v
	}
	return out
}

func (p polygon) bounds() image.Rectangle {
	if len(p) == 0 {
		return image.Rectangle{}
	}
	low, high := p[0], p[0]
	for _, v := range p {
		low = vertex{math.Min(low.x, v.x), math.Min(low.y, v.y)}
		high = vertex{math.Max(high.x, v.x), math.Max(high.y, v.y)}
	}
	const most = 1 << 20 // keeps the conversion to int inside its range; the image is smaller
	at := func(v float64) int { return int(math.Max(-most, math.Min(most, v))) }
	return image.Rect(at(math.Floor(low.x)), at(math.Floor(low.y)), at(math.Ceil(high.x)), at(math.Ceil(high.y)))
}
