package desk

import (
	"strings"

	"lotpair/qa"
)

// SpineView is what the spine says above and below its lines.
type SpineView struct {
	Overall  string // "Overall: not equivalent."
	Sentence string // what it rests on
	Asked    string
	Order    string
	Rows     []SpineRow
	Foot     string
}

// SpineRow is one line of the spine.
type SpineRow struct {
	At       int // place of the characteristic in the result
	Name     string
	Verdict  string
	Note     string
	Weighty  bool // a verdict that is not the one wanted
	Selected bool
}

// Spine says the overall verdict and one line a characteristic.
func (s State) Spine() SpineView {
	v := SpineView{Order: "in " + s.Sorted.String()}
	if s.Sorted != ByFile {
		v.Order = "by " + s.Sorted.String()
	}
	if !s.Compared {
		v.Overall, v.Sentence = "Not compared.", "A reading was left out or put back: the result that was here is gone."
		return v
	}
	r := s.Record.Result
	v.Overall = "Overall: " + string(r.Verdict) + "."
	if _, rest, ok := strings.Cut(r.Sentence, ". "); ok {
		v.Sentence = rest
	}
	v.Asked = qa.Asked(r)
	for _, i := range s.lines() {
		c := r.Characteristics[i]
		v.Rows = append(v.Rows, SpineRow{At: i, Name: c.Name, Verdict: string(c.Verdict), Note: rowNote(c), Weighty: !c.Verdict.Shown(), Selected: i == s.Selected})
	}
	v.Foot = spineFoot(r)
	return v
}

// rowNote says what a line's verdict alone would hide.
func rowNote(c qa.Comparison) string {
	var notes []string
	if c.Objective != qa.Equivalence {
		notes = append(notes, "asked: "+strings.ReplaceAll(string(c.Objective), "-", " "))
	}
	switch {
	case qa.Has(c.Warnings, qa.WarnUnread):
		notes = append(notes, "cells could not be read")
	case qa.Has(c.Warnings, qa.WarnNonDetects):
		notes = append(notes, "below a detection limit")
	case qa.Has(c.Warnings, qa.WarnTooFew):
		notes = append(notes, "too few readings")
	case c.Detectable && (c.Verdict == qa.Equivalent || c.Verdict == qa.Demonstrated):
		notes = append(notes, "a shift is detectable")
	case len(c.Warnings) > 0:
		notes = append(notes, qa.Count(len(c.Warnings), "finding", "findings"))
	}
	return strings.Join(notes, "; ")
}

// spineFoot says by which rule the overall verdict comes from the lines.
func spineFoot(r qa.Result) string {
	against := 0
	for _, c := range r.Characteristics {
		if c.Objective.AgainstMargin() {
			against++
		}
	}
	switch {
	case against == 0:
		return "Only differences were asked: a difference not shown is no evidence that there is none."
	case against == 1 && len(r.Characteristics) == 1:
		return "One characteristic: the overall verdict is its own."
	}
	s := "All must hold. An overall “not equivalent” rests on the refuted characteristic named."
	if against < len(r.Characteristics) {
		s += " Lines asked for a difference take no part."
	}
	return s
}
