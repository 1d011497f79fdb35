package desk_test

import (
	"errors"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"lotpair/app/desk"
	"lotpair/qa"
)

var update = flag.Bool("update", false, "write what the scripts give as what they want")

// example is a comparison of three characteristics: the wall is refuted, the bore holds, the run-out is one-sided.
func example(t testing.TB) qa.Record {
	t.Helper()
	ptr := func(v float64) *float64 { return &v }
	series := func(name, column string, first int, decimals int, values ...float64) qa.Series {
		s := qa.Series{Characteristic: name, Rows: len(values)}
		for i, v := range values {
			s.Readings = append(s.Readings, qa.Reading{
				Value: v, Decimals: decimals,
				Source: qa.Source{File: "shell.xlsx", Sheet: "Data", Cell: fmt.Sprintf("%s%d", column, first+i), Text: fmt.Sprintf("%.*f", decimals, v)},
			})
		}
		return s
	}
	file := []qa.File{{Name: "shell.xlsx", SHA256: strings.Repeat("4f1c09be", 7) + "000077a2", Bytes: 9000}}
	readings := qa.Readings{
		Characteristics: []qa.Characteristic{
			{Name: "Bore", Unit: "mm", Lower: ptr(39.975), Upper: ptr(40.025)},
			{Name: "Run-out", Unit: "mm", Upper: ptr(0.08), Objective: qa.NotHigher, Margin: &qa.Margin{Absolute: ptr(0.008)}},
			{Name: "Wall", Unit: "mm", Lower: ptr(3.9), Upper: ptr(4.1)},
		},
		Reference: qa.Lot{Name: "R-118", Source: "Existing foundry", Files: file, Rows: 6, Series: []qa.Series{
			series("Bore", "C", 4, 3, 40.001, 39.999, 40.000, 40.002, 39.998, 40.000),
			series("Run-out", "D", 4, 3, 0.021, 0.025, 0.019, 0.023, 0.020, 0.024),
			series("Wall", "E", 4, 3, 4.012, 3.998, 4.021, 4.005, 4.001, 4.312),
		}},
		Candidate: qa.Lot{Name: "C-022", Source: "Second foundry", Files: file, Rows: 6, Series: []qa.Series{
			series("Bore", "C", 10, 3, 40.001, 40.000, 40.001, 40.002, 39.999, 40.001),
			series("Run-out", "D", 10, 3, 0.025, 0.031, 0.027, 0.035, 0.022, 0.024),
			series("Wall", "E", 10, 3, 3.951, 3.946, 3.938, 3.950, 3.929, 3.945),
		}},
	}
	readings.Said = []string{"The limits stand in the plan."}
	readings.Warnings = []qa.Warning{{Code: "hidden-rows", Text: "Rows 20 to 22 of sheet Data are hidden; they were read."}}
	plan := qa.Plan{
		Format: qa.PlanFormat, Title: "Hub shell HS-40: second foundry", Supports: "DEV-2291",
		Signatures: []qa.Required{{Meaning: "prepared"}, {Meaning: "reviewed"}},
		Criterion:  qa.Criterion{Objective: qa.Equivalence, Margin: &qa.Margin{ToleranceFraction: ptr(0.1)}}, Characteristics: readings.Characteristics,
	}
	res, err := qa.Compare(plan, readings, qa.Run{Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: "not counted"}})
	if err != nil {
		t.Fatal(err)
	}
	return qa.NewRecord(plan, qa.File{Name: "plan.toml", SHA256: strings.Repeat("ab", 32)}, readings, res, "tester", noon)
}

var made *qa.Record

// once is the example, compared once for all scripts.
func once(t testing.TB) qa.Record {
	t.Helper()
	if made == nil {
		rec := example(t)
		made = &rec
	}
	return *made
}

var noon = time.Date(2026, 12, 1, 12, 0, 0, 0, time.FixedZone("", 3600))

