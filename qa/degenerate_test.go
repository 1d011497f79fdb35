package qa_test

import (
	"encoding/json"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"lotpair/qa"
)

// TestDegenerate checks what data without variation, or too few, come to.
func TestDegenerate(t *testing.T) {
	five := []float64{1, 2, 3, 4, 5}
	for _, c := range []struct {
		name      string
		ref, cand []float64
		verdict   qa.Verdict
		codes     []string
		interval  bool
	}{
		{"empty", nil, nil, qa.Undecided, []string{qa.WarnTooFew}, false},
		{"one reading", []float64{1}, five, qa.Undecided, []string{qa.WarnTooFew}, false},
		{"both constant", []float64{2, 2, 2, 2, 2}, []float64{3, 3, 3, 3, 3}, qa.Undecided, []string{qa.WarnNoVariation}, false},
		{"both constant and equal", []float64{2, 2, 2, 2, 2}, []float64{2, 2, 2, 2, 2}, qa.Undecided, []string{qa.WarnNoVariation, qa.WarnIdentical}, false},
		{"one constant", []float64{3, 3, 3, 3, 3}, five, qa.Equivalent, []string{qa.WarnNoVariation}, true},
		{"few", []float64{1, 2}, []float64{1, 2.5, 2}, qa.Equivalent, []string{qa.WarnFew}, true},
		{"identical", five, []float64{5, 4, 3, 2, 1}, qa.Equivalent, []string{qa.WarnIdentical}, true},
	} {
		t.Run(c.name, func(t *testing.T) {
			got := one(t, plan(qa.Equivalence, absolute(50)), lots(qa.Characteristic{Name: "x"}, series("x", 1, c.ref...), series("x", 1, c.cand...)))
			if got.Verdict != c.verdict {
				t.Errorf("verdict: got %q, want %q", got.Verdict, c.verdict)
			}
			for _, code := range c.codes {
				if !qa.Has(got.Warnings, code) {
					t.Errorf("warnings: got %v, want %s", got.Warnings, code)
				}
			}
			if (got.Equivalence.Lower != nil) != c.interval {
				t.Errorf("interval: got %v, want one: %v", got.Equivalence.Lower, c.interval)
			}
		})
	}
}

// TestOneConstantLot checks the degrees of freedom: the other lot's n − 1.
func TestOneConstantLot(t *testing.T) {
	got := one(t, plan(qa.Equivalence, absolute(9)), lots(qa.Characteristic{Name: "x"}, series("x", 0, 3, 3, 3), series("x", 0, 1, 2, 3, 4, 5, 6)))
	near(t, "df", got.Difference.DF, 5, 1e-14)
}

// TestCoarse checks that a step wider than the smaller standard deviation is said.
func TestCoarse(t *testing.T) {
	got := one(t, plan(qa.Equivalence, absolute(9)), lots(qa.Characteristic{Name: "x"}, series("x", 0, 3, 3, 3, 3, 3, 4), series("x", 0, 3, 3, 3, 4, 4, 5)))
	if !qa.Has(got.Warnings, qa.WarnCoarse) {
		t.Errorf("warnings: got %v, want %s", got.Warnings, qa.WarnCoarse)
	}
}

// TestUnreadCells checks that a cell that could not be read withholds the verdict, whatever the interval.
func TestUnreadCells(t *testing.T) {
	ch, ref, cand := d1()
	cand.Rows++
	cand.Unread = 1
	got := one(t, plan(qa.Equivalence, absolute(0.05)), lots(ch, ref, cand))
	if got.Verdict != qa.Undecided || got.Equivalence.Verdict != qa.Undecided || !qa.Has(got.Warnings, qa.WarnUnread) {
		t.Errorf("got %q, %q, %v; want undecided with %s", got.Verdict, got.Equivalence.Verdict, got.Warnings, qa.WarnUnread)
	}
	if got.Equivalence.Lower == nil {
		t.Error("the interval of the readings that could be read is missing")
	}
}

// TestPBelowRange checks the smallest p-value that is given.
func TestPBelowRange(t *testing.T) {
	var ref, cand []float64
	for i := range 400 {
		ref = append(ref, float64(i%7))
		cand = append(cand, 1e6+float64(i%5))
	}
	p := plan(qa.Difference, nil)
	got := one(t, p, lots(qa.Characteristic{Name: "x"}, series("x", 0, ref...), series("x", 0, cand...)))
	if got.Difference.P == nil || *got.Difference.P != 1e-300 || !qa.Has(got.Warnings, qa.WarnPBelowRange) {
		t.Errorf("p: got %v with %v, want 1e-300 with %s", got.Difference.P, got.Warnings, qa.WarnPBelowRange)
	}
}

