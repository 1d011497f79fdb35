package figure_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"lotpair/qa"
	"lotpair/qa/figure"
)

func ptr(v float64) *float64 { return &v }

// lot is a lot of one characteristic "Wall".
func lot(name string, values []float64, leftOut map[int]string) qa.Lot {
	s := qa.Series{Characteristic: "Wall", Rows: len(values)}
	for i, v := range values {
		s.Readings = append(s.Readings, qa.Reading{
			Value: v, Decimals: 3, LeftOut: leftOut[i],
			Source: qa.Source{File: "wall.csv", Cell: fmt.Sprintf("D%d", i+2), Text: fmt.Sprint(v)},
		})
	}
	return qa.Lot{Name: name, Rows: len(values), Series: []qa.Series{s}}
}

// spread makes n values about centre from the golden ratio's fractional parts: dense, even and the same each time.
func spread(n int, centre, half float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		_, u := math.Modf(float64(i+1) * 0.6180339887498949)
		v := centre + half*(2*u-1)*math.Abs(2*u-1)
		out[i] = math.Round(v*1000) / 1000
	}
	return out
}

func compared(t testing.TB, ch qa.Characteristic, ref, cand qa.Lot) (qa.Comparison, qa.Readings) {
	t.Helper()
	ch.Name = "Wall"
	r := qa.Readings{Reference: ref, Candidate: cand, Characteristics: []qa.Characteristic{ch}}
	res, err := qa.Compare(qa.Plan{Format: qa.PlanFormat}, r, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	return res.Characteristics[0], r
}

func at(t *testing.T, f figure.Figure, name string) figure.Mark {
	t.Helper()
	m, ok := f.Find(name)
	if !ok {
		t.Fatalf("%s: no mark %q", f.Title, name)
	}
	return m
}

func near(t *testing.T, what string, got, want float64) {
	t.Helper()
	if math.Abs(got-want) > 0.01 {
		t.Errorf("%s: got %v, want %v", what, got, want)
	}
}

func equivalence(o qa.Objective, lower, upper, low, high, estimate *float64) qa.Comparison {
	return qa.Comparison{Name: "Wall", Objective: o, Equivalence: &qa.EquivalenceResult{
		MarginLower: lower, MarginUpper: upper, Lower: low, Upper: high, Estimate: estimate,
	}}
}

func TestSpineStandsOnItsOwnMargin(t *testing.T) {
	f := figure.Spine(equivalence(qa.Equivalence, ptr(-0.02), ptr(0.02), ptr(-0.01), ptr(0.03), ptr(0.01)))
	centre, one := 184.0, 184/figure.Reach
	near(t, "lower post", at(t, f, "lower post").X, centre-one)
	near(t, "upper post", at(t, f, "upper post").X, centre+one)
	near(t, "zero", at(t, f, "zero").X, centre)
	near(t, "interval from", at(t, f, "interval").X, centre-one/2)
	near(t, "interval to", at(t, f, "interval").X2, centre+1.5*one)
	near(t, "lower end", at(t, f, "lower end").X, centre-one/2)
	near(t, "estimate", at(t, f, "estimate").X, centre+one/2)
	near(t, "band from", at(t, f, "margin").X, centre-one)
	near(t, "band to", at(t, f, "margin").X2, centre+one)
}

func TestSpineOfOneSideHasOnePost(t *testing.T) {
	f := figure.Spine(equivalence(qa.NotHigher, nil, ptr(0.008), ptr(-0.004), ptr(0.002), ptr(-0.001)))
	if n := len(f.All("lower post")); n != 0 {
		t.Errorf("lower posts: got %d, want 0", n)
	}
	near(t, "band from the edge", at(t, f, "margin").X, 0)
	near(t, "band to the post", at(t, f, "margin").X2, at(t, f, "upper post").X)
	f = figure.Spine(equivalence(qa.NotLower, ptr(-0.008), nil, ptr(-0.004), ptr(0.002), ptr(-0.001)))
	if n := len(f.All("upper post")); n != 0 {
		t.Errorf("upper posts: got %d, want 0", n)
	}
	near(t, "band to the edge", at(t, f, "margin").X2, figure.SpineWidth)
}

func TestSpineUnlikeBoundsStayOnOneScale(t *testing.T) {
	f := figure.Spine(equivalence(qa.Equivalence, ptr(-0.01), ptr(0.02), ptr(-0.005), ptr(0.005), ptr(0)))
	one := 184 / figure.Reach
	near(t, "lower post", at(t, f, "lower post").X, 184-one/2)
	near(t, "upper post", at(t, f, "upper post").X, 184+one)
}

func TestSpineBeyondTheScale(t *testing.T) {
	for _, c := range []struct {
		name      string
		low, high float64
		want, not []string
		x, x2     float64
	}{
		{"one end", -100, 0, []string{"lower beyond", "upper end", "interval"}, []string{"lower end"}, 0, 184},
		{"wholly left", -100, -50, []string{"lower beyond", "interval"}, []string{"upper end", "upper beyond", "estimate"}, 0, 26},
		{"wholly right", 50, 100, []string{"upper beyond", "interval"}, []string{"lower end", "estimate"}, 342, 368},
		{"both ends", -100, 100, []string{"lower beyond", "upper beyond", "estimate"}, []string{"lower end", "upper end"}, 0, 368},
	} {
		f := figure.Spine(equivalence(qa.Equivalence, ptr(-1), ptr(1), &c.low, &c.high, ptr((c.low+c.high)/2)))
		if c.name == "one end" {
			f = figure.Spine(equivalence(qa.Equivalence, ptr(-1), ptr(1), &c.low, &c.high, ptr(-50)))
		}
		for _, n := range c.want {
			at(t, f, n)
		}
		for _, n := range c.not {
			if _, ok := f.Find(n); ok {
				t.Errorf("%s: got a mark %q, want none", c.name, n)
			}
		}
		near(t, c.name+" from", at(t, f, "interval").X, c.x)
		near(t, c.name+" to", at(t, f, "interval").X2, c.x2)
	}
}

func TestSpineWithoutInterval(t *testing.T) {
	f := figure.Spine(equivalence(qa.Equivalence, ptr(-1), ptr(1), nil, nil, ptr(0.5)))
	at(t, f, "no interval")
	at(t, f, "estimate")
	if _, ok := f.Find("interval"); ok {
		t.Error("interval: got one, want none")
	}
}

func TestSpineOfADifferenceRestsOnItsInterval(t *testing.T) {
	c := qa.Comparison{Name: "Wall", Objective: qa.Difference, Difference: qa.DifferenceResult{Lower: ptr(1), Upper: ptr(3), Estimate: ptr(2)}}
	f := figure.Spine(c)
	if _, ok := f.Find("margin"); ok {
		t.Error("margin: got one, want none")
	}
	m := at(t, f, "interval")
	if !(m.X > at(t, f, "zero").X && m.X2 < figure.SpineWidth) {
		t.Errorf("interval: got %v to %v, want it right of zero and in the line", m.X, m.X2)
	}
}

func TestFacingCountsEveryReading(t *testing.T) {
	ref := lot("R-118", append(spread(39, 4.004, 0.03), 4.05), map[int]string{39: "dropped part, NCR-77"})
	cand := lot("C-022", spread(38, 3.942, 0.03), nil)
	c, r := compared(t, qa.Characteristic{Unit: "mm", Lower: ptr(3.9), Upper: ptr(4.1), Margin: &qa.Margin{Absolute: ptr(0.02)}}, ref, cand)
	f := figure.Facing(c, r)
	for name, want := range map[string]int{
		"reference reading": 39, "reference left out": 1, "candidate reading": 38, "candidate left out": 0,
		"upper limit": 1, "lower limit": 1, "margin": 1, "reference mean": 1, "candidate mean": 1,
	} {
		if got := len(f.All(name)); got != want {
			t.Errorf("%s: got %d, want %d", name, got, want)
		}
	}
	axis := at(t, f, "axis").X
	for _, m := range f.All("reference reading") {
		if m.X >= axis {
			t.Errorf("reference reading at %v, want it left of the axis %v", m.X, axis)
		}
	}
	// The scale is linear: the band's centre is the reference's mean, its half the margin.
	lower, upper := at(t, f, "lower limit").Y, at(t, f, "upper limit").Y
	y := func(v float64) float64 { return lower + (v-3.9)/(4.1-3.9)*(upper-lower) }
	near(t, "reference mean", at(t, f, "reference mean").Y, y(*c.Reference.Mean))
	near(t, "candidate mean", at(t, f, "candidate mean").Y, y(*c.Candidate.Mean))
	near(t, "band's top", at(t, f, "margin").Y, y(*c.Reference.Mean+0.02))
	near(t, "band's bottom", at(t, f, "margin").Y2, y(*c.Reference.Mean-0.02))
}

func TestFacingDenseReadingsBecomeBars(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}},
		lot("R", spread(10000, 4, 0.05), nil), lot("C", spread(10000, 4.01, 0.05), nil))
	f := figure.Facing(c, r)
	if len(f.Marks) > 250 {
		t.Errorf("marks: got %d, want few", len(f.Marks))
	}
	if len(f.All("reference bar")) == 0 || len(f.All("candidate bar")) == 0 {
		t.Error("bars: got none, want them on both sides")
	}
	at(t, f, "note")
}

