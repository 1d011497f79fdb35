package qa_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"lotpair/qa"
	"lotpair/qa/stats"
)

// D1 at ±0.010 is undecided. A double integral in SciPy (qa/stats/testdata/refpower.py, Welch, the standard deviations found)
// gives the power 0.908426740 for 16 a lot at a true difference of 0 and 0.884785731 for 15, and at the difference found
// 0.905301304 for 37 and 0.898184408 for 36.
func TestNewStudy(t *testing.T) {
	ch, ref, cand := d1()
	got := one(t, plan(qa.Equivalence, absolute(0.010)), lots(ch, ref, cand))
	want := qa.NewStudyResult{Power: 0.9, AtZero: &qa.StudyParts{Reference: 16, Candidate: 16}, AtEstimate: &qa.StudyParts{Reference: 37, Candidate: 37}}
	checkStudy(t, got, want)
	const sentence = "A new study of 16 a lot would show it with probability 0.90 if the difference is 0, one of 37 a lot if it is as found here; these readings are not to be extended unless the plan allowed it."
	if s := qa.Sentences(got); !strings.Contains(strings.Join(s, "\n"), sentence) {
		t.Errorf("sentences: got %q, want among them %q", s, sentence)
	}
	if shown := one(t, plan(qa.Equivalence, absolute(0.020)), lots(ch, ref, cand)); shown.NewStudy != nil {
		t.Errorf("shown: got %+v, want no new study", shown.NewStudy)
	}
	if asked := one(t, plan(qa.Difference, nil), lots(ch, ref, cand)); asked.NewStudy != nil {
		t.Errorf("difference: got %+v, want no new study", asked.NewStudy)
	}
	p := plan(qa.Equivalence, absolute(0.004)) // the estimate 0.00425 lies outside
	p.Criterion.Power = ptr(0.8)
	outside := one(t, p, lots(ch, ref, cand))
	if s := outside.NewStudy; s == nil || s.Power != 0.8 || s.AtZero == nil || s.AtEstimate != nil {
		t.Errorf("estimate outside: got %+v, want power 0.8, a number at zero and none at the estimate", s)
	}
}

func checkStudy(t *testing.T, c qa.Comparison, want qa.NewStudyResult) {
	t.Helper()
	got := c.NewStudy
	switch {
	case got == nil:
		t.Errorf("new study: got none, want %+v; verdict %s, %v", want, c.Verdict, c.Warnings)
	case got.Power != want.Power || (got.AtZero == nil) != (want.AtZero == nil) || (got.AtEstimate == nil) != (want.AtEstimate == nil) ||
		got.AtZero != nil && *got.AtZero != *want.AtZero || got.AtEstimate != nil && *got.AtEstimate != *want.AtEstimate:
		t.Errorf("new study: got %v, %+v, %+v, want %v, %+v, %+v", got.Power, got.AtZero, got.AtEstimate, want.Power, want.AtZero, want.AtEstimate)
	}
}

