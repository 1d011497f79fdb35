package exports_test

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/opcsign"
)

// TestSupersede puts a third record in the place of a second, and that in the place of a first.
func TestSupersede(t *testing.T) {
	ada := person(t, "Ada Quill")
	pkg := signedOnce(t)
	var files [][]byte
	for i, reason := range []string{"a gauge was out of calibration", "a lot was named wrongly"} {
		files = append(files, pkg)
		earlier, err := exports.Supersede("old.xlsx", pkg, reason)
		if err != nil {
			t.Fatal(err)
		}
		if len(earlier) != i+1 {
			t.Fatalf("got %d earlier records, want %d", len(earlier), i+1)
		}
		rec := record(t).Superseding(earlier, "tester", when)
		if pkg, err = exports.SignFirst(rec, ada, opcsign.Statement{Meaning: "prepared", Time: when}); err != nil {
			t.Fatal(err)
		}
	}
	v := exports.Verify(pkg, nil)
	if v.State != exports.Intact || !v.Rebuilt || len(v.Record.Supersedes) != 2 || v.Record.Trail.Broken() >= 0 {
		t.Fatalf("got %s, %v, %v", v.State, v.Reasons, v.Record.Supersedes)
	}
	shown := strings.Join(texts(cellsOf(t, pkg, exports.SheetSummary)), "\n")
	listed := strings.Join(texts(cellsOf(t, pkg, exports.SheetTrail)), "\n")
	for i, s := range v.Record.Supersedes {
		sum := sha256.Sum256(files[i])
		old := exports.Verify(files[i], nil)
		if s.File.SHA256 != hex.EncodeToString(sum[:]) || s.File.Name != "old.xlsx" || s.Verdict != old.Record.Result.Verdict || !s.Compared.Equal(when) {
			t.Errorf("earlier record %d: got %+v", i, s)
		}
		id := "Record " + s.Record
		if old := strings.Join(texts(cellsOf(t, files[i], exports.SheetSummary)), "\n"); !strings.Contains(old, id) {
			t.Errorf("earlier record %d: got the id %s, want the one on its summary", i, s.Record)
		}
		if !strings.Contains(listed, s.Record) || !strings.Contains(listed, s.Reason) || !strings.Contains(listed, s.File.SHA256) {
			t.Errorf("trail: got no record %s with its digest and reason", s.Record)
		}
	}
	last := v.Record.Supersedes[1]
	if !strings.Contains(shown, exports.SupersedesText(last)) {
		t.Errorf("summary: got no %q", exports.SupersedesText(last))
	}
	if want := "superseded record " + last.Record; v.Record.Trail[3].What != want || v.Record.Trail[3].Why != last.Reason {
		t.Errorf("trail: got %+v, want %s", v.Record.Trail[3], want)
	}
}

func texts(cells map[string]string) []string {
	var out []string
	for _, t := range cells {
		out = append(out, t)
	}
	return out
}

// TestSupersedeRefuses wants a reason, and a record that is signed and sound.
func TestSupersedeRefuses(t *testing.T) {
	draft, err := exports.Workbook(record(t))
	if err != nil {
		t.Fatal(err)
	}
	seal, err := exports.SignSeal(sealed(t), person(t, "Ada"), opcsign.Statement{Meaning: "approved", Time: when})
	if err != nil {
		t.Fatal(err)
	}
	changed := rezip(t, signedOnce(t), func(name string, b []byte) []byte {
		if name == readings {
			return append(b, ' ')
		}
		return b
	})
	var sound *exports.NotSoundError
	for name, c := range map[string]struct {
		pkg    []byte
		reason string
		want   func(error) bool
	}{
		"no reason": {signedOnce(t), " ", func(err error) bool { return errors.Is(err, exports.ErrNoReason) }},
		"a draft":   {draft, "r", func(err error) bool { return errors.As(err, &sound) && sound.State == exports.Unsigned }},
		"changed":   {changed, "r", func(err error) bool { return errors.As(err, &sound) && sound.State == exports.Changed }},
		"a seal":    {seal, "r", func(err error) bool { return errors.Is(err, exports.ErrNoRecord) }},
		"no file":   {nil, "r", func(err error) bool { return errors.As(err, &sound) && sound.State == exports.Unreadable }},
	} {
		if _, err := exports.Supersede("old.xlsx", c.pkg, c.reason); err == nil || !c.want(err) {
			t.Errorf("%s: got %v, want a refusal", name, err)
		}
	}
	if got := record(t).Superseding(nil, "tester", when); len(got.Supersedes) != 0 || len(got.Trail) != 3 {
		t.Errorf("nothing superseded: got %v", got.Trail)
	}
}
