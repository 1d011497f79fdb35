package stats

import (
	"errors"
	"fmt"
	"math"

	"lotpair/qa/stats/dist"
)

// An Aim is what a study is to show of the difference of two means, candidate
// minus reference.
type Aim int

// The aims: that it lies within a margin, above its lower or below its upper
// limit; or that it is not 0, below 0 or above 0.
const (
	AimWithin Aim = iota
	AimNotLower
	AimNotHigher
	AimDifference
	AimLower
	AimHigher
)

// A Design is a study that has not been made: how many readings of two normal
// groups, of which standard deviations, tested how, and the true Shift. Lower and
// Upper are the margin, an infinity where the aim has no such limit; the aims
// without margin ignore them. A paired design has NRef pairs, whose differences
// have the standard deviation SDRef, and ignores NCand and SDCand. Welch says
// which test; it does not apply to pairs.
//
// A SpreadRatio above 0 asks besides that the ratio of the standard deviations,
// candidate over reference, is shown to lie below it, by the F interval at level
// 1 - 2 alpha.
//
// Bias is the standard uncertainty of what the measuring systems add to every
// difference. It is normal about 0 and not seen in the readings, so that the estimate
// varies by it however many they are.
type Design struct {
	Aim           Aim
	Paired, Welch bool
	NRef, NCand   int
	SDRef, SDCand float64
	Alpha         float64
	Lower, Upper  float64
	Shift         float64
	SpreadRatio   float64
	Bias          float64
}

// ErrBeyondMargin says that the true shift lies on or beyond what is to be
// refuted: no number of readings would show the aim.
var ErrBeyondMargin = errors.New("the true shift lies on or beyond the margin")

// ErrBias says that what is not known of the measuring systems' bias alone leaves
// less power than is asked: no number of readings would do.
var ErrBias = errors.New("the measuring systems' bias is not known well enough")

// check says what makes the design impossible.
func (d Design) check() error {
	above := func(v float64) bool { return v > 0 && !math.IsInf(v, 1) }
	finite := func(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
	limits := d.Aim == AimWithin || d.Aim == AimNotLower || d.Aim == AimNotHigher
	switch {
	case d.NRef < 2 || !d.Paired && d.NCand < 2:
		return ErrTooFew
	case !above(d.SDRef) || !d.Paired && !above(d.SDCand):
		return fmt.Errorf("standard deviation: found %v and %v, want numbers above 0", d.SDRef, d.SDCand)
	case !(d.Alpha > 0 && d.Alpha < 0.5):
		return fmt.Errorf("alpha: found %v, want a number above 0 and below 0.5", d.Alpha)
	case !finite(d.Bias) || d.Bias < 0:
		return fmt.Errorf("bias: found %v, want a standard uncertainty from 0", d.Bias)
	case !finite(d.Shift):
		return fmt.Errorf("shift: found %v, want a number", d.Shift)
	case limits && d.Aim != AimNotHigher && !finite(d.Lower), limits && d.Aim != AimNotLower && !finite(d.Upper), d.Aim == AimWithin && !(d.Lower < d.Upper):
		return fmt.Errorf("margin: found %v to %v, want a lower limit below the upper one", d.Lower, d.Upper)
	case d.Aim < AimWithin || d.Aim > AimHigher:
		return fmt.Errorf("aim: found %d, want one of the aims", d.Aim)
	case d.SpreadRatio != 0 && !above(d.SpreadRatio):
		return fmt.Errorf("spread ratio: found %v, want a number above 0", d.SpreadRatio)
	case d.SpreadRatio != 0 && d.Paired:
		return errors.New("spread ratio: found one with a paired design, want two independent lots")
	}
	return nil
}

// room is how far the true shift is from the nearest value that is to be refuted,
// in the direction of the aim; 0 or less where no number of readings would show
// it.
func (d Design) room() float64 {
	switch d.Aim {
	case AimNotLower:
		return d.Shift - d.Lower
	case AimNotHigher:
		return d.Upper - d.Shift
	case AimDifference:
		return math.Abs(d.Shift)
	case AimLower:
		return -d.Shift
	case AimHigher:
		return d.Shift
	}
	return min(d.Shift-d.Lower, d.Upper-d.Shift)
}

// Room is how far no difference is from the nearest limit of the margin.
func (d Design) Room() float64 {
	d.Shift = 0
	return d.room()
}

// HalfWidth is about half of the 1 - 2 alpha interval that the study is expected to
// end in: its true standard error times the quantile of t with the degrees of freedom
// that the true standard deviations have.
func (d Design) HalfWidth() float64 {
	df, se := d.expected()
	return -dist.StudentQuantile(d.Alpha, df) * se
}

// expected are the degrees of freedom and the standard error by the true standard
// deviations.
func (d Design) expected() (df, se float64) {
	nr, nc := float64(d.NRef), float64(d.NCand)
	if d.Paired {
		return nr - 1, d.SDRef / math.Sqrt(nr)
	}
	a, b := d.SDRef/math.Sqrt(nr), d.SDCand/math.Sqrt(nc)
	se = math.Hypot(a, b)
	if !d.Welch {
		return nr + nc - 2, se
	}
	p, q := (a/se)*(a/se), (b/se)*(b/se)
	return 1 / (p*p/(nr-1) + q*q/(nc-1)), se
}

// most is the power that no number of readings reaches: 1 without Bias.
func (d Design) most() float64 {
	switch {
	case d.Bias == 0 || d.Aim == AimDifference: // a bias is a difference as well
		return 1
	case d.Aim == AimWithin:
		return dist.NormalLower((d.Upper-d.Shift)/d.Bias) - dist.NormalLower((d.Lower-d.Shift)/d.Bias)
	}
	return dist.NormalLower(d.room() / d.Bias)
}
