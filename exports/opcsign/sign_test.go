package opcsign

import (
	"testing"
)

func TestSign(t *testing.T) {
	for n := 1; n <= 3; n++ {
		b := signed(t, n)
		r, err := Verify(b, roots(t))
		if err != nil || !r.Sound() || len(r.Signatures) != n {
			t.Fatalf("%d signatures: got %v, %+v, want a sound package", n, err, r)
		}
		for i, s := range r.Signatures {
			id := key(t, people[i])
			want := statement(id, people[i])
			if !s.Statement.Time.Equal(want.Time) || s.Statement.Time.Format(timeForm) != want.Time.Format(timeForm) {
				t.Errorf("signature %d: got the time %v, want %v", i+1, s.Statement.Time, want.Time)
			}
			want.Time = s.Statement.Time
			if s.Statement != want {
				t.Errorf("signature %d: got %+v, want %+v", i+1, s.Statement, want)
			}
			if got, want := *s.Trusted, people[i] == "reviewed"; got != want {
				t.Errorf("signature %d: got trusted %v (%s), want %v", i+1, got, s.Doubt, want)
			}
		}
	}
}
