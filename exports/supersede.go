package exports

import (
	"errors"
	"fmt"
	"strings"

	"lotpair/qa"
)

// ErrNoReason says that a record is to be superseded and nobody says why.
var ErrNoReason = errors.New("superseding: found no reason, want why the earlier record is superseded; state it")

// Supersede is what a new record states of the earlier ones in whose place it stands: those that the record in this file had
// superseded, and last that record itself, with the reason. The record has to be signed and sound; required signatures may still
// be missing.
func Supersede(name string, pkg []byte, reason string) ([]qa.Superseded, error) {
	if strings.TrimSpace(reason) == "" {
		return nil, ErrNoReason
	}
	v := Verify(pkg, nil)
	if v.State != Intact && v.State != Incomplete {
		return nil, fmt.Errorf("%s: %w", name, &NotSoundError{State: v.State, Reasons: v.Reasons, undone: "superseded"})
	}
	if v.Record == nil {
		return nil, fmt.Errorf("%s: %w", name, ErrNoRecord)
	}
	return append(append([]qa.Superseded{}, v.Record.Supersedes...), qa.Superseded{
		Record: RecordID(v.digest), File: qa.FileOf(name, pkg), Verdict: v.Record.Result.Verdict, Compared: v.Record.Compared(), Reason: reason,
	}), nil
}

// SupersedesText says which record is superseded and why.
func SupersedesText(s qa.Superseded) string { return "Supersedes record " + earlierText(s) }

func earlierText(s qa.Superseded) string {
	return fmt.Sprintf("%s (%s, SHA-256 %s), which found: %s. Reason: %s", s.Record, s.File.Name, s.File.SHA256, s.Verdict, s.Reason)
}