func TestFacingFarLimitIsNamedNotDrawn(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Upper: ptr(400), Margin: &qa.Margin{Absolute: ptr(0.02)}},
		lot("R", spread(20, 4, 0.05), nil), lot("C", spread(20, 4, 0.05), nil))
	f := figure.Facing(c, r)
	if _, ok := f.Find("upper limit"); ok {
		t.Error("upper limit: got a line, want none")
	}
	if got, want := at(t, f, "note").Text, "upper 400.000 lies outside the picture"; got != want {
		t.Errorf("note: got %q, want %q", got, want)
	}
}

func TestFacingSurvivesWhateverTheReadings(t *testing.T) {
	one := func(v ...float64) qa.Lot { return lot("L", v, nil) }
	for name, lots := range map[string][2]qa.Lot{
		"none": {one(), one()}, "one": {one(1), one()}, "equal": {one(2, 2, 2), one(2, 2, 2)}, "zero": {one(0, 0), one(0, 0)},
		"huge": {one(1e300, -1e300), one(1e300, 2)}, "tiny": {one(1e-300, 2e-300), one(3e-300, 1e-300)},
	} {
		c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}}, lots[0], lots[1])
		for _, f := range []figure.Figure{figure.Facing(c, r), figure.Spine(c)} {
			for _, m := range f.Marks {
				if v := m.X + m.Y + m.X2 + m.Y2 + m.Size; math.IsNaN(v) || math.IsInf(v, 0) {
					t.Errorf("%s: mark %+v is not finite", name, m)
				}
			}
		}
	}
}

