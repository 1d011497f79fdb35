package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
)

// golden rewrites the golden files of every package whose tests have an -update flag, and shows what changed.
func golden(d *dev, args []string) error {
	if err := noArguments(args); err != nil {
		return err
	}
	packages, err := d.withUpdate()
	if err != nil {
		return err
	}
	if len(packages) == 0 {
		return errors.New("found no test with an -update flag")
	}
	for _, p := range packages {
		if err := d.run(pure, "go", "test", "-count=1", p, "-update"); err != nil {
			return err
		}
	}
	d.say("What changed; read every line before you commit it:")
	return d.run(nil, "git", "diff", "--stat")
}

// withUpdate lists the packages whose tests define the flag.
func (d *dev) withUpdate() ([]string, error) {
	var out []string
	err := filepath.WalkDir(d.root, func(name string, entry fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case entry.IsDir() && name != d.root && (entry.Name() == "out" || strings.HasPrefix(entry.Name(), ".")):
			return filepath.SkipDir
		case entry.IsDir() || !strings.HasSuffix(name, "_test.go"):
			return nil
		}
		text, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		folder, err := filepath.Rel(d.root, filepath.Dir(name))
		if err != nil {
			return err
		}
		if p := "./" + filepath.ToSlash(folder); strings.Contains(string(text), "flag.Bool(\"update\"") && !slices.Contains(out, p) {
			out = append(out, p)
		}
		return nil
	})
	return out, err
}

// A referenceProgram computes reference values by another program than ours and prints the table that stands beside it. The
// slow ones compute in many digits for minutes.
type referenceProgram struct {
	program, table string
	slow           bool
}

var referencePrograms = []referenceProgram{
	{"qa/stats/dist/testdata/refdata.R", "qa/stats/dist/testdata/r.txt", false},
	{"qa/stats/testdata/refdata.R", "qa/stats/testdata/r.txt", false},
	{"qa/stats/testdata/refdata_means.R", "qa/stats/testdata/means.txt", false},
	{"qa/stats/testdata/refdata_groups.R", "qa/stats/testdata/groups.txt", false},
	{"qa/stats/testdata/refdata_normality.R", "qa/stats/testdata/normality.txt", false},
	{"qa/stats/testdata/refdata_proportions.R", "qa/stats/testdata/proportions.txt", false},
	{"qa/stats/testdata/refdata_ranks.R", "qa/stats/testdata/ranks_r.txt", false},
	{"qa/stats/testdata/refdata_robust.R", "qa/stats/testdata/robust.txt", false},
	{"qa/stats/testdata/refpower.R", "qa/stats/testdata/power_r.txt", false},
	{"qa/stats/testdata/refdata_ranks.py", "qa/stats/testdata/ranks.txt", true},
	{"qa/stats/testdata/refdata_tolerance.py", "qa/stats/testdata/tolerance.csv", true},
	{"qa/stats/testdata/refpower.py", "qa/stats/testdata/power.txt", true},
	{"qa/stats/testdata/refdata_exact.py", "qa/stats/testdata/exact.txt", true},
	{"qa/stats/dist/testdata/refdata.py", "qa/stats/dist/testdata/exact.txt", true},
	{"qa/stats/dist/testdata/refowen.py", "qa/stats/dist/testdata/owen.txt", true},
	{"qa/stats/dist/testdata/refnoncentral.py", "qa/stats/dist/testdata/noncentral.txt", true},
}

// command is what runs the program, and the package that brings it.
func (r referenceProgram) command() (name, pkg string) {
	if filepath.Ext(r.program) == ".py" {
		return python, "python3-mpmath and python3-scipy"
	}
	return "Rscript", "r-base-core"
}

// output is what the program prints.
func (r referenceProgram) output(d *dev) ([]byte, error) {
	program := d.path(filepath.FromSlash(r.program))
	if !exists(program) {
		return nil, errors.New(r.program + ": found none; correct the list in cmd/dev/golden.go")
	}
	name, pkg := r.command()
	if !present(name) {
		return nil, fmt.Errorf("reference values: found no %s; install it (Debian: apt-get install %s)", name, pkg)
	}
	d.say("(in %s)", filepath.Dir(program))
	d.show(nil, name, filepath.Base(program))
	c := exec.Command(name, filepath.Base(program))
	c.Dir, c.Stderr = filepath.Dir(program), d.stderr
	return c.Output()
}

// refdata computes the reference values again and shows what changed; with --slow also those of many digits. It changes the
// tables; git keeps the old ones.
func refdata(d *dev, args []string) error {
	slow := len(args) == 1 && args[0] == "--slow"
	if !slow && len(args) > 0 {
		return usageError(fmt.Sprintf("found %q, want nothing or --slow", strings.Join(args, " ")))
	}
	for _, r := range referencePrograms {
		if r.slow && !slow {
			continue
		}
		out, err := r.output(d)
		if err != nil {
			return err
		}
		if len(out) > 0 {
			if err := os.WriteFile(d.path(filepath.FromSlash(r.table)), out, 0o644); err != nil {
				return err
			}
		}
	}
	return d.run(nil, "git", "diff", "--stat", "--", "qa")
}
