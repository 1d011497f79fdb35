package register_test

import (
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/app/register"
)

func TestActsAreNeitherChangedNorRemoved(t *testing.T) {
	dir := t.TempDir()
	r := opened(t, dir)
	e, err := r.Add(entry(1), act("opened"))
	if err != nil {
		t.Fatal(err)
	}
	if e, err = r.Keep(e, act("left out D17")); err != nil {
		t.Fatal(err)
	}
	if _, err = r.Keep(e, act("compared")); err != nil {
		t.Fatal(err)
	}
	raw, err := register.Raw(dir)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = raw.Close() }()
	for _, q := range []string{"UPDATE acts SET who = 'another'", "DELETE FROM acts WHERE number = 2"} {
		if _, err := raw.Exec(q); err == nil || !strings.Contains(err.Error(), "only appended") {
			t.Errorf("%s: got %v, want a refusal", q, err)
		}
	}
	// Who takes the rule away and changes an act is found out by the digests.
	for _, q := range []string{"DROP TRIGGER acts_kept", "UPDATE acts SET what = 'left out D18' WHERE number = 2"} {
		if _, err := raw.Exec(q); err != nil {
			t.Fatal(err)
		}
	}
	_, acts, err := r.Record(e.ID)
	if err == nil || !strings.Contains(err.Error(), "act 2") || len(acts) != 1 {
		t.Errorf("a changed act: got %d acts, %v, want 1 and an error that names act 2", len(acts), err)
	}
}

// filled is a folder whose register holds so many records of three acts, closed.
func filled(t testing.TB, n int) string {
	t.Helper()
	dir := t.TempDir()
	r := opened(t, dir)
	for i := range n {
		e, err := r.Add(entry(i), act("opened"))
		for _, what := range []string{"left out D17", "compared"} {
			if err == nil {
				a := act(what)
				a.State = []byte(strings.Repeat(what, 40))
				e, err = r.Keep(e, a)
			}
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := r.Close(); err != nil {
		t.Fatal(err)
	}
	return dir
}

// TestDamagedDatabase spoils pages in many ways. Whatever happens, the register opens, says what was lost, keeps the damaged
// file, shows no act that was not kept, and keeps new acts.
func TestDamagedDatabase(t *testing.T) {
	const records = 30
	whole := filled(t, records)
	data, err := os.ReadFile(filepath.Join(whole, register.Database))
	if err != nil {
		t.Fatal(err)
	}
	random := rand.New(rand.NewPCG(6, 2026))
	spoil := map[string]func([]byte) []byte{
		"no database":  func([]byte) []byte { return []byte(strings.Repeat("this is no database ", 500)) },
		"first page":   func(d []byte) []byte { clear(d[:4096]); return d },
		"cut in half":  func(d []byte) []byte { return d[:len(d)/2] },
		"header alone": func(d []byte) []byte { return d[:100] },
	}
	for p := 1; p < len(data)/4096; p += 6 {
		spoil["page "+string(rune('0'+p/10))+string(rune('0'+p%10))] = func(d []byte) []byte {
			for i := p * 4096; i < (p+1)*4096; i++ {
				d[i] = byte(random.Uint32())
			}
			return d
		}
	}
	recovered, most := 0, 0
	for name, how := range spoil {
		dir := t.TempDir()
		if err := os.WriteFile(filepath.Join(dir, register.Database), how(append([]byte{}, data...)), 0o600); err != nil {
			t.Fatal(err)
		}
		r, d, err := register.Open(dir, noon)
		if err != nil {
			t.Errorf("%s: got %v, want it recovered", name, err)
			continue
		}
		// What does not show at once shows when it is read; then it is recovered too.
		for id := int64(1); id <= records && d.Kept == ""; id++ {
			if _, _, err := r.Record(id); err != nil && register.Damaged(err) {
				if err := r.Close(); err != nil {
					t.Fatal(err)
				}
				if r, d, err = register.Recover(dir, noon); err != nil {
					t.Fatalf("%s: %v", name, err)
				}
			}
		}
		if d.Kept != "" {
			recovered++
			most = max(most, d.Records)
			if _, err := os.Stat(d.Kept); err != nil {
				t.Errorf("%s: the damaged file was not kept: %v", name, err)
			}
			if !strings.Contains(d.String(), "was damaged") {
				t.Errorf("%s: got %q", name, d)
			}
		}
		for id := int64(1); id <= records; id++ {
			_, acts, err := r.Record(id)
			if err != nil {
				continue
			}
			for i, a := range acts {
				if want := []string{"opened", "left out D17", "compared"}[i]; a.What != want {
					t.Errorf("%s: record %d act %d: got %q, want %q", name, id, i+1, a.What, want)
				}
			}
		}
		if d.Kept != "" {
			if _, err := r.Add(entry(99), act("opened")); err != nil {
				t.Errorf("%s: a new record: %v", name, err)
			}
		}
		if err := r.Close(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	t.Logf("%d damages, %d recovered, at most %d of %d records taken over", len(spoil), recovered, most, records)
	if recovered < 4 || most < records/2 {
		t.Errorf("got %d recoveries with at most %d records, want more: most pages hold few records", recovered, most)
	}
}
