package desk

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
	"time"

	"lotpair/qa"
)

// Particular is one thing that a plan states besides its criterion, as a person types it.
type Particular struct {
	Label, Hint string
	Words       []string // what may be chosen; nil where it is typed
	Early       bool     // only before the readings are taken: it changes what is computed
	Sealed      bool     // only before the seal, which covers it
	Get         func(qa.Plan) string
	Set         func(*qa.Plan, string) error
}

// Particulars are all of them, in the order in which they are asked; d is the decimal mark of their numbers.
func Particulars(d Decimal) []Particular {
	text := func(label, hint string, of func(*qa.Plan) *string) Particular {
		return Particular{Label: label, Hint: hint, Get: func(p qa.Plan) string { return *of(&p) }, Set: func(p *qa.Plan, s string) error {
			*of(p) = strings.TrimSpace(s)
			return nil
		}}
	}
	early := func(x Particular) Particular {
		x.Early = true
		return x
	}
	number := func(label, hint string, of func(*qa.Plan) **float64) Particular {
		return Particular{Label: label, Hint: hint, Get: func(p qa.Plan) string { return d.NumberText(*of(&p), 1) }, Set: func(p *qa.Plan, s string) error {
			v, err := d.Number(s)
			if err == nil {
				*of(p) = v
			}
			return err
		}}
	}
	ofValues := func(label string, of func(*qa.Plan) *string) Particular {
		x := early(text(label, "deviation: from the nominal value, as measuring machines report them", of))
		x.Words = []string{"", "absolute", "deviation"}
		return x
	}
	nonDetect := early(text("Below a detection limit", "what “<0.05” counts as; empty bounds the verdict", func(p *qa.Plan) *string { return &p.Reading.NonDetect }))
	nonDetect.Words = []string{"", qa.NonDetectExclude, qa.NonDetectLimit, qa.NonDetectHalfLimit, qa.NonDetectZero}
	out := []Particular{
		text("Title", "", func(p *qa.Plan) *string { return &p.Title }),
		text("Supports", "the deviation, change or qualification record this is evidence for; required before signing", func(p *qa.Plan) *string { return &p.Supports }),
		text("Part", "required before signing", func(p *qa.Plan) *string { return &p.Record.Part }),
		text("Revision", "of the drawing; required before signing", func(p *qa.Plan) *string { return &p.Record.Revision }),
		text("Sampling", "how the parts were chosen", func(p *qa.Plan) *string { return &p.Record.Sampling }),
		number("Quantity, reference", "parts in the lot", func(p *qa.Plan) **float64 { return &p.Record.QuantityReference }),
		number("Quantity, candidate", "", func(p *qa.Plan) **float64 { return &p.Record.QuantityCandidate }),
		text("Gauge, reference", "with its calibration", func(p *qa.Plan) *string { return &p.Record.GaugeReference }),
		text("Gauge, candidate", "", func(p *qa.Plan) *string { return &p.Record.GaugeCandidate }),
		text("Retention", "how long the record is kept", func(p *qa.Plan) *string { return &p.Retention }),
		{Label: "Signatures", Hint: "a complete record carries these: prepared, reviewed: Ada Quill, approved; prepared alone where empty", Get: requiredText, Set: setRequired},
		early(text("Unit, reference", "in the file, where it is not the characteristic's: readings are converted", func(p *qa.Plan) *string { return &p.Reference.Unit })),
		early(text("Unit, candidate", "", func(p *qa.Plan) *string { return &p.Candidate.Unit })),
		ofValues("Readings, reference", func(p *qa.Plan) *string { return &p.Reference.Values }),
		ofValues("Readings, candidate", func(p *qa.Plan) *string { return &p.Candidate.Values }),
		nonDetect,
		early(text("Column of groups", "heading of sub-lots, or of the lots of a source", func(p *qa.Plan) *string { return &p.Reading.GroupColumn })),
		early(text("Column of pairs", "heading of what names the pairs, for the paired method", func(p *qa.Plan) *string { return &p.Reading.PairColumn })),
		early(text("Column of part ids", "repeat readings of one part are averaged", func(p *qa.Plan) *string { return &p.Reading.PartColumn })),
		early(text("Column of the order", "in which the readings were taken", func(p *qa.Plan) *string { return &p.Reading.OrderColumn })),
	}
	return append(out, further(d)...)
}

