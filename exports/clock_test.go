package exports_test

import (
	"errors"
	"strings"
	"testing"
	"time"

	"lotpair/exports"
	"lotpair/exports/opcsign"
)

// TestClock signs by clocks that are wrong: by a day or more nothing is signed, by less it stands in what verification finds.
func TestClock(t *testing.T) {
	rec := record(t) // compared at when
	ada, bert := person(t, "Ada Quill"), person(t, "Bert Oakes")
	as := func(meaning string, at time.Time) opcsign.Statement {
		return opcsign.Statement{Meaning: meaning, Time: at}
	}
	var clock *exports.ClockError
	if _, err := exports.SignFirst(rec, ada, as("prepared", when.Add(-25*time.Hour))); !errors.As(err, &clock) || !strings.Contains(err.Error(), "check the clock") {
		t.Errorf("first, a day before the comparison: got %v, want ClockError", err)
	}
	first, err := exports.SignFirst(rec, ada, as("prepared", when.Add(48*time.Hour)))
	if err != nil {
		t.Fatal(err)
	}
	if _, err := exports.Sign(first, bert, as("reviewed", when.Add(time.Hour))); !errors.As(err, &clock) {
		t.Errorf("second, two days before the first: got %v, want ClockError", err)
	}
	for _, c := range []struct {
		name string
		at   time.Time
		said bool
	}{
		{"an hour before the first", when.Add(47 * time.Hour), true},
		{"a minute before it", when.Add(48*time.Hour - time.Minute), false},
		{"after it", when.Add(49 * time.Hour), false},
	} {
		second, err := exports.Sign(first, bert, as("reviewed", c.at))
		if err != nil {
			t.Fatal(err)
		}
		v := exports.Verify(second, nil)
		if v.State != exports.Intact || hasCode(v, "clock") != c.said {
			t.Errorf("%s: got %s, %v; want it intact, and said %v", c.name, v.State, v.Reasons, c.said)
		}
		if _, err := exports.Sign(second, person(t, "Cleo Ash"), as("approved", when.Add(72*time.Hour))); err != nil {
			t.Errorf("%s: a third signature: got %v", c.name, err)
		}
	}
}
