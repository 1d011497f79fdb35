package exports

import (
	"bytes"
	"crypto/rand"
	"fmt"
	"time"

	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// CheckRecord signs a record with an identity made for the occasion, verifies it, and changes one bit of it, which must be
// noticed: the steps of an installation check that go beyond numbers.
func CheckRecord(rec qa.Record, when time.Time, zone string) []StepLine {
	step := func(name string, err error) StepLine {
		if err != nil {
			return StepLine{Step: name, Fault: err.Error()}
		}
		return StepLine{Step: name, Holds: true}
	}
	pkg, err := signedOnce(rec, when, zone)
	sound := err
	if v := Verify(pkg, nil); err == nil && (v.State != Intact && v.State != Incomplete || !v.Agrees) {
		sound = fmt.Errorf("found the record %s, want it intact: %v", v.State, v.Reasons)
	}
	noticed := err
	if err == nil {
		changed := bytes.Clone(pkg)
		changed[len(changed)/2] ^= 1 // wherever it lies
		if v := Verify(changed, nil); v.State == Intact || v.State == Incomplete {
			noticed = fmt.Errorf("found the changed record %s, want it refused", v.State)
		}
	}
	return []StepLine{
		step("a signed record is read, computed again and found intact", sound),
		step("a record changed in one bit is refused", noticed),
	}
}

func signedOnce(rec qa.Record, when time.Time, zone string) ([]byte, error) {
	id, err := identity.New("Installation check", "", "", when, rand.Reader)
	if err != nil {
		return nil, err
	}
	return SignFirst(rec, id, opcsign.Statement{Meaning: "prepared", Time: when, Zone: zone})
}