// TestNewStudyScales takes each method's new study and holds it to the design that it stands for.
func TestNewStudyScales(t *testing.T) {
	ch, ref, cand := d1()
	size := func(d stats.Design) *qa.StudyParts {
		n, m, _, err := stats.Size(d, 1, 0.9)
		if err != nil {
			return nil
		}
		return &qa.StudyParts{Reference: n, Candidate: m}
	}
	values := func(s qa.Series, f func(float64) float64) stats.Summary {
		var x []float64
		for _, r := range s.Readings {
			x = append(x, f(r.Value))
		}
		return stats.Summarize(x)
	}
	same := func(v float64) float64 { return v }
	x, y := values(ref, same), values(cand, same)
	base := stats.Design{Alpha: 0.05, Lower: -0.01, Upper: 0.01, SDRef: x.SD, SDCand: y.SD, Welch: true}
	with := func(change func(d *stats.Design)) stats.Design {
		d := base
		change(&d)
		return d
	}
	lx, ly := values(ref, math.Log), values(cand, math.Log)
	pooled := math.Sqrt((x.SD*x.SD + y.SD*y.SD) / 2)
	for _, c := range []struct {
		method    string
		objective qa.Objective
		margin    *qa.Margin
		d         stats.Design
		shift     float64
	}{
		{"pooled", qa.Equivalence, absolute(0.010), with(func(d *stats.Design) { d.Welch, d.SDRef, d.SDCand = false, pooled, pooled }), 0.00425},
		{"welch", qa.NotHigher, absolute(0.010), with(func(d *stats.Design) { d.Aim = stats.AimNotHigher }), 0.00425},
		{"log", qa.Equivalence, &qa.Margin{RatioLower: ptr(0.9992), RatioUpper: ptr(1.0008)}, with(func(d *stats.Design) {
			d.SDRef, d.SDCand, d.Lower, d.Upper = lx.SD, ly.SD, math.Log(0.9992), math.Log(1.0008)
		}), ly.Mean - lx.Mean},
		{"welch", qa.Equivalence, &qa.Margin{ReferenceFraction: ptr(0.0008)}, with(func(d *stats.Design) {
			d.SDRef, d.Lower, d.Upper = x.SD*1.0008, -0.0008*x.Mean, 0.0008*x.Mean
		}), 0.00425},
	} {
		t.Run(c.method+" "+string(c.objective), func(t *testing.T) {
			p := plan(c.objective, c.margin)
			p.Criterion.Method = c.method
			at := c.d
			at.Shift = c.shift
			checkStudy(t, one(t, p, lots(ch, ref, cand)), qa.NewStudyResult{Power: 0.9, AtZero: size(c.d), AtEstimate: size(at)})
		})
	}
}

// The spread may need more parts than the mean, and one as wide as asked is never shown.
func TestNewStudySpread(t *testing.T) {
	ch, ref, cand := d1()
	p := plan(qa.Equivalence, absolute(0.020))
	p.Criterion.SpreadRatio = ptr(1.6)
	got := one(t, p, lots(ch, ref, cand))
	n, m, _, err := stats.SpreadSize(stats.Design{SDRef: *got.Reference.SD, SDCand: *got.Candidate.SD, Alpha: 0.05, SpreadRatio: 1.6}, 1, 0.9)
	if err != nil {
		t.Fatal(err)
	}
	parts := &qa.StudyParts{Reference: n, Candidate: m}
	checkStudy(t, got, qa.NewStudyResult{Power: 0.9, AtZero: parts, AtEstimate: parts})
	p.Criterion.SpreadRatio = ptr(1.1) // the ratio found is 1.15
	checkStudy(t, one(t, p, lots(ch, ref, cand)), qa.NewStudyResult{Power: 0.9})
}

// A new study of an attribute starts from the fractions found.
func TestNewStudyAttribute(t *testing.T) {
	counts := func(n, failed int) qa.Series {
		v := make([]float64, n)
		for i := range failed {
			v[i] = 1
		}
		return series("leak", 0, v...)
	}
	ch := qa.Characteristic{Name: "leak", Kind: "attribute"}
	got := one(t, plan(qa.NotHigher, absolute(0.05)), lots(ch, counts(60, 3), counts(60, 4)))
	n, _, _, err := stats.FractionSize(stats.FractionDesign{Aim: stats.AimNotHigher, PRef: 0.05, PCand: 0.05, Alpha: 0.05, Upper: 0.05}, 1, 0.9)
	if err != nil {
		t.Fatal(err)
	}
	m, _, _, err := stats.FractionSize(stats.FractionDesign{Aim: stats.AimNotHigher, PRef: 0.05, PCand: 4.0 / 60, Alpha: 0.05, Upper: 0.05}, 1, 0.9)
	if err != nil {
		t.Fatal(err)
	}
	checkStudy(t, got, qa.NewStudyResult{Power: 0.9, AtZero: &qa.StudyParts{Reference: n, Candidate: n}, AtEstimate: &qa.StudyParts{Reference: m, Candidate: m}})
}

