package qa

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"time"
)

// Act is one entry of the trail: who did what when, and the digest of the entry before it (21 CFR 11.10(e)).
type Act struct {
	Time   time.Time `json:"time"` // local, with offset
	Who    string    `json:"who"`
	What   string    `json:"what"`
	On     string    `json:"on,omitempty"`
	Why    string    `json:"why,omitempty"`
	Before string    `json:"before"` // digest of the entry before; empty for the first
}

// Digest is the SHA-256 of the entry, in lower-case hexadecimal.
func (a Act) Digest() string {
	text := fmt.Sprintf("%q %q %q %q %q %q", a.Time.Format(time.RFC3339Nano), a.Who, a.What, a.On, a.Why, a.Before)
	sum := sha256.Sum256([]byte(text))
	return hex.EncodeToString(sum[:])
}

// Trail is the acts on one record, in order. Entries are only ever appended.
type Trail []Act

// With is the trail with one more entry, chained to the last; t itself is not changed.
func (t Trail) With(when time.Time, who, what, on, why string) Trail {
	a := Act{Time: when, Who: who, What: what, On: on, Why: why}
	if len(t) > 0 {
		a.Before = t[len(t)-1].Digest()
	}
	return append(append(Trail{}, t...), a)
}

// Broken is the index of the first entry that does not hold the digest of the one before it, or -1.
func (t Trail) Broken() int {
	before := ""
	for i, a := range t {
		if a.Before != before {
			return i
		}
		before = a.Digest()
	}
	return -1
}
