package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestBadInput checks what a user sees when an input is wrong: one clear message, the right exit code, nothing written and no
// stack of calls.
func TestBadInput(t *testing.T) {
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
	const lots = "Lot,Part,Bore\nR,1,10.1\nR,2,10.2\nR,3,10.4\nC,1,10.2\nC,2,10.3\nC,3,10.2\n"
	demo, err := os.ReadFile("../../testdata/demo/hub-shell.xlsx")
	if err != nil {
		t.Fatal(err)
	}
	xlsx := strings.ReplaceAll(plan, "lots.csv", "lots.xlsx")
	for _, c := range []struct {
		name  string
		files map[string]string
		args  []string
		code  int
		says  []string
	}{
		{"renamed .xls", map[string]string{"plan.toml": xlsx, "lots.xlsx": "\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1" + strings.Repeat("\x00", 600)}, []string{"compare", "plan.toml"}, 3, []string{"lots.xlsx", ".xls"}},
		{"truncated zip", map[string]string{"plan.toml": xlsx, "lots.xlsx": string(demo[:len(demo)/2])}, []string{"compare", "plan.toml"}, 3, []string{"lots.xlsx"}},
		{"empty file", map[string]string{"plan.toml": plan, "lots.csv": ""}, []string{"compare", "plan.toml"}, 3, []string{"lots.csv", "empty"}},
		{"empty workbook", map[string]string{"plan.toml": xlsx, "lots.xlsx": ""}, []string{"compare", "plan.toml"}, 3, []string{"lots.xlsx", "empty"}},
		{"no such file", map[string]string{"plan.toml": plan}, []string{"compare", "plan.toml"}, 3, []string{"lots.csv"}},
		{"no such plan", nil, []string{"compare", "plan.toml"}, 3, []string{"plan.toml"}},
		{"missing column", map[string]string{"plan.toml": plan + "[[characteristic]]\nname = \"Bor\"\n", "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"Bor", "Bore"}},
		{"missing lot", map[string]string{"plan.toml": strings.Replace(plan, `"C"`, `"D"`, 1), "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{`"D"`, "C"}},
		{"typo in the plan", map[string]string{"plan.toml": strings.Replace(plan, "margin", "margn", 1), "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"margn", "margin", "9"}},
		{"no TOML", map[string]string{"plan.toml": "format = \n", "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"plan.toml", "1"}},
		{"two kinds of margin", map[string]string{"plan.toml": strings.Replace(plan, "absolute = 1", "absolute = 1, tolerance_fraction = 0.1", 1), "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"exactly one kind"}},
		{"unknown method", map[string]string{"plan.toml": plan + "method = \"poold\"\n", "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"poold", "pooled", "welch"}},
		{"paired without pairs", map[string]string{"plan.toml": plan + "method = \"paired\"\n", "lots.csv": lots}, []string{"compare", "plan.toml"}, 2, []string{"pair_column"}},
		{"repeated parts", map[string]string{"plan.toml": plan, "lots.csv": strings.Replace(lots, "R,2", "R,1", 1)}, []string{"compare", "plan.toml"}, 2, []string{"part_column"}},
		{"ambiguous mark", map[string]string{"plan.toml": plan, "lots.csv": "Lot;Part;Bore\nR;1;10,125\nR;2;10,225\nR;3;10,425\nC;1;10,225\nC;2;10,325\nC;3;10,225\n"}, []string{"compare", "plan.toml"}, 2, []string{"decimal"}},
		{"not a record", map[string]string{"r.xlsx": string(demo)}, []string{"verify", "r.xlsx"}, 1, nil},
		{"not a workbook", map[string]string{"r.xlsx": "hello"}, []string{"verify", "r.xlsx"}, 1, nil},
		{"identity that is none", map[string]string{"plan.toml": plan, "lots.csv": lots, "k.p12": "nothing", "w": "a word"}, []string{"compare", "plan.toml", "--workbook", "out.xlsx", "--identity", "k.p12", "--meaning", "prepared", "--passphrase-file", "w"}, 3, []string{"k.p12"}},
		{"identity without meaning", map[string]string{"plan.toml": plan, "lots.csv": lots}, []string{"compare", "plan.toml", "--workbook", "out.xlsx", "--identity", "k.p12"}, 2, []string{"--meaning"}},
		{"unknown flag", nil, []string{"compare", "plan.toml", "--workbok", "x"}, 2, []string{"workbok"}},
		{"unknown call", nil, []string{"compere"}, 2, []string{"compere"}},
		{"no call", nil, nil, 2, nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			dir := t.TempDir()
			for name, text := range c.files {
				if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
					t.Fatal(err)
				}
			}
			code, out, errText := run(t, dir, c.args...)
			if code != c.code {
				t.Errorf("exit code: got %d, want %d\n%s%s", code, c.code, out, errText)
			}
			for _, s := range c.says {
				if !strings.Contains(errText, s) {
					t.Errorf("message: got %q, want it to say %q", errText, s)
				}
			}
			if strings.Contains(errText, "goroutine") || strings.Contains(errText, ".go:") {
				t.Errorf("a stack of calls: %s", errText)
			}
			left, err := os.ReadDir(dir)
			if err != nil || len(left) != len(c.files) {
				t.Errorf("files: got %d, want the %d there were", len(left), len(c.files))
			}
		})
	}
}

// TestWrongPassphrase checks that a wrong passphrase writes nothing and is told apart from a broken file.
func TestWrongPassphrase(t *testing.T) {
	dir := t.TempDir()
	for name, text := range map[string]string{
		"plan.toml": "format = \"lotpair.plan/1\"\nsupports = \"X\"\n[record]\npart = \"A\"\nrevision = \"1\"\n[reference]\nlot = \"R\"\nfile = \"lots.csv\"\n[candidate]\nlot = \"C\"\nfile = \"lots.csv\"\n[criterion]\nmargin = { absolute = 1 }\n",
		"lots.csv":  "Lot,Bore\nR,10.1\nR,10.2\nC,10.2\nC,10.3\n", "right": "a long enough word\n", "wrong": "another long word\n",
	} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	if code, _, e := run(t, dir, "identity", "new", "--name", "Ada", "--out", "k.p12", "--passphrase-file", "right"); code != 0 {
		t.Fatal(e)
	}
	code, _, e := run(t, dir, "compare", "plan.toml", "--workbook", "out.xlsx", "--identity", "k.p12", "--meaning", "prepared", "--passphrase-file", "wrong")
	if code != 3 || !strings.Contains(e, "passphrase") {
		t.Errorf("got exit code %d, %q; want 3 and the passphrase named", code, e)
	}
	if _, err := os.Stat(filepath.Join(dir, "out.xlsx")); !os.IsNotExist(err) {
		t.Error("a workbook was written")
	}
	if code, _, e := run(t, dir, "compare", "plan.toml", "--workbook", "out.xlsx", "--identity", "k.p12", "--meaning", "prepared", "--passphrase-file", "right"); code != 0 {
		t.Errorf("the right passphrase: got exit code %d, %s", code, e)
	}
}
