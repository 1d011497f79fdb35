package stats

import (
	"errors"
	"fmt"
	"math"

	"lotpair/qa/stats/dist"
)

// mostReadings is the largest sample size that is sought.
const mostReadings = 100_000_000

// ErrNoSize says that more readings would be needed than anyone takes.
var ErrNoSize = errors.New("more than 100,000,000 readings would be needed")

// Size returns the smallest number of reference readings (pairs), at least 2, with
// which the design shows its aim with at least the given power, the candidate's,
// ratio times as many and rounded up, and the power they have. It returns
// ErrBeyondMargin or ErrBias where no number would do. NRef and NCand of d are not
// read.
func Size(d Design, ratio, power float64) (nRef, nCand int, achieved float64, err error) {
	nRef, nCand, err = Parts(d, ratio, power)
	if err != nil {
		return 0, 0, 0, err
	}
	d.NRef, d.NCand = nRef, nCand
	return nRef, nCand, d.power(), nil
}

// Parts is Size for one who does not ask for the power achieved, which takes longer than
// the rest.
func Parts(d Design, ratio, power float64) (nRef, nCand int, err error) {
	if d.Paired {
		ratio = 1
	}
	nRef, nCand, _, err = d.size(ratio, power, false)
	return nRef, nCand, err
}

// SpreadSize is Size for the ratio of the standard deviations alone.
func SpreadSize(d Design, ratio, power float64) (nRef, nCand int, achieved float64, err error) {
	if !(d.SpreadRatio > 0) {
		return 0, 0, 0, fmt.Errorf("spread ratio: found %v, want a number above 0", d.SpreadRatio)
	}
	d.Aim, d.Shift, d.Lower, d.Upper = AimWithin, 0, -1, 1 // of no account
	return d.size(ratio, power, true)
}

// targets checks what a number of readings or parts is sought for.
func targets(ratio, power float64) error {
	switch {
	case !(ratio > 0) || math.IsInf(ratio, 1):
		return fmt.Errorf("ratio: found %v, want a number above 0", ratio)
	case !(power > 0 && power < 1):
		return fmt.Errorf("power: found %v, want a number above 0 and below 1", power)
	}
	return nil
}

// size is Size, or with alone that of the spread alone.
func (d Design) size(ratio, power float64, alone bool) (nRef, nCand int, achieved float64, err error) {
	if err := targets(ratio, power); err != nil {
		return 0, 0, 0, err
	}
	d.NRef, d.NCand = 2, 2
	if err := d.check(); err != nil {
		return 0, 0, 0, err
	}
	if d.room() <= 0 || d.SpreadRatio > 0 && d.SDCand/d.SDRef >= d.SpreadRatio {
		return 0, 0, 0, ErrBeyondMargin
	}
	if !alone && power >= d.most() {
		return 0, 0, 0, ErrBias
	}
	with := func(of func(Design) float64) func(n int) float64 {
		return func(n int) float64 {
			e := d
			e.NRef, e.NCand = n, Share(n, ratio)
			return of(e)
		}
	}
	// With too few candidates there is no test; from the first number on that
	// allows one, a power that is not there at once is not there for a while.
	first := 2
	if Share(first, ratio) < 2 {
		first = int(1/ratio) + 1
		for Share(first, ratio) < 2 {
			first++
		}
	}
	at, guess := with(Design.power), d.guess(ratio, power)
	double := !alone && !d.Paired && (d.Welch || d.SDRef != d.SDCand)
	switch {
	case alone:
		at, guess = with(Design.spread), d.spreadGuess(ratio, power)
	case double: // each power is a double integral: start from a nearer guess
		near := remembered(with(Design.near))
		start, _, err := smallest(near, first, guess, power)
		if err != nil {
			return 0, 0, 0, err
		}
		guess = float64(start)
		if exact := at; d.Welch && d.SpreadRatio == 0 {
			at = func(n int) float64 {
				if p := near(n); math.Abs(p-power) > nearError(d.Alpha, min(n, Share(n, ratio))) {
					return p // on the same side of the power as the exact one
				}
				return exact(n)
			}
		}
	}
	n, achieved, err := smallest(at, first, guess, power)
	if err != nil {
		return 0, 0, 0, err
	}
	if double && ratio != math.Trunc(ratio) {
		n = earlier(at, first, n, ratio, power)
		achieved = at(n)
	}
	return n, Share(n, ratio), achieved, nil
}

