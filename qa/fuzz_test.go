package qa_test

import (
	"encoding/json"
	"math"
	"strconv"
	"testing"

	"lotpair/qa"
)

// dealt deals out the fuzzer's input, and zeros when it is used up.
type dealt struct{ left []byte }

func (b *dealt) next() int {
	if len(b.left) == 0 {
		return 0
	}
	x := b.left[0]
	b.left = b.left[1:]
	return int(x)
}

// of picks one of n.
func (b *dealt) of(n int) int { return b.next() % n }

// number is a reading or margin: mostly plain, sometimes at the ends of the arithmetic.
func (b *dealt) number() float64 {
	whole := float64(b.next()) - 128
	switch b.of(8) {
	case 0, 1, 2, 3:
		return whole / 8
	case 4:
		return 1000 + whole/64
	case 5:
		return math.Ldexp(whole, 4*(b.next()-128))
	case 6:
		return math.Float64frombits(math.Float64bits(1+whole/256) + uint64(b.next()))
	}
	return math.Pow10(b.of(30)-15) * whole
}

// some is a pointer to a number in a quarter of the cases or more.
func (b *dealt) some(odds int) *float64 {
	if b.of(odds) > 0 {
		return nil
	}
	return ptr(b.number())
}

// fuzzedPlan is any plan, sound or not.
func fuzzedPlan(b *dealt) qa.Plan {
	p := plan([]qa.Objective{qa.Equivalence, qa.NotLower, qa.NotHigher, qa.Difference, qa.Lower, qa.Higher}[b.of(6)], nil)
	c := &p.Criterion
	c.Method = []string{"", "welch", "pooled", "paired", "log"}[b.of(5)]
	m := &qa.Margin{}
	switch x := math.Abs(b.number()); b.of(9) {
	case 0, 1:
		m.Absolute = &x
	case 2:
		m.Lower, m.Upper = b.some(4), &x
	case 3:
		m.ToleranceFraction = ptr(float64(1+b.next()) / 256)
	case 4:
		m.ReferenceFraction = ptr(float64(1+b.next()) / 257)
	case 5:
		m.RatioLower, m.RatioUpper = ptr(float64(1+b.next())/257), ptr(1+float64(1+b.next())/64)
	case 6:
		m.SDMultiple, m.SD = ptr(float64(1+b.next())/64), b.some(2)
	case 7:
		m.KeepPpk, m.Mean, m.SD = ptr(float64(1+b.next())/128), b.some(2), b.some(2)
	default:
		m = nil
	}
	c.Margin = m
	if m != nil { // mostly a plan that fits together, or nothing of the comparison would be reached
		switch ratio := m.RatioLower != nil; {
		case ratio && b.of(16) > 0:
			c.Method = "log"
		case !ratio && c.Method == "log" && b.of(16) > 0:
			c.Method = "welch"
		case m.KeepPpk != nil && c.Method == "paired" && b.of(16) > 0:
			c.Method = "pooled"
		}
	}
	if a := b.next(); a > 0 {
		c.Alpha = ptr(float64(a) / 512)
	}
	if b.of(3) == 0 {
		c.SpreadRatio = ptr(1 + float64(1+b.next())/64)
	}
	if c.Guard = b.some(8); c.Guard != nil {
		*c.Guard = math.Abs(*c.Guard) / 1024
	}
	if b.of(6) == 0 && c.Method != "paired" {
		c.Groups = "random"
		p.Reading.GroupColumn = "Heat"
	}
	if b.of(8) == 0 {
		c.SecondSample = "one"
	}
	if b.of(4) == 0 {
		p.Reading.NonDetect = []string{"exclude", "limit", "half-limit", "zero"}[b.of(4)]
	}
	p.Reading.PairColumn = "Pair"
	return p
}

