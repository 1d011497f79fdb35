package main

import (
	"encoding/json"
	"os"
	"path/filepath"
	"testing"

	"lotpair/qa"
)

// TestFilesOfOneName checks that files which are called alike in different folders are not taken for one another, and that one
// file under two names is one.
func TestFilesOfOneName(t *testing.T) {
	const plan = `format = "lotpair.plan/1"
[reference]
lot = "R"
file = "lots.csv"
[candidate]
lot = "C"
file = "lots.csv"
[criterion]
margin = { absolute = 1 }
`
	dir := t.TempDir()
	for name, text := range map[string]string{
		"plans/plan.toml": plan,
		"plans/lots.csv":  "Lot,Bore\nR,1.1\nR,1.2\nR,1.4\nC,1.3\nC,1.5\nC,1.6\n",
		"lots.csv":        "Lot,Bore\nR,2.1\nR,2.2\nR,2.4\nC,2.3\nC,2.5\nC,2.6\n",
		"may/lots.csv":    "Lot,Bore\nR,3.1\nR,3.2\nR,3.4\nC,3.3\nC,3.5\nC,3.6\n",
	} {
		if err := os.MkdirAll(filepath.Dir(filepath.Join(dir, name)), 0o700); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	for _, c := range []struct {
		args                 []string
		reference, candidate float64 // smallest reading
		names                [2]string
	}{
		{nil, 1.1, 1.3, [2]string{"lots.csv", "lots.csv"}},
		{[]string{"--candidate-file", "lots.csv"}, 1.1, 2.3, [2]string{"lots.csv", "../lots.csv"}},
		{[]string{"--reference-file", "may/lots.csv"}, 3.1, 1.3, [2]string{"../may/lots.csv", "lots.csv"}},
		{[]string{"--reference-file", "may/lots.csv", "--candidate-file", "lots.csv"}, 3.1, 2.3, [2]string{"../may/lots.csv", "../lots.csv"}},
		{[]string{"--reference-file", "may/lots.csv", "--candidate-file", "may/../may/lots.csv"}, 3.1, 3.3, [2]string{"lots.csv", "lots.csv"}},
		{[]string{"--candidate-file", "plans/lots.csv"}, 1.1, 1.3, [2]string{"lots.csv", "lots.csv"}},
	} {
		code, out, e := run(t, dir, append([]string{"compare", "plans/plan.toml", "--json"}, c.args...)...)
		var r qa.Result
		if err := json.Unmarshal([]byte(out), &r); code != 0 || err != nil {
			t.Fatal(c.args, code, err, e)
		}
		x, names := r.Characteristics[0], [2]string{r.Reference.Files[0].Name, r.Candidate.Files[0].Name}
		if *x.Reference.Min != c.reference || *x.Candidate.Min != c.candidate || names != c.names {
			t.Errorf("%q: got %v and %v from %q, want %v and %v from %q", c.args, *x.Reference.Min, *x.Candidate.Min, names, c.reference, c.candidate, c.names)
		}
	}
}