// further are the terms of performance and resampling.
func further(d Decimal) []Particular {
	share := func(label, hint string, of func(*qa.PerformancePlan) *float64) Particular {
		return Particular{Label: label, Hint: hint, Early: true, Sealed: true, Get: func(p qa.Plan) string {
			if p.Performance == nil || *of(p.Performance) == 0 {
				return ""
			}
			return d.NumberText(of(p.Performance), 1)
		}, Set: func(p *qa.Plan, s string) error {
			v, err := d.Number(s)
			if err != nil {
				return err
			}
			next := qa.PerformancePlan{}
			if p.Performance != nil {
				next = *p.Performance
			}
			*of(&next) = 0
			if v != nil {
				*of(&next) = *v
			}
			p.Performance = &next
			if next == (qa.PerformancePlan{}) {
				p.Performance = nil
			}
			return nil
		}}
	}
	whole := func(label, hint string, get func(qa.SensitivityPlan) int64, set func(*qa.SensitivityPlan, int64)) Particular {
		return Particular{Label: label, Hint: hint, Early: true, Get: func(p qa.Plan) string {
			if p.Sensitivity == nil || get(*p.Sensitivity) == 0 {
				return ""
			}
			return strconv.FormatInt(get(*p.Sensitivity), 10)
		}, Set: func(p *qa.Plan, s string) error {
			v, next := int64(0), qa.SensitivityPlan{}
			if s = strings.TrimSpace(s); s != "" {
				var err error
				if v, err = strconv.ParseInt(s, 10, 64); err != nil {
					return fmt.Errorf("found %q, want a whole number", s)
				}
			}
			if p.Sensitivity != nil {
				next = *p.Sensitivity
			}
			set(&next, v)
			p.Sensitivity = &next
			if next == (qa.SensitivityPlan{}) {
				p.Sensitivity = nil
			}
			return nil
		}}
	}
	return []Particular{
		share("Coverage", "of tolerance intervals, 0.95 where empty (ISO 16269-6)", func(f *qa.PerformancePlan) *float64 { return &f.Coverage }),
		share("Confidence", "of tolerance intervals and limits of Ppk, 0.95 where empty", func(f *qa.PerformancePlan) *float64 { return &f.Confidence }),
		whole("Resamples", "for bootstrap and permutation; none where empty", func(s qa.SensitivityPlan) int64 { return int64(s.Resamples) }, func(s *qa.SensitivityPlan, v int64) { s.Resamples = int(v) }),
		whole("Seed", "of the resampling; it is in the record", func(s qa.SensitivityPlan) int64 { return s.Seed }, func(s *qa.SensitivityPlan, v int64) { s.Seed = v }),
	}
}

// requiredText are the signatures that a complete record must carry.
func requiredText(p qa.Plan) string {
	var out []string
	for _, r := range p.Signatures {
		t := r.Meaning
		for _, more := range []string{r.Name, r.Title} {
			if more != "" {
				t += ": " + more
			}
		}
		out = append(out, t)
	}
	return strings.Join(out, ", ")
}

func setRequired(p *qa.Plan, text string) error {
	if text == requiredText(*p) {
		return nil
	}
	p.Signatures = nil
	for _, one := range strings.Split(text, ",") {
		if one = strings.TrimSpace(one); one == "" {
			continue
		}
		parts := append(strings.SplitN(one, ":", 3), "", "")
		r := qa.Required{Meaning: strings.TrimSpace(parts[0]), Name: strings.TrimSpace(parts[1]), Title: strings.TrimSpace(parts[2])}
		switch r.Meaning {
		case "prepared", "reviewed", "approved":
		default:
			return fmt.Errorf("found %q, want prepared, reviewed or approved, each with a name where one is required, as in: prepared, reviewed: Ada Quill", r.Meaning)
		}
		p.Signatures = append(p.Signatures, r)
	}
	return nil
}

// WithParticulars states what a record says besides its criterion after the comparison was made; res is the result computed
// again with it, which is no new attempt.
func (s State) WithParticulars(p qa.Plan, res qa.Result, who string, when time.Time) (State, error) {
	switch {
	case s.Closed():
		return s, ErrClosed
	case p.SealDigest() != s.Record.Plan.SealDigest():
		return s, ErrSealed
	case res.Verdict != s.Record.Result.Verdict:
		return s, errors.New("particulars: found that they change the verdict, want them not to; amend the criterion instead")
	}
	next := s
	next.Record.Plan, next.Record.Result = p, res
	next.Workbook, next.Said = Workbook{}, ""
	next.Record.Trail = s.Record.Trail.With(when, who, "stated the particulars", "", "")
	return next.undoable(s, "stated the particulars"), nil
}
