package desk

import (
	"slices"
	"time"

	"lotpair/qa"
)

// moment is what lay on the desk before an act that can be undone.
type moment struct {
	act      string
	plan     qa.Plan
	readings qa.Readings
	result   qa.Result
	compared bool
	selected int
	files    []qa.File
	instead  []qa.Superseded
}

func (s State) moment(act string) moment {
	r := s.Record
	return moment{act: act, plan: r.Plan, readings: r.Readings, result: r.Result, compared: s.Compared, selected: s.Selected, files: s.Files, instead: r.Supersedes}
}

// undoable is the state after an act that can be undone; before is the state that it changed.
func (s State) undoable(before State, act string) State {
	s.Past, s.Future = append(slices.Clone(before.Past), before.moment(act)), nil
	return s.acted(act)
}

// final is the state after an act that is never undone: nothing before it is undone either.
func (s State) final(act string) State {
	s.Past, s.Future = nil, nil
	return s.acted(act)
}

// CanUndo is the act that would be undone; empty where there is none.
func (s State) CanUndo() string { return lastAct(s.Past) }

// CanRedo is the act that would be done again; empty where there is none.
func (s State) CanRedo() string { return lastAct(s.Future) }

func lastAct(m []moment) string {
	if len(m) == 0 {
		return ""
	}
	return m[len(m)-1].act
}

// Undone takes the last act back. That is an act itself: the trail keeps both.
func (s State) Undone(who string, when time.Time) State {
	if len(s.Past) == 0 {
		return s
	}
	m := s.Past[len(s.Past)-1]
	next := s.at(m)
	next.Past, next.Future = slices.Clone(s.Past[:len(s.Past)-1]), append(slices.Clone(s.Future), s.moment(m.act))
	next.Said = "Undid: " + m.act + "."
	next.Record.Trail = s.Record.Trail.With(when, who, "undid", m.act, "")
	return next.acted("undid: " + m.act)
}

// Redone does again what was undone last.
func (s State) Redone(who string, when time.Time) State {
	if len(s.Future) == 0 {
		return s
	}
	m := s.Future[len(s.Future)-1]
	next := s.at(m)
	next.Future, next.Past = slices.Clone(s.Future[:len(s.Future)-1]), append(slices.Clone(s.Past), s.moment(m.act))
	next.Said = "Did again: " + m.act + "."
	next.Record.Trail = s.Record.Trail.With(when, who, "did again", m.act, "")
	return next.acted("did again: " + m.act)
}

// at is the state with what lay on the desk at a moment. A comparison that was run stays counted.
func (s State) at(m moment) State {
	attempts := max(s.Record.Result.Attempts.Known, m.result.Attempts.Known)
	s.Record.Plan, s.Record.Readings, s.Record.Result, s.Record.Supersedes = m.plan, m.readings, m.result, m.instead
	s.Record.Result.Attempts.Known = attempts
	s.Compared, s.Selected, s.Files, s.Problem, s.Typing = m.compared, m.selected, m.files, Problem{}, nil
	return s
}
