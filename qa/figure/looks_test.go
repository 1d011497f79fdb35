package figure_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa"
	"lotpair/qa/figure"
)

// looked is a comparison of 39 readings and one left out with 38, two of them outside the limits.
func looked(t testing.TB) (qa.Comparison, qa.Readings) {
	t.Helper()
	ref := lot("R-118", append(spread(39, 4.004, 0.03), 4.05), map[int]string{39: "dropped part, NCR-77"})
	cand := lot("C-022", append(spread(36, 3.942, 0.03), 3.88, 3.89), nil)
	return compared(t, qa.Characteristic{Unit: "mm", Lower: ptr(3.9), Target: ptr(4), Upper: ptr(4.1), Margin: &qa.Margin{Absolute: ptr(0.02)}}, ref, cand)
}

func TestOrderKeepsTheOrderOfTheFile(t *testing.T) {
	c, r := looked(t)
	f := figure.Order(c, r)
	axis := at(t, f, "axis").X
	for side, want := range map[string]int{"reference": 39, "candidate": 38} {
		marks := f.All(side + " reading")
		if len(marks) != want {
			t.Errorf("%s: got %d readings, want %d", side, len(marks), want)
		}
		for i, m := range marks {
			if i > 0 && m.X <= marks[i-1].X {
				t.Errorf("%s reading %d: got it at %v, want it right of %v", side, i, m.X, marks[i-1].X)
			}
			if (m.X < axis) != (side == "reference") {
				t.Errorf("%s reading %d stands on the other lot's side", side, i)
			}
			if cell := fmt.Sprintf("D%d", i+2); m.Reading == nil || m.Reading.Source.Cell != cell {
				t.Errorf("%s reading %d: got %+v, want the one in %s", side, i, m.Reading, cell)
			}
		}
	}
	if n := len(f.All("reference left out")); n != 1 {
		t.Errorf("left out: got %d, want 1", n)
	}
	// The line joins readings in use alone.
	if n := len(f.All("reference order")); n != 38 {
		t.Errorf("strokes between readings: got %d, want 38", n)
	}
}

func TestOrderOfManyIsStrokes(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}},
		lot("R", spread(20000, 4, 0.05), nil), lot("C", spread(20000, 4.01, 0.05), nil))
	f := figure.Order(c, r)
	if len(f.Marks) > 600 {
		t.Errorf("marks: got %d, want few", len(f.Marks))
	}
	if note := at(t, f, "note").Text; !strings.Contains(note, "each stroke spans about") {
		t.Errorf("note: got %q", note)
	}
	// Every reading lies in some stroke: the highest and the lowest are reached.
	low, high := math.Inf(1), math.Inf(-1)
	for _, m := range f.All("reference stroke") {
		low, high = math.Min(low, m.Y), math.Max(high, m.Y2)
	}
	band := at(t, f, "margin")
	y := func(v float64) float64 { return (band.Y+band.Y2)/2 - (v-*c.Reference.Mean)/0.04*(band.Y2-band.Y) }
	near(t, "highest", low, y(*c.Reference.Max))
	near(t, "lowest", high, y(*c.Reference.Min))
}

// TestShapeStandsOnQuantiles checks the places against the normal distribution's: of 3 readings the middle one stands at 0 and
// the others at the quantile of (3 - 3/8)/(3 + 1/4) = 0.8077, which is 0.8694 (Abramowitz and Stegun, table 26.1, between 0.86
// and 0.87).
func TestShapeStandsOnQuantiles(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}}, lot("R", []float64{4.01, 4, 3.99}, nil), lot("C", []float64{3.99, 4, 4.01}, nil))
	f := figure.Shape(c, r)
	for _, side := range []string{"reference", "candidate"} {
		m := f.All(side + " reading")
		if len(m) != 3 {
			t.Fatalf("%s: got %d readings, want 3", side, len(m))
		}
		zero := f.All("deviation")[0].X // with 1.62 standard deviations on either side, only 0 is marked
		if side == "candidate" {
			zero = f.All("deviation")[1].X
		}
		near(t, side+" middle", m[1].X, zero)
		near(t, side+" ends", m[0].X+m[2].X, 2*zero)
		line := at(t, f, side+" normal")
		// On the line a deviation of z stands z standard deviations (0.01) above the mean; the highest reading of the three is
		// 1 standard deviation up and stands at the quantile 0.8694.
		slope := (line.Y2 - line.Y) / (line.X2 - line.X)
		one := (m[2].Y - m[1].Y) / slope
		near(t, side+" quantile", (m[2].X-m[1].X)/one, 0.8694)
		if (m[2].X < m[1].X) != (side == "reference") {
			t.Errorf("%s: the deviations do not grow outward", side)
		}
	}
}

func TestShapeOfManyDrawsWhatIsSeen(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}},
		lot("R", spread(20000, 4, 0.05), nil), lot("C", spread(20000, 4.01, 0.05), nil))
	f := figure.Shape(c, r)
	if len(f.Marks) > 600 {
		t.Errorf("marks: got %d, want few", len(f.Marks))
	}
	if note := at(t, f, "note").Text; !strings.Contains(note, "of 20000") {
		t.Errorf("note: got %q", note)
	}
}

