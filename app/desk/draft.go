package desk

import (
	"errors"
	"fmt"
	"path"
	"slices"
	"strings"
	"time"

	"lotpair/importers"
	"lotpair/qa"
)

// Begun lays a new comparison on the desk: nothing is known of it but what is customary.
func (s State) Begun(who string, when time.Time) State {
	alpha, power := qa.DefaultAlpha, 0.9
	plan := qa.Plan{Format: qa.PlanFormat, Criterion: qa.Criterion{Objective: qa.Equivalence, Alpha: &alpha, Method: "welch", Power: &power}}
	rec := qa.Record{Format: qa.RecordFormat, Plan: plan}
	rec.Trail = rec.Trail.With(when, who, "began the comparison", "", "")
	return State{Open: true, Drafting: true, Record: rec, Acts: s.Acts, Number: s.Number}.acted("began a comparison")
}

// WithSheet lays a file open over the desk; nil closes it. It is no act: nothing is taken.
func (s State) WithSheet(x *Sheet) State {
	s.Sheet, s.Problem = x, Problem{}
	return s
}

// Sealed says whether the criterion is fixed.
func (s State) Sealed() bool { return s.Record.Result.Seal.Time != "" }

// ErrSealed says that a sealed criterion is changed by an amendment alone.
var ErrSealed = errors.New("criterion: found it sealed, want one that is open; amend it with a reason")

// TookHeadings takes names, units and limits from the file that is looked at, and no reading.
func (s State) TookHeadings(who string, when time.Time) (State, error) {
	x := s.Sheet
	if x == nil || !s.Drafting {
		return s, errors.New("headings: found no file, want one that is looked at; open it first")
	}
	if s.Sealed() {
		return s, ErrSealed
	}
	next, err := s.withLayout(*x)
	if err != nil {
		return s, err
	}
	p := &next.Record.Plan
	p.Characteristics = merged(p.Characteristics, x.characteristics())
	what := "took headings and limits of " + x.File.Name + ", every reading masked"
	if !x.Masked {
		what = "took headings and limits of " + x.File.Name + ", its readings in sight"
		next.Seen = true
	}
	next.Sheet = nil
	next.Selected = max(0, min(next.Selected, len(p.Characteristics)-1))
	next.Record.Trail = saidOf(*x, s.Record.Trail, who, when).With(when, who, what, x.File.Name, "sha-256 "+x.File.SHA256)
	return next.undoable(s, what), nil
}

// merged are the characteristics of a file with what was stated of them before: by hand, or by a plan that this file goes on
// with.
func merged(old, found []qa.Characteristic) []qa.Characteristic {
	out := slices.Clone(found)
	for i, c := range out {
		for _, o := range old {
			if o.Name != c.Name && !sameHeading(c.Name, o.Heading()) {
				continue
			}
			if o.Lower == nil && o.Target == nil && o.Upper == nil {
				o.Lower, o.Target, o.Upper = c.Lower, c.Target, c.Upper
			}
			if o.Unit == "" {
				o.Unit = c.Unit
			}
			out[i] = o
		}
	}
	return out
}

// saidOf is the trail with what a person said of the file, which stands in the plan from now on.
func saidOf(x Sheet, t qa.Trail, who string, when time.Time) qa.Trail {
	for _, said := range x.Stated.Said {
		t = t.With(when, who, "said how the file is read", x.File.Name, said)
	}
	if x.Unfit != "" {
		t = t.With(when, who, "read the file otherwise than the plan", x.File.Name, strings.ReplaceAll(x.Unfit, "\n", "; "))
	}
	return t
}

// withLayout is the state whose plan says where the readings of the file stand.
func (s State) withLayout(x Sheet) (State, error) {
	ref, cand, err := x.lots(s.Record.Plan)
	if err != nil {
		return s, err
	}
	p := s.Record.Plan
	place := func(l *qa.LotPlan, lot string) {
		if lot == "" {
			return
		}
		l.File, l.Sheet = x.File.Name, x.sheets[lot]
		if x.lot != "" || len(x.found.Lots) > 1 || l.Lot == "" { // else the file names no lot: it is called as was typed
			l.Lot = strings.TrimSuffix(lot, path.Ext(x.File.Name))
		}
	}
	place(&p.Reference, ref)
	place(&p.Candidate, cand)
	before := p.Reading
	p.Reading = x.reading()
	p.Reading.Exclude = slices.Clone(before.Exclude)
	for _, e := range x.leftRows(ref, cand) {
		if !slices.ContainsFunc(p.Reading.Exclude, func(o qa.Exclusion) bool { return o.Cell == e.Cell && (o.File == "" || o.File == e.File) }) {
			p.Reading.Exclude = append(p.Reading.Exclude, e)
		}
	}
	if p.Reading.NonDetect == "" {
		p.Reading.NonDetect = before.NonDetect
	}
	switch {
	case x.sheets != nil: // each lot has its own sheet
		p.Reading.Sheet = ""
	case p.Reference.File != p.Candidate.File: // each file has its own sheet
		p.Reading.Sheet = ""
		side := &p.Reference
		if cand != "" {
			side = &p.Candidate
		}
		side.Sheet = x.found.Sheet
	}
	s.Record.Plan = p
	s.Files = append(slices.DeleteFunc(slices.Clone(s.Files), func(f qa.File) bool { return f.Name == x.File.Name }), x.File)
	return s, nil
}

