package exports

import (
	"fmt"
	"time"

	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// How far the clocks of two machines may stand apart, and when a clock is so wrong that nothing is signed by it.
const (
	clockSlack = 10 * time.Minute
	clockWrong = 24 * time.Hour
)

// moment is when something was done, by the clock of the machine where it was done.
type moment struct {
	at   time.Time
	what string
}

// lastAct is the last thing that was done to a record before it was signed.
func lastAct(t qa.Trail) moment {
	var last moment
	for _, a := range t {
		if a.Time.After(last.at) {
			last = moment{a.Time, a.What}
		}
	}
	return last
}

// clocks notes signatures that state a time before what there was to be signed: the clock of one of the machines was wrong. It
// takes nothing from what they cover.
func (v *Verification) clocks(report opcsign.Report, before moment) {
	for _, s := range report.Signatures {
		at := s.Statement.Time
		if at.IsZero() {
			continue
		}
		if at.Add(clockSlack).Before(before.at) {
			v.reason("clock", s.Part, fmt.Sprintf("found it signed as %s at %s, and %q at %s before it: the clock of one of the machines was wrong; ask the signers when they signed",
				s.Statement.Meaning, localTime(at), before.what, localTime(before.at)))
		}
		if at.After(before.at) {
			before = moment{at, signedAs + s.Statement.Meaning}
		}
	}
}

// ClockError says that nothing was signed because the clock of the machine is clearly wrong.
type ClockError struct {
	Now, Last time.Time
	What      string // what was done last
}

func (e *ClockError) Error() string {
	return fmt.Sprintf("clock: found the time %s, want one after %s, when this record was %q; check the clock of this machine and sign again", localTime(e.Now), localTime(e.Last), e.What)
}

// clockProblem is a ClockError where a time of signing lies more than a day before what was done last.
func clockProblem(now time.Time, last moment) error {
	if now.Add(clockWrong).Before(last.at) {
		return &ClockError{now, last.at, last.what}
	}
	return nil
}

// last is the last thing that was done to a file that was verified.
func (v Verification) last() moment {
	var last moment
	if v.Record != nil {
		last = lastAct(v.Record.Trail)
	}
	if v.Sealed != nil {
		last = moment{v.Sealed.Time, "sealed"}
	}
	for _, s := range v.Signatures {
		if at, err := time.Parse(time.RFC3339, s.Time); err == nil && at.After(last.at) {
			last = moment{at, signedAs + s.Meaning}
		}
	}
	return last
}
