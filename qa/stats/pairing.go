package stats

import (
	"math"
	"math/rand/v2"
	"slices"
)

// A pairing stands for all numbers rows[i] - columns[j] of two sorted slices,
// without holding them. As a triangle it stands for those with
// j < len(rows) - i only, which with columns = -rows (sorted) are the sums
// rows[i] + rows[j'] with i <= j'.
type pairing struct {
	rows, columns []float64
	triangle      bool
}

// A stretch is the numbers of a pairing strictly between low and high: below is
// how many of all are at most low, before how many are less than high.
type stretch struct {
	low, high     float64
	below, before int64
}

func (in stretch) left() int64 { return in.before - in.below }

// order returns the numbers of the given ranks, 1 for the smallest: exactly those
// that sorting all would give. It takes a sample of the numbers left, brackets
// the ranks between two of the sample, counts those below each in one walk of
// both slices, and goes on with what lies between, until that fits in a buffer.
// The random numbers choose the way, never the answer. (Sampling as Floyd &
// Rivest 1975, Communications of the ACM 18, 165-172; the walk as in
// Frederickson & Johnson 1982, J. Computer and System Sciences 24, 197-208; both
// from memory.)
func (p pairing) order(ranks []int64) []float64 {
	last := len(p.rows) - 1
	if math.IsInf(p.rows[last]-p.columns[0], 0) || math.IsInf(p.rows[0]-p.columns[len(p.columns)-1], 0) {
		half := func(v float64) float64 { return v / 4 }
		p.rows, p.columns = each(p.rows, half), each(p.columns, half)
		// A difference beyond the largest float64 is given as that.
		largest := math.MaxFloat64
		return each(p.order(ranks), func(v float64) float64 { return max(-largest, min(v*4, largest)) })
	}
	all := stretch{low: math.Inf(-1), high: math.Inf(1), before: int64(len(p.rows)) * int64(len(p.columns))}
	if p.triangle {
		n := int64(len(p.rows))
		all.before = n * (n + 1) / 2
	}
	sorted := slices.Clone(ranks)
	slices.Sort(sorted)
	s := search{pairing: p, random: rand.New(rand.NewPCG(1, 2)), found: map[int64]float64{}}
	s.find(slices.Compact(sorted), all)
	out := make([]float64, len(ranks))
	for i, r := range ranks {
		out[i] = s.found[r]
	}
	return out
}

func each(x []float64, f func(float64) float64) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		out[i] = f(v)
	}
	return out
}

const (
	sampled  = 1024 // numbers in a sample
	gathered = 2048 // numbers that are sorted at once
	aside    = 30   // places in the sample to each side of the ranks sought, about its root
)

type search struct {
	pairing
	random *rand.Rand
	buffer []float64
	found  map[int64]float64
}

// find looks for ranks, in rising order, that lie in a stretch.
func (s *search) find(ranks []int64, in stretch) {
	if len(ranks) == 0 {
		return
	}
	left := in.left()
	if left <= gathered {
		s.sample(in, left)
		for _, r := range ranks {
			s.found[r] = s.buffer[r-in.below-1]
		}
		return
	}
	s.sample(in, sampled)
	pivot := func(rank int64, by int) float64 {
		place := int(float64(rank-in.below)/float64(left)*sampled) + by
		return s.buffer[max(0, min(place, sampled-1))]
	}
	first, last := pivot(ranks[0], -aside), pivot(ranks[len(ranks)-1], aside)
	under, ranks, lower, in := s.split(ranks, in, first)
	s.find(under, lower)
	if first != last {
		ranks, over, between, upper := s.split(ranks, in, last)
		s.find(over, upper)
		s.narrower(ranks, between, left)
		return
	}
	s.narrower(ranks, in, left)
}

// narrower goes on with ranks together where that still shortens the stretch.
func (s *search) narrower(ranks []int64, in stretch, left int64) {
	if in.left() < left/2 {
		s.find(ranks, in)
		return
	}
	for i := range ranks {
		s.find(ranks[i:i+1], in)
	}
}

// split divides ranks and stretch at a number; ranks at it are found.
func (s *search) split(ranks []int64, in stretch, at float64) (under, over []int64, lower, upper stretch) {
	less, most := s.count(at)
	i := 0
	for i < len(ranks) && ranks[i] <= less {
		i++
	}
	j := i
	for j < len(ranks) && ranks[j] <= most {
		s.found[ranks[j]] = at
		j++
	}
	lower, upper = in, in
	lower.high, lower.before = at, less
	upper.low, upper.below = at, most
	return ranks[:i], ranks[j:], lower, upper
}

// limit is the number of columns that a row has.
func (p pairing) limit(row int) int {
	if p.triangle {
		return len(p.rows) - row
	}
	return len(p.columns)
}

// count returns how many numbers are less than v and how many at most v.
func (p pairing) count(v float64) (less, most int64) {
	a, b := 0, 0 // the first columns with a number less than v and at most v
	columns := p.columns
	for i, y := range p.rows {
		limit := p.limit(i)
		for b < len(columns) && y-columns[b] > v {
			b++
		}
		a = max(a, b)
		for a < len(columns) && y-columns[a] == v {
			a++
		}
		less += int64(max(0, limit-a))
		most += int64(max(0, limit-b))
	}
	return less, most
}

// sample fills the buffer with count numbers of a stretch, sorted: one at random
// from each of count equal parts of it, in the order of rows. All of the stretch
// is taken where count is its length.
func (s *search) sample(in stretch, count int64) {
	s.buffer = s.buffer[:0]
	left := in.left()
	place := func(k int64) int64 {
		if count == left {
			return k
		}
		return int64((float64(k) + s.random.Float64()) * (float64(left) / float64(count)))
	}
	var k, passed int64
	next := place(0)
	a, b := 0, 0 // the columns of the row from a up to b are in the stretch
	columns := s.columns
	for i, y := range s.rows {
		for a < len(columns) && !(y-columns[a] < in.high) {
			a++
		}
		b = max(a, b)
		for b < len(columns) && y-columns[b] > in.low {
			b++
		}
		width := int64(max(0, min(b, s.limit(i))-a))
		for k < count && next < passed+width {
			s.buffer = append(s.buffer, y-columns[a+int(next-passed)])
			k++
			next = max(next, min(place(k), left-1))
		}
		passed += width
	}
	slices.Sort(s.buffer)
}