// Where groups are random a new study is of groups, whose means vary as found, with as many parts a group; the spread may ask for
// more parts, and so for more groups.
func TestNewStudyGroups(t *testing.T) {
	p := plan(qa.Equivalence, absolute(0.020))
	p.Reading.GroupColumn, p.Criterion.Claim = "Lot", "sources"
	ch := qa.Characteristic{Name: "Bore dia", Unit: "mm"}
	got := one(t, p, lots(ch, grouped(qa.Reference), grouped(qa.Candidate)))
	means := func(side qa.Side) stats.Summary { return stats.Summarize(stats.GroupMeans(d2[side])) }
	x, y := means(qa.Reference), means(qa.Candidate)
	d := stats.Design{Alpha: 0.05, Lower: -0.02, Upper: 0.02, SDRef: x.SD, SDCand: y.SD, Welch: true}
	parts := func() *qa.StudyParts {
		n, m, _, err := stats.Size(d, 1, 0.9)
		if err != nil {
			t.Fatal(err)
		}
		return &qa.StudyParts{Reference: 5 * n, Candidate: 5 * m, GroupsReference: n, GroupsCandidate: m}
	}
	zero := parts()
	d.Shift = y.Mean - x.Mean
	estimate := parts()
	checkStudy(t, got, qa.NewStudyResult{Power: 0.9, AtZero: zero, AtEstimate: estimate})
	if s := strings.Join(qa.Sentences(got), " "); !strings.Contains(s, fmt.Sprintf("A new study of %d groups a lot (%d parts)", zero.GroupsReference, zero.Reference)) {
		t.Errorf("got %q, want the groups said", s)
	}
	p.Criterion.SpreadRatio = ptr(1.2)
	wide := one(t, p, lots(ch, grouped(qa.Reference), grouped(qa.Candidate)))
	n, _, _, err := stats.SpreadSize(stats.Design{SDRef: *wide.Reference.SD, SDCand: *wide.Candidate.SD, Alpha: 0.05, SpreadRatio: 1.2}, 1, 0.9)
	if err != nil {
		t.Fatal(err)
	}
	if s := wide.NewStudy; s == nil || s.AtZero == nil || s.AtZero.Reference < n || s.AtZero.Reference >= n+5 || s.AtZero.GroupsReference*5 != s.AtZero.Reference {
		t.Errorf("with the spread: got %+v, want at least %d parts in whole groups of 5", s, n)
	}
}

// The spread of pairs is planned by Pitman and Morgan's test, with the correlation found.
func TestNewStudyPairs(t *testing.T) {
	x := []float64{10.1, 10.9, 9.4, 10.2, 11.3, 8.8, 10.0, 9.7, 10.6, 9.2}
	y := []float64{10.3, 11.2, 9.3, 10.5, 11.6, 9.1, 9.9, 9.9, 10.9, 9.3}
	a, b := series("v", 1, x...), series("v", 1, y...)
	for i := range a.Readings {
		a.Readings[i].Pair, b.Readings[i].Pair = fmt.Sprint(i), fmt.Sprint(i)
	}
	p := plan(qa.Equivalence, absolute(2))
	p.Criterion.Method, p.Criterion.SpreadRatio, p.Reading.PairColumn = "paired", ptr(1.15), "Serial"
	got := one(t, p, lots(qa.Characteristic{Name: "v"}, a, b))
	sx, sy := stats.Summarize(x), stats.Summarize(y)
	r := 0.0
	for i := range x {
		r += (x[i] - sx.Mean) / sx.SD * (y[i] - sy.Mean) / sy.SD / float64(len(x)-1)
	}
	n, err := stats.PairedSpreadSize(stats.PairedSpreadDesign{Ratio: sy.SD / sx.SD, Correlation: r, Asked: 1.15, Alpha: 0.05}, 0.9)
	if err != nil {
		t.Fatal(err)
	}
	parts := &qa.StudyParts{Reference: n, Candidate: n}
	checkStudy(t, got, qa.NewStudyResult{Power: 0.9, AtZero: parts, AtEstimate: parts})
	p.Criterion.SpreadRatio = ptr(1.02) // below the ratio found
	checkStudy(t, one(t, p, lots(qa.Characteristic{Name: "v"}, a, b)), qa.NewStudyResult{Power: 0.9})
}
