package desk

import (
	"errors"
	"strings"
	"time"

	"lotpair/qa"
)

// BegunFrom lays a new comparison on the desk that asks what the record on it asked, of the next lot: the plan without its
// files, the cells left out in them and the candidate's name. A criterion that was sealed before the readings were opened, and
// never amended, stays sealed as it was.
func (s State) BegunFrom(who string, when time.Time) (State, error) {
	if !s.Open || len(s.Record.Plan.Characteristics) == 0 && !s.Compared {
		return s, errors.New("new comparison: found no plan on the desk, want a record with one; open it first")
	}
	old := s.Record
	of := named(old.Plan.Title, s.Path)
	rec := qa.Record{Format: qa.RecordFormat, Plan: nextPlan(old.Plan)}
	rec.Trail = rec.Trail.With(when, who, "began the comparison from the plan of "+of, old.PlanFile.Name, digestText(old.PlanFile.SHA256))
	next := State{Open: true, Drafting: true, Record: rec, Acts: s.Acts, Number: s.Number}
	seal := old.Result.Seal
	if seal.Time != "" && seal.Amended == 0 && seal.Readings == "unopened" && seal.Digest == rec.Plan.SealDigest() {
		next.Record.Result.Seal = seal
		next.Record.Trail = next.Record.Trail.With(when, who, "went on with the sealed criterion", "sha-256 "+seal.Digest, "sealed "+seal.Time)
		next.Said = "The criterion stays sealed, as it was on " + timeText(seal.Time) + "."
	} else if len(rec.Plan.Characteristics) == 0 { // the plan named none: it was about those of the file
		for _, c := range old.Readings.Characteristics {
			next.Record.Plan.Characteristics = append(next.Record.Plan.Characteristics, qa.Characteristic{Name: c.Name})
		}
	}
	return next.acted("began a comparison from the plan of " + of), nil
}

// nextPlan is a plan for the next lot.
func nextPlan(p qa.Plan) qa.Plan {
	p.Format = qa.PlanFormat
	for _, l := range []*qa.LotPlan{&p.Reference, &p.Candidate} {
		l.File, l.Sheet = "", ""
	}
	p.Candidate.Lot = ""
	p.Record.QuantityCandidate = nil
	p.Reading.Exclude = nil
	return p
}

// BegunBy lays a new comparison on the desk by a plan whose files are still to be brought in.
func (s State) BegunBy(path string, p qa.Plan, file qa.File, who string, when time.Time) State {
	rec := qa.Record{Format: qa.RecordFormat, Plan: p, PlanFile: file}
	rec.Trail = rec.Trail.With(when, who, "began the comparison by the plan "+file.Name, file.Name, digestText(file.SHA256))
	return State{Open: true, Drafting: true, Path: path, Record: rec, Acts: s.Acts, Number: s.Number}.acted("began a comparison by the plan " + file.Name)
}

// BegunSealed lays a new comparison on the desk whose criterion was sealed in a workbook of its own; trail is what that
// workbook says of it.
func (s State) BegunSealed(p qa.Plan, seal qa.Seal, trail qa.Trail, file qa.File, who string, when time.Time) State {
	rec := qa.Record{Format: qa.RecordFormat, Plan: nextPlan(p), Result: qa.Result{Seal: seal}}
	rec.Plan.Candidate.Lot = p.Candidate.Lot
	rec.Trail = trail.With(when, who, "began the comparison by the seal "+file.Name, file.Name, digestText(file.SHA256))
	next := State{Open: true, Drafting: true, Record: rec, Acts: s.Acts, Number: s.Number}
	next.Said = "The criterion is sealed, as " + file.Name + " says."
	return next.acted("began a comparison by the seal " + file.Name)
}

// Superseding puts the record in the place of earlier ones, oldest first, for a stated reason. It can be undone until the
// record is exported or signed.
func (s State) Superseding(earlier []qa.Superseded, who string, when time.Time) (State, error) {
	switch {
	case s.Closed():
		return s, ErrClosed
	case !s.Open || len(earlier) == 0:
		return s, errors.New("superseding: found no earlier record, want the signed workbook in whose place this one stands; choose it")
	case len(s.Record.Supersedes) > 0:
		return s, errors.New("superseding: found this record in the place of " + s.Record.Supersedes[len(s.Record.Supersedes)-1].Record + ", want one that supersedes none yet; undo that first")
	}
	next := s
	next.Record = s.Record.Superseding(earlier, who, when)
	next.Record.Trail = next.Record.Trail[:len(next.Record.Trail):len(next.Record.Trail)]
	if n := len(earlier) + 1; next.Record.Result.Attempts.Known < n {
		next.Record.Result.Attempts = qa.Attempts{Known: n, KeptBy: "the records that this one supersedes"}
	}
	last := earlier[len(earlier)-1]
	next.Workbook, next.Problem = Workbook{}, Problem{}
	next.Said = "Supersedes record " + last.Record + "."
	return next.undoable(s, "superseded record "+last.Record+": "+last.Reason), nil
}

// SavedPlan says that the plan was written to a file. It is no part of the record.
func (s State) SavedPlan(path string) State {
	s.Problem, s.Said = Problem{}, "Plan saved to "+path+"."
	return s.did("saved the plan " + path)
}

// SavedFile says that something was written to a file that is no part of the record: a seal, a statement, a report.
func (s State) SavedFile(what, path string) State {
	s.Problem, s.Said = Problem{}, what+" saved to "+path+"."
	return s.did("saved " + strings.ToLower(what) + " " + path)
}

// named is what a comparison is called: its title, its file, or that it has none.
func named(title, path string) string {
	switch {
	case title != "":
		return title
	case path != "":
		return base(path)
	}
	return "a comparison without a title"
}

func digestText(sha string) string {
	if sha == "" {
		return ""
	}
	return "sha-256 " + sha
}