func TestFacingMarksStayInThePicture(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		values := rapid.SliceOfN(rapid.Float64Range(-1000, 1000), 1, 60)
		c, r := compared(t, qa.Characteristic{Lower: ptr(-500), Upper: ptr(500), Margin: &qa.Margin{Absolute: ptr(10)}},
			lot("R", values.Draw(rt, "ref"), nil), lot("C", values.Draw(rt, "cand"), nil))
		w, h := rapid.Float64Range(100, 900).Draw(rt, "w"), rapid.Float64Range(100, 500).Draw(rt, "h")
		f := figure.FacingAt(c, r, w, h)
		var labels []figure.Mark
		for _, m := range f.Marks {
			if m.X < 0 || m.X > f.Width || m.Y < 0 || m.Y > f.Height {
				rt.Errorf("mark %q at %v, %v outside %v by %v", m.Name, m.X, m.Y, f.Width, f.Height)
			}
			if m.Kind == figure.Label && m.Anchor == figure.Start && m.X == 6 {
				labels = append(labels, m)
			}
		}
		for i, a := range labels {
			for _, b := range labels[i+1:] {
				if math.Abs(a.Y-b.Y) < 12.9 {
					rt.Errorf("labels %q and %q lie on each other", a.Text, b.Text)
				}
			}
		}
	})
}

func TestTheSameReadingsGiveTheSameMarks(t *testing.T) {
	c, r := compared(t, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}}, lot("R", spread(40, 4, 0.05), nil), lot("C", spread(40, 4, 0.05), nil))
	a, b := fmt.Sprintf("%+v", figure.Facing(c, r)), fmt.Sprintf("%+v", figure.Facing(c, r))
	if a != b {
		t.Error("marks: got two different pictures of the same readings")
	}
}

func BenchmarkFacing(b *testing.B) {
	c, r := compared(b, qa.Characteristic{Margin: &qa.Margin{Absolute: ptr(0.02)}}, lot("R", spread(10000, 4, 0.05), nil), lot("C", spread(10000, 4, 0.05), nil))
	b.ReportAllocs()
	for b.Loop() {
		figure.Facing(c, r)
	}
}
