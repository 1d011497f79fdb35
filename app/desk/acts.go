package desk

import (
	"fmt"
	"strconv"
	"time"

	"lotpair/qa"
)

// Opened lays a comparison made from a plan file on the desk. Whatever lay there is gone: every act was kept in its record.
func (s State) Opened(path string, rec qa.Record) State {
	return State{Open: true, Compared: true, Path: path, Record: rec, Selected: weightiest(rec.Result), Acts: s.Acts, Number: s.Number}.acted("opened the plan " + path)
}

// OpenedWorkbook lays the record of a workbook on the desk, with what verification found of the file.
func (s State) OpenedWorkbook(rec qa.Record, w Workbook) State {
	w.Opened = true
	return State{Open: true, Compared: true, Path: w.Path, Record: rec, Workbook: w, Selected: weightiest(rec.Result), Acts: s.Acts, Number: s.Number}.acted("opened the workbook " + w.Path)
}

// Reopened lays a record of the register on the desk as it lay there, looked at as it was.
func (s State) Reopened(next State, view View) State {
	next.Open, next.Acts, next.Number = true, s.Acts, s.Number
	if next.Compared {
		next.Selected = weightiest(next.Record.Result)
	}
	n := len(next.Record.Readings.Characteristics)
	if next.Drafting {
		n = len(next.Record.Plan.Characteristics)
	}
	if view.Known && view.Selected >= 0 && view.Selected < n {
		next.Selected, next.Sorted, next.Looking = view.Selected, view.Sorted, view.Looking
	}
	return next.did("opened the record again: " + next.Path)
}

// Left lays nothing on the desk: the register is seen.
func (s State) Left() State {
	if !s.Open {
		return s
	}
	return State{Acts: s.Acts, Number: s.Number}.did("left the record")
}

// weightiest is the first of the characteristics that stand most in the way: what is looked at first.
func weightiest(r qa.Result) int {
	best := 0
	for i, c := range r.Characteristics {
		if rank(c.Verdict) < rank(r.Characteristics[best].Verdict) {
			best = i
		}
	}
	return best
}

// WithSelected looks at another characteristic. A place that does not exist changes nothing.
func (s State) WithSelected(i int) State {
	n := len(s.Record.Result.Characteristics)
	if s.Drafting {
		n = len(s.Record.Plan.Characteristics)
	}
	if !s.Compared && !s.Drafting || i < 0 || i >= n || i == s.Selected {
		return s
	}
	s.Selected = i
	return s.did("selected " + strconv.Itoa(i+1))
}

// WithSortedBy puts the lines of the spine in another order.
func (s State) WithSortedBy(by Sorting) State {
	if by == s.Sorted {
		return s
	}
	s.Sorted = by
	return s.did("sorted by " + by.String())
}

// Exported says that the record was written to a workbook, unsigned.
func (s State) Exported(path string) State {
	s.Workbook = Workbook{Path: path}
	s.Problem, s.Job = Problem{}, Job{}
	s.Said = "Exported to " + path + ", unsigned."
	return s.final("exported " + path)
}

// SavedPicture says that the picture of the bench was written to a file. It is no part of the record.
func (s State) SavedPicture(path string) State {
	s.Problem = Problem{}
	s.Said = "Picture saved to " + path + "."
	return s.did("saved the picture " + path)
}

// Signed says that the workbook was signed; rec and w are read back from the file that was written.
func (s State) Signed(rec qa.Record, w Workbook) State {
	w.Opened = s.Workbook.Opened
	s.Record, s.Workbook = rec, w
	s.Problem, s.Job = Problem{}, Job{}
	meaning := ""
	if n := len(w.Signatures); n > 0 {
		meaning = w.Signatures[n-1].Meaning
	}
	s.Said = "Signed as " + meaning + ", kept in " + w.Path + "."
	return s.final("signed as " + meaning + " in " + w.Path)
}

// Verified says what a check of the workbook found with other trusted certificates. It is no act on the record.
func (s State) Verified(w Workbook) State {
	s.Workbook, s.Problem = w, Problem{}
	return s
}

// Compare runs the comparison again, under a watch, after a reading was left out or put back. It is one more attempt.
func (s State) Compare(watch qa.Watch) (State, error) {
	r := s.Record.Result
	run := qa.Run{Software: r.Software, Seal: r.Seal, Attempts: r.Attempts, Watch: watch}
	run.Attempts.Known++
	res, err := qa.Compare(s.Record.Plan, s.Record.Readings, run)
	if err != nil {
		return s, fmt.Errorf("comparison: %w", err)
	}
	return s.WithResult(res), nil
}

// WithResult takes a result that was computed from what lies on the desk.
func (s State) WithResult(res qa.Result) State {
	s.Record.Result, s.Compared = res, true
	s.Selected = max(0, min(s.Selected, len(res.Characteristics)-1))
	return s.acted("compared")
}

// ComparedAgain takes a result as WithResult does, and puts the comparison into the trail.
func (s State) ComparedAgain(res qa.Result, who string, when time.Time) State {
	s.Record.Trail = s.Record.Trail.With(when, who, "compared", string(res.Verdict), "")
	return s.WithResult(res)
}

// Working says what runs off the window's thread, and how much of it is done (below 0 where that is not known).
func (s State) Working(name string, share float64) State {
	s.Job = Job{Name: name, Share: share}
	return s
}

// Rested says that nothing runs any more, because it was done or given up.
func (s State) Rested() State {
	s.Job = Job{}
	return s
}

// Failed says what went wrong and where; nothing else on the desk changes.
func (s State) Failed(place string, err error) State {
	s.Job = Job{}
	s.Problem = Problem{Place: place, Text: err.Error()}
	return s.did("failed: " + place)
}

// Read says that the problem was read.
func (s State) Read() State {
	s.Problem = Problem{}
	return s
}
