package figure

import (
	"math"
	"sort"
)

// place sets the waiting labels, each column apart so that no label covers another, as near as possible to where it belongs.
func (f *facing) place() {
	f.add(apart(f.left, head-8, f.bottom-2)...)
	f.add(apart(f.rights, head-8, f.bottom-2)...)
}

// apart moves the baselines of labels at least a leading from each other, between top and bottom; the order stays.
func apart(labels []Mark, top, bottom float64) []Mark {
	out := append([]Mark{}, labels...)
	sort.SliceStable(out, func(i, j int) bool { return out[i].Y < out[j].Y })
	for i := range out {
		out[i].Y = math.Max(out[i].Y, top+8)
		if i > 0 {
			out[i].Y = math.Max(out[i].Y, out[i-1].Y+leading)
		}
	}
	for i := len(out) - 1; i >= 0; i-- {
		limit := bottom
		if i < len(out)-1 {
			limit = out[i+1].Y - leading
		}
		out[i].Y = math.Min(out[i].Y, limit)
	}
	return out
}
