package importers

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"lotpair/qa"
)

// What makes a reading odd here is common practice, no source. Nothing is left out because of it.
const (
	oddDistance = 12 // robust standard deviations from the median
	oddFewest   = 5  // readings, below which nothing can be said
	oddShare    = 4  // at most one in so many: more are no slips
)

// codes are numbers that instruments and people write for "no value": all nines, the ends of whole numbers in computers, and
// the overload codes of measuring instruments (SCPI 1999, 7.2.1: 9.9E37 and 9.91E37).
var codes = []float64{-1, 32767, -32768, 65535, 2147483647, -2147483648, 9.9e37, 9.91e37}

// looksLikeCode says whether a number is one that is written for "no value".
func looksLikeCode(v float64) bool {
	if v == 0 || slices.Contains(codes, v) {
		return true
	}
	s := strings.TrimPrefix(qa.Plain(math.Abs(v)), "−")
	return len(s) >= 2 && strings.Trim(s, "9.") == "" && strings.Count(s, "9") >= 2
}

// slips are the factors that a slip of the decimal mark or a unit makes.
var slips = []struct {
	factor float64
	text   string
}{
	{10, "10 times"},
	{100, "100 times"},
	{1000, "1000 times"},
	{0.1, "a tenth of"},
	{0.01, "a hundredth of"},
	{0.001, "a thousandth of"},
	{25.4, "25.4 times (inch and millimetre)"},
	{1 / 25.4, "1/25.4 of (inch and millimetre)"},
}

// enough is how many readings, evenly spaced, say where the middle of a lot is.
const enough = 20000

// middle is the median and the robust standard deviation: 1.4826 times the median distance from it, for a normal distribution.
func middle(values []float64) (median, spread float64) {
	step := 1 + len(values)/enough
	s := make([]float64, 0, len(values)/step+1)
	for i := 0; i < len(values); i += step {
		s = append(s, values[i])
	}
	slices.Sort(s)
	median = half(s)
	for i, v := range s {
		s[i] = math.Abs(v - median)
	}
	slices.Sort(s)
	if spread = 1.4826 * half(s); spread == 0 {
		if spread = 1e-3 * math.Abs(median); spread == 0 {
			spread = 1
		}
	}
	return median, spread
}

func half(sorted []float64) float64 {
	n := len(sorted)
	if n%2 == 1 {
		return sorted[n/2]
	}
	return sorted[n/2-1]/2 + sorted[n/2]/2
}

// oddReading is a reading far from the others that looks like a code or a slip.
type oddReading struct {
	at   int
	text string // empty for a code
}

// oddReadings finds them among the values of one lot.
func oddReadings(values []float64) []oddReading {
	if len(values) < oddFewest {
		return nil
	}
	median, spread := middle(values)
	far := func(v float64) bool { return math.Abs(v-median) > oddDistance*spread }
	low, high := math.Inf(1), math.Inf(-1)
	for _, v := range values {
		if !far(v) {
			low, high = min(low, v-spread), max(high, v+spread)
		}
	}
	var out []oddReading
	for i, v := range values {
		if !far(v) {
			continue
		}
		slip := ""
		for _, s := range slips {
			if x := v / s.factor; v != 0 && math.Abs(median) > 5*spread && x >= low && x <= high {
				slip = s.text + " what the others are"
				break
			}
		}
		switch {
		case slip != "":
			out = append(out, oddReading{at: i, text: slip})
		case looksLikeCode(v):
			out = append(out, oddReading{at: i})
		}
	}
	if oddShare*len(out) > len(values) {
		return nil
	}
	return out
}

// sayOdd warns of readings that may be marks for "no value" or slips of the decimal mark. They are used until the plan says otherwise.
func (r *reader) sayOdd() {
	for _, s := range r.sides {
		for k, series := range s.lot.Series {
			if r.isAttribute(k) {
				continue
			}
			values := series.Values()
			if len(oddReadings(values)) == 0 {
				continue
			}
			at := make([]qa.Source, 0, len(values))
			for _, x := range series.Readings {
				if x.Used() {
					at = append(at, x.Source)
				}
			}
			s.table.warnOdd(series.Characteristic, values, at)
		}
	}
}

// checkScales refuses lots of which one is written in another unit or as deviations, as far as numbers can show it and unless
// the plan states unit or values of that lot.
func (r *reader) checkScales() error {
	var faults []Fault
	for k, c := range r.out.Characteristics {
		var m, s [2]float64
		var constant [2]bool // says nothing of how far apart readings of the other lot may lie
		few := c.Kind == kindAttribute
		for i := range r.sides {
			v := r.sides[i].lot.Series[k].Values()
			if few = few || len(v) < oddFewest; !few {
				m[i], s[i] = middle(v)
				constant[i] = slices.Max(v) == slices.Min(v)
			}
		}
		if few {
			continue
		}
		for _, i := range []int{1, 0} {
			side, other := r.sides[i], 1-i
			if constant[other] || side.plan.Unit != "" || side.plan.Values != "" || r.sides[other].plan.Unit != "" || r.sides[other].plan.Values != "" {
				continue
			}
			if text := scaleText(m[i], s[i], m[other], s[other]); text != "" {
				faults = append(faults, Fault{Place: side.table.place(), Text: fmt.Sprintf(
					"found the readings of %s in the %s lot %s (medians %s and %s), want both lots in one unit and none as deviations; state unit or values under [%s] (values = \"absolute\" if they are right as they are)",
					quoted(c.Name), side.side, text, qa.Plain(m[i]), qa.Plain(m[other]), side.side)})
				break
			}
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// scaleText says how one lot's readings look beside the other's: deviations from a nominal value, or in another unit.
func scaleText(m, s, other, otherSpread float64) string {
	if math.Abs(other) < 100*otherSpread || math.Abs(m-other) < oddDistance*otherSpread {
		return ""
	}
	if math.Abs(m) < 10*s && (s > 20*otherSpread || math.Abs(other) > 100*max(math.Abs(m), s)) {
		return "about 0 beside those of the other far from it: they look like deviations from a nominal value"
	}
	for _, f := range slips {
		if q := m / other / f.factor; q > 0.98 && q < 1.02 && math.Abs(m) > 50*s {
			return f.text + " those of the other: they look like another unit, or a slip of the decimal mark"
		}
	}
	return ""
}