// fuzzedSeries is any readings of one lot.
func fuzzedSeries(b *dealt, name string) qa.Series {
	s := qa.Series{Characteristic: name}
	n := b.of(24)
	same := b.of(8) == 0
	first := b.number()
	for i := range n {
		r := qa.Reading{
			Value: first, Part: strconv.Itoa(i), Pair: strconv.Itoa(i), Decimals: b.of(4), Group: strconv.Itoa(i % (1 + b.of(4))),
			Source: qa.Source{File: "lots.csv", Cell: "C" + strconv.Itoa(i+2), Text: "…"},
		}
		if !same {
			r.Value = b.number()
		}
		if b.of(32) == 0 && i > 0 {
			r.LeftOut = "NCR 1"
		}
		s.Readings = append(s.Readings, r)
	}
	for i := range b.of(12) / 10 {
		d := qa.NonDetect{Limit: b.some(2), Above: b.of(4) == 0, Decimals: 2, Source: qa.Source{File: "lots.csv", Cell: "D" + strconv.Itoa(i+2), Text: "<"}}
		s.NonDetected = append(s.NonDetected, d)
		s.NonDetects++
	}
	s.Unread, s.Missing = b.of(18)/16, b.of(18)/16
	s.Rows = n + s.NonDetects + s.Unread + s.Missing
	return s
}

// FuzzCompare holds Compare to its word for any plan that Validate lets pass and any finite readings: no panic, no number that is
// none, and a verdict that is the one of the interval and the margin shown.
func FuzzCompare(f *testing.F) {
	f.Add([]byte{})
	f.Add([]byte("equivalence of two plain lots, long enough to fill the plan and some readings of each lot"))
	f.Fuzz(func(t *testing.T, input []byte) {
		b := &dealt{left: input}
		p := fuzzedPlan(b)
		ch := qa.Characteristic{Name: "X", Lower: b.some(3), Target: b.some(6), Upper: b.some(3), SD: b.some(8)}
		if b.of(8) == 0 {
			ch = qa.Characteristic{Name: "X", Kind: "attribute", Failed: []string{"fail"}}
		} else if b.of(6) == 0 {
			ch.Uncertainty = &qa.Uncertainty{Reference: math.Abs(b.number()), Candidate: math.Abs(b.number())}
		}
		p.Characteristics = []qa.Characteristic{ch}
		if ch.Kind == "attribute" && p.Criterion.Margin != nil {
			p.Criterion = qa.Criterion{Objective: p.Criterion.Objective, Alpha: p.Criterion.Alpha, Margin: absolute(float64(1+b.next()) / 257)}
		}
		if len(p.Validate()) > 0 {
			return
		}
		ref, cand := fuzzedSeries(b, "X"), fuzzedSeries(b, "X")
		if ch.Kind == "attribute" {
			for _, s := range []qa.Series{ref, cand} {
				for i := range s.Readings {
					s.Readings[i].Value = float64(int(math.Abs(math.Mod(s.Readings[i].Value, 2))))
				}
			}
		}
		res, err := qa.Compare(p, lots(ch, ref, cand), qa.Run{})
		if err != nil {
			return
		}
		if _, err := json.Marshal(res); err != nil {
			t.Fatalf("result: got %v, want numbers only", err)
		}
		sound(t, res.Characteristics[0])
	})
}

// sound holds what is shown of one characteristic against itself.
func sound(t *testing.T, c qa.Comparison) {
	t.Helper()
	for _, x := range []*float64{c.Difference.P, c.Difference.PTwoSided} {
		if x != nil && !(*x > 0 && *x <= 1) {
			t.Errorf("p: got %v, want above 0 and at most 1", *x)
		}
	}
	if lower, upper := c.Difference.Lower, c.Difference.Upper; lower != nil && upper != nil && *lower > *upper {
		t.Errorf("difference: got %v to %v, want a lower end below the upper", *lower, *upper)
	}
	e := c.Equivalence
	if e == nil || !c.Objective.AgainstMargin() {
		return
	}
	shown := e.Lower != nil && e.Upper != nil && (e.MarginLower == nil || *e.Lower > *e.MarginLower) && (e.MarginUpper == nil || *e.Upper < *e.MarginUpper)
	if c.Verdict.Shown() && !shown && !qa.Has(c.Warnings, qa.WarnNonDetects) {
		t.Errorf("verdict: got %q, want it only with the interval inside the margin", c.Verdict)
	}
	if c.Verdict == qa.Undecided && len(qa.Sentences(c)) == 0 {
		t.Error("sentences: got none, want why it is undecided")
	}
}