// act does one line of a script.
func act(t testing.TB, s desk.State, line string) (desk.State, error) {
	t.Helper()
	rec := once(t)
	cell := func(text string) qa.Source {
		part := strings.Split(text, "!")
		if len(part) != 3 {
			t.Fatalf("%q: want file!sheet!cell", text)
		}
		return qa.Source{File: part[0], Sheet: part[1], Cell: part[2]}
	}
	signature := func(meaning string, valid bool) desk.Signature {
		return desk.Signature{
			Signer: "Ann Example", Title: "quality engineer", Meaning: meaning, Reason: "first article", Time: noon.Format(time.RFC3339),
			Valid: valid, CoversAll: true, Fingerprint: strings.Repeat("cd", 32),
		}
	}
	verb, rest, _ := strings.Cut(line, " ")
	switch verb {
	case "open":
		return s.Opened(rest, rec), nil
	case "workbook": // workbook STATE MEANING...
		f := strings.Fields(rest)
		w := desk.Workbook{Path: "record.xlsx", State: f[0], Agreement: "the result computed again agrees with the record and its sheets"}
		for _, m := range f[1:] {
			w.Signatures = append(w.Signatures, signature(m, f[0] != "changed"))
		}
		if f[0] == "changed" {
			w.Reasons = []string{"/xl/worksheets/sheet1.xml: is not as it was signed"}
		}
		return s.OpenedWorkbook(rec, w), nil
	case "select":
		for i, c := range rec.Result.Characteristics {
			if c.Name == rest {
				return s.WithSelected(i), nil
			}
		}
		t.Fatalf("no characteristic %q", rest)
	case "step":
		var by int
		if _, err := fmt.Sscan(rest, &by); err != nil {
			t.Fatal(err)
		}
		return s.WithSelected(s.Stepped(by)), nil
	case "sort":
		for s.Sorted.String() != rest {
			s = s.WithSortedBy(s.Sorted.Next())
		}
		return s, nil
	case "look":
		for l := desk.Spread; l <= desk.Limits; l++ {
			if l.String() == rest {
				return s.WithLook(l), nil
			}
		}
		t.Fatalf("no way of looking %q", rest)
	case "leave": // leave CELL REASON
		c, reason, _ := strings.Cut(rest, " ")
		return s.LeftOut(cell(c), reason, "tester", noon)
	case "back":
		return s.PutBack(cell(rest), "tester", noon)
	case "undo":
		return s.Undone("tester", noon), nil
	case "redo":
		return s.Redone("tester", noon), nil
	case "compare":
		return s.Compare(qa.Watch{})
	case "export":
		return s.Exported(rest), nil
	case "sign":
		w := s.Workbook
		w.Path, w.State, w.Missing = "record.xlsx", "incomplete", []string{"reviewed"}
		w.Agreement = "the result computed again agrees with the record and its sheets" // as verification of what was written says it
		w.Signatures = append(append([]desk.Signature{}, w.Signatures...), signature(rest, true))
		return s.Signed(s.Record, w), nil
	case "fail":
		place, text, _ := strings.Cut(rest, ": ")
		return s.Failed(place, errors.New(text)), nil
	case "work":
		return s.Working(rest, 0.5), nil
	}
	t.Fatalf("%q: no such act", line)
	return s, nil
}

// text is everything the screens say.
func text(s desk.State) string {
	var b strings.Builder
	say := func(format string, args ...any) {
		b.WriteString(strings.TrimRight(fmt.Sprintf(format, args...), " ") + "\n")
	}
	h := s.Header()
	say("header: %s | %s || %s | %s%s", h.Title, h.Supports, h.Right, h.Note, map[bool]string{true: " (alarm)"}[h.Alarm])
	if s.Problem.Text != "" {
		say("problem: %s: %s", s.Problem.Place, s.Problem.Text)
	}
	if s.Job.Name != "" {
		say("working: %s %v", s.Job.Name, s.Job.Share)
	}
	for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
		p := s.Page(side)
		say("%s: %s | %s | %s | %s | %s", p.Heading, p.Lot, p.Source, p.File, p.Digest, p.Parts)
		for _, f := range p.Findings {
			say("  %s: %s", p.FindingsTitle, f)
		}
		for i := range p.Readings.Len() {
			if r := p.Readings.At(i); !r.Used {
				say("  %s %s not used: %s", r.Cell, r.Value, r.Note)
			}
		}
		say("  %s: %d", p.ReadingsTitle, p.Readings.Len())
	}
	v := s.Spine()
	say("spine: %s %s", v.Overall, v.Sentence)
	say("  %s (%s)", v.Asked, v.Order)
	for _, r := range v.Rows {
		say("  %s%s: %s (%s)", map[bool]string{true: "> "}[r.Selected], r.Name, r.Verdict, r.Note)
	}
	say("  %s", v.Foot)
	w := s.Bench()
	say("bench: %s: %s", w.Name, w.Headline)
	for _, l := range w.Looks {
		say("  %s%s", map[bool]string{true: "> "}[l.Chosen], l.Name)
	}
	for _, p := range w.Paragraphs {
		say("  %s", p)
	}
	for _, p := range w.Whole {
		say("  whole: %s", p)
	}
	say("  %s", w.Caution)
	if w.Read != "" {
		say("  %s", w.Read)
	}
	f := s.Foot()
	say("foot: %s | %s | %s", f.Next, f.Said, strings.Join([]string{f.Compare, f.Signatures, f.Export, f.Sign}, ", "))
	for _, l := range s.Signatures() {
		say("  %s", l)
	}
	for _, a := range s.Acts {
		say("act: %s", a)
	}
	return b.String()
}

