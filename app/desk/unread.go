package desk

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"lotpair/qa"
)

// Unread is the entry of the ledger of a cell that was not read as a number, or was left out as such; false where there is none.
func (s State) Unread(at qa.Source) (qa.Entry, bool) {
	for _, e := range s.Record.Readings.Ledger {
		if same(e.Source, at) && (e.TakenAs == qa.TakenNotANumber || e.TakenAs == qa.TakenNonDetect || e.TakenAs == qa.TakenExcluded && e.Value == nil) {
			return e, true
		}
	}
	return qa.Entry{}, false
}

// WithoutUnread is the plan that leaves out a cell that was not read as a number, with a typed reason. The readings have to be
// taken again by it.
func (s State) WithoutUnread(at qa.Source, reason string) (qa.Plan, error) {
	p, reason := s.Record.Plan, strings.TrimSpace(reason)
	e, ok := s.Unread(at)
	switch {
	case s.Closed():
		return p, ErrClosed
	case !ok || e.TakenAs == qa.TakenExcluded:
		return p, fmt.Errorf("%s: found no cell that could not be read, want one; choose another", at.String())
	case reason == "":
		return p, fmt.Errorf("%s: found no reason, want one in words; type why the cell is left out", at.Place())
	}
	p.Reading.Exclude = append(slices.Clone(p.Reading.Exclude), qa.Exclusion{Cell: at.Place(), File: at.File, Reason: reason})
	return p, nil
}

// WithUnread is the plan that no longer leaves out a cell that was not read as a number.
func (s State) WithUnread(at qa.Source) (qa.Plan, error) {
	p := s.Record.Plan
	if s.Closed() {
		return p, ErrClosed
	}
	p.Reading.Exclude = slices.DeleteFunc(slices.Clone(p.Reading.Exclude), func(x qa.Exclusion) bool {
		return x.Cell == at.Place() && (x.File == "" || x.File == at.File)
	})
	if len(p.Reading.Exclude) == len(s.Record.Plan.Reading.Exclude) {
		return p, errors.New(at.String() + ": found it not left out by a cell of the plan alone, want one that is; choose another")
	}
	return p, nil
}

// Reread lays readings on the desk that were taken again by a changed plan. The result is cleared: it was made with others.
func (s State) Reread(p qa.Plan, r qa.Readings, what string, at qa.Source, why, who string, when time.Time) State {
	next := s
	next.Record.Plan, next.Record.Readings = p, r
	next.Compared, next.Workbook, next.Said, next.Problem = false, Workbook{}, "", Problem{}
	next.Record.Trail = s.Record.Trail.With(when, who, what, at.String(), why)
	said := what + " " + at.String()
	if why != "" {
		said += ": " + why
	}
	return next.undoable(s, said)
}
