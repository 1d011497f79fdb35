package stats

import (
	"fmt"
	"math"
)

// SmallestMargin returns the m of the narrowest symmetric margin, -m to m, that
// the design would show with the given power; for a one-sided aim the margin's one
// limit is -m or m. Lower and Upper of d are not read.
func SmallestMargin(d Design, power float64) (float64, error) {
	if !(power > 0 && power < 1) {
		return 0, fmt.Errorf("power: found %v, want a number above 0 and below 1", power)
	}
	if d.Aim != AimWithin && d.Aim != AimNotLower && d.Aim != AimNotHigher {
		return 0, fmt.Errorf("aim: found %d, want one with a margin", d.Aim)
	}
	d.Lower, d.Upper, d.SpreadRatio = -1, 1, 0
	if err := d.check(); err != nil {
		return 0, err
	}
	at := func(m float64) float64 {
		d.Lower, d.Upper = -m, m
		return d.power()
	}
	unit := d.SDRef / math.Sqrt(float64(d.NRef))
	if !d.Paired {
		unit = math.Hypot(unit, d.SDCand/math.Sqrt(float64(d.NCand)))
	}
	unit = math.Hypot(unit, d.Bias)
	// The power rises from 0 to 1 with the margin. Against one limit it is alpha
	// where the limit is the shift itself.
	low, high := 0.0, math.Abs(d.Shift)+unit
	if d.Aim != AimWithin {
		low = -high
		for at(low) >= power {
			low *= 2
		}
	}
	for at(high) < power {
		low, high = high, high+2*(high-low)
		if math.IsInf(high, 1) {
			return 0, fmt.Errorf("margin: found none below the largest number, want a smaller standard deviation than %v", d.SDRef)
		}
	}
	return bracketed(low, high, func(m float64) float64 { return at(m) - power }), nil
}
