package exports_test

import (
	"bytes"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

func sealed(t testing.TB) exports.Sealed {
	t.Helper()
	rec := record(t)
	return exports.Seal(rec.Plan, rec.PlanFile, qa.Software{Version: "test"}, "unopened", "tester", when)
}

// TestSealRoundTrip writes a seal, reads it back and verifies it, unsigned, signed once and signed twice.
func TestSealRoundTrip(t *testing.T) {
	s := sealed(t)
	a, err := s.Workbook()
	if err != nil {
		t.Fatal(err)
	}
	b, err := s.Workbook()
	if err != nil || !bytes.Equal(a, b) {
		t.Errorf("the same seal gave two workbooks, %v", err)
	}
	if v := exports.Verify(a, nil); v.State != exports.Unsigned || !v.Agrees || v.Sealed == nil || v.Record != nil {
		t.Fatalf("unsigned: got %s, %v", v.State, v.Differences)
	}
	first, err := exports.Sign(a, person(t, "Ada"), opcsign.Statement{Meaning: "approved", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	second, err := exports.Sign(first, person(t, "Bert"), opcsign.Statement{Meaning: "reviewed", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	v := exports.Verify(second, nil)
	if v.State != exports.Intact || len(v.Signatures) != 2 || v.Sealed.Signer == nil || v.Sealed.Signer.Name != "Ada" {
		t.Fatalf("signed: got %s, %v, %v", v.State, v.Differences, v.Signatures)
	}
	if got := *v.Sealed; got.Digest != s.Plan.SealDigest() || !got.Time.Equal(when) || len(exports.SealDifferences(got.Plan, s.Plan)) > 0 {
		t.Errorf("read back: got %s, %s, %v", got.Digest, got.Time, exports.SealDifferences(got.Plan, s.Plan))
	}
	if r := v.Sealed.Result(); r.Readings != "unopened" || r.Time != "2026-12-01T09:30:00+01:00" {
		t.Errorf("result: got %+v", r)
	}
}

// TestSealTampering changes one thing of a seal a case.
func TestSealTampering(t *testing.T) {
	signed, err := exports.SignSeal(sealed(t), person(t, "Ada"), opcsign.Statement{Meaning: "approved", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ name, part, old, new string }{
		{"the margin in the sheet", "xl/worksheets/sheet1.xml", ">0.05<", ">0.06<"},
		{"the margin in the plan", "customXml/item1.xml", ":0.05", ":0.06"},
		{"the time", "customXml/item1.xml", "2026-12-01T09:30", "2026-11-01T09:30"},
	} {
		b := rezip(t, signed, func(name string, b []byte) []byte {
			if name == c.part {
				return bytes.Replace(b, []byte(c.old), []byte(c.new), 1)
			}
			return b
		})
		if v := exports.Verify(b, nil); v.State != exports.Changed {
			t.Errorf("%s: got %s, want changed", c.name, v.State)
		}
	}
	s := sealed(t)
	s.Digest = strings.Repeat("0", 64)
	b, err := s.Workbook()
	if err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(b, nil); v.Agrees {
		t.Error("another digest: agrees")
	}
}

// TestSealDifferences names the keys that were changed, and nothing that the seal does not cover.
func TestSealDifferences(t *testing.T) {
	base := record(t).Plan
	for _, c := range []struct {
		name string
		edit func(*qa.Plan)
		want string
	}{
		{"title", func(p *qa.Plan) { p.Title = "other" }, ""},
		{"file", func(p *qa.Plan) { p.Candidate.File = "other.csv" }, ""},
		{"exclusion", func(p *qa.Plan) { p.Reading.Exclude = []qa.Exclusion{{Cell: "A1", Reason: "x"}} }, ""},
		{"alpha", func(p *qa.Plan) { p.Criterion.Alpha = ptr(0.1) }, "criterion.alpha: sealed null, the plan has 0.1"},
		{"limit", func(p *qa.Plan) { p.Characteristics[0].Upper = ptr(10.3) }, "characteristic 1 (Bore).upper: sealed 10.2, the plan has 10.3"},
		{"one less", func(p *qa.Plan) { p.Characteristics = p.Characteristics[:2] }, `characteristic: sealed "3: Bore, =Length, Run-out", the plan has "2: Bore, =Length"`},
		{"performance", func(p *qa.Plan) { p.Performance = &qa.PerformancePlan{Coverage: 0.9} }, `performance: sealed null, the plan has {"coverage":0.9}`},
	} {
		plan := base
		plan.Characteristics = append([]qa.Characteristic{}, base.Characteristics...)
		c.edit(&plan)
		got := strings.Join(exports.SealDifferences(base, plan), "\n")
		if got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
		if same := plan.SealDigest() == base.SealDigest(); same != (c.want == "") {
			t.Errorf("%s: digests alike %v, differences %q", c.name, same, got)
		}
	}
}

// TestSealTrail puts the act of sealing before the others, the chain whole.
func TestSealTrail(t *testing.T) {
	trail := sealed(t).Trail(record(t).Trail, qa.File{Name: "plan.seal.xlsx", SHA256: "ab"})
	if len(trail) != 4 || trail[0].What != "sealed the criterion" || trail.Broken() >= 0 {
		t.Errorf("got %v, broken at %d", trail, trail.Broken())
	}
}

// TestNote states every signature of a record, and of files that are none.
func TestNote(t *testing.T) {
	seal, err := sealed(t).Workbook()
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name string
		pkg  []byte
		want []string
	}{
		{"signed", signedOnce(t), []string{"Intact; who signed is not established.", "Ada Quill", "a reason", "Signature 1: prepared", "itself", "agrees with the record and its sheets"}},
		{"seal", seal, []string{"Unsigned.", "No signature was found."}},
		{"no workbook", []byte("nothing"), []string{"Unreadable.", "not-a-package"}},
	} {
		b, err := exports.Note("r.xlsx", c.pkg, exports.Verify(c.pkg, nil), qa.Software{Version: "test"}, when)
		if err != nil {
			t.Fatal(err)
		}
		all := ""
		for _, s := range cellsOf(t, b, exports.SheetStatement) {
			all += s + "\n"
		}
		for _, want := range c.want {
			if !strings.Contains(all, want) {
				t.Errorf("%s: found no %q", c.name, want)
			}
		}
	}
}