func TestLimitsStandOnOneScale(t *testing.T) {
	c, r := looked(t)
	f := figure.Limits(c, r)
	lower, upper := f.All("lower limit"), f.All("upper limit")
	if len(lower) != 2 || len(upper) != 2 {
		t.Fatalf("posts: got %d and %d, want 2 and 2", len(lower), len(upper))
	}
	x := func(v float64) float64 { return lower[0].X + (v-3.9)/0.2*(upper[0].X-lower[0].X) }
	for i, s := range []qa.SampleResult{c.Reference, c.Candidate} {
		side := []string{"reference", "candidate"}[i]
		near(t, side+" mean", at(t, f, side+" mean").X, x(*s.Mean))
		m := at(t, f, side+" three deviations")
		near(t, side+" from", m.X, x(*s.Mean-3**s.SD))
		near(t, side+" to", m.X2, x(*s.Mean+3**s.SD))
	}
	if n := len(f.All("candidate outside")); n != 2 {
		t.Errorf("outside: got %d, want 2", n)
	}
	if got, want := at(t, f, "candidate figures").Text, "outside: 2 of 38 counted"; !strings.Contains(got, want) {
		t.Errorf("figures: got %q, want %q in it", got, want)
	}
}

// TestEveryLookSurvivesWhateverTheReadings throws readings of all sizes at every picture: marks are finite and in the picture.
func TestEveryLookSurvivesWhateverTheReadings(t *testing.T) {
	value := rapid.OneOf(rapid.Float64Range(-1000, 1000), rapid.SampledFrom([]float64{0, 1, 1e300, -1e300, 1e-300, math.MaxFloat64, -math.MaxFloat64}))
	rapid.Check(t, func(rt *rapid.T) {
		values := rapid.SliceOfN(value, 0, 40)
		ch := qa.Characteristic{Lower: ptr(-500), Target: ptr(0), Upper: ptr(500), Margin: &qa.Margin{Absolute: ptr(10)}}
		if rapid.Bool().Draw(rt, "one limit") {
			ch.Lower, ch.Target = nil, nil
		}
		c, r := compared(t, ch, lot("R", values.Draw(rt, "ref"), map[int]string{0: "dropped"}), lot("C", values.Draw(rt, "cand"), nil))
		w, h := rapid.Float64Range(100, 900).Draw(rt, "w"), rapid.Float64Range(100, 500).Draw(rt, "h")
		for _, f := range []figure.Figure{figure.OrderAt(c, r, w, h), figure.ShapeAt(c, r, w, h), figure.LimitsAt(c, r, w, h)} {
			for _, m := range f.Marks {
				if v := m.X + m.Y + m.X2 + m.Y2 + m.Size; math.IsNaN(v) || math.IsInf(v, 0) {
					rt.Errorf("%s: mark %+v is not finite", f.Title, m)
				}
				if m.X < -0.01 || m.X > f.Width+0.01 || m.Y < -0.01 || m.Y > f.Height+0.01 {
					rt.Errorf("%s: mark %q at %v, %v outside %v by %v", f.Title, m.Name, m.X, m.Y, f.Width, f.Height)
				}
			}
		}
	})
}

// otherwise is a comparison with its verdict by two other ways.
func otherwise(t testing.TB) qa.Comparison {
	t.Helper()
	c, _ := looked(t)
	c.Sensitivity = []qa.SensitivityResult{
		{Method: "pooled", Estimate: ptr(0.01), Level: ptr(0.9), Lower: ptr(-0.01), Upper: ptr(0.03), Verdict: qa.Undecided},
		{Method: "exclusions-put-back", Estimate: ptr(0), Level: ptr(0.9), Lower: ptr(-0.01), Upper: ptr(0.01), Verdict: qa.Equivalent},
	}
	return c
}

func TestSensitivityIsALineAWay(t *testing.T) {
	f := figure.Sensitivity(otherwise(t))
	if n := len(f.All("interval")); n != 3 {
		t.Fatalf("intervals: got %d, want the plan's own and 2 others", n)
	}
	centre := at(t, f, "zero").X
	one := at(t, f, "upper post").X - centre
	second := f.All("interval")[1]
	near(t, "interval from", second.X, centre-one/2)
	near(t, "interval to", second.X2, centre+1.5*one)
	var text []string
	for _, m := range f.Marks {
		if m.Kind == figure.Label {
			text = append(text, m.Text)
		}
	}
	for _, want := range []string{"Welch, as planned", "pooled", "exclusions put back", "undecided", "equivalent", "not equivalent"} {
		if !strings.Contains(strings.Join(text, "|"), want) {
			t.Errorf("words: got %q, want %q among them", text, want)
		}
	}
}

func TestRatiosStandAboutOne(t *testing.T) {
	c := equivalence(qa.Equivalence, ptr(0.9), ptr(1.1), ptr(0.95), ptr(1.05), ptr(1))
	c.Equivalence.Scale = "ratio"
	f := figure.Spine(c)
	near(t, "estimate", at(t, f, "estimate").X, at(t, f, "zero").X)
	near(t, "interval", at(t, f, "interval").X2-at(t, f, "zero").X, (at(t, f, "upper post").X-at(t, f, "zero").X)/2)
	c = equivalence(qa.Equivalence, ptr(0.8), ptr(1.25), ptr(0.8), ptr(1.25), ptr(1))
	c.Equivalence.Scale, c.Method = "ratio", "log"
	f = figure.Spine(c)
	near(t, "lower post", at(t, f, "zero").X-at(t, f, "lower post").X, at(t, f, "upper post").X-at(t, f, "zero").X)
	near(t, "lower end", at(t, f, "interval").X, at(t, f, "lower post").X)
}