// earlier is the smallest number from first on that has the power, where n has it and
// n-1 has not. One reading more in the group of the smaller standard deviation may lower
// the power a little, so that a number before may have had it: of the numbers with as
// many candidate readings the first, or where the power falls and rises again one from
// which on they have it. So the two ends of each such run are looked at, back to where
// four runs have it no more; a power that nobody would plan for may fall for longer.
func earlier(at func(n int) float64, first, n int, ratio, power float64) int {
	most := 4
	if power < 0.5 {
		most = 12
	}
	best, last := n, n
	for runs := 0; runs < most && last >= first; runs++ {
		start := max(first, runStart(last, ratio))
		switch {
		case at(start) >= power:
			best, runs = start, 0
		case last < n && at(last) >= power:
			low, high := start, last
			for high-low > 1 {
				if middle := low + (high-low)/2; at(middle) >= power {
					high = middle
				} else {
					low = middle
				}
			}
			best, runs = high, 0
		}
		last = start - 1
	}
	return best
}

// runStart is the smallest number of reference readings with as many candidate ones as n
// has.
func runStart(n int, ratio float64) int {
	c := Share(n, ratio)
	start := max(1, min(n, int(float64(c-1)/ratio)))
	for Share(start, ratio) < c {
		start++
	}
	for start > 1 && Share(start-1, ratio) == c {
		start--
	}
	return start
}

// nearError is at least as large as near is off for Welch's test, n readings in the
// smaller lot: 0.06/(alpha (n-1)^2), or 0.7. Found by computing both, for alpha from 0.001 to
// 0.3, ratios of sizes from 1/4 to 4 and of standard deviations
// from 0.2 to 5: never above 0.6 of it. A test holds it to that.
func nearError(alpha float64, n int) float64 {
	return min(0.7, 0.06/alpha/square(float64(n-1)))
}

// remembered computes each power once.
func remembered(of func(n int) float64) func(n int) float64 {
	known := map[int]float64{}
	return func(n int) float64 {
		p, ok := known[n]
		if !ok {
			p = of(n)
			known[n] = p
		}
		return p
	}
}

// Share returns how many candidate readings go with n of the reference. A product that
// is whole but for rounding is taken as whole.
func Share(n int, ratio float64) int {
	c := float64(n) * ratio
	if near := math.Round(c); math.Abs(c-near) <= 1e-12*c {
		return int(min(near, math.MaxInt32))
	}
	return int(min(math.Ceil(c), math.MaxInt32))
}

// guess is the sample size that the normal distribution would need.
func (d Design) guess(ratio, power float64) float64 {
	sd := math.Hypot(d.SDRef, d.SDCand/math.Sqrt(ratio))
	if d.Paired {
		sd = d.SDRef
	}
	tail := d.Alpha
	if d.Aim == AimDifference {
		tail /= 2
	}
	miss := 1 - power
	if d.Aim == AimWithin && d.Upper-d.Shift == d.Shift-d.Lower {
		miss /= 2
	}
	z := max(0.1, -dist.NormalQuantile(tail)-dist.NormalQuantile(miss)) / d.room()
	return square(z*sd) + 1
}

// smallest finds the least n from first on with at(n) at least want, where at
// rises from there or falls first and then rises. The normal quantile of a power
// is nearly a straight line over the root of n, which leads to the answer in a few
// steps; it is done when n has the power and n-1 has been seen not to.
func smallest(at func(n int) float64, first int, guess, want float64) (int, float64, error) {
	p := at(first)
	if p >= want {
		return first, p, nil
	}
	line := dist.NormalQuantile(want)
	below, zBelow := first, dist.NormalQuantile(p)
	above, zAbove, pAbove := 0, 0.0, 0.0
	next := max(guess, float64(first+1))
	for step := 0; ; step++ {
		n := int(min(next, mostReadings))
		if above > 0 {
			n = min(n, above-1)
		}
		n = max(n, below+1)
		p := at(n)
		if z := dist.NormalQuantile(p); p >= want {
			above, zAbove, pAbove = n, z, p
		} else {
			if n >= mostReadings {
				return 0, 0, ErrNoSize
			}
			below, zBelow = n, z
		}
		if above-below == 1 {
			return above, pAbove, nil
		}
		x, y := math.Sqrt(float64(below)), math.Sqrt(float64(above))
		switch {
		case step == 0 && p >= want: // the guess may be right
			next = float64(n - 1)
		case step == 0:
			next = float64(n + 1)
		case above == 0 && step < 3 && line-zBelow < 1:
			// The line rises by about (z of alpha + z of power) over the root of n.
			next = float64(n) * square(1+(line-zBelow)/3) // overshoots a little
		case above == 0:
			next = 2 * float64(n)
		case step > 12 || math.IsInf(zBelow, -1) || math.IsInf(zAbove, 1):
			next = float64(below) + float64(above-below)/2
		default:
			next = math.Ceil(square(x + (y-x)*(line-zBelow)/(zAbove-zBelow)))
			if step%2 == 1 && p >= want { // close in from below
				next--
			}
		}
	}
}

func square(x float64) float64 { return x * x }
