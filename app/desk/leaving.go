package desk

import (
	"errors"
	"fmt"
	"strings"
	"time"

	"lotpair/qa"
)

// ErrClosed says that the record may no longer be changed.
var ErrClosed = errors.New("record: found it signed or opened from a workbook, want one that is still open; open the plan and compare again")

// LeftOut leaves the readings of one cell out, with a typed reason. The result is cleared: it was made with them.
func (s State) LeftOut(at qa.Source, reason, who string, when time.Time) (State, error) {
	reason = strings.TrimSpace(reason)
	switch {
	case s.Closed():
		return s, ErrClosed
	case reason == "":
		return s, fmt.Errorf("%s: found no reason, want one in words; type why the reading is left out", at.Place())
	}
	var entries []qa.Entry
	next, n := s.changing(at, func(side qa.Side, characteristic string, r qa.Reading) (qa.Reading, bool) {
		if !r.Used() {
			return r, false
		}
		v := r.Value
		entries = append(entries, qa.Entry{Source: r.Source, Side: side, Characteristic: characteristic, TakenAs: qa.TakenExcluded, Value: &v, Reason: reason})
		r.LeftOut = reason
		return r, true
	})
	if n == 0 {
		return s, fmt.Errorf("%s: found no reading in use, want one; choose another cell", at.String())
	}
	next.Record.Readings.Ledger = append(append([]qa.Entry{}, s.Record.Readings.Ledger...), entries...)
	next.Record.Plan.Reading.Exclude = append(append([]qa.Exclusion{}, s.Record.Plan.Reading.Exclude...), qa.Exclusion{Cell: at.Place(), File: at.File, Reason: reason})
	next.Record.Trail = s.Record.Trail.With(when, who, "left out", at.String(), reason)
	return next.undoable(s, "left out "+at.String()+": "+reason), nil
}

// PutBack takes the readings of one cell back into use. The result is cleared.
func (s State) PutBack(at qa.Source, who string, when time.Time) (State, error) {
	if s.Closed() {
		return s, ErrClosed
	}
	next, n := s.changing(at, func(_ qa.Side, _ string, r qa.Reading) (qa.Reading, bool) {
		was := !r.Used()
		r.LeftOut = ""
		return r, was
	})
	if n == 0 {
		return s, fmt.Errorf("%s: found no reading left out, want one; choose another cell", at.String())
	}
	next.Record.Readings.Ledger = nil
	for _, e := range s.Record.Readings.Ledger {
		if e.TakenAs != qa.TakenExcluded || !same(e.Source, at) {
			next.Record.Readings.Ledger = append(next.Record.Readings.Ledger, e)
		}
	}
	next.Record.Plan.Reading.Exclude = nil
	for _, x := range s.Record.Plan.Reading.Exclude {
		if x.Cell != at.Place() || x.File != "" && x.File != at.File {
			next.Record.Plan.Reading.Exclude = append(next.Record.Plan.Reading.Exclude, x)
		}
	}
	next.Record.Trail = s.Record.Trail.With(when, who, "put back", at.String(), "")
	return next.undoable(s, "put back "+at.String()), nil
}

func same(a, b qa.Source) bool { return a.File == b.File && a.Sheet == b.Sheet && a.Cell == b.Cell }

// changing is the state with every reading of the cell passed through change, in fresh slices, and how many changed. One
// cell may be a reading of both lots only where a file is on both sides.
func (s State) changing(at qa.Source, change func(qa.Side, string, qa.Reading) (qa.Reading, bool)) (State, int) {
	n := 0
	lot := func(side qa.Side, l qa.Lot) qa.Lot {
		series := append([]qa.Series{}, l.Series...)
		for i, x := range series {
			for j, r := range x.Readings {
				if !same(r.Source, at) {
					continue
				}
				changed, ok := change(side, x.Characteristic, r)
				if !ok {
					continue
				}
				n++
				x.Readings = append([]qa.Reading{}, x.Readings...)
				x.Readings[j] = changed
				series[i] = x
			}
		}
		l.Series = series
		return l
	}
	s.Record.Readings.Reference = lot(qa.Reference, s.Record.Readings.Reference)
	s.Record.Readings.Candidate = lot(qa.Candidate, s.Record.Readings.Candidate)
	s.Compared, s.Workbook, s.Said = false, Workbook{}, ""
	return s, n
}
