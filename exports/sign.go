package exports

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// The meanings a signature may have (21 CFR 11.50: review, approval, responsibility, authorship).
var signMeanings = []string{"prepared", "reviewed", "approved"}

// ErrMeaning says that a signature has none of the known meanings.
var ErrMeaning = errors.New("meaning: want prepared, reviewed or approved")

// NotSoundError says that a record is not signed because something is wrong with it.
type NotSoundError struct {
	State   State
	Reasons []opcsign.Reason

	clause string // what it does, where the state does not say it
	undone string // what was not done; signed where empty
}

func (e *NotSoundError) Error() string {
	lines := []string{fmt.Sprintf("found a record that %s, want a sound one; nothing was %s", orWord(e.clause, stateClause(e.State)), orWord(e.undone, "signed"))}
	for _, r := range e.Reasons {
		lines = append(lines, r.Error())
	}
	return strings.Join(lines, "\n")
}

// stateClause says a state as the end of "a record that".
func stateClause(s State) string {
	if s == Disagrees {
		return "does not agree with itself"
	}
	return "is " + string(s)
}

// Unstated lists what the plan leaves out of what a record must state before it is signed: the plan keys.
func Unstated(p qa.Plan) []string {
	var out []string
	for _, f := range [][2]string{{"supports", p.Supports}, {"record.part", p.Record.Part}, {"record.revision", p.Record.Revision}} {
		if strings.TrimSpace(f[1]) == "" {
			out = append(out, f[0])
		}
	}
	return out
}

// UnstatedError names the plan keys that must be filled before a record is signed.
type UnstatedError struct{ Keys []string }

func (e *UnstatedError) Error() string {
	return fmt.Sprintf("plan: found no %s, want them stated before a record is signed; fill them in and compare again", strings.Join(e.Keys, ", "))
}

// Sign adds a signature to a record's workbook. The first signer is also printed in the workbook, which is therefore written
// anew from its record; with later signatures nothing but signature parts is added. The record must be sound: unchanged, and
// giving the same result again. The statement's name, title and organization are the identity's where they are empty.
func Sign(pkg []byte, id identity.Identity, st opcsign.Statement) ([]byte, error) {
	if !slices.Contains(signMeanings, st.Meaning) {
		return nil, fmt.Errorf("%w, found %q", ErrMeaning, st.Meaning)
	}
	fill(&st, id)
	v := Verify(pkg, nil)
	if err := clockProblem(st.Time, v.last()); err != nil {
		return nil, err
	}
	switch v.State {
	case Intact, Incomplete:
		out, err := opcsign.Sign(pkg, id.Key, id.Chain, st)
		if err != nil {
			return nil, fmt.Errorf("signature: %w", err)
		}
		return out, nil
	case Unsigned:
		// A draft of an earlier layout is written anew from its record, which this version computed again.
		if !v.Agrees || slices.ContainsFunc(v.Reasons, func(r opcsign.Reason) bool { return r.Code != "layout-version" }) {
			e := &NotSoundError{State: Disagrees, Reasons: v.Reasons}
			if v.Agrees && v.ComputedOtherwise() {
				e.clause = "this version computes otherwise"
			}
			return nil, e
		}
	default:
		return nil, &NotSoundError{State: v.State, Reasons: v.Reasons}
	}
	if v.Sealed != nil {
		return SignSeal(*v.Sealed, id, st)
	}
	return SignFirst(*v.Record, id, st)
}

func signerOf(id identity.Identity, st opcsign.Statement) *qa.Signer {
	return &qa.Signer{
		Name: st.Name, Title: st.Title, Organization: st.Organization, Meaning: st.Meaning,
		Reason: st.Reason, Disposition: st.Disposition, Time: st.Time, Fingerprint: id.Fingerprint(), Certificate: certificateText(id.Chain[0]),
	}
}

// SignFirst writes a record's workbook with its first signer and signs it.
func SignFirst(rec qa.Record, id identity.Identity, st opcsign.Statement) ([]byte, error) {
	return Watched{}.SignFirst(rec, id, st)
}

// SignFirst writes and signs as the function of that name does.
func (w Watched) SignFirst(rec qa.Record, id identity.Identity, st opcsign.Statement) ([]byte, error) {
	if !slices.Contains(signMeanings, st.Meaning) {
		return nil, fmt.Errorf("%w, found %q", ErrMeaning, st.Meaning)
	}
	if keys := Unstated(rec.Plan); len(keys) > 0 {
		return nil, &UnstatedError{Keys: keys}
	}
	fill(&st, id)
	if err := clockProblem(st.Time, lastAct(rec.Trail)); err != nil {
		return nil, err
	}
	rec.Signer = signerOf(id, st)
	rec.Trail = rec.Trail.With(st.Time, st.Name, signedAs+st.Meaning, "", st.Reason)
	pkg, err := w.Workbook(rec)
	if err != nil {
		return nil, err
	}
	out, err := opcsign.Sign(pkg, id.Key, id.Chain, st)
	if err != nil {
		return nil, fmt.Errorf("signature: %w", err)
	}
	return out, nil
}

func fill(st *opcsign.Statement, id identity.Identity) {
	if st.Name == "" {
		st.Name = id.Name()
	}
	if st.Title == "" {
		st.Title = id.Title()
	}
	if st.Organization == "" {
		st.Organization = id.Organization()
	}
}