// TestNothingInfinite throws nasty readings at Compare and checks that no NaN and no infinity leaves the package, that counts
// reconcile, and that the verdict agrees with the interval.
func TestNothingInfinite(t *testing.T) {
	nasty := []float64{0, 1, -1, 1e-300, 1e300, -1e300, math.MaxFloat64, -math.MaxFloat64, math.SmallestNonzeroFloat64, 99999991, 99999991.5, 0.99999991, 1e12, 1e12 + 1}
	value := rapid.OneOf(rapid.SampledFrom(nasty), rapid.Float64Range(-10, 10))
	rapid.Check(t, func(t *rapid.T) {
		ref := rapid.SliceOfN(value, 0, 8).Draw(t, "reference")
		cand := rapid.SliceOfN(value, 0, 8).Draw(t, "candidate")
		o := rapid.SampledFrom([]qa.Objective{qa.Equivalence, qa.NotLower, qa.NotHigher, qa.Difference, qa.Lower, qa.Higher}).Draw(t, "objective")
		p := plan(o, absolute(rapid.Float64Range(1e-3, 1e3).Draw(t, "margin")))
		r, err := qa.Compare(p, lots(qa.Characteristic{Name: "x", Lower: ptr(-5.0), Upper: ptr(5.0)}, series("x", 3, ref...), series("x", 3, cand...)), qa.Run{})
		if err != nil {
			t.Fatal(err)
		}
		if _, err := json.Marshal(r); err != nil { // JSON refuses NaN and infinities
			t.Fatal(err)
		}
		c := r.Characteristics[0]
		if e := c.Equivalence; o.AgainstMargin() && e.Lower != nil && e.Upper != nil {
			inside := (e.MarginLower == nil || *e.Lower > *e.MarginLower) && (e.MarginUpper == nil || *e.Upper < *e.MarginUpper)
			if inside != c.Verdict.Shown() {
				t.Fatalf("interval %v to %v, margin %v, verdict %q", *e.Lower, *e.Upper, p.Criterion.Margin, c.Verdict)
			}
		}
		if c.Verdict == "" {
			t.Fatal("no verdict")
		}
	})
}

// TestOverall checks the rule over all characteristics (contract: result, "Overall").
func TestOverall(t *testing.T) {
	// Characteristics with known verdicts: the difference is exactly the shift, the spread small.
	base := []float64{-0.1, 0, 0.1, -0.1, 0, 0.1}
	for _, c := range []struct {
		name  string
		asked []qa.Objective
		shift []float64
		want  qa.Verdict
	}{
		{"all equivalent", []qa.Objective{qa.Equivalence, qa.Equivalence}, []float64{0, 0.1}, qa.Equivalent},
		{"one undecided", []qa.Objective{qa.Equivalence, qa.Equivalence}, []float64{0, 1}, qa.Undecided},
		{"one refuted beats undecided", []qa.Objective{qa.Equivalence, qa.Equivalence, qa.Equivalence}, []float64{0, 1, 5}, qa.NotEquivalent},
		{"refuted not-higher beside equivalence", []qa.Objective{qa.Equivalence, qa.NotHigher}, []float64{0, 5}, qa.NotEquivalent},
		{"only one-sided, shown", []qa.Objective{qa.NotHigher, qa.NotLower}, []float64{-3, 3}, qa.Demonstrated},
		{"only one-sided, refuted", []qa.Objective{qa.NotHigher, qa.NotLower}, []float64{3, 3}, qa.Contradicted},
		{"a difference has no part", []qa.Objective{qa.Equivalence, qa.Difference}, []float64{0, 5}, qa.Equivalent},
		{"only differences, none", []qa.Objective{qa.Difference, qa.Difference}, []float64{0, 0}, qa.NoDifference},
		{"only differences, one shown", []qa.Objective{qa.Difference, qa.Difference}, []float64{0, 5}, qa.Different},
		{"only directions, agreeing", []qa.Objective{qa.Higher, qa.Higher}, []float64{5, 5}, qa.IsHigher},
		{"only directions, unlike", []qa.Objective{qa.Higher, qa.Lower}, []float64{5, -5}, qa.Different},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := qa.Readings{Reference: qa.Lot{Name: "R"}, Candidate: qa.Lot{Name: "C"}}
			for i, o := range c.asked {
				name := string(rune('a' + i))
				r.Characteristics = append(r.Characteristics, qa.Characteristic{Name: name, Objective: o})
				shifted := slices.Clone(base)
				for j := range shifted {
					shifted[j] += c.shift[i]
				}
				r.Reference.Series = append(r.Reference.Series, series(name, 1, base...))
				r.Candidate.Series = append(r.Candidate.Series, series(name, 1, shifted...))
			}
			got, err := qa.Compare(plan(qa.Equivalence, absolute(1)), r, qa.Run{})
			if err != nil {
				t.Fatal(err)
			}
			if got.Verdict != c.want {
				t.Errorf("overall: got %q, want %q (%s)", got.Verdict, c.want, got.Sentence)
			}
			if !strings.HasPrefix(strings.ToLower(got.Sentence), string(got.Verdict)) {
				t.Errorf("sentence: got %q, want it to open with %q", got.Sentence, got.Verdict)
			}
		})
	}
}