// TestScripts replays whole afternoons: acts above the line, what the screens say below it.
func TestScripts(t *testing.T) {
	files, err := filepath.Glob("testdata/*.txt")
	if err != nil || len(files) == 0 {
		t.Fatalf("scripts: found %d, %v", len(files), err)
	}
	for _, name := range files {
		t.Run(filepath.Base(name), func(t *testing.T) {
			data, err := os.ReadFile(name)
			if err != nil {
				t.Fatal(err)
			}
			const line = "-- want --\n"
			script, want, _ := strings.Cut(string(data), line)
			var s desk.State
			for _, l := range strings.Split(script, "\n") {
				if l = strings.TrimSpace(l); l == "" || strings.HasPrefix(l, "#") {
					continue
				}
				before, had := s, text(s)
				next, err := act(t, s, l)
				if err != nil {
					next = s.Failed(strings.Fields(l)[0], err)
				}
				if text(before) != had {
					t.Errorf("%s: the state before was changed in place", l)
				}
				s = next
			}
			got := text(s)
			if *update {
				if err := os.WriteFile(name, []byte(script+line+got), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			if got != want {
				t.Errorf("%s: got\n%s\nwant\n%s", name, got, want)
			}
		})
	}
}

func TestClosedRecordsAreNotChanged(t *testing.T) {
	at := qa.Source{File: "shell.xlsx", Sheet: "Data", Cell: "E9"}
	for name, s := range map[string]desk.State{
		"opened": desk.State{}.OpenedWorkbook(example(t), desk.Workbook{Path: "r.xlsx", State: "unsigned"}),
		"signed": desk.State{}.Opened("plan.toml", example(t)).Signed(example(t), desk.Workbook{Path: "r.xlsx", Signatures: []desk.Signature{{Meaning: "prepared", Valid: true}}}),
	} {
		if _, err := s.LeftOut(at, "a reason", "tester", noon); !errors.Is(err, desk.ErrClosed) {
			t.Errorf("%s: got %v, want %v", name, err, desk.ErrClosed)
		}
		if _, err := s.PutBack(at, "tester", noon); !errors.Is(err, desk.ErrClosed) {
			t.Errorf("%s: got %v, want %v", name, err, desk.ErrClosed)
		}
	}
}

func TestLeavingOutIsInTheTrail(t *testing.T) {
	s := desk.State{}.Opened("plan.toml", example(t))
	at := qa.Source{File: "shell.xlsx", Sheet: "Data", Cell: "E9"}
	out, err := s.LeftOut(at, "dropped part, NCR-77", "tester", noon)
	if err != nil {
		t.Fatal(err)
	}
	back, err := out.PutBack(at, "tester", noon)
	if err != nil {
		t.Fatal(err)
	}
	if n := len(back.Record.Trail); n != 5 || back.Record.Trail.Broken() >= 0 {
		t.Errorf("trail: got %d entries, broken at %d, want 5 and whole", n, back.Record.Trail.Broken())
	}
	if n := len(out.Record.Plan.Reading.Exclude); n != 1 {
		t.Errorf("exclusions: got %d, want 1", n)
	}
	if n := len(back.Record.Plan.Reading.Exclude); n != 0 {
		t.Errorf("exclusions after putting back: got %d, want 0", n)
	}
	if s.Record.Plan.SealDigest() != out.Record.Plan.SealDigest() {
		t.Error("seal: leaving a reading out changed the criterion")
	}
	again, err := back.Compare(qa.Watch{})
	if err != nil {
		t.Fatal(err)
	}
	if got, want := text(again), text(s); cutActs(got) != cutActs(want) {
		t.Errorf("after leaving out and putting back: got\n%s\nwant\n%s", got, want)
	}
	if got := again.Record.Result.Attempts.Known; got != 2 {
		t.Errorf("attempts: got %d, want 2", got)
	}
}

func cutActs(s string) string {
	before, _, _ := strings.Cut(s, "act: ")
	return before
}

func TestStepsStayOnTheSpine(t *testing.T) {
	s := desk.State{}.Opened("plan.toml", example(t))
	if got := s.Stepped(-5); got != 0 {
		t.Errorf("up from the first: got %d, want 0", got)
	}
	if got := s.Stepped(99); got != 2 {
		t.Errorf("down past the last: got %d, want 2", got)
	}
	if got := (desk.State{}).Stepped(1); got != 0 {
		t.Errorf("on an empty desk: got %d, want 0", got)
	}
}
