package desk_test

import (
	"encoding/json"
	"fmt"
	"testing"
	"time"

	"pgregory.net/rapid"

	"lotpair/app/desk"
	"lotpair/importers"
	"lotpair/qa"
)

// TestActsInAnyOrder does acts in any order, as a person may, and holds what must be so after each: no act changes the state
// before it, the trail is whole and only grows, a sealed criterion changes by an amendment alone, undo and redo come back to what
// was, and what is kept is counted.
func TestActsInAnyOrder(t *testing.T) {
	sample := example(t)
	rapid.Check(t, func(t *rapid.T) {
		at := time.Date(2026, 12, 1, 8, 0, 0, 0, time.UTC)
		s := desk.State{}
		for step := range rapid.IntRange(3, 25).Draw(t, "acts") {
			at = at.Add(time.Minute)
			before, text := s, stateText(t, s)
			name := rapid.SampledFrom([]string{"begin", "open", "type", "terms", "sight", "headings", "seal", "amend", "undo", "redo", "out", "back", "supersede", "particulars", "next", "select", "leave", "compare", "export"}).Draw(t, "act")
			s = anyAct(t, s, name, step, sample, at)
			if got := stateText(t, before); got != text {
				t.Fatalf("%s: the state before it changed:\n%s\nto\n%s", name, text, got)
			}
			r, old := s.Record, before.Record
			if r.Trail.Broken() >= 0 {
				t.Fatalf("%s: the trail is broken at %d", name, r.Trail.Broken())
			}
			fresh := name == "begin" || name == "open" || name == "next" || name == "leave"
			if !fresh && len(r.Trail) < len(old.Trail) {
				t.Fatalf("%s: the trail has %d acts, had %d", name, len(r.Trail), len(old.Trail))
			}
			if s.Number < before.Number {
				t.Fatalf("%s: the acts are numbered %d, were %d", name, s.Number, before.Number)
			}
			if seal := old.Result.Seal; !fresh && before.Sealed() && name != "amend" && (r.Result.Seal.Digest != seal.Digest || s.Record.Plan.SealDigest() != before.Record.Plan.SealDigest()) {
				t.Fatalf("%s: changed a sealed criterion", name)
			}
			if name == "undo" && before.CanUndo() != "" {
				if again := s.Redone("tester", at); !sameDesk(t, again, before) {
					t.Fatalf("redo after undo: got\n%s\nwant\n%s", stateText(t, again), text)
				}
			}
			if s.Compared && s.Record.Result.Verdict == "" {
				t.Fatalf("%s: compared without a verdict", name)
			}
		}
	})
}

// sameDesk says whether plan, readings and result of two states are the same, whatever was said and done between.
func sameDesk(t *rapid.T, a, b desk.State) bool {
	a.Record.Trail, b.Record.Trail = nil, nil
	a.Record.Result.Attempts, b.Record.Result.Attempts = qa.Attempts{}, qa.Attempts{}
	x, err := json.Marshal(a.Record)
	if err != nil {
		t.Fatal(err)
	}
	y, err := json.Marshal(b.Record)
	if err != nil {
		t.Fatal(err)
	}
	return string(x) == string(y) && a.Compared == b.Compared
}

func stateText(t *rapid.T, s desk.State) string {
	b, err := json.Marshal(struct {
		Record   qa.Record
		Compared bool
		Drafting bool
		Files    []qa.File
		Acts     []string
	}{s.Record, s.Compared, s.Drafting, s.Files, s.Acts})
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// anyAct does an act; one that is refused leaves the state as it was.
func anyAct(t *rapid.T, s desk.State, name string, step int, sample qa.Record, at time.Time) desk.State {
	const who = "tester"
	taken := func(next desk.State, err error) desk.State {
		if err != nil {
			return s.Failed(name, err)
		}
		return next
	}
	margin := func() qa.Plan {
		terms := desk.TermsOf(s.Record.Plan, desk.Point)
		terms.Margin, terms.First = desk.Margins[1], fmt.Sprint(float64(step+1)/100)
		p, err := terms.Into(s.Record.Plan)
		if err != nil {
			t.Fatal(err)
		}
		return p
	}
	cell := qa.Source{File: "shell.xlsx", Sheet: "Data", Cell: fmt.Sprintf("D%d", rapid.IntRange(4, 16).Draw(t, "cell"))}
	switch name {
	case "begin":
		return s.Begun(who, at)
	case "open":
		return s.Opened("plan.toml", sample)
	case "type":
		return s.Typed(margin())
	case "terms":
		if !s.Drafting {
			return s
		}
		return taken(s.Typed(margin()).Stated(margin(), "margin", who, at))
	case "sight", "headings":
		if !s.Drafting {
			return s
		}
		x, err := desk.LookedInto(qa.Watch{}, "a.csv", []byte(sheetText), desk.Stated{}.WithDecimal(","), true)
		if err != nil {
			t.Fatal(err)
		}
		if stated, err := x.Playing(3, importers.PlaysGroup); err == nil && step%2 == 0 {
			x.Stated = stated
		}
		if s = s.WithSheet(&x); name == "sight" {
			return s.WithSight(who, at).WithSheet(nil)
		}
		return taken(s.TookHeadings(who, at)).WithSheet(nil)
	case "seal":
		return taken(s.Seal(who, at))
	case "amend":
		return taken(s.Amended(margin(), "because", who, at))
	case "undo":
		return s.Undone(who, at)
	case "redo":
		return s.Redone(who, at)
	case "out":
		return taken(s.LeftOut(cell, "burr", who, at))
	case "back":
		return taken(s.PutBack(cell, who, at))
	case "supersede":
		return taken(s.Superseding([]qa.Superseded{{Record: "LP-1", File: qa.File{Name: "a.xlsx"}, Reason: "gauge"}}, who, at))
	case "particulars":
		if !s.Compared {
			return s
		}
		p := s.Record.Plan
		p.Record.Revision = fmt.Sprint(step)
		res := s.Record.Result
		return taken(s.WithParticulars(p, res, who, at))
	case "next":
		return taken(s.BegunFrom(who, at))
	case "select":
		return s.WithSelected(step % 3)
	case "leave":
		return s.Left()
	case "compare":
		if !s.Open || s.Drafting || s.Compared || len(s.Record.Readings.Characteristics) == 0 {
			return s
		}
		return taken(s.Compare(qa.Watch{}))
	}
	if !s.Compared {
		return s
	}
	return s.Exported("out.xlsx")
}