// TestHolm checks the adjustment against R: p.adjust(c(0.01, 0.02, 0.03, 0.04), "holm") gives 0.04 0.06 0.06 0.06; here the
// rule is checked on the p-values that the data give.
func TestHolm(t *testing.T) {
	r := qa.Readings{Reference: qa.Lot{Name: "R"}, Candidate: qa.Lot{Name: "C"}}
	for i, shift := range []float64{0.5, 1.0, 1.5} {
		name := string(rune('a' + i))
		r.Characteristics = append(r.Characteristics, qa.Characteristic{Name: name})
		r.Reference.Series = append(r.Reference.Series, series(name, 1, 1, 2, 3, 4, 5, 2, 3, 4))
		r.Candidate.Series = append(r.Candidate.Series, series(name, 1, 1+shift, 2+shift, 3+shift, 4+shift, 5+shift, 2+shift, 3+shift, 4+shift))
	}
	got, err := qa.Compare(plan(qa.Difference, nil), r, qa.Run{})
	if err != nil {
		t.Fatal(err)
	}
	c := got.Characteristics
	p := []float64{*c[2].Difference.P, *c[1].Difference.P, *c[0].Difference.P} // ascending
	want := []float64{min(1, 3*p[0]), min(1, max(3*p[0], 2*p[1])), min(1, max(3*p[0], 2*p[1], p[2]))}
	for i, j := range []int{2, 1, 0} {
		near(t, c[j].Name, c[j].Difference.PHolm, want[i], 1e-14)
	}
	for _, x := range c {
		if x.Verdict.Shown() != (*x.Difference.PHolm < x.Alpha) {
			t.Errorf("%s: verdict %q with adjusted p %v", x.Name, x.Verdict, *x.Difference.PHolm)
		}
		if x.Verdict == qa.NoDifference && !qa.Has(x.Warnings, qa.WarnAbsence) {
			t.Errorf("%s: no difference shown without %s", x.Name, qa.WarnAbsence)
		}
	}
}

// TestTrail checks the chain: a changed entry breaks it at the next.
func TestTrail(t *testing.T) {
	rec := qa.NewRecord(qa.Plan{}, qa.File{Name: "plan.toml"}, qa.Readings{}, qa.Result{}, "console", when)
	if i := rec.Trail.Broken(); i >= 0 {
		t.Fatalf("fresh trail: got broken at %d", i)
	}
	rec.Trail[1].Who = "another"
	if i := rec.Trail.Broken(); i != 2 {
		t.Errorf("changed entry 1: got broken at %d, want 2", i)
	}
}

// TestSealDigest checks what the seal covers and what it does not.
func TestSealDigest(t *testing.T) {
	a := plan(qa.Equivalence, absolute(1))
	b := a
	b.Title, b.Reading.Sheet, b.Record.Part = "other", "other", "other"
	if a.SealDigest() != b.SealDigest() {
		t.Error("title, reading or record changed the digest")
	}
	b.Criterion.Margin = absolute(1.0000001)
	if a.SealDigest() == b.SealDigest() {
		t.Error("another margin left the digest as it was")
	}
}

var when = time.Date(2026, 12, 1, 9, 30, 0, 0, time.FixedZone("CET", 3600))