// Playing is what is stated where a column of the file that is looked at plays another part. A sealed criterion names its
// characteristics: they stay.
func (s State) Playing(column int, part string) (Stated, error) {
	if s.Sheet == nil {
		return Stated{}, errors.New("part: found no file, want one that is looked at; open it first")
	}
	of := func(p string) bool { return p == importers.PlaysCharacteristic || p == importers.PlaysRepeat }
	if s.Sealed() && of(part) != of(s.Sheet.plays(column)) {
		return Stated{}, fmt.Errorf("column %s: %w", letters(column), ErrSealed)
	}
	return s.Sheet.Playing(column, part)
}

// WithSight shows the masked readings of the file that is looked at: a seal set later says that they were seen.
func (s State) WithSight(who string, when time.Time) State {
	if s.Sheet == nil || !s.Sheet.Masked {
		return s
	}
	x := s.Sheet.Unmasked()
	s.Sheet, s.Seen = &x, true
	what := "looked at the readings of " + x.File.Name
	s.Record.Trail = s.Record.Trail.With(when, who, what, x.File.Name, "sha-256 "+x.File.SHA256)
	return s.final(what)
}

// Typed is the state with another draft of the plan, not yet an act. What a seal covers is not changed.
func (s State) Typed(p qa.Plan) State {
	if !s.Drafting || s.Sealed() && p.SealDigest() != s.Record.Result.Seal.Digest {
		return s
	}
	if s.Typing == nil {
		before := s.Record.Plan
		s.Typing = &before
	}
	s.Record.Plan = p
	return s
}

// Stated keeps the draft of the plan, with what was changed in words.
func (s State) Stated(p qa.Plan, what, who string, when time.Time) (State, error) {
	if s.Sealed() && p.SealDigest() != s.Record.Result.Seal.Digest {
		return s, ErrSealed
	}
	next := s
	if s.Typing != nil {
		s.Record.Plan = *s.Typing
	}
	next.Record.Plan, next.Typing = p, nil
	next.Record.Trail = s.Record.Trail.With(when, who, what, "", "")
	return next.undoable(s, what), nil
}

// noMargin says what a plan without a margin lacks.
const noMargin = "state the margin: the largest difference that does not matter in use"

// lacksMargin says whether a fault of a plan is only that no margin is stated yet.
func lacksMargin(f qa.PlanFault) bool {
	return f.Found == "none" && strings.HasSuffix(f.Key, ".margin")
}

// inWords says the kinds of margins as the window names them, not as the plan's file does.
var inWords = strings.NewReplacer("tolerance_fraction", "a part of the tolerance", "reference_fraction", "a ratio of means", "keep_ppk", "a Ppk to keep",
	"sd_multiple", "a multiple of an SD", "an absolute margin", "a margin in the unit")

// Faults lists what the draft lacks before it can be sealed; where its readings stand is asked for later.
func (s State) Faults() []string { return s.faults(nil) }

func (s State) faults(m *Planner) []string {
	var out []string
	for _, f := range s.Record.Plan.Validate() {
		switch {
		case importers.StillToCome(f):
		case lacksMargin(f):
			if len(out) == 0 || out[0] != noMargin {
				out = append([]string{noMargin}, out...)
			}
		default:
			out = append(out, inWords.Replace(f.Error()))
		}
	}
	if len(out) == 0 { // what only the characteristic's own limits show
		p := Settled(s.Record.Plan)
		for _, c := range p.Characteristics {
			if fault := m.fault(p, c); fault != "" {
				out = append(out, inWords.Replace(fault))
			}
		}
	}
	if len(s.Record.Plan.Characteristics) == 0 {
		out = append(out, "characteristics: found none, want at least one; bring a file in and take its headings and limits, or add one")
	}
	return out
}

