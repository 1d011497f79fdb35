package desk

import (
	"fmt"

	"lotpair/qa"
)

// QualifyText says what an installation check is.
const QualifyText = "Runs the published checks on this machine, each beside its source, then reads, compares, signs and verifies the worked example and changes one bit of it, which must be noticed. It shows that the program computes as published here; validation for your intended use stays with your organization."

// CheckText says what came of an installation check.
func CheckText(time, version string, checks, off int) string {
	if off == 0 {
		return fmt.Sprintf("Lotpair %s, %s: all %d checks hold.", version, timeText(time), checks)
	}
	return fmt.Sprintf("Lotpair %s, %s: %s of %d OFF. Do not use this installation; tell whoever looks after it.", version, timeText(time), qa.Count(off, "check", "checks"), checks)
}

// CheckedInstallation says what came of an installation check. It is no part of the record.
func (s State) CheckedInstallation(said string, holds bool) State {
	s.Problem, s.Said = Problem{}, said
	if !holds {
		s.Problem = Problem{Place: "Checking this installation", Text: said}
	}
	return s.did("checked the installation")
}