// Seal fixes the criterion.
func (s State) Seal(who string, when time.Time) (State, error) {
	switch {
	case !s.Drafting:
		return s, errors.New("seal: found a comparison that was made, want one before it; begin a new one")
	case s.Sealed():
		return s, ErrSealed
	}
	if faults := s.Faults(); len(faults) > 0 {
		return s, errors.New(strings.Join(faults, "\n"))
	}
	if faults := s.Record.Plan.SealFaults(); len(faults) > 0 {
		return s, faults[0]
	}
	seal := qa.Seal{Digest: s.Record.Plan.SealDigest(), Time: when.Format(time.RFC3339), Readings: "unopened"}
	if s.Seen {
		seal.Readings = "opened"
	}
	s.Record.Result.Seal = seal
	s.Problem = Problem{}
	s.Said = "Criterion sealed, sha-256 " + shortDigest(seal.Digest) + "."
	s.Record.Trail = s.Record.Trail.With(when, who, "sealed the criterion", "sha-256 "+seal.Digest, "readings "+seal.Readings)
	return s.final("sealed the criterion " + seal.Digest), nil
}

// Amended changes a sealed criterion, with a reason. A result made under the old one is gone from the desk, not from the trail.
func (s State) Amended(p qa.Plan, reason, who string, when time.Time) (State, error) {
	reason = strings.TrimSpace(reason)
	old := s.Record.Result.Seal
	switch {
	case s.Closed():
		return s, ErrClosed
	case !s.Sealed():
		return s, errors.New("amendment: found a criterion that is not sealed, want a sealed one; change it and seal it")
	case reason == "":
		return s, errors.New("amendment: found no reason, want one in words; type why the criterion is changed")
	case p.SealDigest() == old.Digest:
		return s, errors.New("amendment: found the criterion as it was sealed, want a change; change it first")
	}
	was := s.Record.Result
	s.Record.Plan = p
	if faults := s.Faults(); len(faults) > 0 {
		return s, errors.New(strings.Join(faults, "\n"))
	}
	seal := old
	seal.Digest, seal.Amended = p.SealDigest(), old.Amended+1
	verdict := ""
	if s.Compared {
		verdict = "; the verdict under the old criterion was " + string(was.Verdict)
	}
	s.Record.Result = qa.Result{Seal: seal, Attempts: was.Attempts, Software: was.Software}
	s.Compared, s.Workbook, s.Said = false, Workbook{}, ""
	s.Record.Trail = s.Record.Trail.With(when, who, "amended the criterion", "sha-256 "+old.Digest+" to "+seal.Digest+verdict, reason)
	return s.final(fmt.Sprintf("amended the criterion: %s", reason)), nil
}

// Taking says what is needed to take the readings of the file that is looked at: the plan with its layout.
func (s State) Taking(who string, when time.Time) (State, error) {
	x := s.Sheet
	if x == nil || !s.Drafting {
		return s, errors.New("readings: found no file, want one that is looked at; open it first")
	}
	next, err := s.withLayout(*x)
	if err != nil {
		return s, err
	}
	if chosen := len(x.Stated.Said) > 0; !s.Sealed() && (chosen || len(next.Record.Plan.Characteristics) == 0) {
		next.Record.Plan.Characteristics = merged(next.Record.Plan.Characteristics, x.characteristics())
	}
	next.Sheet = nil
	next.Record.Trail = saidOf(*x, s.Record.Trail, who, when)
	return next, nil
}

// Missing is the side whose file is not known yet; empty where both are.
func (s State) Missing() qa.Side {
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		if s.Record.Plan.LotOf(side).File == "" {
			return side
		}
	}
	return ""
}

// Placed keeps where the readings of one lot stand, while those of the other are still to come.
func (s State) Placed(who string, when time.Time) State {
	f := s.Files[len(s.Files)-1]
	what := "brought in " + f.Name
	s.Seen = true
	s.Record.Trail = s.Record.Trail.With(when, who, what, f.Name, "sha-256 "+f.SHA256)
	return s.final(what)
}

// Took takes the readings that were read under the plan and the result they gave.
func (s State) Took(readings qa.Readings, res qa.Result, who string, when time.Time) State {
	names := readings.Reference.Files
	for _, f := range readings.Candidate.Files {
		if !slices.ContainsFunc(names, func(x qa.File) bool { return x.Name == f.Name }) {
			names = append(slices.Clone(names), f)
		}
	}
	var on []string
	for _, f := range names {
		on = append(on, f.Name)
	}
	s.Drafting, s.Compared, s.Seen, s.Sheet, s.Problem, s.Said = false, true, true, nil, Problem{}, ""
	s.Record.Readings, s.Record.Result = readings, res
	s.Selected = weightiest(res)
	s.Record.Trail = s.Record.Trail.With(when, who, "opened the readings", strings.Join(on, ", "), "").With(when, who, "compared", string(res.Verdict), "")
	return s.final("took the readings of " + strings.Join(on, ", ") + " and compared")
}
